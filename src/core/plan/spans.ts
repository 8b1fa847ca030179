import { isoDate } from '../load';
import { localMiddles, shaftLoadSeries, type DayKind, type Grid } from './shaft-load';
import type { Spans } from './types';

/** How a year is parted into stretches that may have settings of their own, as a person says it. */
export type SpanSet =
  | { by: 'year' }
  /** Every month, 1 to 12, in one of the seasons. */
  | { by: 'months'; spans: { name: string; months: number[] }[] }
  /** The schedule's own seasons, in its order. */
  | { by: 'schedule'; spans: { name: string }[] }
  /** Hours of the local clock; a later shift wins over an earlier one, all other time is the last span, `rest`. */
  | { by: 'clock'; spans: ClockSpan[]; rest: string };

/** A shift. One whose end is not after its beginning runs into the next day. */
export interface ClockSpan {
  name: string;
  /** A holiday counts as the day of the week it falls on. */
  days: Exclude<DayKind, 'holiday'>[];
  /** Local clock times HH:MM; `to` may be 24:00. */
  from: string;
  to: string;
}

/** Names of the spans in their order; one, empty, where the year is whole. */
export function spanNames(set: SpanSet): string[] {
  if (set.by === 'year') return [''];
  const names = set.spans.map(({ name }) => name);
  return set.by === 'clock' ? [...names, set.rest] : names;
}

/**
 * The span of every interval. An interval belongs where its middle lies.
 *
 * @param set  How the year is parted.
 * @param at.grid  The intervals.
 * @param at.timeZone  IANA zone of the plant.
 * @param at.seasonOfDate  Position in the schedule's order of the season of a local date YYYY-MM-DD; needed for its seasons.
 * @throws {RangeError} naming what is missing: a month without a season, a season the schedule has not
 */
export function resolveSpans(
  set: SpanSet,
  at: { grid: Grid; timeZone: string; seasonOfDate?: (date: string) => number },
): Spans {
  const { grid, timeZone, seasonOfDate } = at;
  const count = spanNames(set).length;
  switch (set.by) {
    case 'year':
      return { index: new Uint8Array(grid.count), count };
    case 'months': {
      const ofMonth = Array.from({ length: 13 }, (_, month) =>
        set.spans.findIndex((one) => one.months.includes(month)),
      );
      return { index: byDate(grid, timeZone, (date) => ofMonth[Number(date.slice(5, 7))]!, count), count };
    }
    case 'schedule':
      if (!seasonOfDate) throw new RangeError('seasonOfDate must be given for seasons of the schedule, got none');
      return { index: byDate(grid, timeZone, seasonOfDate, count), count };
    case 'clock':
      return { index: byClock(set.spans, grid, timeZone), count };
  }
}

function byDate(grid: Grid, timeZone: string, spanOf: (date: string) => number, count: number): Uint8Array {
  const index = new Uint8Array(grid.count);
  let day = NaN;
  let span = 0;
  localMiddles(grid, timeZone).forEach((localMs, i) => {
    const today = Math.floor(localMs / 86_400_000);
    if (today !== day) {
      day = today;
      span = spanOf(isoDate(day));
      if (!(span >= 0 && span < count)) throw new RangeError(`spans must cover ${isoDate(day)}, got none of ${count}`);
    }
    index[i] = span;
  });
  return index;
}

/** The rules of a shift calendar choose the span as they choose a load: load k + 1 is span k, none is the rest. */
function byClock(shifts: readonly ClockSpan[], grid: Grid, timeZone: string): Uint8Array {
  const rules = shifts.map(({ days, from, to }, k) => ({ days, from, to, shaftKw: k + 1 }));
  const chosen = shaftLoadSeries({ rules }, grid, timeZone);
  return Uint8Array.from(chosen, (code) => (code === 0 ? shifts.length : code - 1));
}
