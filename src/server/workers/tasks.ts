import type { MessagePort } from 'node:worker_threads';
import type { BillingPeriod, LoadSeries } from '../../core/load';
import type { FieldControl, SynchronousMotor } from '../../core/machine';
import type {
  BankPlanResult,
  BusSupply,
  CapacitorBank,
  InductionMotor,
  MotorPlanResult,
  PlanResult,
  SpanRule,
  Upstream,
} from '../../core/plan';
import type { ExampleResult, PricedBill, PrintedRow } from '../../core/tariff';
import type { CalendarInput } from '../../schemas/motor';
import type { SearchInput, SearchView } from '../../schemas/search';
import type { SpanRules } from '../services/plan-spans';
import type { ReconcileBasis } from '../services/price-basis';
import type { LoadSource } from '../services/shaft-load';

/** A motor as the calculations see it. */
export interface TaskMotor extends LoadSource {
  id: number;
  name: string;
  machine: SynchronousMotor;
  fieldTodayA: number;
  /** Position of the meter it stands behind. */
  behind: number;
  /** Terminal voltage, 1 when absent. [pu] */
  voltagePu?: number;
  /** Limits of plans, as in `PlanMotor`. */
  leastFieldA?: number;
  voltageBandPu?: { low: number; high: number };
}

/** What a year is priced from, with its motors. */
export interface TaskBasis {
  scheduleText: string;
  timeZone: string;
  periods: BillingPeriod[];
  contract: Record<string, number>;
  history?: Record<string, number[]>;
  given: Record<string, number>[];
  load: LoadSeries;
  /** Of each meter, where several are summed; `load` is their sum. */
  meters: LoadSeries[];
  motors: TaskMotor[];
  /** Between the first meter and its bus; where not known, not computed. */
  upstream?: Upstream;
  supply?: BusSupply;
  /** Local dates that count as holidays where spans name kinds of day. */
  holidays?: string[];
}

/** What a motor is set to: one control a span, or one for all. */
export interface TaskControls {
  motorId: number;
  controls: FieldControl[];
}

/** A new synchronous motor in place of an induction motor. */
export interface TaskReplacement {
  induction: InductionMotor;
  machine: SynchronousMotor;
  /** When it runs and at what shaft load, as the induction motor does. */
  calendar: CalendarInput;
  controls: FieldControl[];
  behind?: number;
}

/** One way to act; what is not named stays as it stands. No lists at all is standing. */
export interface TaskAct {
  /** Stretches with settings of their own, the first covers the rest; absent: the year is one. */
  spans?: SpanRule[];
  controls?: TaskControls[];
  banks?: CapacitorBank[];
  replacements?: TaskReplacement[];
}

export interface YearTask {
  kind: 'year';
  basis: TaskBasis;
  /** Settings to price; none at all is standing. */
  settings: TaskAct[];
}

/** One motor over the year at one setting. */
export interface TaskMotorYear extends MotorPlanResult {
  motorId: number;
}

/** One setting priced over the year. */
export interface TaskSetting {
  bills: PricedBill[];
  motors: TaskMotorYear[];
  /** New motors and banks, in the act's order. */
  replacements: MotorPlanResult[];
  banks: BankPlanResult[];
  /** Change of active energy over the metered intervals: motors, capacitors and upstream. [kWh] */
  extraKwh: number;
  hoursLeading: number;
  /** Estimated voltage of the first meter's bus; null where its supply is not known. */
  bus: PlanResult['bus'];
  worstPf: { value: number; leading: boolean; bill: number } | null;
  readings: { intervals: number; missing: number; estimated: number; stepMinutes: number };
}

export interface SearchTask {
  kind: 'search';
  basis: TaskBasis;
  asked: SearchInput;
  /** Of the spans asked for; null: the year is whole. */
  spanRules: SpanRules | null;
  fingerprint: string;
  port: MessagePort;
}

export interface SearchProgress {
  done: number;
  planned: number;
  /** What is counted; settings where absent. */
  unit?: string;
}

export type SearchResult = SearchView;

/** What a month is priced from: its readings where there are any, and what the bills up to it print. */
export interface TextMonth {
  /** Bills in order, the month's own the last. */
  rows: PrintedRow[];
  contract: Record<string, number>;
  history: Record<string, number[]> | null;
  load: LoadSeries | null;
}

/** A schedule's text to try: on its own worked bills, and on a month beside the text that is kept. */
export interface TextTask {
  kind: 'text';
  text: string;
  keptText: string | null;
  month: TextMonth | null;
}

/** A month under one text, or why it has no price. */
export type TextPrice = { bill: PricedBill } | { refused: string };

export interface TextResult {
  examples: ExampleResult[];
  yours: TextPrice | null;
  kept: TextPrice | null;
}

/** A schedule of a comparison with what it is priced from. Where `rows` are null it is priced from the load. */
export interface CompareSchedule {
  id: string;
  scheduleText: string;
  contract: Record<string, number>;
  history?: Record<string, number[]>;
  given: Record<string, number>[];
  rows: PrintedRow[] | null;
}

export interface CompareTask {
  kind: 'compare';
  periods: BillingPeriod[];
  /** Of the standing schedule, whose local days the periods are. */
  timeZone: string;
  load: LoadSeries | null;
  /** The standing schedule first. */
  schedules: CompareSchedule[];
}

/** A year to price and lay beside what was billed; the thread reads the schedule's text itself. */
export interface ReconcileTask {
  kind: 'reconcile';
  basis: Omit<ReconcileBasis, 'schedule'> & { scheduleText: string };
}

/** Anything a calculation thread does. */
export type Task = YearTask | SearchTask | TextTask | CompareTask | ReconcileTask;

/** Why a task cannot be done, in words for a person. */
export interface Refused {
  refused: string;
}
