import { localDateStartMs, type LoadSeries } from '../load';
import { decimalsOf } from '../units';
import {
  measuredQuantities,
  printedParts,
  priceQuantities,
  stepMinutesFor,
  type MeasuredQuantity,
  type PricedBill,
  type PriceOptions,
  type PrintedFactor,
  type PrintedParts,
  type PrintedRow,
  type Schedule,
} from '../tariff';

/** A figure as it may be: surely within `low` and `high` on what is assumed, most likely `best`. */
export interface Estimate {
  low: number;
  best: number;
  high: number;
}

/** A bill's printed quantities, and what they are measured over. */
export interface PrintedMonth {
  row: PrintedRow;
  /** Priced as printed. */
  bill: PricedBill;
  parts: PrintedParts;
  measured: MeasuredQuantity[];
  /** Printed look backs that a month before these bills set: no plan changes them. */
  pastKept: string[];
  /** Printed figures of measured quantities, those that a printed power factor tells among them. */
  figures: Map<string, Estimate>;
}

/** Bills laid out over a grid of intervals. */
export interface PrintedYear {
  months: PrintedMonth[];
  /** The load that draws each printed energy evenly over the hours it is measured in. No such load was metered. */
  evenLoad: LoadSeries;
}

/** What bills without readings are priced from. */
export interface PrintedBasis {
  schedule: Schedule;
  rows: PrintedRow[];
  options: Omit<PriceOptions, 'periods'>;
}

/**
 * Lays printed bills out over intervals: the even load of their energies, and what each printed quantity is measured over.
 *
 * @throws {PriceError} where the bills cannot be priced from what they print
 */
export function layOutBills({ schedule, rows, options }: PrintedBasis): PrintedYear {
  const bills = priceQuantities(schedule, rows, options);
  const stepMinutes = Math.min(...rows.map((row) => stepMinutesFor(schedule, row)));
  const startMs = localDateStartMs(rows[0]!.from, schedule.timeZone);
  const endMs = localDateStartMs(rows[rows.length - 1]!.to, schedule.timeZone);
  const count = Math.round((endMs - startMs) / (stepMinutes * 60_000));
  const measured = measuredQuantities(schedule, { startMs, stepMinutes, count }, rows);
  const partsOf = rows.map((row) => printedParts(schedule, row, new Set(Object.keys(row.quantities))));
  const afresh = priceQuantities(
    schedule,
    rows.map((row, i) => without(row, partsOf[i]!.past)),
    options,
  );
  const months = rows.map((row, i): PrintedMonth => {
    const parts = partsOf[i]!;
    const month = { row, bill: bills[i]!, parts, measured: measured[i]! };
    const pastKept = parts.past.filter(
      (name) => afresh[i]!.quantities[name]?.value !== bills[i]!.quantities[name]?.value,
    );
    return { ...month, pastKept, figures: figuresOf(month) };
  });
  const room = (): Float64Array => new Float64Array(count);
  const evenLoad: LoadSeries = {
    startMs,
    stepMinutes,
    kwh: room(),
    kvarhLagging: room(),
    kvarhLeading: room(),
    quality: new Uint8Array(count),
  };
  for (const month of months) spreadMonth(month, evenLoad);
  return { months, evenLoad };
}

function without(row: PrintedRow, names: string[]): PrintedRow {
  const quantities = Object.entries(row.quantities).filter(([name]) => !names.includes(name));
  return { ...row, quantities: Object.fromEntries(quantities) };
}

function figuresOf({
  row,
  bill,
  parts,
  measured,
}: Omit<PrintedMonth, 'figures' | 'pastKept'>): PrintedMonth['figures'] {
  const figures = new Map<string, Estimate>();
  for (const { name } of measured) {
    const value = row.quantities[name];
    if (value !== undefined) figures.set(name, { low: value, best: value, high: value });
  }
  for (const factor of parts.factors) {
    const printed = row.quantities[factor.name];
    const active = bill.quantities[factor.active]?.value;
    if (printed !== undefined && active !== undefined)
      figures.set(factor.reactive, reactiveOf(factor, printed, active));
  }
  return figures;
}

/** Reactive energy that a printed power factor, or ratio, stands for: kvarh = kWh tan(arccos pf), to half its last digit. */
function reactiveOf({ isRatio, rounding }: PrintedFactor, printed: number, active: number): Estimate {
  const half = (rounding?.step ?? Number(`1e-${decimalsOf(printed)}`)) / 2;
  const of = (factor: number): number => {
    if (isRatio) return active * Math.max(0, factor);
    const kept = Math.min(1, Math.max(0.01, factor));
    return (active * Math.sqrt(1 - kept * kept)) / kept;
  };
  const sign = isRatio ? 1 : -1;
  return { low: of(printed - sign * half), best: of(printed), high: of(printed + sign * half) };
}

const registers = { kwh: 'kwh', kvarhLagging: 'kvarhLagging', kvarhLeading: 'kvarhLeading' } as const;

/** Spreads a month's printed sums evenly, the narrowest window first; what a wider one has more goes into its other hours. */
function spreadMonth({ measured, figures }: PrintedMonth, load: LoadSeries): void {
  for (const register of Object.values(registers)) {
    const sums = measured
      .filter(({ name, operation, channel }) => operation === 'sum' && channel === register && figures.has(name))
      .sort((a, b) => a.intervals.length - b.intervals.length);
    const filled = new Set<number>();
    for (const { name, intervals } of sums) {
      const already = intervals.reduce((sum, i) => (filled.has(i) ? sum + load[register][i]! : sum), 0);
      const free = intervals.filter((i) => !filled.has(i));
      const each = Math.max(0, figures.get(name)!.best - already) / Math.max(1, free.length);
      for (const i of free) {
        load[register][i] = each;
        filled.add(i);
      }
    }
  }
}
