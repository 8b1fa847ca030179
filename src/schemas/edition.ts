import { z } from 'zod';
import type { AssumedValue } from './motor';
import type { BankView, ChargeGroup, PlanField, PlanView, ReplacementView } from './plan';
import type { MoneyView } from './money-view';
import type { AppraisalView, CashFlowMonth, PlanEconomics } from './plan-money';
import type { SpanSet } from './plan-spans';

/** What an edition says of a plan, or of the plant as it runs. Major units of the edition's currency. */
export interface EditionPlan {
  name: string;
  fields: PlanField[];
  /** How the year is parted for the fields; absent: it is whole. */
  spans?: SpanSet;
  /** Capacitors the plan adds, and new motors it brings; absent in editions frozen without them. */
  banks?: BankView[];
  replacements?: ReplacementView[];
  yearTotal: number;
  saving: number;
  reactiveCost: number;
  groupTotals: Record<ChargeGroup, number>;
  capitalCost: number;
  yearlyUpkeep: number;
  economics: PlanEconomics;
  appraisal: AppraisalView;
  paybackWords: string;
  paybackSpread: PlanView['paybackSpread'];
  hoursLeading: number;
  nearestLimit: string;
  worstPf: number | null;
  extraLossKwh: number;
}

/** One line of a bill under the standing plant and under the plan. Major units. */
export interface EditionLine {
  id: string;
  label: string;
  group: ChargeGroup;
  before: number;
  after: number;
}

/** One bill before and after, [from, to). Major units; `billed` is what the utility charged. */
export interface EditionBill {
  from: string;
  to: string;
  before: number;
  after: number;
  billed: number | null;
  /** What poor power factor costs in it, before and after. */
  reactiveCost: number;
  reactiveCostAfter: number;
  lines: EditionLine[];
}

export interface EditionFinding {
  letter: string;
  title: string;
  sentence: string;
  billFrom: string;
  billTo: string;
  amountMinor: number;
}

/** A motor with its present and its proposed setting. Kvar is positive when delivered. */
export interface EditionMotor {
  motorId: number;
  name: string;
  drives: string | null;
  rated: string;
  fieldTodayA: number;
  /** At the usual load. */
  fieldPlanA: number;
  /** What it is set to where that is no constant field current: "holds 0.95 leading", amperes by season. */
  setting?: string;
  fieldLimitA: number;
  fieldRatedA: number;
  armatureTodayA: number;
  armaturePlanA: number;
  armatureRatedA: number;
  kvarToday: number;
  kvarPlan: number;
  usualLoadPercent: number;
  leastPullOut: number;
  pullOutMargin: number;
  extraLossKwh: number;
  hoursRunning: number;
}

export interface EditionSource {
  fileName: string;
  kind: 'intervals' | 'bills';
  sha256: string;
  keptAt: string;
}

/** Everything a client is shown, frozen. */
export interface EditionContent {
  number: number;
  madeOn: string;
  currency: string;
  practice: { name: string; phone: string };
  by: string;
  client: string;
  site: { name: string; place: string | null; timeZone: string };
  meter: string;
  schedule: { title: string; sha256: string };
  year: { from: string; to: string };
  readings: { intervals: number; missing: number; estimated: number; stepMinutes: number };
  standing: EditionPlan;
  plan: EditionPlan;
  others: EditionPlan[];
  bills: EditionBill[];
  findings: EditionFinding[];
  /** Bills compared with nothing, since readings of their period are missing; absent in editions frozen without it. */
  billsIncomplete?: number;
  motors: EditionMotor[];
  assumed: AssumedValue[];
  cashFlow: CashFlowMonth[];
  /** Years, spread and ranking of the plan's money; absent in editions frozen without it. */
  money?: MoneyView | null;
  sources: EditionSource[];
  notes: string[];
}

/** An edition as lists show it. */
export interface EditionSummary {
  id: number;
  number: number;
  madeOn: string;
  madeBy: string;
  digest: string;
  planName: string;
  saving: number;
  currency: string;
  paybackWords: string;
  shownAt: string | null;
  letters: { id: number; recipient: string; state: 'sent' | 'failed'; error: string | null; at: string }[];
}

export const makeEditionInput = z.object({
  planId: z.number({ error: 'Choose the plan the report proposes.' }).int(),
});

export const mailEditionInput = z.object({
  userIds: z
    .array(z.number().int())
    .min(1, 'Choose at least one person of the client.')
    .max(20, 'At most 20 people at once.')
    .transform((ids) => [...new Set(ids)]),
  greeting: z.string().trim().max(600, 'At most 600 characters.').default(''),
});
export type MailEditionInput = z.output<typeof mailEditionInput>;
