import { totalOf, type UtilityLetterSummary } from '../../schemas/utility-letter';
import type { UtilityLetter } from '../models/UtilityLetter';

/** Time after which a letter that is still being sent was cut off: the mail server's own deadlines are shorter. [ms] */
const longestSendingMs = 2 * 60_000;

/** Whether a letter was begun and never heard of: the server stopped while it was being sent. */
export const isUncertain = ({ state, updatedAt }: UtilityLetter, nowMs = Date.now()) =>
  state === 'sending' && nowMs - updatedAt.getTime() > longestSendingMs;

/** A letter to the utility as lists show it. */
export function presentUtilityLetter(row: UtilityLetter): UtilityLetterSummary {
  const { id, version, number, way, state, error, content, digest } = row;
  return {
    id,
    version,
    number,
    way,
    state,
    error,
    isUncertain: isUncertain(row),
    addressee: content.addressee.name,
    madeOn: content.madeOn,
    by: content.by.name,
    totalMinor: totalOf(content.claims),
    letters: content.claims.map(({ letter }) => letter),
    replyBy: content.replyBy,
    digest,
  };
}
