import { localClockOf } from './local-clock';
import { quality as grades, type LoadSeries } from './series';

const minuteMs = 60_000;
const channels = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** Ways to estimate missing readings. */
export const gapMethods = ['same-weekday', 'linear'] as const;
export type GapMethod = (typeof gapMethods)[number];

/** Weeks looked at on either side, and readings wanted of them. */
export const weekdayWeeks = 4;
export const weekdayLeast = 2;
/** Longest stretch a straight line is drawn over: a choice of ours; over more a plant does something of its own. [min] */
export const linearLongestMinutes = 120;

/** The missing intervals of a stretch with the energies they are estimated at. */
export interface GapEstimate {
  /** Positions in the series, ascending. */
  indexes: number[];
  /** Energies of each, NaN in a channel the series does not carry. float64[indexes] */
  kwh: Float64Array;
  kvarhLagging: Float64Array;
  kvarhLeading: Float64Array;
  /** Missing intervals of the stretch that this way cannot estimate. */
  left: number;
}

/**
 * Estimates the missing readings of a stretch; what is there is never touched.
 *
 * - `same-weekday`: the mean of the measured readings at the same wall clock on the same weekday, up to four weeks on
 *   either side, at least two of them. Not scaled: nothing measured says by how much.
 * - `linear`: between the measured readings right before and right behind each gap, the energy rising or falling evenly;
 *   for gaps of at most two hours.
 *
 * Only measured readings are gone by, never estimated ones. A gap of which one interval cannot be estimated keeps that one
 * missing. Both are common practice in validating and estimating meter data; the numbers of weeks and hours are choices of ours.
 *
 * @param load  The series, with weeks around the stretch for `same-weekday`
 * @param stretch  From and to, half-open. [ms since epoch]
 * @param how  The method, and the IANA zone of the wall clock
 */
export function estimateGap(
  load: LoadSeries,
  stretch: { fromMs: number; toMs: number },
  how: { method: GapMethod; timeZone: string },
): GapEstimate {
  const stepMs = load.stepMinutes * minuteMs;
  const first = Math.max(0, Math.ceil((stretch.fromMs - load.startMs) / stepMs));
  const end = Math.min(load.quality.length, Math.ceil((stretch.toMs - load.startMs) / stepMs));
  const missing: number[] = [];
  for (let index = first; index < end; index++) if (load.quality[index] === grades.missing) missing.push(index);
  const estimate = how.method === 'linear' ? lineOver(load) : meanOfWeeks(load, how.timeZone);
  const found = missing.flatMap((index) => {
    const energies = estimate(index);
    return energies ? [{ index, energies }] : [];
  });
  const column = (channel: number) => Float64Array.from(found, ({ energies }) => energies[channel]!);
  return {
    indexes: found.map(({ index }) => index),
    kwh: column(0),
    kvarhLagging: column(1),
    kvarhLeading: column(2),
    left: missing.length - found.length,
  };
}

/** Energies of the three channels, in their order. */
type Energies = [number, number, number];
type Estimate = (index: number) => Energies | null;

function meanOfWeeks(load: LoadSeries, timeZone: string): Estimate {
  const { sameClock } = localClockOf(load, timeZone);
  return (index) => {
    const alike: number[] = [];
    for (let week = 1; week <= weekdayWeeks; week++) {
      for (const days of [-7 * week, 7 * week]) {
        const at = sameClock(index, days);
        if (at >= 0 && load.quality[at] === grades.measured) alike.push(at);
      }
    }
    if (alike.length < weekdayLeast) return null;
    const meanOf = (values: Float64Array) => alike.reduce((sum, at) => sum + values[at]!, 0) / alike.length;
    return channels.map((channel) => meanOf(load[channel])) as Energies;
  };
}

function lineOver(load: LoadSeries): Estimate {
  const { quality, stepMinutes } = load;
  return (index) => {
    let before = index;
    let behind = index;
    while (quality[before] === grades.missing) before--;
    while (quality[behind] === grades.missing) behind++;
    if (quality[before] !== grades.measured || quality[behind] !== grades.measured) return null;
    if ((behind - before - 1) * stepMinutes > linearLongestMinutes) return null;
    const share = (index - before) / (behind - before);
    return channels.map((channel) => {
      const [from, to] = [load[channel][before]!, load[channel][behind]!];
      return from + (to - from) * share;
    }) as Energies;
  };
}
