import { z } from 'zod';
import { addDays, dayNumber, isCalendarDate, isoDate, weekdayOf } from '../core/load';

/** Where on an engagement time is spent: its stations, and what belongs to none. */
export const hourStations = [
  'bills',
  'intervals',
  'tariff',
  'motors',
  'plans',
  'report',
  'proof',
  'travel',
  'other',
] as const;
export type HourStation = (typeof hourStations)[number];

const dayMinutes = 24 * 60;

/** Minutes since midnight of a clock time `0845` or `8:45`. */
function clockMinutes(hours: string, minutes: string): number | null {
  const [hour, minute] = [Number(hours), Number(minutes)];
  if (minute > 59 || hour > 24 || (hour === 24 && minute > 0)) return null;
  return hour * 60 + minute;
}

/**
 * Minutes from what people type: `1:45`, `1.75` or `1,75` (hours), `105m`, `2h`, `1h 45m`, `1h45`, `0845-1030`, `8:45-10:30`.
 * Hours are rounded to the nearest minute. Null where it is none of these, nought, or more than a day.
 *
 * @example parseMinutes('0845-1030') // => 105
 */
export function parseMinutes(typed: string): number | null {
  const text = typed.trim().toLowerCase();
  const minutes = minutesOf(text);
  return minutes !== null && minutes > 0 && minutes <= dayMinutes ? minutes : null;
}

function minutesOf(text: string): number | null {
  const span = /^(\d{1,2}):?(\d{2})\s*(?:-|\u2013|to)\s*(\d{1,2}):?(\d{2})$/.exec(text);
  if (span) {
    const [, fromHour = '', fromMinute = '', toHour = '', toMinute = ''] = span;
    const from = clockMinutes(fromHour, fromMinute);
    const to = clockMinutes(toHour, toMinute);
    if (from === null || to === null) return null;
    return to > from ? to - from : null;
  }
  const clock = /^(\d{1,2}):(\d{2})$/.exec(text);
  if (clock) return Number(clock[2]) > 59 ? null : Number(clock[1]) * 60 + Number(clock[2]);
  const units =
    /^(\d{1,2})\s*h\s*(\d{1,2})$/.exec(text) ?? /^(?:(\d{1,2})\s*h)?\s*(?:(\d{1,4})\s*(?:m|min))?$/.exec(text);
  if (units && text !== '') return Number(units[1] ?? 0) * 60 + Number(units[2] ?? 0);
  const decimal = /^(\d{1,2}(?:[.,]\d{1,4})?|[.,]\d{1,4})\s*h?$/.exec(text);
  return decimal ? Math.round(Number((decimal[1] as string).replace(',', '.')) * 60) : null;
}

/** A day of the calendar. */
export const dayInput = z.string().refine(isCalendarDate, 'Write a day of the calendar, such as 2026-12-01.');

/** One entry of hours as it is typed. */
export const hourInput = z.object({
  day: dayInput,
  time: z
    .string()
    .max(40)
    .transform((typed, context) => {
      const minutes = parseMinutes(typed);
      if (minutes !== null) return minutes;
      const message = 'Write the time as 1:45, 1.75, 105m or 0845-1030, at most 24 hours.';
      context.addIssue({ code: 'custom', message });
      return z.NEVER;
    }),
  station: z.enum(hourStations, 'Choose where the time was spent.'),
  note: z
    .string()
    .trim()
    .min(3, 'Say in a few words what you did; the client reads it on the timesheet.')
    .max(500, 'Use at most 500 characters.'),
  billable: z.boolean(),
});
export type HourInput = z.output<typeof hourInput>;
export type HourForm = z.input<typeof hourInput>;

export const hourChangeInput = hourInput.extend({ version: z.number().int().min(0) });
export type HourChangeInput = z.output<typeof hourChangeInput>;

/** One entry as the screen shows it. Amounts are null where the reader may not know the rate, or none is in force. */
export interface HourView {
  id: number;
  userId: number;
  person: string;
  day: string;
  minutes: number;
  station: HourStation;
  note: string;
  billable: boolean;
  version: number;
  perHourMinor: number | null;
  amountMinor: number | null;
  mine: boolean;
}

/** Sums over entries. `unratedMinutes` are billable minutes that no rate covers. */
export interface HourSums {
  minutes: number;
  billableMinutes: number;
  amountMinor: number;
  unratedMinutes: number;
}

/** Monday of the week a day lies in. */
export function mondayOf(day: string): string {
  const number = dayNumber(day);
  return isoDate(number - ((weekdayOf(number) + 6) % 7));
}

/** Number of the week that begins on a Monday, by ISO 8601: week 1 holds the year's first Thursday. */
export function weekNumber(monday: string): number {
  const thursday = addDays(monday, 3);
  const firstOfYear = dayNumber(`${thursday.slice(0, 4)}-01-01`);
  return Math.floor((dayNumber(thursday) - firstOfYear) / 7) + 1;
}
