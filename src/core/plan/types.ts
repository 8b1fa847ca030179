import type { LoadSeries } from '../load';
import type { FieldControl, SynchronousMotor } from '../machine';

/** A motor as it runs through the metered year. */
export interface PlanMotor {
  motor: SynchronousMotor;
  /** Shaft load of every interval of the load series; 0 where the motor stands still. [kW] */
  shaftKw: Float64Array;
  /** Field current it runs at as metered. [A] */
  standingFieldA: number;
  /** Terminal voltage, 1 when absent. [pu] */
  voltagePu?: number;
  /** The meter it stands behind: 0, as when absent, is the plant's `load`, k its `beside[k - 1]`. */
  behind?: number;
  /** Least field current that is allowed besides the pull-out margin, by regulator or maker. [A] */
  leastFieldA?: number;
  /** Terminal voltages at which every limit must hold; `voltagePu` alone when absent. [pu] */
  voltageBandPu?: { low: number; high: number };
}

/** Capacitors at the plant's bus: fixed, or switched in equal steps by a controller. */
export interface CapacitorBank {
  /** Number of equal steps. Whole, >= 1 */
  steps: number;
  /** Delivered by one step at rated voltage, its reactor included. [kvar], > 0 */
  stepKvar: number;
  /** Losses of the connected steps, reactors included. [W/kvar], >= 0 */
  lossWPerKvar: number;
  /** Power factor, lagging, that a controller holds at the meter it stands behind; absent: all steps are always connected. */
  holdsPowerFactor?: number;
  /** Bus voltage over the bank's rated voltage, 1 when absent: output goes with its square. [pu] */
  voltagePu?: number;
  /** UTC instant from which it is connected; always when absent. [ms] */
  fromMs?: number;
  /** The meter it stands behind, as a motor's. */
  behind?: number;
}

/** Transformer or feeder between the meter and the plant's bus: its loss is metered. */
export interface Upstream {
  ratedKva: number;
  /** On ratedKva. [pu], >= 0 */
  resistancePu: number;
  reactancePu: number;
}

/** How the plant's bus is supplied. What is absent is not known and is not computed. */
export interface BusSupply {
  /** Short-circuit power at the bus. [kVA], > 0 */
  shortCircuitKva: number;
  /** Reactance over resistance of the supply, 10 when absent. [unitless], > 0 */
  xOverR?: number;
  /** Bus voltage at no load of the plant. [pu of rated], 1 when absent */
  noLoadPu?: number;
  /** Least and greatest bus voltage that is allowed. [pu] */
  allowedPu?: { low: number; high: number };
}

/** An induction motor as its data sheet gives it. */
export interface InductionMotor {
  ratedOutputKw: number;
  /** Efficiency and lagging power factor at shares of rated output, ascending; at least two points. */
  points: { loadShare: number; efficiency: number; powerFactor: number }[];
}

/** A new synchronous motor in place of an induction motor that the meter has seen until now. */
export interface Replacement {
  induction: InductionMotor;
  motor: SynchronousMotor;
  /** Shaft load of every interval, 0 at standstill. [kW] */
  shaftKw: Float64Array;
  /** One control a span, or one for all. */
  controls: FieldControl[];
  behind?: number;
}

/** Stretches of the year that may have settings of their own: the span of each interval, 0 to count - 1. */
export interface Spans {
  index: Uint8Array;
  count: number;
}

/** What a plan does, resolved over the intervals of the load. */
export interface PlanSetup {
  /** Absent: the whole year is one span. */
  spans?: Spans;
  /** Controls per motor of the plant, in its order: one a span, or one for all. */
  controls: FieldControl[][];
  banks?: CapacitorBank[];
  replacements?: Replacement[];
}

/** The plant a plan is made for. */
export interface Plant {
  load: LoadSeries;
  /** Loads of further meters of the site, added to `load` before anything is measured; over the same intervals. */
  beside?: LoadSeries[];
  motors: PlanMotor[];
  upstream?: Upstream;
  supply?: BusSupply;
}
