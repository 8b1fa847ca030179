import type { BillingPeriod } from '../load';
import {
  boundQuantities,
  priceBills,
  PriceError,
  priceQuantities,
  type MeasuredQuantity,
  type PricedBill,
  type PrintedRow,
  type Range,
  type RangeRow,
} from '../tariff';
import { changeOver, type PlannedChange } from './estimate-change';
import type { Estimate, PrintedBasis, PrintedMonth, PrintedYear } from './estimate-load';
import { estimateAfter, type Doubt, type MonthFacts, type QuantityEstimate } from './estimate-quantity';
import { createSimulator } from './simulator';
import type { Plant, PlanSetup } from './types';

/** One bill after a plan, estimated from what the bill before prints. [currency] */
export interface EstimatedBill {
  period: BillingPeriod;
  standing: number;
  total: Estimate;
  saving: Estimate;
  /** Printed quantities before and after. */
  quantities: { name: string; unit: string; before: number; after: QuantityEstimate }[];
}

/** What an estimate's width comes from, with how wide it makes the year: each by itself, the others at their best guess. [currency] */
export interface WidthPart {
  doubt: Exclude<Doubt, 'none'>;
  width: number;
}

/** A plan's year estimated from bills alone. */
export interface BillsEstimate {
  bills: EstimatedBill[];
  standing: number;
  total: Estimate;
  saving: Estimate;
  /** The greatest first. */
  widths: WidthPart[];
  notes: string[];
}

/** A plant of which bills and motors are known, without readings: `plant.load` is the even load of `layOutBills`. */
export interface EstimateAsk extends PrintedBasis {
  year: PrintedYear;
  plant: Plant;
  setup: PlanSetup;
}

/**
 * Estimates bills after a plan from what the bills before print.
 *
 * Sums of active energy follow from the motors' calendars. What they deliver lessens printed lagging energy by at least what meets the
 * motors' own and at most all of it; the rest leads. Highest values are taken at every state of the motors that their window knows.
 * Assumed: the calendars hold; nothing but the motors delivers reactive power; reactive power is drawn at the highest kVA.
 * The ends of a bill take the ends of all its quantities together, so that they lie further apart than any load would put them.
 *
 * @returns Best guess with ends, bill by bill, and which doubt makes the width
 * @throws {PriceError} where the bills cannot be priced from what they print
 * @throws {RangeError}, {PullOutError} as simulating the plan does
 */
export function estimateFromBills(ask: EstimateAsk): BillsEstimate {
  const { schedule, options, year } = ask;
  const change = plannedChange(ask);
  const even = evenMeasures(ask, change);
  const months = year.months.map((month, i) => quantitiesAfter(month, change, even[i]));
  const rowsOf = (only?: Doubt): RangeRow[] => year.months.map((month, i) => rangeRow(month, months[i]!, only));
  const best = priceQuantities(
    schedule,
    year.months.map((month, i) => bestRow(month, months[i]!)),
    options,
  );
  const ends = totalsOf(ask, rowsOf());
  const bills = year.months.map((month, i): EstimatedBill => {
    const standing = month.bill.total;
    const total = between(ends.low[i]!, best[i]!.total, ends.high[i]!);
    return {
      period: best[i]!.period,
      standing,
      total,
      saving: saved(standing, total),
      quantities: presented(month, months[i]!),
    };
  });
  const standing = sumOf(bills.map((bill) => bill.standing));
  const total = addUp(bills.map((bill) => bill.total));
  return {
    bills,
    standing,
    total,
    saving: saved(standing, total),
    widths: widthsOf(ask, rowsOf),
    notes: [...new Set(best.flatMap(({ notes }) => notes))],
  };
}

/** The plan on the even load, interval by interval. */
function plannedChange({ year, plant, setup }: EstimateAsk): PlannedChange {
  const { controls, ...fixed } = setup;
  const before = year.evenLoad;
  const simulator = createSimulator({ ...plant, load: before }, fixed);
  const after = simulator.apply(controls);
  const room = (): Float64Array => new Float64Array(before.kwh.length);
  const change = {
    hours: before.stepMinutes / 60,
    before,
    after,
    moreKwh: room(),
    moreKvarh: room(),
    standingKw: room(),
    standingKvar: room(),
  };
  for (let i = 0; i < before.kwh.length; i++) {
    change.moreKwh[i] = after.kwh[i]! - before.kwh[i]!;
    change.moreKvarh[i] =
      after.kvarhLagging[i]! - after.kvarhLeading[i]! - before.kvarhLagging[i]! + before.kvarhLeading[i]!;
    for (const { standing, index } of simulator.placed) {
      change.standingKw[i]! += standing.kw[index[i]!]!;
      change.standingKvar[i]! += standing.kvar[index[i]!]!;
    }
  }
  return change;
}

/** Values on the even load, before and after, where some measure is a formula; none where it cannot be priced. */
function evenMeasures({ schedule, options, year }: EstimateAsk, { before, after }: PlannedChange): MonthValues[] {
  if (!year.months.some(({ measured }) => measured.some(({ channel }) => channel === undefined))) return [];
  const periods = year.months.map(({ row: { from, to } }) => ({ from, to }));
  try {
    const bills = [before, after].map((load) => priceBills(schedule, load, { ...options, periods }));
    return periods.map((_, i) => ({ before: bills[0]![i]!, after: bills[1]![i]! }));
  } catch (error) {
    if (error instanceof PriceError) return [];
    throw error;
  }
}

