import { z } from 'zod';

/** Total of the year at one field current of one motor, the others held. Major units. */
export interface CurvePoint {
  fieldA: number;
  total: number;
  admissible: boolean;
}

export interface CostCurveView {
  motorId: number;
  name: string;
  chosenA: number;
  todayA: number;
  /** Limit after and before the reserve. */
  limitA: number;
  ratedLimitA: number;
  points: CurvePoint[];
  /** Field currents round the chosen one within which the year moves by less than `toleranceAmount`. */
  tolerance: { lowA: number; highA: number; amount: number } | null;
}

/** What a search found, as stored with the plan made of it. */
export interface SearchView {
  fields: { motorId: number; name: string; fieldA: number; todayA: number }[];
  yearTotal: number;
  standingTotal: number;
  saving: number;
  priced: number;
  /** Every combination was priced: there is no better setting at this step. */
  exhaustive: boolean;
  /** No setting is cheaper than the fields of today. */
  leaveAlone: boolean;
  stepA: number;
  curves: CostCurveView[];
  notes: string[];
  /** What the search was made on; another fingerprint means it is stale. */
  fingerprint: string;
}

/** How the search is made. */
export const searchInput = z.object({
  stepA: z
    .number({ error: 'Write the step of the field current in amperes.' })
    .min(0.5, 'The step is at least 0.5 A: nobody sets a rheostat finer.')
    .max(50, 'The step is at most 50 A.')
    .default(2),
});
export type SearchInput = z.output<typeof searchInput>;
