import { cubicTable, fixField, ratedKva } from '../machine';
import type { SynchronousMotor } from '../machine';

/** Distinct readings up to this number are solved one by one. */
const FEW = 60;

/** Error of the table that many readings are read from, as a share of rated kVA. */
const TABLE_TOLERANCE = 1e-7;

/** Shaft load from a submeter. */
export interface SubmeterLoad {
  /** 0 at standstill. [kW] */
  shaftKw: Float64Array;
  /** Readings that are missing (NaN). */
  missing: number;
  /** Readings beyond what the field can hold: they are set to the greatest it holds. */
  beyondPullOut: number;
}

/**
 * Shaft load of a motor from its submeter, at the field it ran with.
 *
 * The input less the losses at that field, solved to 1e-6 of rated kVA. A reading below half the motor's input at no load is a
 * motor that stands still: 0. A missing reading (NaN) takes `whenMissing`, standstill when absent, and is counted.
 *
 * @param motor  Motor data.
 * @param at.inputKw  Metered active power per interval, mean. [kW], Float64Array
 * @param at.fieldCurrentA  Field current during the metering. [A]
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @param at.whenMissing  Shaft load of each interval where its reading is missing. [kW]
 * @throws {RangeError} naming the argument out of range
 */
export function shaftLoadFromSubmeter(
  motor: SynchronousMotor,
  at: { inputKw: Float64Array; fieldCurrentA: number; voltagePu?: number; whenMissing?: Float64Array },
): SubmeterLoad {
  const fixed = fixField(motor, at);
  const greatestKw = fixed.greatestShaftKw * (1 - 1e-9);
  const noLoadKw = fixed.taken(0).inputKw;
  const mostInputKw = fixed.taken(greatestKw).inputKw;
  const runs = (inputKw: number) => inputKw >= noLoadKw / 2 && inputKw < mostInputKw;
  const solve = (inputKw: number) => shaftFor(fixed.taken, inputKw, noLoadKw, greatestKw);
  const shaftAt = inverse(solve, at.inputKw.filter(runs), noLoadKw, greatestKw, TABLE_TOLERANCE * ratedKva(motor));
  let missing = 0;
  let beyondPullOut = 0;
  const shaftKw = at.inputKw.map((inputKw, i) => {
    if (Number.isNaN(inputKw)) {
      missing++;
      return at.whenMissing?.[i] ?? 0;
    }
    if (runs(inputKw)) return shaftAt(inputKw);
    if (inputKw < noLoadKw) return 0;
    beyondPullOut++;
    return greatestKw;
  });
  return { shaftKw, missing, beyondPullOut };
}

/** Shaft load by reading of a running motor: few distinct readings are solved, many are read from a table of the inverse. */
function inverse(
  solve: (inputKw: number) => number,
  readings: Float64Array,
  noLoadKw: number,
  greatestKw: number,
  tolerance: number,
): (inputKw: number) => number {
  const known = new Map<number, number>();
  let highest = 0;
  for (const reading of readings) {
    if (known.size <= FEW && !known.has(reading)) known.set(reading, solve(reading));
    highest = Math.max(highest, reading);
  }
  if (known.size <= FEW) return (reading) => known.get(reading)!;
  const token = tokenLoadKw(greatestKw);
  const lowest = noLoadKw + token;
  if (highest <= lowest) return () => token;
  const table = cubicTable((reading) => ({ a: solve(reading), b: 0 }), lowest, highest, tolerance);
  return (reading) => (reading <= lowest ? token : Math.max(token, table.firstAt(reading)));
}

/** Running at no load keeps a token load, since 0 stands for standstill. */
const tokenLoadKw = (greatestKw: number) => 1e-6 * greatestKw;

/** Load whose input is as metered. */
function shaftFor(
  taken: (shaftKw: number) => { inputKw: number },
  inputKw: number,
  noLoadKw: number,
  greatestKw: number,
): number {
  const token = tokenLoadKw(greatestKw);
  let lo = token;
  let hi = greatestKw;
  if (inputKw <= noLoadKw + token) return token;
  let shaftKw = Math.min(hi, inputKw - noLoadKw);
  for (let i = 0; i < 100; i++) {
    const gap = taken(shaftKw).inputKw - inputKw;
    if (Math.abs(gap) <= 1e-10 * greatestKw) return shaftKw;
    if (gap > 0) hi = shaftKw;
    else lo = shaftKw;
    const next = shaftKw - gap;
    shaftKw = next > lo && next < hi ? next : (lo + hi) / 2;
  }
  return shaftKw;
}
