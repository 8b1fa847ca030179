import { NotConvergedError, PullOutError } from './errors';
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

/** The same from a compiled motor, per unit. */
export function capabilityOf(model: MotorModel, shaft: number, v: number): Capability {
  const atFieldLimit = fieldLimited(model, shaft, v);
  if (!atFieldLimit) return { kvarDelivered: null, fieldCurrentA: null, binding: 'pull-out' };
  const limit = model.limits.armaturePu;
  if (atFieldLimit.current <= limit * LIMIT_TOLERANCE) return admitted(model, atFieldLimit, 'field');
  const q = armatureLimitedQ(model, shaft, v, atFieldLimit.q);
  if (q === null) return { kvarDelivered: null, fieldCurrentA: null, binding: 'armature' };
  return admitted(model, solveAtKvar(model, shaft, q, v), 'armature');
}

function admitted(model: MotorModel, s: MachineState, binding: Limit): Capability {
  if (pullOutOfState(model, s).ratio * LIMIT_TOLERANCE < model.limits.pullOutMargin) {
    return { kvarDelivered: null, fieldCurrentA: null, binding: 'pull-out' };
  }
  return { kvarDelivered: -s.q * model.baseKva, fieldCurrentA: s.fieldCurrentA, binding };
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
 * point at `qField` breaks that limit. Null when no smaller delivery keeps within it.
 */
function armatureLimitedQ(model: MotorModel, shaft: number, v: number, qField: number): number | null {
  const limit = model.limits.armaturePu;
  const excess = (q: number) => {
    try {
      return solveAtKvar(model, shaft, q, v).current - limit;
    } catch (error) {
      if (error instanceof NotConvergedError) return Infinity;
      throw error;
    }
  };
  if (qField < 0 && excess(0) <= 0) return brentRoot(excess, qField, 0, 'armature-limited kvar');
  const far = Math.max(qField, 0) + limit * v;
  const least = goldenMinimum(excess, Math.min(qField, 0), far);
  if (least <= qField) return null;
  const slack = excess(least);
  if (slack > limit * (LIMIT_TOLERANCE - 1)) return null;
  return slack >= 0 ? least : brentRoot(excess, qField, least, 'armature-limited kvar');
}
