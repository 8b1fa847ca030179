import { addDays, dayNumber, isoDate, localDateStartMs, weekdayOf } from '../../core/load';
import type { SynchronousMotor } from '../../core/machine';
import {
  laidPowerOn,
  shaftLoadFromSubmeter,
  shaftLoadSeries,
  type DayKind,
  type Grid,
  type PowerSeries,
  type ShiftCalendar,
  type SubmeterLoad,
} from '../../core/plan';
import { dayNames, type CalendarInput, type DayName, type LoadRule } from '../../schemas/motor';
import type { GapLoad, ProfileInput } from '../../schemas/shaft-load';

/** What tells a motor's shaft load. */
export interface LoadSource {
  /** Rules of the week: the shift calendar's, or a profile's. */
  calendar: CalendarInput;
  /** What a submeter read; without it the rules tell all. */
  metered?: { series: PowerSeries[]; whenMissing: GapLoad } | null;
}

/** A motor with what tells its load, and the field that its losses hang on. */
export interface RunningMotor extends LoadSource {
  machine: SynchronousMotor;
  fieldTodayA: number;
}

/** Shaft power of a rule's load. [kW] */
export const ruleLoadKw = (rule: LoadRule, ratedOutputKw: number) =>
  rule.unit === 'kW' ? rule.load : (rule.load / 100) * ratedOutputKw;

/** Local clock hours of the year at each shaft load. Standstill is not among them. */
export interface LoadHours {
  shaftKw: number;
  hours: number;
}

const stepsPerHour = 4;
const stepsPerDay = 24 * stepsPerHour;

/** The rule that holds in a quarter-hour of the week, the later one first; null at standstill. Monday is day 0. */
function weekOf({ rules }: CalendarInput): (LoadRule | null)[] {
  const week = new Array<LoadRule | null>(7 * stepsPerDay).fill(null);
  for (const rule of rules) {
    const from = Math.round(rule.fromHour * stepsPerHour);
    const to = Math.round(rule.toHour * stepsPerHour) + (rule.toHour <= rule.fromHour ? stepsPerDay : 0);
    for (const day of rule.days) {
      const start = dayNames.indexOf(day) * stepsPerDay;
      for (let step = start + from; step < start + to; step += 1) week[step % week.length] = rule;
    }
  }
  return week;
}

/** Hours of [from, to) at each load of the rules, most hours first, by the clock: the odd hour of a clock change is not counted. */
function hoursOfRules(calendar: CalendarInput, ratedOutputKw: number, year: { from: string; to: string }): LoadHours[] {
  const week = weekOf(calendar);
  const steps = new Map<number, number>();
  for (let day = dayNumber(year.from); day < dayNumber(year.to); day += 1) {
    const date = isoDate(day);
    if (calendar.shutdowns.some((range) => date >= range.from && date <= range.lastDay)) continue;
    const start = ((weekdayOf(day) + 6) % 7) * stepsPerDay;
    for (const rule of week.slice(start, start + stepsPerDay)) {
      const shaftKw = rule ? ruleLoadKw(rule, ratedOutputKw) : 0;
      if (shaftKw > 0) steps.set(shaftKw, (steps.get(shaftKw) ?? 0) + 1);
    }
  }
  return [...steps]
    .map(([shaftKw, count]) => ({ shaftKw, hours: count / stepsPerHour }))
    .sort((a, b) => b.hours - a.hours || b.shaftKw - a.shaftKw);
}

const clock = (hour: number) =>
  `${String(Math.floor(hour)).padStart(2, '0')}:${String(Math.round((hour % 1) * 60)).padStart(2, '0')}`;

/** The calendar in the words of the core. */
function toShiftCalendar(calendar: CalendarInput, ratedOutputKw: number): ShiftCalendar {
  return {
    rules: calendar.rules.map((rule) => ({
      days: rule.days.map((day) => day.toLowerCase() as DayKind),
      from: clock(rule.fromHour),
      to: clock(rule.toHour),
      shaftKw: ruleLoadKw(rule, ratedOutputKw),
    })),
    shutdowns: calendar.shutdowns.map(({ from, lastDay }) => ({ from, to: addDays(lastDay, 1) })),
  };
}

/** Shaft load of every interval by the rules of a calendar. [kW] */
export const rulesLoad = (calendar: CalendarInput, ratedOutputKw: number, grid: Grid, timeZone: string) =>
  shaftLoadSeries(toShiftCalendar(calendar, ratedOutputKw), grid, timeZone);

/**
 * Shaft load of a motor in every interval of a grid: of what its submeter read less its losses, or by its rules.
 *
 * Where the submeter has no reading the rules hold, or standstill, as was chosen; such intervals are counted.
 */
