import { medianOf } from '../robust';
import type { LoadSeries } from '../series';
import { instantsOf, meanPower, runsWhere, type LoadFinding, type Run } from './finding';

/** Choices of ours: a meter that repeats a figure for six hours, and at least a dozen times, hardly measures. */
const flatHours = 6;
const flatIntervals = 12;
/** A figure of few digits repeats by itself: only one of at least this many of its smallest steps counts. */
const leastSteps = 100;

/**
 * Flat lines: the same figure above nought in every channel for hours. Meters that print few digits are let alone: the
 * smallest step between two figures of the series must be fine against the figure that stands still.
 */
export function flatLines(load: LoadSeries): LoadFinding[] {
  const { kwh, kvarhLagging, kvarhLeading, stepMinutes } = load;
  const least = Math.max(flatIntervals, Math.ceil((flatHours * 60) / stepMinutes));
  const step = smallestStep(kwh);
  const isSame = (values: Float64Array, i: number) =>
    values[i] === values[i - 1] || (Number.isNaN(values[i]!) && Number.isNaN(values[i - 1]!));
  const standing = runsWhere(
    kwh.length,
    (i) => i > 0 && kwh[i]! > 0 && [kwh, kvarhLagging, kvarhLeading].every((values) => isSame(values, i)),
  );
  return standing
    .map(({ from, to }): Run => ({ from: from - 1, to }))
    .filter(({ from, to }) => to - from >= least && kwh[from]! >= leastSteps * step)
    .map((run) => ({
      ...instantsOf(load, run),
      fault: 'flat' as const,
      severity: 'caution' as const,
      found: meanPower(load, kwh[run.from]!),
      against: null,
    }));
}

/** Smallest difference between two figures met; 0 where there is but one. Doubles that differ in their last bits are one figure. */
function smallestStep(values: Float64Array): number {
  const sorted = values.filter((value) => value > 0).sort();
  let smallest = Infinity;
  for (let i = 1; i < sorted.length; i++) {
    const step = sorted[i]! - sorted[i - 1]!;
    if (step > 1e-9 * sorted[i]! && step < smallest) smallest = step;
  }
  return Number.isFinite(smallest) ? smallest : 0;
}

/** Choices of ours: a plant that works has hardly a reading of nought (under 1 %), and a stop of hours falls slowly. */
const fewZeros = 0.01;
const workingShare = 0.25;
const longestStopHours = 24;

/**
 * Noughts in a plant that works: runs of exactly 0 kWh of at most a day, with a quarter of the usual load right before
 * and behind, in a series that knows hardly any nought. A lost reading is often written so.
 */
export function zerosAtWork(load: LoadSeries): LoadFinding[] {
  const { kwh, stepMinutes } = load;
  const present = kwh.filter((energy) => !Number.isNaN(energy));
  const zeros = present.filter((energy) => energy === 0).length;
  const working = workingShare * medianOf(present);
  if (zeros === 0 || zeros > fewZeros * present.length || !(working > 0)) return [];
  const longest = (longestStopHours * 60) / stepMinutes;
  return runsWhere(kwh.length, (i) => kwh[i] === 0)
    .filter(({ from, to }) => to - from <= longest && kwh[from - 1]! > working && kwh[to]! > working)
    .map((run) => ({
      ...instantsOf(load, run),
      fault: 'zeros' as const,
      severity: 'caution' as const,
      found: 0,
      against: meanPower(load, kwh[run.from - 1]!),
    }));
}
