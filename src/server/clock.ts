import { localDateOf, zoneOffsetMs } from '../core/load';

/** Time zone of the machine the practice's server runs on: the practice's own calendar. */
export const practiceTimeZone = () => Intl.DateTimeFormat().resolvedOptions().timeZone;

/** Today's date on the practice's calendar. */
export const today = (now = Date.now()) => localDateOf(now, practiceTimeZone());

/** The date of an instant on the practice's calendar. */
export const dateOfInstant = (instant: Date) => localDateOf(instant.getTime(), practiceTimeZone());

/** Hour of an instant on the practice's clock, 0 to 23. */
export function hourOfInstant(instant: Date): number {
  const ms = instant.getTime();
  return new Date(ms + zoneOffsetMs(ms, practiceTimeZone())).getUTCHours();
}
