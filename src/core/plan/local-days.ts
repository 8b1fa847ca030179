import { changeBetween, dayNumber, isCalendarDate, weekdayOf, zoneOffsetMs } from '../load';
import type { BillingPeriod } from '../load';

/** A regular series of intervals. */
export interface Grid {
  /** UTC instant at which interval 0 begins. [ms] */
  startMs: number;
  stepMinutes: number;
  count: number;
}

/** Kinds of day a rule may name. A holiday is only `holiday`, `every` or its date, never a weekday or Saturday or Sunday. */
export type DayKind =
  'every' | 'weekday' | 'weekend' | 'holiday' | 'mon' | 'tue' | 'wed' | 'thu' | 'fri' | 'sat' | 'sun';

/** Days and clock times a rule names. */
export interface DayRule {
  days: DayKind[];
  /** Local dates the rule holds on, [from, to); always when absent. */
  dates?: BillingPeriod;
  /** Local clock times HH:MM; `to` may be 24:00. A span whose end is not after its beginning runs into the next day. */
  from: string;
  to: string;
}

/** A rule with its days as numbers and its clock times as minutes of the day. */
export interface CompiledDayRule {
  days: Set<DayKind>;
  dates: { from: number; to: number } | null;
  fromMinute: number;
  toMinute: number;
}

export const MINUTES_PER_DAY = 1440;

const DAY_NAMES: DayKind[] = ['sun', 'mon', 'tue', 'wed', 'thu', 'fri', 'sat'];
const DAY_MS = 86_400_000;

/** @throws {RangeError} naming the rule and what is wrong with it */
export function compileDayRule(rule: DayRule, name: string): CompiledDayRule {
  if (rule.days.length === 0) throw new RangeError(`${name}.days must name at least one kind of day, got none`);
  const known = new Set<string>(['every', 'weekday', 'weekend', 'holiday', ...DAY_NAMES]);
  const unknown = rule.days.find((day) => !known.has(day));
  if (unknown) throw new RangeError(`${name}.days must be kinds of day such as weekday or sat, got ${unknown}`);
  return {
    days: new Set(rule.days),
    dates: rule.dates ? compileDates(rule.dates, `${name}.dates`) : null,
    fromMinute: clockMinute(rule.from, `${name}.from`),
    toMinute: clockMinute(rule.to, `${name}.to`),
  };
}

/** The local day a rule's span that holds at a minute begins in; null where the rule does not hold then. */
export function holdsAt(rule: CompiledDayRule, holidays: Set<number>, day: number, minute: number): number | null {
  if (rule.toMinute > rule.fromMinute) {
    return minute >= rule.fromMinute && minute < rule.toMinute && holdsOn(rule, holidays, day) ? day : null;
  }
  if (minute >= rule.fromMinute && holdsOn(rule, holidays, day)) return day;
  return minute < rule.toMinute && holdsOn(rule, holidays, day - 1) ? day - 1 : null;
}

function holdsOn(rule: CompiledDayRule, holidays: Set<number>, day: number): boolean {
  if (rule.dates && (day < rule.dates.from || day >= rule.dates.to)) return false;
  if (rule.days.has('every')) return true;
  if (holidays.has(day)) return rule.days.has('holiday');
  const weekday = weekdayOf(day);
  const kind: DayKind = weekday === 0 || weekday === 6 ? 'weekend' : 'weekday';
  return rule.days.has(kind) || rule.days.has(DAY_NAMES[weekday]!);
}

function clockMinute(clock: string, name: string): number {
  const match = /^(\d{2}):(\d{2})$/.exec(clock);
  const minute = match ? Number(match[1]) * 60 + Number(match[2]) : NaN;
  if (!(minute <= MINUTES_PER_DAY && Number(match?.[2]) < 60))
    throw new RangeError(`${name} must be a clock time HH:MM up to 24:00, got ${clock}`);
  return minute;
}

/** Dates as day numbers. @throws {RangeError} naming what is no date, or an end before its beginning */
export function compileDates(span: BillingPeriod, name: string): { from: number; to: number } {
  const from = dayOf(span.from, `${name}.from`);
  const to = dayOf(span.to, `${name}.to`);
  if (to <= from) throw new RangeError(`${name} must end after they begin, got ${span.from} to ${span.to}`);
  return { from, to };
}

/** Number of a local day. @throws {RangeError} naming what is no date */
export function dayOf(date: string, name: string): number {
  if (!isCalendarDate(date)) throw new RangeError(`${name} must be a day written YYYY-MM-DD, got ${date}`);
  return dayNumber(date);
}

/** Local time of the middle of each interval, as if UTC. The zone's offset is looked up once a day and at its changes. */
export function localMiddles(grid: Grid, timeZone: string): Float64Array {
  const stepMs = grid.stepMinutes * 60_000;
  const middles = new Float64Array(grid.count);
  let offsetMs = 0;
  let untilMs = -Infinity;
  for (let i = 0; i < grid.count; i++) {
    const utcMs = grid.startMs + (i + 0.5) * stepMs;
    if (utcMs >= untilMs) {
      offsetMs = zoneOffsetMs(utcMs, timeZone);
      const nextMs = utcMs + DAY_MS;
      untilMs = zoneOffsetMs(nextMs, timeZone) === offsetMs ? nextMs : changeBetween(utcMs, nextMs, timeZone);
    }
    middles[i] = utcMs + offsetMs;
  }
  return middles;
}
