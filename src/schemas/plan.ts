import { z } from 'zod';
import type { PlanEconomics } from './assumptions';
import { economicsInput, moneyInput, refineMoney } from './money';
import type { MoneyView } from './money-view';
import type { AssumedValue } from './motor';

export { planDefaults, type PlanEconomics } from './assumptions';

export type ChargeGroup = 'energy' | 'demand' | 'reactive' | 'fixed' | 'adjustment' | 'tax';

/** One priced line of a bill. Amounts in major units, as priced. */
export interface PricedLineView {
  id: string;
  label: string;
  group: ChargeGroup;
  amount: number;
  quantity?: number;
  unit?: string;
  rate?: number;
  explanation: string;
  clause?: string;
}

/** One priced bill, [from, to). Major units. */
export interface PricedBillView {
  from: string;
  to: string;
  total: number;
  reactiveCost: number;
  lines: PricedLineView[];
  notes: string[];
}

/** What a plan's money is worth, on the assumptions of its own form. */
export interface AppraisalView {
  simplePaybackYears: number | null;
  discountedPaybackYears: number | null;
  npv: number;
  irr: number | null;
  notes: string[];
}

/** One month of the cumulative cash flow; `low` and `high` hold eight of ten samples. Major units. */
export interface CashFlowMonth {
  month: number;
  cumulative: number;
  low?: number;
  high?: number;
}

/** One motor at the standing setting and under the plan. Kvar delivered is positive when leading. */
export interface PlanMotorView {
  motorId: number;
  name: string;
  usualShaftKw: number;
  usualLoadPercent: number;
  kvarToday: number;
  kvarPlan: number;
  armatureTodayA: number;
  armaturePlanA: number;
  /** Mean over running hours and energy over the year, both against standing. */
  extraLossKw: number;
  extraLossKwh: number;
  /** After the reserve. */
  fieldLimitA: number;
  fieldSharePercent: number;
  leastPullOut: number;
  /** Greatest share of the stator limit, after the reserve; 1 is at the limit. */
  greatestArmatureShare: number;
  pullOutMargin: number;
  hoursRunning: number;
  /** Running hours by the limit that lies nearest. */
  hoursNearest: { field: number; armature: number; pullOut: number };
  /** Hours beyond the limit broken longest; a plan on offer has none. */
  hoursBeyond: number;
}

/** A field current one motor is set to. */
export interface FieldSetting {
  motorId: number;
  fieldA: number;
}

export interface PlanField extends FieldSetting {
  name: string;
  todayA: number;
  /** What a brushless machine's panel shows at fieldA. */
  panelA?: number;
}

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

/** A fixed capacitor bank of a plan, and how it sits with the supply. */
export interface CapacitorBank {
  kvar: number;
  lossWPerKvar: number;
  /** Reactors, per cent of the capacitive reactance; absent: none. */
  detuningPercent?: number;
  /** At the bank's bus; absent: not known, no resonance check. */
  shortCircuitKva?: number;
}

/** One action of a stored plan: a field current that is set, or a bank that is added. */
export type PlanAction = ({ kind: 'field' } & FieldSetting) | ({ kind: 'capacitor' } & CapacitorBank);

