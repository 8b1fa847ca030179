import { addDays, dayNumber, isoDate, weekdayOf } from '../../core/load';
import type { DayKind, ShiftCalendar } from '../../core/plan';
import { dayNames, type CalendarInput, type LoadRule } from '../../schemas/motor';

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

/** Hours of [from, to) at each load, most hours first, by the clock: the odd hour of a clock change is not counted. */
export function loadHoursOf(
  calendar: CalendarInput,
  ratedOutputKw: number,
  year: { from: string; to: string },
): LoadHours[] {
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
export function toShiftCalendar(calendar: CalendarInput, ratedOutputKw: number): ShiftCalendar {
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
