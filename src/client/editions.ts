import type { EditionSummary, MailEditionInput } from '../schemas/edition';
import type { JobProgress } from '../schemas/job';
import { call } from './api';

/** Begins the making of the next edition. */
export const makeEdition = (code: string, planId: number) =>
  call<JobProgress>('POST', `/api/engagements/${code}/editions`, { planId });

/** Mails an edition to people of the client. */
export const mailEdition = (id: number, input: MailEditionInput) =>
  call<EditionSummary>('POST', `/api/editions/${id}/mail`, input);
