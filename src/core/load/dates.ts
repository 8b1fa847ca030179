const dayMs = 86_400_000;

/**
 * Days since 1970-01-01 of a local date. [d], integer
 *
 * @throws {RangeError} if the text is no date of the calendar written YYYY-MM-DD
 */
export function dayNumber(date: string): number {
  const ms = /^\d{4}-\d{2}-\d{2}$/.test(date) ? Date.parse(`${date}T00:00:00Z`) : NaN;
  if (Number.isNaN(ms) || isoDate(ms / dayMs) !== date) {
    throw new RangeError(`date must be a day of the calendar written YYYY-MM-DD, got "${date}"`);
  }
  return ms / dayMs;
}

/** Local date YYYY-MM-DD of a count of days since 1970-01-01. */
export function isoDate(day: number): string {
  return new Date(day * dayMs).toISOString().slice(0, 10);
}

/** Whether a text is a date of the calendar written YYYY-MM-DD. */
export function isCalendarDate(text: string): boolean {
  if (!/^\d{4}-\d{2}-\d{2}$/.test(text)) return false;
  const ms = Date.parse(`${text}T00:00:00Z`);
  return !Number.isNaN(ms) && isoDate(ms / dayMs) === text;
}

/** The date a number of days later. */
export function addDays(date: string, days: number): string {
  return isoDate(dayNumber(date) + days);
}

/** The same day a number of months later; the month's last day where it has no such day. */
export function addMonths(date: string, months: number): string {
  dayNumber(date);
  const month = Number(date.slice(0, 4)) * 12 + Number(date.slice(5, 7)) - 1 + months;
  const year = Math.floor(month / 12);
  const lastDay = new Date(Date.UTC(year, (month % 12) + 1, 0)).getUTCDate();
  const day = Math.min(Number(date.slice(8)), lastDay);
  return isoDate(Date.UTC(year, month - year * 12, day) / dayMs);
}

/** Day of the week of a count of days since 1970-01-01: 0 Sunday ... 6 Saturday. */
export function weekdayOf(day: number): number {
  return (((day + 4) % 7) + 7) % 7;
}
