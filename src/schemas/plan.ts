import type { FieldControl } from '../core/machine';
import type { AssumedValue } from './motor';
import type { BankInput } from './plan-input';
import type { MoneyView } from './money-view';
import type { AppraisalView, CashFlowMonth, PlanEconomics } from './plan-money';
import type { MotorSetting } from './plan-settings';
import type { SpanSet } from './plan-spans';
import type { SearchView } from './search';

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

/** One motor at the standing setting and under the plan. Kvar delivered is positive when leading. */
export interface PlanMotorView {
  motorId: number;
  name: string;
  usualShaftKw: number;
  usualLoadPercent: number;
  kvarToday: number;
  kvarPlan: number;
  /** Field current under the plan at the usual load. */
  fieldPlanA: number;
  armatureTodayA: number;
  armaturePlanA: number;
  /** Mean over running hours and energy over the year, both against standing. */
  extraLossKw: number;
  extraLossKwh: number;
  /** After the reserve; the greatest share of it in the year. */
  fieldLimitA: number;
  fieldSharePercent: number;
  leastPullOut: number;
  /** Greatest share of the stator limit, after the reserve; 1 is at the limit. */
  greatestArmatureShare: number;
  pullOutMargin: number;
  hoursRunning: number;
  /** Running hours by the limit that lies nearest. */
  hoursNearest: { field: number; armature: number; pullOut: number };
  /** Hours a regulator is kept at a limit by its limiters. */
  hoursLimited: number;
  /** Hours beyond the limit broken longest; a plan on offer has none. */
  hoursBeyond: number;
}

/** A motor's setting under a plan. */
export interface PlanField extends MotorSetting {
  name: string;
  todayA: number;
  /** What a brushless machine's panel shows, control by control; null where no field current is held. */
  panelA?: (number | null)[];
}

/** Capacitors of a plan, and how they sit with the supply. */
export interface BankView extends Omit<BankInput, 'cost'> {
  /** All steps together. */
  kvar: number;
  /** Worst harmonic order of resonance over the steps, and the usual harmonics within half an order; null: not checked. */
  resonance: { order: number; near: number[]; kvar: number } | null;
  /** Operations of single steps, and losses, over the year. */
  switchings: number;
  lossKwh: number;
}

/** A new motor in place of an induction motor. */
export interface ReplacementView {
  name: string;
  inductionKw: number;
  ratedKw: number;
  controls: FieldControl[];
  hoursRunning: number;
  /** Hours its regulator is kept at a limit. */
  hoursLimited: number;
  /** At the usual load, and mean while running, against the induction motor. */
  kvarGained: number;
  kwSaved: number;
}

/** What a plan costs once, part by part. Major units. */
export interface CostPart {
  label: string;
  amount: number;
}

/** The bus voltage as estimated, standing or with a plan. [pu of rated] */
export interface VoltageView {
  lowPu: number;
  highPu: number;
  /** Hours outside the allowed band; null where no band is known. */
  hoursOutside: number | null;
}

/** A plan, or the plant as it runs now (id null), priced over the year. */
export interface PlanView {
  id: number | null;
  version: number;
  name: string;
  currency: string;
  /** How the year is parted for the settings. */
  spans: SpanSet;
  fields: PlanField[];
  banks: BankView[];
  replacements: ReplacementView[];
  bills: PricedBillView[];
  yearTotal: number;
  /** Standing total minus this total; 0 for standing. */
  saving: number;
  reactiveCost: number;
  groupTotals: Record<ChargeGroup, number>;
  /** Sum of `costParts`. */
  capitalCost: number;
  costParts: CostPart[];
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
  /** Energy drawn more over the metered year: losses of motors, capacitors, transformer and cable. */
  extraLossKwh: number;
  hoursLeading: { before: number; after: number };
  /** null: the supply is not known well enough. */
  voltage: VoltageView | null;
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
  spans: SpanSet;
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
  /** Names of the schedule's seasons. */
  seasons: string[];
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
