import type { LetterOutcome, PersonView } from '../schemas/account';
import type { PersonChangeInput, PersonInput } from '../schemas/client';
import type { RateChangeInput, RateInput, RateView } from '../schemas/rate';
import { call } from './api';

export const addPerson = (input: PersonInput) =>
  call<{ person: PersonView; letter: LetterOutcome }>('POST', '/api/people', input);

export const changePerson = (id: number, input: PersonChangeInput) =>
  call<PersonView>('PATCH', `/api/people/${id}`, input);

export const invitePerson = (id: number) => call<LetterOutcome>('POST', `/api/people/${id}/invite`);

export const setRate = (input: RateInput) => call<RateView>('POST', '/api/rates', input);
export const changeRate = (id: number, input: RateChangeInput) => call<RateView>('PUT', `/api/rates/${id}`, input);
export const removeRate = (id: number, version: number) => call<void>('DELETE', `/api/rates/${id}`, { version });
