import { isStaff, type Actor, type EngagementScope } from './actor';

/** May the person open the engagement's stations? Partners all, consultants where they are members, clients never. */
export function canWorkOn(actor: Actor, engagement: EngagementScope): boolean {
  if (actor.role === 'partner') return true;
  return actor.role === 'consultant' && engagement.memberIds.includes(actor.id);
}

/** May the person read what was released to the client? Those who work on it, and the client's own people who may view. */
export function canReadReleased(actor: Actor, engagement: EngagementScope): boolean {
  if (isStaff(actor)) return canWorkOn(actor, engagement);
  return actor.clientId === engagement.clientId && actor.rights.view;
}

/** May the person begin an engagement? */
export const canCreateEngagement = (actor: Actor) => isStaff(actor);

/** May the person see the practice's money: rates of others, costs, work in progress? */
export const canSeePractice = (actor: Actor) => actor.role === 'partner';

/** May the person see and change people, rights, licences and rates? */
export const canManagePeople = (actor: Actor) => actor.role === 'partner';

/** May the person read the audit trail? */
export const canReadTrail = (actor: Actor) => actor.role === 'partner';
