import { greatestAngle, powerOverAngle, valueAt } from './angle-power';
import { requireRange } from './errors';
import { emfFor } from './kernel';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad } from './operating-point';
import { brentRoot } from './roots';
import { fieldCurrentFor } from './solve';

/** A point of the armature's active and reactive power. Reactive power as delivered: leading is positive. */
export interface PqPoint {
  armatureKw: number;
  kvarDelivered: number;
}

/** Lines that bound where a motor may run, for a chart of reactive against active power. */
export interface PqLimits {
  /** Circle of the armature's limit, from full delivery over unity to full absorption. */
  armature: PqPoint[];
  /** Constant field current at its limit, from no armature power up to the pull-out margin. */
  field: PqPoint[];
  /** Least excitation that keeps the pull-out margin. */
  pullOut: PqPoint[];
}

/**
 * Limit lines of a motor in the plane of armature power, after the reserve.
 *
 * @param motor  Motor data with its limits.
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @param at.points  Points per line, >= 8; 61 when absent.
 * @throws {RangeError} naming the argument out of range
 * @source [FIT] sec. 5.5 (capability curve); the kernel of this folder.
 */
export function pqLimits(motor: SynchronousMotor, at: { voltagePu?: number; points?: number } = {}): PqLimits {
  const model = compileMotor(motor);
  const v = checkLoad({ shaftKw: 0, voltagePu: at.voltagePu });
  const points = at.points ?? 61;
  requireRange(Number.isInteger(points) && points >= 8, 'points', 'a whole number >= 8', points);
  const kva = model.limits.armaturePu * v;
  const shares = Array.from({ length: points }, (_, i) => i / (points - 1));
  const scaled = (p: number, delivered: number) => ({
    armatureKw: p * model.baseKva,
    kvarDelivered: delivered * model.baseKva,
  });
  const loads = shares.map((share) => share * 1.1 * kva);
  return {
    armature: shares.map((share) => scaled(kva * Math.sin(Math.PI * share), kva * Math.cos(Math.PI * share))),
    field: lineOf(loads, (p) => deliveredAtField(model, v, p), scaled),
    pullOut: lineOf(loads, (p) => deliveredAtMargin(model, v, p), scaled),
  };
}

function lineOf(
  loads: number[],
  delivered: (p: number) => number | null,
  scaled: (p: number, q: number) => PqPoint,
): PqPoint[] {
  return loads.flatMap((p) => {
    const q = delivered(p);
    return q === null ? [] : [scaled(p, q)];
  });
}

/** Reactive power delivered at armature power p with the field at its limit; null beyond the pull-out margin. */
function deliveredAtField(model: MotorModel, v: number, p: number): number | null {
  const excess = (delivered: number) => {
    const { e } = emfFor(v, p, -delivered, model.z);
    return fieldCurrentFor(model, e, v, p, -delivered) - model.limits.fieldCurrentA;
  };
  const least = deliveredAtMargin(model, v, p) ?? (-0.95 * v * v) / model.z.xd;
  let most = Math.max(0, least) + 0.5;
  while (excess(most) < 0 && most < 50) most += 0.5;
  return excess(least) <= 0 && excess(most) >= 0 ? brentRoot(excess, least, most, 'field-limited kvar') : null;
}

/** Least reactive power delivered at armature power p that keeps the pull-out margin; null where no excitation is needed for it. */
function deliveredAtMargin(model: MotorModel, v: number, p: number): number | null {
  const short = (delivered: number) => {
    const { e, current } = emfFor(v, p, -delivered, model.z);
    const now = p - model.z.ra * current ** 2;
    const developed = powerOverAngle(v, Math.max(0, e), model.z, model.z.ra);
    return valueAt(developed, greatestAngle(developed)) - model.limits.pullOutMargin * now;
  };
  let high = 1.5 * v;
  if (short(high) < 0) return null;
  for (let low = high - 0.05; low > (-v * v) / model.z.xd; low -= 0.05) {
    if (short(low) < 0) return brentRoot(short, low, high, 'kvar at the pull-out margin');
    high = low;
  }
  return null;
}
