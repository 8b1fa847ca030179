import type { LocalClock } from '../local-clock';
import { medianOf, robustSpread } from '../robust';
import type { LoadSeries } from '../series';
import { instantsOf, meanPower, runsWhere, type LoadFinding } from './finding';

/** A choice of ours: no plant draws four times the usual peak of its days; a slipped multiplier or a register fault does. */
const impossibleFactor = 4;
/** A choice of ours: a spike stands alone for at most two intervals. */
const spikeIntervals = 2;
/** Days on either side with which a reading is compared at its own time of day. */
const neighbourDays = 7;
/** Hampel's identifier with the customary 3 deviations drowns a plant of changing work; 6 is a choice of ours. */
const hampelDeviations = 6;
/** A choice of ours: and it stands a quarter above everything else within those days. */
const aboveAll = 1.25;

/** Median of the highest readings of 24 hours each; NaN for less than seven days, from which nothing is usual. */
export function usualPeakKwh({ kwh, stepMinutes }: LoadSeries): number {
  const perDay = 1440 / stepMinutes;
  const peaks: number[] = [];
  for (let first = 0; first + perDay <= kwh.length; first += perDay) {
    let highest = -Infinity;
    for (const energy of kwh.subarray(first, first + perDay)) if (energy > highest) highest = energy;
    if (highest > 0) peaks.push(highest);
  }
  return peaks.length < 7 ? NaN : medianOf(peaks);
}

/**
 * Readings no plant can have: negative, above what the service carries, or several times the usual peak of its days.
 *
 * @param serviceKw  What the service can carry, where it is known. [kW]
 */
export function impossibleReadings(load: LoadSeries, serviceKw: number | null): LoadFinding[] {
  const { kwh, kvarhLagging, kvarhLeading } = load;
  const usual = usualPeakKwh(load);
  const limit = impossibleFactor * usual;
  const negative = runsWhere(kwh.length, (i) => kwh[i]! < 0 || kvarhLagging[i]! < 0 || kvarhLeading[i]! < 0);
  const beyond = runsWhere(kwh.length, (i) => kwh[i]! > limit);
  const over = serviceKw === null ? [] : runsWhere(kwh.length, (i) => meanPower(load, kwh[i]!) > serviceKw);
  const highestOf = (run: { from: number; to: number }) => Math.max(...kwh.subarray(run.from, run.to));
  return [
    ...negative.map((run) => ({
      ...instantsOf(load, run),
      fault: 'negative' as const,
      severity: 'fault' as const,
      found: meanPower(load, Math.min(...kwh.subarray(run.from, run.to))),
      against: 0,
    })),
    ...beyond.map((run) => ({
      ...instantsOf(load, run),
      fault: 'impossible' as const,
      severity: 'fault' as const,
      found: meanPower(load, highestOf(run)),
      against: meanPower(load, usual),
    })),
    ...over.map((run) => ({
      ...instantsOf(load, run),
      fault: 'over-capacity' as const,
      severity: 'fault' as const,
      found: meanPower(load, highestOf(run)),
      against: serviceKw,
    })),
  ];
}

/**
 * Spikes: one or two intervals that Hampel's identifier (distance from the median in scaled median absolute deviations)
 * rejects against the same time of the seven days on either side, and that stand a quarter above every other reading of
 * those days. What is impossible already is not told twice.
 */
export function spikes(load: LoadSeries, clock: LocalClock): LoadFinding[] {
  const { kwh, stepMinutes } = load;
  const reach = (neighbourDays * 1440) / stepMinutes;
  const limit = impossibleFactor * usualPeakKwh(load);
  const found: LoadFinding[] = [];
  let highest = 0;
  // A spike is the highest of two weeks by a quarter: only such readings are worth the median.
  for (let index = 0; index < kwh.length; index++) {
    const energy = kwh[index]!;
    if (!(energy > 0) || energy > limit || energy < kwh[index - 1]! || energy < kwh[index + 1]!) continue;
    highest = highestAround(kwh, index, reach);
    if (energy < aboveAll * highest || highest <= 0) continue;
    const { median, deviation } = robustSpread(sameTimes(kwh, clock, index));
    if (!(energy - median > hampelDeviations * deviation)) continue;
    const run = spikeRun(kwh, index, aboveAll * highest);
    if (found.at(-1)?.fromMs === instantsOf(load, run).fromMs) continue;
    found.push({
      ...instantsOf(load, run),
      fault: 'spike',
      severity: 'caution',
      found: meanPower(load, energy),
      against: meanPower(load, median),
    });
  }
  return found;
}

/** The highest reading within reach but for those next to an interval that may belong to the same spike. */
function highestAround(kwh: Float64Array, index: number, reach: number): number {
  let highest = -Infinity;
  for (let at = Math.max(0, index - reach); at < Math.min(kwh.length, index + reach + 1); at++) {
    if (Math.abs(at - index) >= spikeIntervals && kwh[at]! > highest) highest = kwh[at]!;
  }
  return highest;
}

function spikeRun(kwh: Float64Array, index: number, above: number) {
  if (kwh[index - 1]! >= above) return { from: index - 1, to: index + 1 };
  return { from: index, to: kwh[index + 1]! >= above ? index + 2 : index + 1 };
}

function sameTimes(kwh: Float64Array, clock: LocalClock, index: number): number[] {
  const values: number[] = [];
  for (let days = -neighbourDays; days <= neighbourDays; days++) {
    const at = days === 0 ? -1 : clock.sameClock(index, days);
    if (at >= 0 && !Number.isNaN(kwh[at]!)) values.push(kwh[at]!);
  }
  return values;
}
