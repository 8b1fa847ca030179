import { changeBetween, isoDate, localDateStartMs, weekdayOf, zoneOffsetMs } from '../../load';
import { PriceError } from '../errors';
import type { ScheduleText } from '../model';
import { seasonOfDate, type PeriodPlan } from '../price/period-plan';
import type { PricingGrid } from '../types';
import { dayKindsOf } from './day-kinds';
import { holidaysOfYear } from './holidays';
import { windowMembership } from './membership';

const dayMs = 86_400_000;

/** Local time of the intervals whose beginning lies in a period, inside the series or not. Positions count from the period's first. */
export interface PeriodCalendar {
  /** Number of interval at position 0; may lie before the series. */
  first: number;
  count: number;
  /** Day of the period, from 0. int32[count] */
  day: Int32Array;
  /** Minute of the local clock, 0 to 1439. int16[count] */
  clock: Int16Array;
  /** Rises by one where the offset changes inside a day: tells the repeated hour from the first. uint8[count] */
  turn: Uint8Array;
}

/** Lays local time over the intervals of a period, with one zone look-up a day. */
export function layPeriod(grid: PricingGrid, plan: PeriodPlan, timeZone: string): PeriodCalendar {
  const stepMs = grid.stepMinutes * 60_000;
  const first = Math.ceil((plan.startMs - grid.startMs) / stepMs);
  const count = Math.ceil((plan.endMs - grid.startMs) / stepMs) - first;
  const calendar: PeriodCalendar = {
    first,
    count,
    day: new Int32Array(count),
    clock: new Int16Array(count),
    turn: new Uint8Array(count),
  };
  let startMs = plan.startMs;
  let offsetMs = zoneOffsetMs(startMs, timeZone);
  let position = 0;
  for (let day = 0; day < plan.days; day++) {
    const midnightMs = (plan.firstDay + day) * dayMs;
    const guessMs = midnightMs + dayMs - offsetMs;
    const nextOffsetMs = zoneOffsetMs(guessMs, timeZone);
    const endMs = nextOffsetMs === offsetMs ? guessMs : localDateStartMs(isoDate(plan.firstDay + day + 1), timeZone);
    const changeMs =
      endMs - startMs === dayMs && nextOffsetMs === offsetMs ? Infinity : changeBetween(startMs, endMs, timeZone);
    const laterOffsetMs = changeMs === Infinity ? offsetMs : zoneOffsetMs(changeMs, timeZone);
    for (; position < count; position++) {
      const ms = grid.startMs + (first + position) * stepMs;
      if (ms >= endMs) break;
      const isLater = ms >= changeMs;
      calendar.day[position] = day;
      calendar.clock[position] = Math.floor((ms + (isLater ? laterOffsetMs : offsetMs) - midnightMs) / 60_000);
      calendar.turn[position] = isLater ? 1 : 0;
    }
    startMs = endMs;
    offsetMs = nextOffsetMs === offsetMs ? offsetMs : zoneOffsetMs(endMs, timeZone);
  }
  return calendar;
}

/**
 * Which positions of a period lie in a window.
 *
 * @returns uint8[count], 1 inside
 * @throws {PriceError} where a border of the window falls inside an interval
 */
export function positionsInside(
  text: ScheduleText,
  window: string,
  plan: PeriodPlan,
  calendar: PeriodCalendar,
  stepMinutes: number,
): Uint8Array {
  checkBorders(text, window, plan, calendar, stepMinutes);
  const inside = new Uint8Array(calendar.count);
  const templates = new Map<number, Uint8Array>();
  const byDay = Array.from({ length: plan.days }, (_, day) => {
    const { season, kinds } = dayOf(text, plan.firstDay + day);
    const key = season * 4096 + kinds;
    let template = templates.get(key);
    if (!template) templates.set(key, (template = windowMembership(text, window, season, kinds)));
    return template;
  });
  for (let position = 0; position < calendar.count; position++) {
    inside[position] = byDay[calendar.day[position]!]![calendar.clock[position]!]!;
  }
  return inside;
}

/** Season and kinds of a day, given as days since 1970-01-01. */
export function dayOf(text: ScheduleText, day: number): { season: number; kinds: number } {
  const date = isoDate(day);
  const isHoliday = holidaysOfYear(text.holidays, Number(date.slice(0, 4))).has(date);
  return { season: seasonOfDate(text.seasons, date), kinds: dayKindsOf(weekdayOf(day), isHoliday) };
}

function checkBorders(
  text: ScheduleText,
  name: string,
  plan: PeriodPlan,
  { clock, count }: PeriodCalendar,
  stepMinutes: number,
): void {
  const window = text.windows.get(name);
  const phase = count > 0 ? clock[0]! % stepMinutes : 0;
  for (const { spans } of window?.rules ?? []) {
    for (const border of spans.flat()) {
      if (border % 1440 === 0 ? phase === 0 : (border - phase) % stepMinutes === 0) continue;
      const time = `${String(Math.floor(border / 60)).padStart(2, '0')}:${String(border % 60).padStart(2, '0')}`;
      throw new PriceError(
        `${window?.path}.hours: ${time} falls inside an interval of ${stepMinutes} minutes. Use a series of a shorter step.`,
        { period: plan.period, name },
      );
    }
  }
  for (const other of window?.restOf ?? [])
    checkBorders(text, other, plan, { clock, count } as PeriodCalendar, stepMinutes);
}
