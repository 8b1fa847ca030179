import { changeBetween, dayNumber, isCalendarDate, isTimeZone, weekdayOf, zoneOffsetMs } from '../load';
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

/** When a motor runs, and at what load. */
export interface ShiftRule {
  days: DayKind[];
  /** Local dates the rule holds on, [from, to); always when absent. */
  dates?: BillingPeriod;
  /** Local clock times HH:MM; `to` may be 24:00. A span whose end is not after its beginning runs into the next day. */
  from: string;
  to: string;
  /** Shaft load; or a fraction of rated output. One of the two. [kW] */
  shaftKw?: number;
  loadFraction?: number;
}

/** Shift calendar of a motor: a later rule wins over an earlier one; outside all rules and in shutdowns it stands still. */
export interface ShiftCalendar {
  rules: ShiftRule[];
  /** Local dates without any running, [from, to). */
  shutdowns?: BillingPeriod[];
  /** Local dates YYYY-MM-DD that count as holidays. */
  holidays?: string[];
}

const DAY_NAMES: DayKind[] = ['sun', 'mon', 'tue', 'wed', 'thu', 'fri', 'sat'];
const MINUTES_PER_DAY = 1440;
const DAY_MS = 86_400_000;

/**
 * Shaft load of a motor in every interval, from its shift calendar. An interval takes the load of its middle.
 *
 * Clock times are local: on the days of clock changes a shift is an hour shorter or longer as it is in the plant.
 *
 * @param calendar  Rules, shutdowns and holidays.
 * @param grid  The intervals.
 * @param timeZone  IANA zone of the plant.
 * @param ratedOutputKw  Needed for rules with a fraction of rated output. [kW], > 0
 * @returns Shaft load, 0 while the motor stands still, never NaN. [kW], Float64Array of grid.count
 * @throws {RangeError} naming the rule and what is wrong with it
 */
export function shaftLoadSeries(
  calendar: ShiftCalendar,
  grid: Grid,
  timeZone: string,
  ratedOutputKw?: number,
): Float64Array {
  if (!isTimeZone(timeZone)) throw new RangeError(`timeZone must be an IANA zone, got ${timeZone}`);
  const rules = calendar.rules.map((rule, i) => compileRule(rule, `rules[${i}]`, ratedOutputKw));
  const shutdowns = (calendar.shutdowns ?? []).map((span, i) => compileDates(span, `shutdowns[${i}]`));
  const holidays = new Set((calendar.holidays ?? []).map((date, i) => dayOf(date, `holidays[${i}]`)));
  const localMs = localMiddles(grid, timeZone);
  const shaftKw = new Float64Array(grid.count);
  for (let i = 0; i < grid.count; i++) {
    const minute = Math.floor(localMs[i]! / 60_000);
    const day = Math.floor(minute / MINUTES_PER_DAY);
    if (shutdowns.some((span) => day >= span.from && day < span.to)) continue;
    shaftKw[i] = loadAt(rules, holidays, day, minute - day * MINUTES_PER_DAY);
  }
  return shaftKw;
}

interface CompiledRule {
  days: Set<DayKind>;
  dates: { from: number; to: number } | null;
  fromMinute: number;
  toMinute: number;
  shaftKw: number;
}

function loadAt(rules: CompiledRule[], holidays: Set<number>, day: number, minute: number): number {
  for (let k = rules.length - 1; k >= 0; k--) {
    const rule = rules[k]!;
    if (rule.toMinute > rule.fromMinute) {
      if (minute >= rule.fromMinute && minute < rule.toMinute && holdsOn(rule, holidays, day)) return rule.shaftKw;
    } else if (
      (minute >= rule.fromMinute && holdsOn(rule, holidays, day)) ||
      (minute < rule.toMinute && holdsOn(rule, holidays, day - 1))
    ) {
      return rule.shaftKw;
    }
  }
  return 0;
}

function holdsOn(rule: CompiledRule, holidays: Set<number>, day: number): boolean {
  if (rule.dates && (day < rule.dates.from || day >= rule.dates.to)) return false;
  if (rule.days.has('every')) return true;
  if (holidays.has(day)) return rule.days.has('holiday');
  const weekday = weekdayOf(day);
  const kind: DayKind = weekday === 0 || weekday === 6 ? 'weekend' : 'weekday';
  return rule.days.has(kind) || rule.days.has(DAY_NAMES[weekday]!);
}

function compileRule(rule: ShiftRule, name: string, ratedOutputKw: number | undefined): CompiledRule {
  if (rule.days.length === 0) throw new RangeError(`${name}.days must name at least one kind of day, got none`);
  const known = new Set<string>(['every', 'weekday', 'weekend', 'holiday', ...DAY_NAMES]);
  const unknown = rule.days.find((day) => !known.has(day));
  if (unknown) throw new RangeError(`${name}.days must be kinds of day such as weekday or sat, got ${unknown}`);
  return {
    days: new Set(rule.days),
    dates: rule.dates ? compileDates(rule.dates, `${name}.dates`) : null,
    fromMinute: clockMinute(rule.from, `${name}.from`),
    toMinute: clockMinute(rule.to, `${name}.to`),
    shaftKw: loadOf(rule, name, ratedOutputKw),
  };
}

function loadOf(rule: ShiftRule, name: string, ratedOutputKw: number | undefined): number {
  if ((rule.shaftKw === undefined) === (rule.loadFraction === undefined)) {
    throw new RangeError(
      `${name} must have either shaftKw or loadFraction, got ${rule.shaftKw === undefined ? 'neither' : 'both'}`,
    );
  }
  if (rule.shaftKw === undefined && !(ratedOutputKw !== undefined && ratedOutputKw > 0)) {
    throw new RangeError(`ratedOutputKw must be > 0 for ${name}.loadFraction, got ${ratedOutputKw}`);
  }
  const shaftKw = rule.shaftKw ?? rule.loadFraction! * ratedOutputKw!;
  if (!(shaftKw >= 0 && Number.isFinite(shaftKw)))
    throw new RangeError(`${name} must have a load >= 0, got ${shaftKw}`);
  return shaftKw;
}

function clockMinute(clock: string, name: string): number {
  const match = /^(\d{2}):(\d{2})$/.exec(clock);
  const minute = match ? Number(match[1]) * 60 + Number(match[2]) : NaN;
  if (!(minute <= MINUTES_PER_DAY && Number(match?.[2]) < 60))
    throw new RangeError(`${name} must be a clock time HH:MM up to 24:00, got ${clock}`);
  return minute;
}

function compileDates(span: BillingPeriod, name: string): { from: number; to: number } {
  const from = dayOf(span.from, `${name}.from`);
  const to = dayOf(span.to, `${name}.to`);
  if (to <= from) throw new RangeError(`${name} must end after they begin, got ${span.from} to ${span.to}`);
  return { from, to };
}

function dayOf(date: string, name: string): number {
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
