import { weekdayOf } from '../dates';
import type { LocalClock } from '../local-clock';
import type { LoadSeries } from '../series';
import type { LoadFinding } from './finding';

/** Days on either side of an instant whose mean working day is compared. */
const windowDays = 21;
/** Working days a side must have. */
const leastDays = 8;
/** Shifts tried. [min] */
const longestShift = 120;
/** Choices of ours: the shifted days must look alike, clearly more so than the unshifted, and must have a shape at all. */
const alike = 0.9;
const gain = 0.05;
const leastShape = 0.05;

/**
 * Clock shifts: after an instant the mean working day has the shape it had before, but earlier or later by an hour or so.
 * Found by cross-correlation of the mean working days of three weeks on either side, at every change of the zone's clock
 * and at the first of every month. A plant whose hours follow the clock has none; a logger that did not follow it has two a year.
 */
export function clockShifts(load: LoadSeries, clock: LocalClock): LoadFinding[] {
  const found: LoadFinding[] = [];
  for (const instantMs of [...clock.changesMs, ...monthsOf(load, clock)]) {
    const near = (finding: LoadFinding) => Math.abs(finding.fromMs - instantMs) < windowDays * 86_400_000;
    if (found.some(near)) continue;
    const at = Math.round((instantMs - load.startMs) / (load.stepMinutes * 60_000));
    const perDay = 1440 / load.stepMinutes;
    const before = workingDay(load, clock, { from: at - windowDays * perDay, to: at });
    const after = workingDay(load, clock, { from: at, to: at + windowDays * perDay });
    const shiftMinutes = before && after ? shiftBetween(before, after, load.stepMinutes) : 0;
    if (shiftMinutes === 0) continue;
    const span = { fromMs: instantMs, toMs: instantMs + load.stepMinutes * 60_000, intervals: 0 };
    found.push({ ...span, fault: 'clock-shift', severity: 'caution', found: shiftMinutes, against: null });
  }
  return found.sort((a, b) => a.fromMs - b.fromMs);
}

/** Instants at which a month begins on the wall clock. */
function monthsOf({ startMs, stepMinutes }: LoadSeries, { localMinute }: LocalClock): number[] {
  const instants: number[] = [];
  localMinute.forEach((minute, index) => {
    if (minute % 1440 === 0 && new Date(minute * 60_000).getUTCDate() === 1) {
      instants.push(startMs + index * stepMinutes * 60_000);
    }
  });
  return instants;
}

/** Mean active energy by time of day over the working days, Monday to Friday; null where they are too few or have no shape. */
function workingDay(
  load: LoadSeries,
  { localMinute }: LocalClock,
  { from, to }: { from: number; to: number },
): Float64Array | null {
  if (from < 0 || to > load.kwh.length) return null;
  const perDay = 1440 / load.stepMinutes;
  const sums = new Float64Array(perDay);
  const counts = new Float64Array(perDay);
  for (let index = from; index < to; index++) {
    const minute = localMinute[index]!;
    const weekday = weekdayOf(Math.floor(minute / 1440));
    const energy = load.kwh[index]!;
    if (weekday === 0 || weekday === 6 || Number.isNaN(energy)) continue;
    const slot = Math.floor((minute % 1440) / load.stepMinutes);
    sums[slot]! += energy;
    counts[slot]!++;
  }
  if (counts.some((count) => count < leastDays)) return null;
  const day = sums.map((sum, slot) => sum / counts[slot]!);
  const mean = day.reduce((sum, energy) => sum + energy, 0) / perDay;
  const deviation = Math.sqrt(day.reduce((sum, energy) => sum + (energy - mean) ** 2, 0) / perDay);
  return deviation > leastShape * mean ? day.map((energy) => (energy - mean) / deviation) : null;
}

/** By how much the second day runs behind the first; negative: ahead of it; 0 where none shift fits clearly better. [min] */
function shiftBetween(first: Float64Array, second: Float64Array, stepMinutes: number): number {
  const correlation = (slots: number) =>
    first.reduce((sum, value, slot) => sum + value * second[(slot + slots + first.length) % first.length]!, 0) /
    first.length;
  const farthest = longestShift / stepMinutes;
  let best = 0;
  for (let slots = -farthest; slots <= farthest; slots++) if (correlation(slots) > correlation(best)) best = slots;
  const minutes = best * stepMinutes;
  const isClear = correlation(best) >= alike && correlation(best) - correlation(0) >= gain;
  return isClear && Math.abs(minutes) >= 45 ? minutes : 0;
}
