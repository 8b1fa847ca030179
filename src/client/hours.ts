import type { HourForm, HourSums, HourView } from '../schemas/hour';
import { call } from './api';

/** Hours of an engagement as the reader may see them. */
export interface HoursAnswer {
  entries: HourView[];
  sums: HourSums;
  currency: string;
  budgetHours: number | null;
}

/** Hours of an engagement, as far as the reader may see them. */
export const listHours = (code: string) => call<HoursAnswer>('GET', `/api/engagements/${code}/hours`);

/** Logs an entry. */
export const logHours = (code: string, input: HourForm) =>
  call<HourView>('POST', `/api/engagements/${code}/hours`, input);

/** Changes an entry against the version seen. */
export const changeHours = (id: number, version: number, input: HourForm) =>
  call<HourView>('PUT', `/api/hours/${id}`, { ...input, version });

/** Removes an entry against the version seen. */
export const removeHours = (id: number, version: number) => call<void>('DELETE', `/api/hours/${id}`, { version });
