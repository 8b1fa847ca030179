import type { JobProgress } from '../schemas/job';
import type { PlanInput } from '../schemas/plan-input';
import type { SearchInput } from '../schemas/search';
import { call } from './api';

/** What the server answers to a saved plan: its row, not its prices. */
export interface SavedPlan {
  id: number;
  version: number;
  name: string;
  chosen: boolean;
}

/** Adds a plan. */
export const createPlan = (code: string, input: PlanInput) =>
  call<SavedPlan>('POST', `/api/engagements/${code}/plans`, input);

/** Changes a plan against the version seen. */
export const changePlan = (id: number, version: number, input: PlanInput) =>
  call<SavedPlan>('PUT', `/api/plans/${id}`, { ...input, version });

/** Chooses a plan for the report, or takes the choice back. */
export const choosePlan = (id: number, version: number, chosen: boolean) =>
  call<SavedPlan>('PATCH', `/api/plans/${id}`, { version, chosen });

/** Removes a plan. */
export const removePlan = (id: number, version: number) => call<void>('DELETE', `/api/plans/${id}`, { version });

/** Begins to price the plan on offer with every assumed value at either end of its range. */
export const startAssumedSaving = (code: string) =>
  call<JobProgress>('POST', `/api/engagements/${code}/plans/assumed-saving`);

/** Begins the search for the best field currents. */
export const startSearch = (code: string, input: SearchInput) =>
  call<JobProgress>('POST', `/api/engagements/${code}/plans/search`, input);
