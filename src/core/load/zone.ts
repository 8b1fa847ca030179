import { dayNumber, isoDate } from './dates';

const formats = new Map<string, Intl.DateTimeFormat>();
const hourMs = 3_600_000;
const dayMs = 24 * hourMs;

function formatOf(timeZone: string): Intl.DateTimeFormat {
  let format = formats.get(timeZone);
  if (format === undefined) {
    format = new Intl.DateTimeFormat('en-US', {
      timeZone,
      calendar: 'gregory',
      numberingSystem: 'latn',
      hourCycle: 'h23',
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
      second: '2-digit',
    });
    formats.set(timeZone, format);
  }
  return format;
}

/** Whether a text names a zone of the IANA database that the platform knows. */
export function isTimeZone(timeZone: string): boolean {
  try {
    formatOf(timeZone);
    return true;
  } catch {
    return false;
  }
}

/**
 * Local time minus UTC at an instant. [ms]
 *
 * @param utcMs  UTC instant. [ms since epoch]
 * @param timeZone  IANA zone
 * @throws {RangeError} if the zone is unknown
 */
export function zoneOffsetMs(utcMs: number, timeZone: string): number {
  let year = 0;
  let month = 0;
  let day = 0;
  let hour = 0;
  let minute = 0;
  let second = 0;
  for (const { type, value } of formatOf(timeZone).formatToParts(utcMs)) {
    if (type === 'year') year = Number(value);
    else if (type === 'month') month = Number(value);
    else if (type === 'day') day = Number(value);
    else if (type === 'hour') hour = Number(value);
    else if (type === 'minute') minute = Number(value);
    else if (type === 'second') second = Number(value);
  }
  return Date.UTC(year, month - 1, day, hour, minute, second) - Math.floor(utcMs / 1000) * 1000;
}

/** Local date YYYY-MM-DD at an instant. */
export function localDateOf(utcMs: number, timeZone: string): string {
  return isoDate(Math.floor((utcMs + zoneOffsetMs(utcMs, timeZone)) / dayMs));
}

/**
 * UTC instant at which a local date begins; where its midnight is skipped by a clock change, the first instant of the date. [ms since epoch]
 *
 * @param date  Local date YYYY-MM-DD
 * @param timeZone  IANA zone
 * @throws {RangeError} if the date or the zone is none
 * @example localDateStartMs('2026-07-01', 'America/Chicago') // => Date.UTC(2026, 6, 1, 5)
 */
export function localDateStartMs(date: string, timeZone: string): number {
  const localMidnightMs = dayNumber(date) * dayMs;
  const guessMs = localMidnightMs - zoneOffsetMs(localMidnightMs, timeZone);
  const offsetMs = zoneOffsetMs(guessMs, timeZone);
  const beforeMs = zoneOffsetMs(guessMs - 3 * hourMs, timeZone);
  // The midnight may be read twice (the clock goes back over it) or never: the earlier reading, or the instant of the change.
  for (const candidateMs of [
    localMidnightMs - Math.max(offsetMs, beforeMs),
    localMidnightMs - Math.min(offsetMs, beforeMs),
  ]) {
    if (candidateMs + zoneOffsetMs(candidateMs, timeZone) === localMidnightMs) return candidateMs;
  }
  return changeBetween(guessMs - 3 * hourMs, guessMs + 3 * hourMs, timeZone);
}

/** First instant, to the minute, at which the offset differs from that at the beginning of a span holding one change. [ms] */
export function changeBetween(fromMs: number, toMs: number, timeZone: string): number {
  const before = zoneOffsetMs(fromMs, timeZone);
  let low = Math.floor(fromMs / 60_000);
  let high = Math.ceil(toMs / 60_000);
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (zoneOffsetMs(middle * 60_000, timeZone) === before) low = middle;
    else high = middle;
  }
  return high * 60_000;
}
