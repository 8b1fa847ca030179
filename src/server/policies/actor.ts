export type Role = 'partner' | 'consultant' | 'client';

/** What a person of a client may do there. */
export interface ClientRights {
  view: boolean;
  record: boolean;
  decide: boolean;
  pay: boolean;
}

/** The signed-in person, as policies see them. */
export interface Actor {
  id: number;
  email: string;
  name: string;
  role: Role;
  clientId: number | null;
  rights: ClientRights;
}

/** The parts of an engagement that decide who may see it. */
export interface EngagementScope {
  clientId: number;
  memberIds: number[];
}

/** Whether the person belongs to the practice. */
export const isStaff = (actor: Actor) => actor.role !== 'client';
