import type { LimitedMotor } from '../core/plan';

/** Distinct shaft loads of the year, [kW], and which of them come when. */
export interface FormLoads {
  kw: number[];
  /** By calendar month, January first; by quarter-hour of the week, Monday 0 h first; by season of the schedule. */
  ofMonth: number[][];
  ofQuarter: number[][];
  ofSeason: number[][];
}

/** A motor as the form of a plan knows it: machine, limits, and the loads it runs at. */
export interface FormMotor extends LimitedMotor {
  motorId: number;
  todayA: number;
  loads: FormLoads;
}

export interface FormMeter {
  id: number;
  label: string;
}
