import { NotConvergedError, requireRange } from './errors';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad } from './operating-point';
import { inputPu, solveAtKvar } from './solve';

/** What reactive power costs a motor in losses. */
export interface LossPoint {
  /** Negative: absorbed. [kvar] */
  kvarDelivered: number;
  fieldCurrentA: number;
  /** All losses at this point. [kW] */
  lossKw: number;
  /** Further loss of one more kvar delivered. [W/kvar] */
  marginalWPerKvar: number;
  /** Extra loss over kvar gained since `sinceKvar`; the marginal one at that point itself. [W/kvar] */
  averageWPerKvar: number;
}

/** Step of the central difference, of rated kVA: its error is of the order of its square. */
const STEP = 1e-4;

/**
 * Losses of a motor against the reactive power it delivers at a constant shaft load, with what each further kvar costs.
 *
 * Derivation: the marginal loss is the central difference of the solved input power over 2e-4 of rated kVA.
 *
 * @param motor  Motor data.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @param at.fromKvar, at.toKvar  Range of kvar delivered, ascending; negative is absorbed. [kvar]
 * @param at.sinceKvar  Point the average counts from. [kvar delivered]
 * @param at.points  Number of points, evenly spaced, both ends included; >= 2
 * @returns Points in ascending kvar; those that need a reversed field or that no current carries are left out.
 * @throws {RangeError} naming the argument out of range
 * @source Losses as in [FIT] ex. 5.8.
 */
export function lossCurve(
  motor: SynchronousMotor,
  at: {
    shaftKw: number;
    voltagePu?: number;
    fromKvar: number;
    toKvar: number;
    sinceKvar: number;
    points: number;
  },
): LossPoint[] {
  requireRange(Number.isInteger(at.points) && at.points >= 2, 'points', 'a whole number >= 2', at.points);
  requireRange(at.toKvar > at.fromKvar, 'toKvar', `above fromKvar (${at.fromKvar})`, at.toKvar);
  requireRange(Number.isFinite(at.sinceKvar), 'sinceKvar', 'finite', at.sinceKvar);
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const shaft = at.shaftKw / model.baseKva;
  const since = inputAt(model, shaft, v, -at.sinceKvar / model.baseKva);
  return Array.from({ length: at.points }, (_, k) => {
    const kvarDelivered = at.fromKvar + ((at.toKvar - at.fromKvar) * k) / (at.points - 1);
    return pointAt(model, shaft, v, { kvarDelivered, sinceKvar: at.sinceKvar, since });
  }).filter((point) => point !== null);
}

function pointAt(
  model: MotorModel,
  shaft: number,
  v: number,
  at: { kvarDelivered: number; sinceKvar: number; since: Input | null },
): LossPoint | null {
  const q = -at.kvarDelivered / model.baseKva;
  const [here, more, less] = [q, q - STEP, q + STEP].map((one) => inputAt(model, shaft, v, one));
  if (!here || !more || !less) return null;
  const marginalWPerKvar = (1000 * (more.input - less.input)) / (2 * STEP);
  const gained = (at.kvarDelivered - at.sinceKvar) / model.baseKva;
  const near = !at.since || Math.abs(gained) < STEP;
  return {
    kvarDelivered: at.kvarDelivered,
    fieldCurrentA: here.fieldCurrentA,
    lossKw: (here.input - shaft) * model.baseKva,
    marginalWPerKvar,
    averageWPerKvar: near ? marginalWPerKvar : (1000 * (here.input - at.since!.input)) / gained,
  };
}

interface Input {
  input: number;
  fieldCurrentA: number;
}

/** Input power at a reactive power absorbed, per unit; null where the motor cannot run there. */
function inputAt(model: MotorModel, shaft: number, v: number, q: number): Input | null {
  try {
    const state = solveAtKvar(model, shaft, q, v);
    return state.fieldCurrentA < 0 ? null : { input: inputPu(model, state), fieldCurrentA: state.fieldCurrentA };
  } catch (error) {
    if (error instanceof NotConvergedError) return null;
    throw error;
  }
}
