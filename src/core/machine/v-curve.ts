import { capabilityOf } from './capability';
import type { Capability } from './capability';
import { PullOutError, requireRange } from './errors';
import { compileMotor } from './motor';
import type { SynchronousMotor } from './motor';
import { checkLoad, describeState, operatingPoint } from './operating-point';
import type { Limit } from './operating-point';
import { goldenMinimum } from './roots';
import { solveAtKvar } from './solve';

/** One point of a V-curve. Load view: kvar > 0 is absorbed. */
export interface VCurvePoint {
  fieldCurrentA: number;
  lineCurrentA: number;
  kvar: number;
  inputKw: number;
  leading: boolean;
  beyond: Limit[];
}

/**
 * V-curve: armature current against field current at a constant shaft load.
 *
 * @param motor  Motor data.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @param at.fieldFromA, at.fieldToA  Range of field current, ascending. [A], >= 0
 * @param at.points  Number of points, evenly spaced, both ends included; >= 2
 * @returns Points in ascending field current; those at which the motor would fall out of step are left out.
 * @throws {RangeError} naming the argument out of range
 */
export function vCurve(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltagePu?: number; fieldFromA: number; fieldToA: number; points: number },
): VCurvePoint[] {
  requireRange(Number.isInteger(at.points) && at.points >= 2, 'points', 'a whole number >= 2', at.points);
  requireRange(at.fieldToA > at.fieldFromA, 'fieldToA', `above fieldFromA (${at.fieldFromA})`, at.fieldToA);
  const curve: VCurvePoint[] = [];
  for (let k = 0; k < at.points; k++) {
    const fieldCurrentA = at.fieldFromA + ((at.fieldToA - at.fieldFromA) * k) / (at.points - 1);
    try {
      const point = operatingPoint(motor, { shaftKw: at.shaftKw, voltagePu: at.voltagePu, fieldCurrentA });
      const { lineCurrentA, kvar, inputKw, leading, beyond } = point;
      curve.push({ fieldCurrentA, lineCurrentA, kvar, inputKw, leading, beyond });
    } catch (error) {
      if (!(error instanceof PullOutError)) throw error;
    }
  }
  return curve;
}

/** Field current at which the motor runs at unity power factor at a shaft load: the bottom of the V-curve. [A] */
export function unityField(motor: SynchronousMotor, at: { shaftKw: number; voltagePu?: number }): number {
  return operatingPoint(motor, { ...at, powerFactor: 1, leading: false }).fieldCurrentA;
}

/** The excitation of least loss. */
export interface LeastLoss {
  fieldCurrentA: number;
  kvar: number;
  inputKw: number;
}

/**
 * Field current at which the motor's own losses are least at a shaft load, and its reactive power there.
 *
 * It lies below unity field: field loss still rises where armature loss is flat. Searched between 0.9/Xd absorbed and
 * 0.2 pu delivered.
 *
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @throws {RangeError} naming the argument out of range
 */
export function leastLossField(motor: SynchronousMotor, at: { shaftKw: number; voltagePu?: number }): LeastLoss {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const pointAt = (q: number) => describeState(model, solveAtKvar(model, at.shaftKw / model.baseKva, q, v), at.shaftKw);
  const { fieldCurrentA, kvar, inputKw } = pointAt(goldenMinimum((q) => pointAt(q).inputKw, -0.2, 0.9 / motor.xdPu));
  return { fieldCurrentA, kvar, inputKw };
}

/**
 * Capability over a list of shaft loads.
 *
 * @param at.loads  Shaft loads in any order. [kW], each >= 0
 * @returns One row per load, in the same order; see `capability`.
 */
export function capabilityCurve(
  motor: SynchronousMotor,
  at: { voltagePu?: number; loads: number[] },
): (Capability & { shaftKw: number })[] {
  const model = compileMotor(motor);
  return at.loads.map((shaftKw) => {
    const v = checkLoad({ shaftKw, voltagePu: at.voltagePu });
    return { shaftKw, ...capabilityOf(model, shaftKw / model.baseKva, v) };
  });
}
