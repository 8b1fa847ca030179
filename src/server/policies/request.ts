import { isStaff, type Actor, type EngagementScope } from './actor';
import { canWorkOn } from './engagement';

/** The parts of a request that decide who may do what: its engagement, and whom it went to. */
export interface RequestScope extends EngagementScope {
  addressedIds: number[];
}

const isOfClient = (actor: Actor, scope: EngagementScope) => !isStaff(actor) && actor.clientId === scope.clientId;
const isAddressed = (actor: Actor, { addressedIds }: RequestScope) => addressedIds.includes(actor.id);

/** May the person ask the client for things, and decide about what came? Who works on the engagement. */
export const canAskClient = (actor: Actor, engagement: EngagementScope) => canWorkOn(actor, engagement);

/** May the person read a request? Who works on it; of the client whom it went to, and who may view. */
export function canReadRequest(actor: Actor, request: RequestScope): boolean {
  if (isStaff(actor)) return canWorkOn(actor, request);
  return isOfClient(actor, request) && (actor.rights.view || isAddressed(actor, request));
}

/** May the person send files and answers? Whom it went to, and readers of the client who record readings; never staff. */
export function canAnswerRequest(actor: Actor, request: RequestScope): boolean {
  if (isStaff(actor) || !canReadRequest(actor, request)) return false;
  return actor.rights.record || isAddressed(actor, request);
}

/** May the person open a file that came? Who works on the engagement, and who sent it. */
export function canOpenFile(actor: Actor, request: RequestScope, file: { uploadedById: number | null }): boolean {
  if (isStaff(actor)) return canWorkOn(actor, request);
  return canReadRequest(actor, request) && file.uploadedById === actor.id;
}

/** May the person know that the engagement has requests at all? Who works on it, and everybody of its client. */
export const mayKnowOfRequests = (actor: Actor, engagement: EngagementScope) =>
  isStaff(actor) ? canWorkOn(actor, engagement) : isOfClient(actor, engagement);
