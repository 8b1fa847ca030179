import type { EngagementForm, MeterInput, MetersView } from '../schemas/engagement';
import { call } from './api';

/** Begins an engagement; the same request twice makes one. */
export const createEngagement = (input: EngagementForm) => call<{ code: string }>('POST', '/api/engagements', input);

/** The code an engagement of a client named so would get. */
export const proposeCode = (clientName: string) =>
  call<{ code: string }>('GET', `/api/engagements?client=${encodeURIComponent(clientName)}`);

/** Lets a person work on an engagement. */
export const addMember = (code: string, userId: number) =>
  call<{ userId: number }>('POST', `/api/engagements/${code}/members`, { userId });

/** Takes a person off; the answer tells how many entries of hours stay. */
export const removeMember = (code: string, userId: number) =>
  call<{ hours: number }>('DELETE', `/api/engagements/${code}/members/${userId}`);

/** Adds a meter to those billed together. */
export const addMeter = (code: string, meter: MeterInput) =>
  call<MetersView>('POST', `/api/engagements/${encodeURIComponent(code)}/meters`, meter);

/** Takes a meter off. */
export const removeMeter = (code: string, meterId: number) =>
  call<MetersView>('DELETE', `/api/engagements/${encodeURIComponent(code)}/meters/${meterId}`);
