import { addDays, localDateStartMs, type BillingPeriod, type LoadSeries } from '../../core/load';
import { priceBills, priceQuantities, type PricedBill, type Schedule } from '../../core/tariff';
import type { BillView } from '../../schemas/bill';
import type { PricingRoute } from '../../schemas/pricing';

/** What a year is priced and reconciled from; plain data but for the schedule. `load` is null on the printed route. */
export interface ReconcileBasis {
  route: PricingRoute;
  schedule: Schedule;
  /** IANA zone of the site; the schedule has one of its own. */
  siteTimeZone: string;
  /** Line of the schedule by printed label, as a person told. */
  lineMatches: Record<string, string>;
  toleranceMinor: number;
  periods: BillingPeriod[];
  contract: Record<string, number>;
  history: Record<string, number[]> | undefined;
  /** Per period: what the bill itself must say, since no meter measures it. */
  given: Record<string, number>[];
  bills: BillView[];
  load: LoadSeries | null;
}

/** Of a bill's printed quantities those the schedule has a name for. */
export function knownTo(schedule: Schedule, bill: BillView): Record<string, number> {
  const names = new Set(schedule.texts.flatMap((text) => text.quantities.map((quantity) => quantity.name)));
  return Object.fromEntries(Object.entries(bill.quantities).filter(([name]) => names.has(name)));
}

/** Prices a basis by its route, on any schedule. @throws {PriceError} */
export function priceOn(basis: ReconcileBasis, schedule: Schedule, load = basis.load): PricedBill[] {
  const { periods, contract, history, given } = basis;
  const told = { contract, given, ...(history ? { history } : {}) };
  if (load) return priceBills(schedule, load, { periods, ...told });
  const rows = basis.bills.map((bill) => ({ from: bill.from, to: bill.to, quantities: knownTo(schedule, bill) }));
  return priceQuantities(schedule, rows, told);
}

/** What is changed for one bill priced by itself. */
export interface Change {
  schedule?: Schedule;
  load?: LoadSeries;
  period?: BillingPeriod;
}

/**
 * Prices one bill by itself: what its look-backs ask for is told from the bills before it, as they were priced.
 *
 * @throws {PriceError}
 */
export function priceAlone(basis: ReconcileBasis, priced: PricedBill[], index: number, change: Change): PricedBill {
  const schedule = change.schedule ?? basis.schedule;
  const load = change.load ?? basis.load;
  const period = change.period ?? basis.periods[index]!;
  const history = historyBefore(basis, priced, index);
  const told = { contract: basis.contract, history };
  if (load) {
    const around = sliceAround(load, period, schedule.timeZone);
    return priceBills(schedule, around, { periods: [period], given: [basis.given[index]!], ...told })[0]!;
  }
  const quantities = knownTo(schedule, basis.bills[index]!);
  return priceQuantities(schedule, [{ ...period, quantities }], told)[0]!;
}

/** The readings of a period with a day before and behind it, so that no demand window is cut. */
function sliceAround(load: LoadSeries, { from, to }: BillingPeriod, timeZone: string): LoadSeries {
  const stepMs = load.stepMinutes * 60_000;
  const indexOf = (date: string) => Math.round((localDateStartMs(date, timeZone) - load.startMs) / stepMs);
  const first = Math.min(load.kwh.length, Math.max(0, indexOf(addDays(from, -1))));
  const end = Math.max(first, indexOf(addDays(to, 1)));
  return {
    ...load,
    startMs: load.startMs + first * stepMs,
    kwh: load.kwh.subarray(first, end),
    kvarhLagging: load.kvarhLagging.subarray(first, end),
    kvarhLeading: load.kvarhLeading.subarray(first, end),
    quality: load.quality.subarray(first, end),
  };
}

function historyBefore({ schedule, history }: ReconcileBasis, priced: PricedBill[], index: number) {
  const names = schedule.texts.flatMap(({ quantities }) =>
    quantities.flatMap(({ definition }) => (definition.kind === 'past' ? definition.expression.names : [])),
  );
  const valueIn = (bill: PricedBill, name: string) =>
    bill.quantities[name]?.value ?? bill.lines.find((line) => line.id === name)?.amount ?? NaN;
  return Object.fromEntries(
    [...new Set(names)].map((name) => {
      const before = priced.slice(0, index).map((bill) => valueIn(bill, name));
      return [name, [...(history?.[name] ?? []), ...before]];
    }),
  );
}
