import { greatestAngle, powerOverAngle, slopeAt, valueAt } from './angle-power';
import { requireRange } from './errors';
import { LIMIT_TOLERANCE, compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { panelCurrentA } from './panel';
import { solveAtField, solveAtKvar, solveAtPowerFactor } from './solve';
import type { MachineState } from './solve';

export type Limit = 'armature' | 'field' | 'pull-out';

/** A motor at one load and excitation. Load view: kvar > 0 is absorbed, < 0 delivered. */
export interface OperatingPoint {
  /** Shaft power plus all losses, the exciter's included. [kW] */
  inputKw: number;
  /** Reactive power absorbed. [kvar] */
  kvar: number;
  /** Armature line current. [A] */
  lineCurrentA: number;
  /** Of inputKw and kvar together. [unitless], [0, 1] */
  powerFactor: number;
  leading: boolean;
  emfPu: number;
  /** Angle by which the emf lags the voltage. [deg] */
  loadAngleDeg: number;
  fieldCurrentA: number;
  /** What the panel's field ammeter shows: the exciter's field for a brushless machine, else the field. [A] */
  panelCurrentA: number;
  /** Greatest developed power at this emf and voltage over the developed power; Infinity at none. [unitless] */
  pullOutRatio: number;
  lossesKw: { armature: number; field: number; exciter: number; stray: number; core: number; frictionWindage: number };
  /** Limits this point breaks; empty when admissible. */
  beyond: Limit[];
}

/** What is held at the machine besides its load: reactive power, field current, or power factor. */
export type Excitation = { kvar: number } | { fieldCurrentA: number } | { powerFactor: number; leading: boolean };

/**
 * Operating point of a synchronous motor at a shaft load, input power solved with the losses.
 *
 * Balanced steady state; two-reaction theory with armature resistance; saturation by the open-circuit curve where given.
 *
 * @param motor  Motor data.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage on rated voltage, 1 when absent. [pu], (0, 2]
 * @param at.kvar  Reactive power absorbed [kvar]; or at.fieldCurrentA [A], >= 0; or at.powerFactor (0, 1] with at.leading.
 * @returns The point, with its losses and the limits it breaks. Beyond the stability limit `pull-out` is named.
 * @throws {PullOutError} when the load exceeds the greatest shaft power of the field current
 * @throws {RangeError} naming the argument out of range, or when the kvar asked for would need a reversed field
 * @throws {NotConvergedError} when no armature power carries the load
 * @source [FIT] ch. 5; losses as in [FIT] ex. 5.8; saturation [I115].
 */
export function operatingPoint(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltagePu?: number } & Excitation,
): OperatingPoint {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const shaft = at.shaftKw / model.baseKva;
  return describeState(model, solveAt(model, shaft, v, at), at.shaftKw);
}

/** Checks shaft load and voltage; returns the voltage. [pu] */
export function checkLoad(at: { shaftKw: number; voltagePu?: number }): number {
  requireRange(at.shaftKw >= 0 && Number.isFinite(at.shaftKw), 'shaftKw', '>= 0', at.shaftKw);
  const v = at.voltagePu ?? 1;
  requireRange(v > 0 && v <= 2, 'voltagePu', 'in (0, 2]', v);
  return v;
}

function solveAt(model: MotorModel, shaft: number, v: number, at: Excitation): MachineState {
  if ('fieldCurrentA' in at) {
    requireRange(at.fieldCurrentA >= 0 && Number.isFinite(at.fieldCurrentA), 'fieldCurrentA', '>= 0', at.fieldCurrentA);
    return solveAtField(model, shaft, at.fieldCurrentA, v);
  }
  if ('powerFactor' in at) {
    requireRange(at.powerFactor > 0 && at.powerFactor <= 1, 'powerFactor', 'in (0, 1]', at.powerFactor);
    return requireForward(solveAtPowerFactor(model, shaft, at.powerFactor, at.leading, v));
  }
  requireRange(Number.isFinite(at.kvar), 'kvar', 'finite', at.kvar);
  return requireForward(solveAtKvar(model, shaft, at.kvar / model.baseKva, v));
}

function requireForward(state: MachineState): MachineState {
  if (state.fieldCurrentA < 0) {
    throw new RangeError(
      `kvar must be what a field of 0 A or more absorbs, got a point that needs ${state.fieldCurrentA} A: absorb less.`,
    );
  }
  return state;
}

/** Developed power now and the greatest at the same emf and voltage, and whether the point is on the stable side. */
export function pullOutOfState(model: MotorModel, s: MachineState): { ratio: number; stable: boolean } {
  const developed = powerOverAngle(s.v, s.e, model.z, model.z.ra);
  const now = s.p - model.z.ra * s.current ** 2;
  const top = greatestAngle(developed);
  const greatest = valueAt(developed, top);
  const slack = 1e-9 * (Math.abs(developed.s1) + Math.abs(developed.s2));
  return {
    ratio: now > 0 ? greatest / now : Infinity,
    stable: slopeAt(developed, s.angle) >= -slack && s.angle <= top + 1e-4,
  };
}

/** Limits a solved state breaks. */
function limitsBroken(model: MotorModel, s: MachineState): { beyond: Limit[]; pullOutRatio: number } {
  const { ratio, stable } = pullOutOfState(model, s);
  const beyond: Limit[] = [];
  if (s.current > model.limits.armaturePu * LIMIT_TOLERANCE) beyond.push('armature');
  if (s.fieldCurrentA > model.limits.fieldCurrentA * LIMIT_TOLERANCE) beyond.push('field');
  if (ratio * LIMIT_TOLERANCE < model.limits.pullOutMargin || !stable) beyond.push('pull-out');
  return { beyond, pullOutRatio: ratio };
}

/** Turns a solved state into the figures a reader knows. */
export function describeState(model: MotorModel, s: MachineState, shaftKw: number): OperatingPoint {
  const { baseKva, motor } = model;
  const square = s.current ** 2;
  const field = model.fieldLossPerA2 * s.fieldCurrentA ** 2 * baseKva;
  const lossesKw = {
    armature: model.z.ra * square * baseKva,
    field,
    exciter: field * (1 / motor.exciterEfficiency - 1),
    stray: model.strayPu * square * baseKva,
    core: model.corePu * s.v ** 2 * baseKva,
    frictionWindage: model.frictionWindagePu * baseKva,
  };
  const inputKw = shaftKw + Object.values(lossesKw).reduce((sum, kw) => sum + kw, 0);
  const kvar = s.q * baseKva;
  const kva = Math.hypot(inputKw, kvar);
  return {
    inputKw,
    kvar,
    lineCurrentA: s.current * model.baseCurrentA,
    powerFactor: kva === 0 ? 1 : inputKw / kva,
    leading: kvar < 0,
    emfPu: s.e,
    loadAngleDeg: (s.angle * 180) / Math.PI,
    fieldCurrentA: s.fieldCurrentA,
    panelCurrentA: panelCurrentA(motor, s.fieldCurrentA),
    lossesKw,
    ...limitsBroken(model, s),
  };
}
