import { addDays } from '../../core/load';
import type { RateView } from '../../schemas/rate';
import type { Rate } from '../models/Rate';

/** A rate among the others of its person: it runs until the day before the next of the same kind begins. */
export function presentRate(rate: Rate, siblings: Rate[], codes: Map<number, string>): RateView {
  const { id, userId, engagementId, perHourMinor, currency, from, version } = rate;
  const next = siblings
    .filter((one) => one.userId === userId && one.engagementId === engagementId && one.from > from)
    .map((one) => one.from)
    .sort()[0];
  const code = engagementId === null ? null : (codes.get(engagementId) ?? null);
  const until = next ? addDays(next, -1) : null;
  return { id, userId, engagementId, code, perHourMinor, currency, from, until, version };
}
