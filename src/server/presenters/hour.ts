import type { HourStation, HourSums, HourView } from '../../schemas/hour';
import type { HourEntry } from '../models/HourEntry';

/** An entry with the rate the reader may know of: null hides it, or says that none is in force. */
export function presentHour(
  entry: HourEntry,
  given: { person: string; readerId: number; perHourMinor: number | null; amountMinor: number | null },
): HourView {
  const { id, userId, day, minutes, note, billable, version } = entry;
  return {
    id,
    userId,
    person: given.person,
    day,
    minutes,
    station: entry.station as HourStation,
    note,
    billable,
    version,
    perHourMinor: given.perHourMinor,
    amountMinor: given.amountMinor,
    mine: userId === given.readerId,
  };
}

/** Sums over entries: what no rate covers is counted apart, never as nought. */
export function sumHours(entries: HourView[]): HourSums {
  const sums: HourSums = { minutes: 0, billableMinutes: 0, amountMinor: 0, unratedMinutes: 0 };
  for (const entry of entries) {
    sums.minutes += entry.minutes;
    if (!entry.billable) continue;
    sums.billableMinutes += entry.minutes;
    if (entry.amountMinor === null) sums.unratedMinutes += entry.minutes;
    else sums.amountMinor += entry.amountMinor;
  }
  return sums;
}
