import type { LoadSeries } from './series';
import { changeBetween, zoneOffsetMs } from './zone';

const minuteMs = 60_000;
const dayMs = 86_400_000;

/** The wall clock under a series, and the way from an interval to the same clock on another day. */
export interface LocalClock {
  /** Minutes of local time since 1970-01-01 00:00 at the beginning of each interval. int32[intervals] */
  localMinute: Int32Array;
  /** Instants at which the clock changes inside the series. [ms since epoch] */
  changesMs: number[];
  /** Interval that begins at the same clock a number of days away; -1 where the series has none. */
  sameClock(index: number, days: number): number;
}

/**
 * Lays the wall clock of a zone under a series.
 *
 * @param load  Beginning and step of the series
 * @param timeZone  IANA zone
 */
export function localClockOf(load: Pick<LoadSeries, 'startMs' | 'stepMinutes' | 'kwh'>, timeZone: string): LocalClock {
  const { startMs, stepMinutes } = load;
  const stepMs = stepMinutes * minuteMs;
  const count = load.kwh.length;
  const localMinute = new Int32Array(count);
  const changesMs: number[] = [];
  const lay = (fromMs: number, toMs: number, offsetMs: number) => {
    for (let at = Math.ceil((fromMs - startMs) / stepMs); at < count && startMs + at * stepMs < toMs; at++) {
      localMinute[at] = (startMs + at * stepMs + offsetMs) / minuteMs;
    }
  };
  let offsetMs = zoneOffsetMs(startMs, timeZone);
  for (let fromMs = startMs; fromMs < startMs + count * stepMs; fromMs += dayMs) {
    const nextMs = zoneOffsetMs(fromMs + dayMs, timeZone);
    const changeMs = nextMs === offsetMs ? fromMs + dayMs : changeBetween(fromMs, fromMs + dayMs, timeZone);
    lay(fromMs, changeMs, offsetMs);
    if (nextMs !== offsetMs) {
      lay(changeMs, fromMs + dayMs, nextMs);
      changesMs.push(changeMs);
    }
    offsetMs = nextMs;
  }
  const sameClock = (index: number, days: number) => {
    const wanted = localMinute[index]! + days * 1440;
    const near = index + (days * 1440) / stepMinutes;
    if (near < 0 || near >= count) return -1;
    const found = near + (wanted - localMinute[near]!) / stepMinutes;
    return localMinute[found] === wanted ? found : -1;
  };
  return { localMinute, changesMs: changesMs.filter((ms) => ms < startMs + count * stepMs), sameClock };
}
