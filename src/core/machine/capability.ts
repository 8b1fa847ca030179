import { NotConvergedError, PullOutError, requireRange } from './errors';
import { LIMIT_TOLERANCE, compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad, pullOutOfState } from './operating-point';
import type { Limit } from './operating-point';
import { brentRoot, goldenMinimum } from './roots';
import { solveAtField, solveAtKvar } from './solve';
import type { MachineState } from './solve';

/** Greatest reactive power a motor may deliver at a load. */
export interface Capability {
  /** Negative when it must absorb; null when nothing is admissible. [kvar] */
  kvarDelivered: number | null;
  fieldCurrentA: number | null;
  binding: Limit;
}

/**
 * Greatest reactive power a motor may deliver at a shaft load within its armature, field and pull-out limits.
 *
 * The field limit binds below rated load, the armature limit above it; both are taken after the reserve. The pull-out
 * margin is checked at the point the two leave.
 *
 * @param motor  Motor data with its limits.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @returns kvarDelivered and the field current for it, and which limit binds; null with the limit nothing can satisfy.
 * @throws {RangeError} naming the argument out of range
 * @source [FIT] sec. 5.5 (capability curve), with losses.
 */
export function capability(motor: SynchronousMotor, at: { shaftKw: number; voltagePu?: number }): Capability {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  return capabilityOf(model, at.shaftKw / model.baseKva, v);
}

/**
 * Least capability over the ends of a voltage band, and the end it is found at. Between the ends the armature's figure rises
 * with voltage and the field's has a single hump, so that the least of both stands at an end.
 *
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltageBandPu  Least and greatest terminal voltage. [pu], (0, 2], low <= high
 * @returns As `capability`, with the voltage that decides; null when either end admits nothing
 * @throws {RangeError} naming the argument out of range
 */
export function capabilityOverBand(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltageBandPu: { low: number; high: number } },
): Capability & { voltagePu: number } {
  const { low, high } = at.voltageBandPu;
  requireRange(low <= high, 'voltageBandPu', 'low first, then high', `${low} to ${high}`);
  const model = compileMotor(motor);
  const [atLow, atHigh] = [low, high].map((voltagePu) => {
    const v = checkLoad({ shaftKw: at.shaftKw, voltagePu });
    return { ...capabilityOf(model, at.shaftKw / model.baseKva, v), voltagePu };
  });
  const worth = (end: Capability) => end.kvarDelivered ?? -Infinity;
  return worth(atHigh!) < worth(atLow!) ? atHigh! : atLow!;
}

/** The same from a compiled motor, per unit. */
export function capabilityOf(model: MotorModel, shaft: number, v: number): Capability {
  const top = highestState(model, shaft, v);
  if (!top?.admissible) return { kvarDelivered: null, fieldCurrentA: null, binding: top?.binding ?? 'pull-out' };
  const { state, binding } = top;
  return { kvarDelivered: -state.q * model.baseKva, fieldCurrentA: state.fieldCurrentA, binding };
}

/** The over-excited end of what a motor may do at a load. */
export interface HighestState {
  state: MachineState;
  binding: Limit;
  /** False: this state breaks `binding`, and so does every other. It is then the one that comes nearest to keeping it. */
  admissible: boolean;
}

/** The state of greatest delivery within armature and field limit; null when the field limit does not hold the load. */
export function highestState(model: MotorModel, shaft: number, v: number): HighestState | null {
  const atFieldLimit = fieldLimited(model, shaft, v);
  if (!atFieldLimit) return null;
  const limit = model.limits.armaturePu;
  if (atFieldLimit.current <= limit * LIMIT_TOLERANCE) return withMargin(model, atFieldLimit, 'field');
  const { q, kept } = armatureLimitedQ(model, shaft, v, atFieldLimit.q);
  const state = solveAtKvar(model, shaft, q, v);
  return kept ? withMargin(model, state, 'armature') : { state, binding: 'armature', admissible: false };
}

function withMargin(model: MotorModel, state: MachineState, binding: Limit): HighestState {
  const short = pullOutOfState(model, state).ratio * LIMIT_TOLERANCE < model.limits.pullOutMargin;
  return short ? { state, binding: 'pull-out', admissible: false } : { state, binding, admissible: true };
}

function fieldLimited(model: MotorModel, shaft: number, v: number): MachineState | null {
  try {
    return solveAtField(model, shaft, model.limits.fieldCurrentA, v);
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}

/**
 * Reactive power absorbed at which the armature stands at its limit on the delivering side, when the field-limited
 * point at `qField` breaks that limit. Not kept when no smaller delivery stays within it: then that of least current.
 */
function armatureLimitedQ(model: MotorModel, shaft: number, v: number, qField: number): { q: number; kept: boolean } {
  const limit = model.limits.armaturePu;
  const excess = (q: number) => currentAt(model, shaft, q, v) - limit;
  const crossing = (to: number) => ({ q: brentRoot(excess, qField, to, 'armature-limited kvar'), kept: true });
  if (qField < 0 && excess(0) <= 0) return crossing(0);
  const far = Math.max(qField, 0) + limit * v;
  const least = goldenMinimum(excess, Math.min(qField, 0), far);
  if (least <= qField) return { q: qField, kept: false };
  const slack = excess(least);
  if (slack > limit * (LIMIT_TOLERANCE - 1)) return { q: least, kept: false };
  return slack >= 0 ? { q: least, kept: true } : crossing(least);
}

/** Armature current at a reactive power; Infinity where no armature power carries the load. [pu] */
export function currentAt(model: MotorModel, shaft: number, q: number, v: number): number {
  try {
    return solveAtKvar(model, shaft, q, v).current;
  } catch (error) {
    if (error instanceof NotConvergedError) return Infinity;
    throw error;
  }
}
