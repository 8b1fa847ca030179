import type { LetterOutcome, PersonView } from '../schemas/account';
import type { PersonChangeInput, PersonInput } from '../schemas/client';
import type { RateChangeInput, RateInput, RateView } from '../schemas/rate';
import { call } from './api';

/** Makes an account and mails its invitation. */
export const addPerson = (input: PersonInput) =>
  call<{ person: PersonView; letter: LetterOutcome }>('POST', '/api/people', input);

/** Changes one thing of a person. */
export const changePerson = (id: number, input: PersonChangeInput) =>
  call<PersonView>('PATCH', `/api/people/${id}`, input);

/** Mails an invitation again. */
export const invitePerson = (id: number) => call<LetterOutcome>('POST', `/api/people/${id}/invite`);

/** Sets a billing rate from a day on. */
export const setRate = (input: RateInput) => call<RateView>('POST', '/api/rates', input);

/** Changes a rate against the version seen. */
export const changeRate = (id: number, input: RateChangeInput) => call<RateView>('PUT', `/api/rates/${id}`, input);

/** Removes a rate; its hours fall to the one before. */
export const removeRate = (id: number, version: number) => call<void>('DELETE', `/api/rates/${id}`, { version });
