import { z } from 'zod';
import type { MotorSetting } from './plan-settings';
import { spanSetInput, type SpanSet } from './plan-spans';

/** Total of the year at one field current of one motor, the others held. Major units. */
export interface CurvePoint {
  fieldA: number;
  total: number;
  admissible: boolean;
}

export interface CostCurveView {
  motorId: number;
  name: string;
  /** Name of the part of the year it is set in; absent where the year is whole. */
  span?: string;
  chosenA: number;
  todayA: number;
  /** Limit after and before the reserve. */
  limitA: number;
  ratedLimitA: number;
  points: CurvePoint[];
  /** Field currents round the chosen one within which the year moves by less than `toleranceAmount`. */
  tolerance: { lowA: number; highA: number; amount: number } | null;
}

/** A motor's setting as the search found it. */
export interface FoundSetting extends MotorSetting {
  name: string;
  todayA: number;
}

/** How near a motor comes to its limits at the best setting. Running hours over the readings. */
export interface LimitHours {
  motorId: number;
  name: string;
  hoursRunning: number;
  /** By the limit that lies nearest. */
  nearest: { field: number; armature: number; pullOut: number };
  /** What sets the ends of what may be set; null where nothing is admissible or a regulator is searched. */
  bounds: { lowA: number; highA: number; lowWords: string; highWords: string } | null;
}

/** The best setting on years that are only like the metered one. */
export interface RobustnessView {
  years: number;
  /** Years in which nothing near it is cheaper by more than a hundredth of the saving. */
  bestYears: number;
  meanSaving: number;
  worstSaving: number;
  /** Best on last year's exact data only: the setting that is better in the mean. */
  safer: { fields: FoundSetting[]; meanSaving: number; worstSaving: number } | null;
}

/** One way to act against reactive power, with its present value. Major units. */
export interface AlternativeView {
  kind: 'motor' | 'capacitors' | 'both';
  name: string;
  /** Field settings and capacitors it stands for. */
  words: string;
  yearTotal: number;
  capitalCost: number;
  yearlyUpkeep: number;
  npv: number;
}

/** A bank that was searched, as it was priced. */
export interface SearchedBankView {
  stepKvar: number;
  lossWPerKvar: number;
  holdsPowerFactor?: number;
  /** Of the best bank beside standing fields, one at least, and of the best together with the fields; 0: none. */
  aloneSteps: number;
  aloneSwitched: boolean;
  togetherSteps: number;
  /** Of the bank alone; null where the short-circuit power is not known. */
  resonance: { order: number; near: number[] } | null;
}

/** What a search found, as stored with the plan made of it. */
export interface SearchView {
  fields: FoundSetting[];
  /** How the year is parted for the settings; whole where absent. */
  spans?: SpanSet;
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
  limits?: LimitHours[];
  robustness?: RobustnessView | null;
  alternatives?: AlternativeView[];
  bank?: SearchedBankView | null;
  /** Which way to act, in one sentence with the present values that decide it. */
  verdict?: string | null;
  /** What no admissible reactive power in any interval can beat, and how loose that is; null where none can be given. */
  bound?: { total: number; words: string } | null;
  notes: string[];
  /** What the search was made on; another fingerprint means it is stale. */
  fingerprint: string;
}

/** Capacitors to be weighed against the fields: steps of one size, what they lose and cost. */
export const searchedBankInput = z.object({
  stepKvar: z
    .number({ error: 'Write the size of a step in kvar.' })
    .positive('A step is larger than 0 kvar.')
    .max(10_000, 'A step is at most 10,000 kvar.'),
  mostSteps: z
    .number({ error: 'Write how many steps are tried.' })
    .int('Write a whole number of steps.')
    .min(1, '1 to 40 steps are tried.')
    .max(40, '1 to 40 steps are tried.'),
  lossWPerKvar: z
    .number({ error: 'Write the losses in watts per kvar.' })
    .min(0, 'Losses lie between 0 and 20 W per kvar.')
    .max(20, 'Losses lie between 0 and 20 W per kvar.'),
  /** Lagging, held by a controller; absent: fixed steps only. */
  holdsPowerFactor: z
    .number({ error: 'Write a power factor, as 0.95.' })
    .min(0.5, 'A power factor lies between 0.5 and 1.')
    .max(1, 'A power factor lies between 0.5 and 1.')
    .optional(),
  costPerKvar: z
    .number({ error: 'Write what a kvar costs, fitted.' })
    .min(0, 'Write an amount of 0 or more.')
    .max(1e6, 'This amount is too large.'),
  /** Reactors of a detuned bank; absent: none. */
  detuningPercent: z
    .number({ error: 'Write the reactors in per cent, as 7.' })
    .min(1, 'Detuning reactors lie between 1 and 25 %.')
    .max(25, 'Detuning reactors lie between 1 and 25 %.')
    .optional(),
  /** Work at the motors, once, that the field settings ask for. Major units. */
  motorWork: z
    .number({ error: 'Write what the work at the motors costs, 0 where it costs nothing.' })
    .min(0, 'Write an amount of 0 or more.')
    .max(1e10, 'This amount is too large.'),
});
export type SearchedBankInput = z.output<typeof searchedBankInput>;

/** How the search is made. */
export const searchInput = z.object({
  stepA: z
    .number({ error: 'Write the step of the field current in amperes.' })
    .min(0.5, 'The step is at least 0.5 A: nobody sets a rheostat finer.')
    .max(50, 'The step is at most 50 A.')
    .default(2),
  /** Motors whose fields are searched; absent: all. */
  motorIds: z.array(z.number().int()).min(1, 'Choose one motor at least.').max(40).optional(),
  /** Parts of the year with settings of their own; absent: the year is whole. */
  spans: spanSetInput.optional(),
  bank: searchedBankInput.optional(),
});
export type SearchInput = z.output<typeof searchInput>;
