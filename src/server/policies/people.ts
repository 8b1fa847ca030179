import { canManagePeople } from './engagement';
import type { Actor, Role } from './actor';

interface Person {
  id: number;
  role: Role;
  clientId: number | null;
}

/** May the person invite another? Partners anybody; consultants the people of the clients they work for. */
export function canInvite(actor: Actor, person: Person, clientIdsWorkedFor: number[]): boolean {
  if (actor.role === 'partner') return true;
  return actor.role === 'consultant' && person.clientId !== null && clientIdsWorkedFor.includes(person.clientId);
}

/** May the person enter or check a licence? A partner, and never the holder. */
export const canSetLicence = (actor: Actor, person: Person) => canManagePeople(actor) && actor.id !== person.id;

/** May the person close or open an account, or change its role? A partner, and never their own. */
export const canSetAccess = (actor: Actor, person: Person) => canManagePeople(actor) && actor.id !== person.id;

/** May the person read a billing rate? Partners all, consultants their own, clients none. */
export function canSeeRate(actor: Actor, person: Pick<Person, 'id'>): boolean {
  return actor.role === 'partner' || (actor.role === 'consultant' && actor.id === person.id);
}
