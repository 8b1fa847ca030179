import type { EngagementForm } from '../schemas/engagement';
import { call } from './api';

export const createEngagement = (input: EngagementForm) => call<{ code: string }>('POST', '/api/engagements', input);

/** The code an engagement of a client named so would get. */
export const proposeCode = (clientName: string) =>
  call<{ code: string }>('GET', `/api/engagements?client=${encodeURIComponent(clientName)}`);

export const addMember = (code: string, userId: number) =>
  call<{ userId: number }>('POST', `/api/engagements/${code}/members`, { userId });

export const removeMember = (code: string, userId: number) =>
  call<{ hours: number }>('DELETE', `/api/engagements/${code}/members/${userId}`);