export function shaftLoadOf(motor: RunningMotor, grid: Grid, timeZone: string): SubmeterLoad {
  const { machine, calendar, metered, fieldTodayA } = motor;
  const byRules = () => rulesLoad(calendar, machine.ratedOutputKw, grid, timeZone);
  if (!metered) return { shaftKw: byRules(), missing: 0, beyondPullOut: 0 };
  return shaftLoadFromSubmeter(machine, {
    inputKw: laidPowerOn(metered.series, grid),
    fieldCurrentA: fieldTodayA,
    whenMissing: metered.whenMissing === 'calendar' ? byRules() : undefined,
  });
}

/** A year by local days, [from, to). */
export interface LoadYear {
  from: string;
  to: string;
  timeZone: string;
}

/** Steps of the year's grid: those of pricing in most places. */
const yearStepMinutes = 15;

/** The intervals of a year of local days. */
export function gridOf({ from, to, timeZone }: LoadYear): Grid {
  const startMs = localDateStartMs(from, timeZone);
  const count = Math.round((localDateStartMs(to, timeZone) - startMs) / (yearStepMinutes * 60_000));
  return { startMs, stepMinutes: yearStepMinutes, count };
}

/** Loads of a submeter are gathered in steps of this share of rated output. */
const binShare = 0.01;

/** A motor's load over a year. */
export interface YearLoad {
  /**
   * Hours at each shaft load, most hours first; standstill is not among them. The many loads of a submeter are gathered: each entry
   * stands for the mean of its loads, and the highest and lowest of all have entries of their own.
   */
  hours: LoadHours[];
  /** Of a submeter: hours without reading, hours set to the most that the field can hold. */
  hoursMissing: number;
  hoursBeyond: number;
}

/** A motor's load over a year, whatever tells it. */
export function yearLoadOf(motor: RunningMotor, year: LoadYear): YearLoad {
  const { calendar, machine, metered } = motor;
  if (!metered) return { hours: hoursOfRules(calendar, machine.ratedOutputKw, year), hoursMissing: 0, hoursBeyond: 0 };
  const { shaftKw, missing, beyondPullOut } = shaftLoadOf(motor, gridOf(year), year.timeZone);
  const hours = gatheredHours(shaftKw, machine.ratedOutputKw);
  return { hours, hoursMissing: hoursOfSteps(missing), hoursBeyond: hoursOfSteps(beyondPullOut) };
}

const hoursOfSteps = (count: number) => (count * yearStepMinutes) / 60;

/** Hours of a series at each load, gathered. */
export function gatheredHours(shaftKw: Float64Array, ratedOutputKw: number): LoadHours[] {
  const bins = new Map<number, { sum: number; count: number }>();
  let highest = 0;
  let lowest = Infinity;
  for (const kw of shaftKw) {
    if (kw <= 0) continue;
    const at = Math.floor(kw / (binShare * ratedOutputKw));
    const bin = bins.get(at) ?? { sum: 0, count: 0 };
    bins.set(at, { sum: bin.sum + kw, count: bin.count + 1 });
    highest = Math.max(highest, kw);
    lowest = Math.min(lowest, kw);
  }
  const gathered = [...bins.values()].map(({ sum, count }) => ({
    shaftKw: Math.min(highest, Math.max(lowest, sum / count)),
    hours: hoursOfSteps(count),
  }));
  const missing = bins.size === 0 ? [] : [...new Set([highest, lowest])];
  const ends = missing.filter((kw) => !gathered.some((one) => one.shaftKw === kw));
  return [...gathered, ...ends.map((kw) => ({ shaftKw: kw, hours: 0 }))].sort(
    (a, b) => b.hours - a.hours || b.shaftKw - a.shaftKw,
  );
}

const weekdays: DayName[] = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri'];

/** A profile as rules of the week, with the shutdowns of the calendar: hours of one load that follow each other are one rule. */
export function calendarOfProfile(profile: ProfileInput, { shutdowns }: CalendarInput): CalendarInput {
  const rulesOf = (days: DayName[], loads: number[]) => {
    const starts = loads.flatMap((load, hour) => (hour === 0 || load !== loads[hour - 1] ? [hour] : []));
    return starts.map((fromHour, k) => ({
      days,
      fromHour,
      toHour: starts[k + 1] ?? 24,
      load: loads[fromHour]!,
      unit: profile.unit,
    }));
  };
  const { weekday, saturday, sunday } = profile;
  return {
    rules: [...rulesOf(weekdays, weekday), ...rulesOf(['Sat'], saturday), ...rulesOf(['Sun'], sunday)],
    shutdowns,
  };
}
