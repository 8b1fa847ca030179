import type { ChargeGroup, PlanView, PricedBillView, YearView } from '../../schemas/plan';
import type { CostCurveView, SearchView } from '../../schemas/search';
import type { BillsBeforeAfterData } from '../charts/BillsBeforeAfterChart';
import type { CostCurveData } from '../charts/CostCurveChart';
import { yearsWorthDrawing, type PaybackData } from '../charts/payback';
import { formatBillName } from '../ui/format';
import type { WaterfallData } from '../charts/WaterfallChart';
import { amperes } from '../ui/setting-words';
import { groupNames } from './words';

const drawnGroups = new Set(['demand', 'reactive']);
const drawnTotal = (bill: PricedBillView) =>
  bill.lines.filter((line) => drawnGroups.has(line.group)).reduce((sum, line) => sum + line.amount, 0);

/** Demand and reactive lines of each bill before and after a plan. */
export function billsChart(year: YearView, plan: PlanView): BillsBeforeAfterData {
  return {
    currency: year.currency,
    planName: plan.name,
    what: 'demand and reactive lines',
    bills: year.standing.bills.map((bill, index) => {
      const [month = '', inYear] = formatBillName(bill).split(' ');
      return {
        label: month,
        year: index === 0 || month === 'Jan' ? inYear : undefined,
        before: drawnTotal(bill),
        after: drawnTotal(plan.bills[index] ?? bill),
      };
    }),
  };
}

/** The cost of the year round a setting of one motor, the others held at the plan's. */
export function costCurve(curve: CostCurveView, search: Pick<SearchView, 'fields'>, currency: string): CostCurveData {
  const points = curve.points
    .filter((point) => point.admissible)
    .map(({ fieldA, total }) => ({ fieldA, yearCost: total }));
  const at = (fieldA: number) => points.find((point) => Math.abs(point.fieldA - fieldA) < 1e-6);
  const others = search.fields.filter((field) => field.motorId !== curve.motorId);
  const held = others
    .flatMap(({ name, fieldA }) => (fieldA === undefined ? [] : `${name} at ${amperes(fieldA)}`))
    .join(', ');
  const isMoved = Math.abs(curve.todayA - curve.chosenA) > 1e-6;
  return {
    currency,
    points,
    chosen: at(curve.chosenA) ?? points[0] ?? { fieldA: curve.chosenA, yearCost: 0 },
    standing: isMoved ? (at(curve.todayA) ?? null) : null,
    standingName: `${curve.name} left at ${amperes(curve.todayA)}`,
    limitFieldA: curve.ratedLimitA,
    reserveFieldA: curve.limitA < curve.ratedLimitA - 1e-6 ? curve.limitA : undefined,
    axisName: `Field current of ${curve.name}${curve.span ? `, ${curve.span}` : ''}, A${held ? ` (${held})` : ''}`,
  };
}

/** Between which years eight of ten samples pay back; null where some do not within the horizon. */
export function paybackRange({ paybackSpread }: Pick<PlanView, 'paybackSpread'>): PaybackData['paybackRange'] {
  const { lowMonths, highMonths } = paybackSpread ?? { lowMonths: null, highMonths: null };
  return lowMonths === null || highMonths === null || highMonths === 0
    ? null
    : { fromYears: lowMonths / 12, toYears: highMonths / 12 };
}

/** Cumulative cash of a plan with the band of eight of ten samples. */
export function paybackChart(plan: PlanView): PaybackData {
  return {
    currency: plan.currency,
    capitalCost: plan.capitalCost,
    incentive: plan.economics.incentive,
    paybackYears: plan.appraisal.simplePaybackYears,
    paybackRange: paybackRange(plan),
    editionName: plan.name,
    shownYears: yearsWorthDrawing(plan.appraisal.simplePaybackYears, plan.economics.horizonYears),
    points: plan.cashFlow
      .filter((month) => month.month % 3 === 0)
      .map((month) => ({ year: month.month / 12, cumulative: month.cumulative, p10: month.low, p90: month.high })),
  };
}

/** Losses that are worth a step of their own. Major units. */
const leastStep = 0.005;

/** From standing to a plan, group by group; what more energy costs is shared among motors and banks by their kWh. */
export function waterfall(year: YearView, plan: PlanView): WaterfallData {
  const changeOf = (group: ChargeGroup) => plan.groupTotals[group] - year.standing.groupTotals[group];
  const steps = groupNames.flatMap(([group, label]) =>
    group === 'energy' ? lossSteps(plan, changeOf('energy')) : [{ label, change: changeOf(group) }],
  );
  return {
    currency: year.currency,
    from: { label: 'Standing', total: year.standing.yearTotal },
    steps: steps.filter(({ change }) => Math.abs(change) >= leastStep),
    to: { label: plan.name, total: plan.yearTotal },
  };
}

function lossSteps(plan: PlanView, change: number): WaterfallData['steps'] {
  const bankKwh = plan.banks.reduce((sum, { lossKwh }) => sum + lossKwh, 0);
  const named = [
    ...plan.motors.map(({ name, extraLossKwh }) => ({ label: `Losses of ${name}`, kwh: extraLossKwh })),
    { label: 'Losses of capacitors', kwh: bankKwh },
  ].filter(({ kwh }) => Math.abs(kwh) >= 1);
  const sum = named.reduce((total, { kwh }) => total + kwh, 0);
  const rest = { label: 'Other losses', kwh: plan.extraLossKwh - sum };
  const parts = Math.abs(rest.kwh) > 0.01 * Math.abs(plan.extraLossKwh) ? [...named, rest] : named;
  const whole = parts.reduce((total, { kwh }) => total + kwh, 0);
  // Where losses and their price do not go together there is no price a kWh to share by.
  if (parts.length === 0 || Math.abs(whole) < 1 || whole * change <= 0) return [{ label: 'Energy', change }];
  return parts.map(({ label, kwh }) => ({ label, change: (change * kwh) / whole }));
}