export interface CapacitorView extends CapacitorBank {
  /** Harmonic order of resonance and the usual harmonics within half an order of it. */
  resonance: { order: number; near: number[] } | null;
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

/** A plan, or the plant as it runs now (id null), priced over the year. */
export interface PlanView {
  id: number | null;
  version: number;
  name: string;
  currency: string;
  fields: PlanField[];
  capacitors: CapacitorView | null;
  bills: PricedBillView[];
  yearTotal: number;
  /** Standing total minus this total; 0 for standing. */
  saving: number;
  reactiveCost: number;
  groupTotals: Record<ChargeGroup, number>;
  capitalCost: number;
  yearlyUpkeep: number;
  economics: PlanEconomics;
  appraisal: AppraisalView;
  /** Simple payback in words: "20 months", "at once", "never". */
  paybackWords: string;
  /** Eight of ten samples pay back between these, in months; null: not within the horizon. */
  paybackSpread: { lowMonths: number | null; highMonths: number | null } | null;
  cashFlow: CashFlowMonth[];
  /** Null for standing. */
  money: MoneyView | null;
  motors: PlanMotorView[];
  /** Extra energy drawn by the motors over the year, and its cost at the mean energy price. */
  extraLossKwh: number;
  hoursLeading: { before: number; after: number };
  /** "field, M-1 at 80 %". */
  nearestLimit: string;
  /** Power factor at the interval of greatest demand, per bill; the worst of them. `bill` is the day its period ends before. */
  worstPf: { value: number; leading: boolean; bill: string } | null;
  chosen: boolean;
  assumed: AssumedValue[];
  search: SearchView | null;
  /** Words on why a figure may be out of date: the search is older than the motors, the tariff or the readings. */
  stale: string[];
}

/** A stored plan that cannot be offered: a field lies beyond a limit since the motor was changed, for instance. */
export interface UnpricedPlan {
  id: number;
  version: number;
  name: string;
  chosen: boolean;
  fields: PlanField[];
  reason: string;
}

/** The year of an engagement: standing, its plans, the chosen one. What pages, report and client read. */
export interface YearView {
  currency: string;
  from: string;
  to: string;
  /** `intervals`: from metered readings; the only route for plans. */
  route: 'intervals';
  scheduleTitle: string;
  readings: { intervals: number; missing: number; estimated: number; stepMinutes: number };
  standing: PlanView;
  plans: PlanView[];
  unpriced: UnpricedPlan[];
  chosen: PlanView | null;
  /** What makes the figures stand for less than a year: bills or readings that are not there. */
  gaps: string[];
  /** Distinct notes of the priced bills. */
  notes: string[];
  /** Changes with motors, bills, readings and tariff: what a search was made on. */
  fingerprint: string;
}

/** What must be done before plans can be priced. */
export interface Missing {
  station: 'intervals' | 'bills' | 'tariff' | 'motors';
  what: string;
  remedy: string;
}

const capacitorInput = z.object({
  kvar: z
    .number({ error: 'Write the size of the bank in kvar.' })
    .positive('The bank is larger than 0 kvar; leave it empty for none.')
    .max(100_000, 'The bank is at most 100,000 kvar.'),
  lossWPerKvar: z
    .number({ error: 'Write the losses in watts per kvar.' })
    .min(0, 'Losses lie between 0 and 20 W per kvar.')
    .max(20, 'Losses lie between 0 and 20 W per kvar.'),
  detuningPercent: z
    .number({ error: 'Write the reactors in per cent, as 7.' })
    .min(1, 'Detuning reactors lie between 1 and 25 %.')
    .max(25, 'Detuning reactors lie between 1 and 25 %.')
    .optional(),
  shortCircuitKva: z
    .number({ error: 'Write the short-circuit power in kVA.' })
    .min(100, 'The short-circuit power lies between 100 and 10,000,000 kVA.')
    .max(1e7, 'The short-circuit power lies between 100 and 10,000,000 kVA.')
    .optional(),
});

const planEntries = z.object({
  name: z.string().trim().min(1, 'Give the plan a name.').max(80, 'A name has at most 80 characters.'),
  fields: z
    .array(
      z.object({
        motorId: z.number().int(),
        fieldA: z
          .number({ error: 'Write a field current in amperes.' })
          .positive('The field current must be above 0 A.'),
      }),
    )
    .max(40, 'A plan has at most 40 motors.'),
  capacitors: capacitorInput.optional(),
  capitalCost: moneyInput,
  yearlyUpkeep: moneyInput,
  economics: economicsInput,
  /** Job whose result the plan is made of. */
  searchJobId: z.number().int().optional(),
});

/** A plan as its form sends it. Amounts in major units. */
export const planInput = planEntries.superRefine(refineMoney);
export type PlanInput = z.output<typeof planInput>;

/** A change of a plan carries the version that was seen. */
export const planChangeInput = planEntries.extend({ version: z.number().int() }).superRefine(refineMoney);
export type PlanChangeInput = z.output<typeof planChangeInput>;

export const planChoiceInput = z.object({ version: z.number().int(), chosen: z.boolean() });

/** How the search is made. */
export const searchInput = z.object({
  stepA: z
    .number({ error: 'Write the step of the field current in amperes.' })
    .min(0.5, 'The step is at least 0.5 A: nobody sets a rheostat finer.')
    .max(50, 'The step is at most 50 A.')
    .default(2),
});
export type SearchInput = z.output<typeof searchInput>;
