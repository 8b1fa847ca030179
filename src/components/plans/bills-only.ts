import type { BillsOnlyView, EstimatedAmount, EstimatedPlanView } from '../../schemas/plan-from-bills';
import { formatBillName, formatMajor, formatNumber } from '../ui/format';
import type { LedgerCell, LedgerData } from '../ui/ledger';
import type { SumRow } from '../ui/ResultSums';

export type EstimatedYear = Exclude<BillsOnlyView, { refused: string }>;

const doubts: Record<EstimatedPlanView['widths'][number]['doubt'], string> = {
  moment: 'which motors run at the highest demand',
  netting: 'how much kvarh delivered meets kvarh drawn in the same hours',
  formula: 'what is settled hour by hour, of which bills print one figure',
};

/** What makes an estimate wide, in words. */
export function widthWords({ widths }: EstimatedPlanView): string {
  const [first] = widths;
  return first ? doubts[first.doubt] : 'nothing: the bills tell it';
}

/** The plan that most likely saves most; none saves: null. */
export function likeliestPlan({ plans }: EstimatedYear): EstimatedPlanView | null {
  const best = plans.reduce<EstimatedPlanView | null>(
    (most, plan) => (plan.saving.best > (most?.saving.best ?? 0) ? plan : most),
    null,
  );
  return best;
}

/** Heading and lead of the station where only bills are kept. */
export function estimateVerdict(year: EstimatedYear): { title: string; lead: string } {
  const plan = likeliestPlan(year);
  const lead = 'Estimated from bills alone. Readings of the meter would replace the range by one figure.';
  if (!plan) return { title: 'From the bills alone, no setting is likely to save anything.', lead };
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  const { low, high, best } = plan.saving;
  const least = low < 0 ? `at worst ${money(-low)} lost` : `at least ${money(low)}`;
  return { title: `${plan.name}: likely ${money(best)} saved a year, ${least}, at most ${money(high)}.`, lead };
}

/** How wide each doubt by itself makes a plan's year. */
export function widthRows({ currency }: EstimatedYear, { widths, total }: EstimatedPlanView): SumRow[] {
  return [
    ...widths.map(({ doubt, width }) => ({ label: doubts[doubt], value: formatNumber(width) })),
    {
      label: `All together, ${currency} a year`,
      value: formatNumber(total.high - total.low),
      kind: 'total' as const,
    },
  ];
}

const signed = (amount: number): LedgerCell => ({
  value: amount < 0 ? `${formatNumber(-amount)} more` : formatNumber(amount),
  tone: amount < 0 ? 'fault' : undefined,
});

/** Plans side by side, each saving with its ends. */
export function estimatesTable(year: EstimatedYear): LedgerData {
  const best = likeliestPlan(year);
  return {
    columns: [
      { key: 'plan', head: 'Setting', wrap: true },
      { key: 'low', head: 'Saved at least', unit: year.currency, align: 'right' },
      { key: 'best', head: 'likely', unit: year.currency, align: 'right', strong: true },
      { key: 'high', head: 'at most', unit: year.currency, align: 'right' },
      { key: 'width', head: 'What makes the range', wrap: true, quiet: true },
    ],
    rows: year.plans.map((plan, index) => ({
      id: `${plan.id ?? 'raised'}-${index}`,
      cells: {
        plan: { value: plan.name, note: settingWords(plan), strong: plan === best },
        low: signed(plan.saving.low),
        best: signed(plan.saving.best),
        high: signed(plan.saving.high),
        width: widthWords(plan),
      },
    })),
  };
}

function settingWords({ fields }: EstimatedPlanView): string | undefined {
  if (fields.length === 0) return undefined;
  const ampere = (value: number) => formatNumber(value, { upTo: 1 });
  return fields.map(({ name, fieldA, todayA }) => `${name} ${ampere(todayA)} to ${ampere(fieldA)} A`).join(', ');
}

/** One plan bill by bill, before and after with the ends. */
export function estimatedBillsTable(year: EstimatedYear, plan: EstimatedPlanView): LedgerData {
  const cells = (standing: number, total: EstimatedAmount, saving: EstimatedAmount) => ({
    standing: formatNumber(standing),
    low: formatNumber(total.low),
    best: formatNumber(total.best),
    high: formatNumber(total.high),
    saving: signed(saving.best),
  });
  return {
    columns: [
      { key: 'bill', head: 'Bill' },
      { key: 'standing', head: 'Before', unit: year.currency, align: 'right' },
      { key: 'low', head: 'After, at least', unit: year.currency, align: 'right' },
      { key: 'best', head: 'likely', unit: year.currency, align: 'right', strong: true },
      { key: 'high', head: 'at most', unit: year.currency, align: 'right' },
      { key: 'saving', head: 'Likely saved', unit: year.currency, align: 'right' },
    ],
    rows: [
      ...plan.bills.map((bill) => ({
        id: bill.from,
        cells: { bill: formatBillName(bill), ...cells(bill.standing, bill.total, bill.saving) },
      })),
      {
        id: 'year',
        kind: 'total' as const,
        cells: { bill: 'All bills', ...cells(year.standing, plan.total, plan.saving) },
      },
    ],
  };
}
