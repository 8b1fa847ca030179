import { changeBetween, isoDate, localDateStartMs, weekdayOf, zoneOffsetMs } from '../../load';
import { PriceError } from '../errors';
import type { ScheduleText } from '../model';
import { seasonOfDate, type PeriodPlan } from '../price/period-plan';
import type { PricingGrid } from '../types';
import { dayKindsOf } from './day-kinds';
import { holidaysOfYear } from './holidays';
import { windowsOfDay, type DayWindows } from './membership';

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

/** The windows of a text over the positions of a period. */
export class PeriodWindows {
  private readonly byKind = new Map<number, DayWindows>();
  private readonly byDay: DayWindows[];

  constructor(
    private readonly text: ScheduleText,
    private readonly plan: PeriodPlan,
    private readonly calendar: PeriodCalendar,
    private readonly stepMinutes: number,
  ) {
    this.byDay = Array.from({ length: plan.days }, (_, day) => this.windowsOf(plan.firstDay + day));
  }

  /**
   * Which positions lie in a window.
   *
   * @returns uint8[positions], 1 inside
   * @throws {PriceError} where a border of the window falls inside an interval
   */
  positionsInside(window: string): Uint8Array {
    this.checkBorders(window);
    const { count, day, clock } = this.calendar;
    const inside = new Uint8Array(count);
    const templates = this.byDay.map((windows) => windows.get(window)!);
    for (let position = 0; position < count; position++)
      inside[position] = templates[day[position]!]![clock[position]!]!;
    return inside;
  }

  private windowsOf(day: number): DayWindows {
    const date = isoDate(day);
    const season = seasonOfDate(this.text.seasons, date);
    const isHoliday = holidaysOfYear(this.text.holidays, Number(date.slice(0, 4))).has(date);
    const kinds = dayKindsOf(weekdayOf(day), isHoliday);
    const key = season * 4096 + kinds;
    let windows = this.byKind.get(key);
    if (!windows) this.byKind.set(key, (windows = windowsOfDay(this.text, season, kinds)));
    return windows;
  }

  private checkBorders(name: string): void {
    const { clock, count } = this.calendar;
    const { stepMinutes } = this;
    const phase = count > 0 ? clock[0]! % stepMinutes : 0;
    const names = new Set([name]);
    for (const one of names) {
      const window = this.text.windows.get(one);
      for (const other of window?.restOf ?? []) names.add(other);
      for (const border of window?.rules.flatMap(({ spans }) => spans.flat()) ?? []) {
        if (border % 1440 === 0 ? phase === 0 : (border - phase) % stepMinutes === 0) continue;
        const time = `${String(Math.floor(border / 60)).padStart(2, '0')}:${String(border % 60).padStart(2, '0')}`;
        throw new PriceError(
          `${window?.path}.hours: ${time} falls inside an interval of ${stepMinutes} minutes. Use a series of a shorter step.`,
          { period: this.plan.period, name: one },
        );
      }
    }
  }
}
