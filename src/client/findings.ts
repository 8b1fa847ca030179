import type { FindingNoteInput, MoveFindingInput } from '../schemas/finding';
import type { UtilityLetterInput, UtilityLetterSummary } from '../schemas/utility-letter';
import { call } from './api';

const letters = (code: string) => `/api/engagements/${encodeURIComponent(code)}/tariff/letters`;

/** Moves a finding to another state. */
export const moveFinding = (id: number, input: MoveFindingInput) => call<void>('PATCH', `/api/findings/${id}`, input);

/** Adds a note to a finding. */
export const noteFinding = (id: number, input: FindingNoteInput) =>
  call<void>('POST', `/api/findings/${id}/notes`, input);

/** Freezes and sends a letter to the utility. */
export const sendUtilityLetter = (code: string, input: UtilityLetterInput) =>
  call<UtilityLetterSummary>('POST', letters(code), input);

/** Sends a letter again that did not go. */
export const sendLetterAgain = (code: string, number: number, version: number) =>
  call<UtilityLetterSummary>('POST', `${letters(code)}/${number}`, { version });
