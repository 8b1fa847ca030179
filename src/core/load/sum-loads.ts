import { assertLoadSeries, quality, type LoadSeries } from './series';

const channels = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** True where a meter does not carry a channel: its values are NaN throughout. */
const isAbsent = (values: Float64Array) => values.every((value) => Number.isNaN(value));

/**
 * Adds the readings of several meters, interval by interval and register by register, as a utility does that bills them together.
 *
 * An interval missing at one meter is missing in the sum, one estimated at any is estimated. A register that a meter does not carry adds
 * nothing; one that no meter carries is absent in the sum. Lagging and leading are added apart: one meter's leading energy does not take
 * away another's lagging, since each meter has counted its own.
 *
 * @param loads  One or more series over the same intervals
 * @throws {RangeError} when there is none, or when two differ in beginning, length of interval or count
 */
export function sumLoads(loads: readonly LoadSeries[]): LoadSeries {
  const [first] = loads;
  if (!first) throw new RangeError('loads must hold at least one series, got none');
  loads.forEach((load, at) => {
    assertLoadSeries(load);
    const isAlike =
      load.startMs === first.startMs && load.stepMinutes === first.stepMinutes && load.kwh.length === first.kwh.length;
    if (!isAlike)
      throw new RangeError(
        `loads[${at}] must cover the intervals of loads[0], ${first.kwh.length} of ${first.stepMinutes} minutes, got ${load.kwh.length} of ${load.stepMinutes}`,
      );
  });
  if (loads.length === 1) return first;
  const sum: LoadSeries = {
    startMs: first.startMs,
    stepMinutes: first.stepMinutes,
    kwh: sumOf(loads, 'kwh'),
    kvarhLagging: sumOf(loads, 'kvarhLagging'),
    kvarhLeading: sumOf(loads, 'kvarhLeading'),
    quality: new Uint8Array(first.quality.length),
  };
  for (const { quality: marks } of loads)
    marks.forEach((mark, at) => (sum.quality[at] = Math.max(sum.quality[at] ?? 0, mark)));
  sum.quality.forEach((mark, at) => {
    if (mark === quality.missing) for (const channel of channels) sum[channel][at] = Number.NaN;
  });
  return sum;
}

function sumOf(loads: readonly LoadSeries[], channel: (typeof channels)[number]): Float64Array {
  const carried = loads.map((load) => load[channel]).filter((values) => !isAbsent(values));
  const [first, ...others] = carried;
  const sum = Float64Array.from(first ?? loads[0]![channel]);
  for (const values of others) values.forEach((value, at) => (sum[at]! += value));
  return sum;
}
