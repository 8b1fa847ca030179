import { isStaff, type Actor, type EngagementScope } from './actor';
import { canWorkOn } from './engagement';

interface Entry {
  userId: number;
}

/** May the person write hours on the engagement? Who works on it. */
export const canLogHours = (actor: Actor, engagement: EngagementScope) => canWorkOn(actor, engagement);

/** May the person read an entry? Partners all, consultants their own, clients none. */
export function canReadHours(actor: Actor, entry: Entry): boolean {
  return actor.role === 'partner' || (isStaff(actor) && entry.userId === actor.id);
}

/** May the person change or remove an entry? Only who wrote it. */
export const canEditHours = (actor: Actor, entry: Entry) => isStaff(actor) && entry.userId === actor.id;
