import type { MessagePort } from 'node:worker_threads';
import type { BillingPeriod, LoadSeries } from '../../core/load';
import type { FieldControl, SynchronousMotor } from '../../core/machine';
import type { BusSupply, CapacitorBank, InductionMotor, MotorPlanResult, SpanSet, Upstream } from '../../core/plan';
import type { ExampleResult, PricedBill, PrintedRow } from '../../core/tariff';
import type { CalendarInput } from '../../schemas/motor';
import type { SearchView } from '../../schemas/search';
import type { ReconcileBasis } from '../services/price-basis';

/** A motor as the calculations see it. */
export interface TaskMotor {
  id: number;
  name: string;
  machine: SynchronousMotor;
  calendar: CalendarInput;
  fieldTodayA: number;
  /** Position of the meter it stands behind. */
  behind: number;
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
  /** Transformer and cable whose losses the meter counts; absent where there are none or they are not known. */
  upstream?: Upstream;
  supply?: BusSupply;
}

/** A new motor in place of an induction motor, with when it runs. */
export interface TaskReplacement {
  name: string;
  induction: InductionMotor;
  machine: SynchronousMotor;
  calendar: CalendarInput;
  controls: FieldControl[];
  /** Position of the meter it stands behind. */
  behind: number;
}

/** One way to act. */
export interface TaskAct {
  spans: SpanSet;
  /** By motor, one for all spans or one for each; a motor not named stays at today's field. */
  controls: { motorId: number; controls: FieldControl[] }[];
  banks: CapacitorBank[];
  replacements: TaskReplacement[];
}

export interface YearTask {
  kind: 'year';
  basis: TaskBasis;
  /** Acts to price; one without any control, bank or replacement is standing. */
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
  hoursLeading: number;
  worstPf: { value: number; leading: boolean; bill: number } | null;
  readings: { intervals: number; missing: number; estimated: number; stepMinutes: number };
}

export interface SearchTask {
  kind: 'search';
  basis: TaskBasis;
  stepA: number;
  fingerprint: string;
  port: MessagePort;
}

export interface SearchProgress {
  done: number;
  planned: number;
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
