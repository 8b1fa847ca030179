import { defaultSpread } from '../../schemas/assumptions';
import type { PlanView } from '../../schemas/plan';
import type { PlanEconomics } from '../../schemas/plan-money';
import {
  capital,
  formatCount,
  formatList,
  formatMajor,
  formatNumber,
  formatPayback,
  formatQuantity,
} from '../ui/format';
import type { SumRow } from '../ui/ResultSums';

const percent = (value: number) => formatQuantity(value, '%', { upTo: 2 });

/** A payback in months, and in years and months where it is longer than a year and a half: "20 months, that is 1 year and 8 months". */
export function paybackInFull(years: number | null): string {
  const short = formatPayback(years);
  const months = Math.round((years ?? 0) * 12);
  if (months < 18 || months % 12 === 0) return short;
  return `${short}, that is ${formatCount(Math.floor(months / 12), 'year')} and ${formatCount(months % 12, 'month')}`;
}

/** What the bars of the cash flow say of a plan. */
export function cashFlowFinding({ money, currency, name, economics }: PlanView): string {
  const whole = (amount: number) => formatMajor(amount, currency, { whole: true });
  const [start, first] = money?.years ?? [];
  if (!start || !first) return '';
  const last = money?.years.at(-1) ?? first;
  const spent =
    Math.round(start.net) === 0 ? `${name} costs nothing to begin with` : `${whole(-start.net)} go out once`;
  const years = economics.horizonYears;
  const trend =
    years === 1 || Math.abs(last.net - first.net) < 0.5
      ? `${whole(first.net)} ${first.net < 0 ? 'are lost' : 'remain'} each year`
      : `${whole(first.net)} remain of year 1 and ${whole(last.net)} of year ${years}`;
  return capital(`${spent}; ${trend}, ${moneyBasis(economics)}.`);
}

/** What is taken off before a year's cash is shown. */
function moneyBasis({ taxPercent = 0 }: PlanEconomics): string {
  return taxPercent > 0 ? 'after upkeep and tax' : 'after upkeep, before tax';
}

/** What work may cost at most. */
export function ceilingWords({ money, currency, economics }: PlanView): string {
  const ceiling = money?.breakEvenCapital ?? null;
  return ceiling === null
    ? 'Nothing of its cost: even without any it would be worth less than standing.'
    : `Work dearer than ${formatMajor(ceiling, currency, { whole: true })}: then its present value over ${formatCount(economics.horizonYears, 'year')} is nought.`;
}

/** Cost, saving, payback and worth of a plan. */
export function moneySums(plan: PlanView): SumRow[] {
  const { economics, appraisal, currency, yearlyUpkeep } = plan;
  const { incentive = 0, taxPercent = 0 } = economics;
  const discounted = appraisal.discountedPaybackYears;
  return [
    { label: 'Work, once', value: formatNumber(plan.capitalCost) },
    ...(incentive > 0 ? [{ label: 'Incentive', value: formatNumber(-incentive) }] : []),
    { label: 'Saved a year', value: formatNumber(plan.saving) },
    { label: 'Upkeep a year', value: formatNumber(yearlyUpkeep) },
    ...(taxPercent > 0
      ? [{ label: `Tax of year 1, ${percent(taxPercent)}`, value: formatNumber(plan.money?.years[1]?.tax ?? 0) }]
      : []),
    { label: 'Simple payback', value: plan.paybackWords, kind: 'subtotal' },
    {
      label: 'Discounted payback',
      value: discounted === null ? 'never' : formatQuantity(discounted * 12, 'months', { decimals: 1 }),
    },
    {
      label: `Present value, ${percent(economics.discountPercent)}`,
      value: formatMajor(appraisal.npv, currency, { whole: true }),
      kind: 'total',
    },
  ];
}

const months = (value: number | null) => formatPayback(value === null ? null : value / 12);

/** What the samples say: one in ten of them lies below P10, half below P50, nine in ten below P90. */
export function spreadSums({ money }: PlanView): SumRow[] {
  if (!money) return [];
  const { paybackMonths, npv, paidBackShare } = money;
  return [
    { label: 'Payback, P10', value: months(paybackMonths.p10) },
    { label: 'P50', value: months(paybackMonths.p50), kind: 'strong' },
    { label: 'P90', value: months(paybackMonths.p90) },
    { label: 'Present value, P10', value: formatNumber(npv.p10), kind: 'subtotal' },
    { label: 'P50', value: formatNumber(npv.p50), kind: 'strong' },
    { label: 'P90', value: formatNumber(npv.p90) },
    ...(paidBackShare < 0.995
      ? [
          {
            label: 'Paid back within the horizon',
            value: percent(Math.round(100 * paidBackShare)),
            tone: 'warn' as const,
          },
        ]
      : []),
  ];
}

/** How charges rise: "Prices rise by 2 % a year, demand charges by 4 %". */
export function riseWords(economics: PlanEconomics): string {
  const own = [
    ['energy', economics.energyRisePercent],
    ['demand', economics.demandRisePercent],
    ['reactive', economics.reactiveRisePercent],
    ['fixed', economics.fixedRisePercent],
  ].flatMap(([group, value]) => (value === undefined ? [] : [`${group} charges by ${percent(Number(value))}`]));
  const common = `Prices rise by ${percent(economics.escalationPercent)} a year`;
  return own.length > 0 ? `${common}, ${formatList(own)}` : common;
}

/** What the band is drawn from. */
export function spreadWords(economics: PlanEconomics): string {
  const spread = { ...defaultSpread, ...economics.spread };
  const points = (value: number) => formatQuantity(value, value === 1 ? 'point' : 'points', { upTo: 2 });
  return `Band: saving within ${percent(spread.savingPercent)}, hours ${percent(spread.hoursPercent)}, work ${percent(spread.workPercent)}, upkeep ${percent(spread.upkeepPercent)}, rise of energy charges ${points(spread.energyRisePoints)} and of others ${points(spread.demandRisePoints)}, one standard deviation each`;
}
