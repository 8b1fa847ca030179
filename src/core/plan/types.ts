import type { LoadSeries } from '../load';
import type { SynchronousMotor } from '../machine';

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
}

/** A fixed capacitor step at the plant's bus, behind the first meter. */
export interface CapacitorStep {
  /** Delivered at rated voltage. [kvar], > 0 */
  kvar: number;
  /** Losses of the step, reactors included. [W/kvar], >= 0 */
  lossWPerKvar: number;
  /** Bus voltage over the step's rated voltage, 1 when absent: output goes with its square. [pu] */
  voltagePu?: number;
  /** UTC instant from which it is connected; always when absent. [ms] */
  fromMs?: number;
}

/** Transformer or feeder between the meter and the plant's bus: its loss is metered. */
export interface Upstream {
  ratedKva: number;
  /** On ratedKva. [pu], >= 0 */
  resistancePu: number;
  reactancePu: number;
}

/**
 * One thing a plan does. Settings that vary with season or follow a control mode are further kinds of this union; a motor
 * without an action stays as it stands.
 */
export type PlanAction =
  { kind: 'constant-field'; motorIndex: number; fieldCurrentA: number } | ({ kind: 'capacitor' } & CapacitorStep);

/** The plant a plan is made for. */
export interface Plant {
  load: LoadSeries;
  /** Loads of further meters of the site, added to `load` before anything is measured; over the same intervals. */
  beside?: LoadSeries[];
  motors: PlanMotor[];
  upstream?: Upstream;
}