interface MonthValues {
  before: PricedBill;
  after: PricedBill;
}

function quantitiesAfter(
  month: PrintedMonth,
  change: PlannedChange,
  even: MonthValues | undefined,
): Map<string, QuantityEstimate> {
  const after = new Map<string, QuantityEstimate>();
  // The lagging register first: the leading one of the same hours follows from it.
  const inOrder = [...month.measured].sort(
    (a, b) => Number(a.channel === 'kvarhLeading') - Number(b.channel === 'kvarhLeading'),
  );
  for (const quantity of inOrder) {
    const printed = month.figures.get(quantity.name);
    if (!printed) continue;
    const facts = factsOf(month, quantity, change.hours, after, even);
    after.set(quantity.name, estimateAfter(quantity, printed, changeOver(change, quantity.intervals), facts));
  }
  return after;
}

function factsOf(
  { measured, figures }: PrintedMonth,
  quantity: MeasuredQuantity,
  hours: number,
  after: Map<string, QuantityEstimate>,
  even: MonthValues | undefined,
): MonthFacts {
  const beside = (operation: string, channel: string): MeasuredQuantity | undefined =>
    measured.find(
      (one) =>
        one.operation === operation &&
        one.channel === channel &&
        figures.has(one.name) &&
        one.intervals.length === quantity.intervals.length &&
        one.intervals.every((interval, i) => interval === quantity.intervals[i]),
    );
  const figure = (one: MeasuredQuantity | undefined): Estimate | undefined => one && figures.get(one.name);
  const lagging = beside('sum', 'kvarhLagging');
  const active = figure(beside('sum', 'kwh'))?.best;
  const [before, later] = [even?.before, even?.after].map((bill) => bill?.quantities[quantity.name]?.value);
  return {
    lagging: figure(lagging),
    leading: figure(beside('sum', 'kvarhLeading')),
    laggingAfter: lagging && after.get(lagging.name),
    highestKw: figure(beside('highest', 'kw'))?.best,
    meanKw: active === undefined ? undefined : active / Math.max(hours, quantity.intervals.length * hours),
    ...(before !== undefined && later !== undefined ? { even: { before, after: later } } : {}),
  };
}

/** Printed quantities that are not worked out anew keep their figure. */
function keptOf({ row, parts, pastKept, measured }: PrintedMonth): [string, number][] {
  const past = parts.past.filter((name) => !pastKept.includes(name));
  const changed = new Set([...parts.workedOut, ...past, ...measured.map(({ name }) => name)]);
  const factors = new Set(parts.factors.map(({ name }) => name));
  return Object.entries(row.quantities).filter(([name]) => !changed.has(name) && !factors.has(name));
}

function rangeRow(month: PrintedMonth, after: Map<string, QuantityEstimate>, only: Doubt | undefined): RangeRow {
  const ends = [...after].map(([name, { low, best, high, doubt }]): [string, Range] => [
    name,
    only === undefined || doubt === only ? { low, high } : { low: best, high: best },
  ]);
  const kept = keptOf(month).map(([name, value]): [string, Range] => [name, { low: value, high: value }]);
  return { from: month.row.from, to: month.row.to, quantities: Object.fromEntries([...kept, ...ends]) };
}

function bestRow(month: PrintedMonth, after: Map<string, QuantityEstimate>): PrintedRow {
  const best = [...after].map(([name, estimate]): [string, number] => [name, estimate.best]);
  return { from: month.row.from, to: month.row.to, quantities: Object.fromEntries([...keptOf(month), ...best]) };
}

function totalsOf({ schedule, options }: EstimateAsk, rows: RangeRow[]): { low: Float64Array; high: Float64Array } {
  const bound = boundQuantities(schedule, rows, options);
  if (bound.refused !== undefined) throw new PriceError(bound.refused);
  return bound.totals;
}

function widthsOf(ask: EstimateAsk, rowsOf: (only: Doubt) => RangeRow[]): WidthPart[] {
  return (['moment', 'netting', 'formula'] as const)
    .map((doubt): WidthPart => {
      const { low, high } = totalsOf(ask, rowsOf(doubt));
      return { doubt, width: sumOf([...high]) - sumOf([...low]) };
    })
    .filter(({ width }) => width > 0.005)
    .sort((a, b) => b.width - a.width);
}

function presented(
  { measured, figures }: PrintedMonth,
  after: Map<string, QuantityEstimate>,
): EstimatedBill['quantities'] {
  return measured.flatMap(({ name, unit }) => {
    const [before, later] = [figures.get(name), after.get(name)];
    return before && later ? [{ name, unit, before: before.best, after: later }] : [];
  });
}

function between(low: number, best: number, high: number): Estimate {
  return { low: Math.min(low, best), best, high: Math.max(high, best) };
}

function saved(standing: number, { low, best, high }: Estimate): Estimate {
  return { low: standing - high, best: standing - best, high: standing - low };
}

function addUp(all: Estimate[]): Estimate {
  return {
    low: sumOf(all.map(({ low }) => low)),
    best: sumOf(all.map(({ best }) => best)),
    high: sumOf(all.map(({ high }) => high)),
  };
}

function sumOf(values: number[]): number {
  return values.reduce((sum, value) => sum + value, 0);
}
