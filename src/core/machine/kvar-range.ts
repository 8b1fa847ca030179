import { currentAt, highestState } from './capability';
import { NotConvergedError, PullOutError, requireRange } from './errors';
import { LIMIT_TOLERANCE, compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad, pullOutOfState } from './operating-point';
import type { Limit } from './operating-point';
import { brentRoot, goldenMinimum } from './roots';
import { solveAtField, solveAtKvar } from './solve';
import type { MachineState } from './solve';

/** Limits of the reactive range. Besides the motor's own the least field: the one allowed, or that which leaves no emf. */
export type RangeLimit = Limit | 'least-field';

/** Reactive power a motor may deliver at a load within all its limits. */
export interface ReactiveRange {
  /** Negative: absorbed. [kvar] */
  least: number;
  most: number;
  leastBinding: RangeLimit;
  mostBinding: Limit;
}

/** Both ends of the range as solved states, per unit. */
export interface RangeStates {
  least: MachineState;
  most: MachineState;
  leastBinding: RangeLimit;
  mostBinding: Limit;
  /** False: nothing keeps every limit. Both ends are then the state in which the over-excited limiters leave the motor. */
  admissible: boolean;
}

/**
 * Reactive power a motor may deliver at a shaft load: from the least excitation that keeps pull-out margin, armature limit and
 * least field, to that of `capability`.
 *
 * @param motor  Motor data with its limits.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @param at.leastFieldA  Least field current allowed by regulator or maker, 0 when absent. [A], >= 0
 * @returns Both ends, delivered, with what binds each; null when nothing is admissible.
 * @throws {RangeError} naming the argument out of range
 * @source [FIT] sec. 5.5 (capability curve), with losses.
 */
export function reactiveRange(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltagePu?: number; leastFieldA?: number },
): ReactiveRange | null {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const range = rangeStates(model, at.shaftKw / model.baseKva, v, checkLeastField(at.leastFieldA));
  if (!range?.admissible) return null;
  const { least, most, leastBinding, mostBinding } = range;
  return { least: -least.q * model.baseKva, most: -most.q * model.baseKva, leastBinding, mostBinding };
}

/** Checks a least field current; 0 when absent. [A] */
export function checkLeastField(leastFieldA = 0): number {
  requireRange(leastFieldA >= 0 && Number.isFinite(leastFieldA), 'leastFieldA', '>= 0', leastFieldA);
  return leastFieldA;
}

/** The range from a compiled motor; null when the field limit does not hold the load. */
export function rangeStates(model: MotorModel, shaft: number, v: number, leastFieldA: number): RangeStates | null {
  const top = highestState(model, shaft, v);
  if (!top) return null;
  const most = top.state;
  const none = { least: most, most, leastBinding: top.binding, mostBinding: top.binding, admissible: false };
  if (!top.admissible) return none;
  if (most.fieldCurrentA * LIMIT_TOLERANCE < leastFieldA) return { ...none, leastBinding: 'least-field' };
  const ends = leastState(model, shaft, v, leastFieldA, most);
  return { ...ends, most, mostBinding: top.binding, admissible: true };
}

/** The same where the load must be held. @throws {PullOutError} */
export function heldRangeStates(model: MotorModel, shaft: number, v: number, leastFieldA: number): RangeStates {
  const range = rangeStates(model, shaft, v, leastFieldA);
  if (range) return range;
  // Solving at the limit itself throws with the greatest load that it holds.
  solveAtField(model, shaft, model.limits.fieldCurrentA, v);
  throw new PullOutError(`The shaft load of ${shaft * model.baseKva} kW exceeds what the field limit can hold.`, 0);
}

/** Least excitation below an admissible state `most`. */
function leastState(model: MotorModel, shaft: number, v: number, leastFieldA: number, most: MachineState) {
  const spare = (q: number) => Math.min(...Object.values(sparesAt(model, shaft, v, q, leastFieldA)));
  const far = Math.max(most.q, 0) + (v * v) / model.z.xq + model.limits.armaturePu * v;
  const byField = spare(most.q) <= 0 ? most.q : insideRoot(spare, most.q, far, 'least excitation');
  const { armaturePu } = model.limits;
  const armatureSpare = (q: number) => armaturePu - currentAt(model, shaft, q, v);
  if (armatureSpare(byField) >= 0 || byField === most.q) {
    const { margin, field } = sparesAt(model, shaft, v, byField + 1e-9, leastFieldA);
    const leastBinding: RangeLimit = field < margin ? 'least-field' : 'pull-out';
    return { least: solveAtKvar(model, shaft, byField, v), leastBinding };
  }
  const easiest = most.q < 0 && armatureSpare(0) >= 0 ? 0 : goldenMinimum((q) => -armatureSpare(q), most.q, byField);
  const q =
    armatureSpare(easiest) > 0 ? insideRoot(armatureSpare, easiest, byField, 'least armature-limited kvar') : most.q;
  return { least: solveAtKvar(model, shaft, q, v), leastBinding: 'armature' as const };
}

/** How far a state is from the limits of low excitation: both fall as more is absorbed. */
function sparesAt(model: MotorModel, shaft: number, v: number, q: number, leastFieldA: number) {
  try {
    const s = solveAtKvar(model, shaft, q, v);
    // Below no emf a saturated machine would slip a pole: it stands half a turn away at the same field.
    const field = Math.min(s.e, (s.fieldCurrentA - leastFieldA) / model.motor.ratedFieldCurrentA);
    const { ratio, stable } = pullOutOfState(model, s);
    return { margin: stable ? Math.min(1, ratio / model.limits.pullOutMargin - 1) : -1, field };
  } catch (error) {
    if (error instanceof NotConvergedError) return { margin: -1, field: 0 };
    throw error;
  }
}

/** Root of a function that falls from `from` to `to`, taken just inside, so that rounding leaves it on the side kept. */
function insideRoot(f: (x: number) => number, from: number, to: number, code: string): number {
  const root = brentRoot(f, from, to, code);
  return Math.max(from, root - 1e-12 * (1 + Math.abs(root)));
}
