import { isTimeZone } from '../load';
import type { BillingPeriod } from '../load';
import { MINUTES_PER_DAY, compileDates, compileDayRule, dayOf, holdsAt, localMiddles } from './local-days';
import type { CompiledDayRule, DayRule, Grid } from './local-days';

/** When a motor runs, and at what load. */
export interface ShiftRule extends DayRule {
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

interface CompiledRule extends CompiledDayRule {
  shaftKw: number;
}

function loadAt(rules: CompiledRule[], holidays: Set<number>, day: number, minute: number): number {
  for (let k = rules.length - 1; k >= 0; k--) {
    if (holdsAt(rules[k]!, holidays, day, minute) !== null) return rules[k]!.shaftKw;
  }
  return 0;
}

function compileRule(rule: ShiftRule, name: string, ratedOutputKw: number | undefined): CompiledRule {
  return { ...compileDayRule(rule, name), shaftKw: loadOf(rule, name, ratedOutputKw) };
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
