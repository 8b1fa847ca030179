import type { MessagePort } from 'node:worker_threads';
import type { BillingPeriod, LoadSeries } from '../../core/load';
import type { SynchronousMotor } from '../../core/machine';
import type { MotorPlanResult } from '../../core/plan';
import type { PricedBill } from '../../core/tariff';
import type { CalendarInput } from '../../schemas/motor';
import type { SearchView } from '../../schemas/plan';

/** A motor as the calculations see it. */
export interface TaskMotor {
  id: number;
  name: string;
  machine: SynchronousMotor;
  calendar: CalendarInput;
  fieldTodayA: number;
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
  motors: TaskMotor[];
}

/** Field currents by motor; a motor not named stays at today's. */
export type TaskFields = { motorId: number; fieldA: number }[];

/** One way to act. */
export interface TaskAct {
  fields: TaskFields;
  capacitors: { kvar: number; lossWPerKvar: number } | null;
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

/** Why a task cannot be done, in words for a person. */
export interface Refused {
  refused: string;
}
