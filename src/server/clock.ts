import { localDateOf } from '../core/load';

/** Time zone of the machine the practice's server runs on: the practice's own calendar. */
export const practiceTimeZone = () => Intl.DateTimeFormat().resolvedOptions().timeZone;

/** Today's date on the practice's calendar. */
export const today = (now = Date.now()) => localDateOf(now, practiceTimeZone());

/** The date of an instant on the practice's calendar. */
export const dateOfInstant = (instant: Date) => localDateOf(instant.getTime(), practiceTimeZone());
