import { FIRST_STEP, GRID_STEP_RAD, LAST_STEP, SAME_POWER } from './angle-power';
import { angleFor, axisCurrents, greatestAngle, powerOverAngle, valueAt } from './angle-power';
import { NotConvergedError, PullOutError } from './errors';
import { emfFor } from './kernel';
import type { MotorModel } from './motor';
import { brentRoot, goldenMinimum } from './roots';
import { saturationIncrementA } from './saturation';

/** A solved state, per unit on the machine's rating; terminal power p and q are the armature's. */
export interface MachineState {
  v: number;
  p: number;
  q: number;
  e: number;
  angle: number;
  current: number;
  fieldCurrentA: number;
}

/** Field current that holds emf e when the armature takes p and q at v. [A] */
export function fieldCurrentFor(model: MotorModel, e: number, v: number, p: number, q: number): number {
  if (!model.curve) return e * model.fieldPerEmf;
  const re = p / v;
  const im = -q / v;
  const { ra } = model.z;
  const xl = model.curve.xl;
  const behind = Math.hypot(v - ra * re + xl * im, -ra * im - xl * re);
  return e / model.curve.airGapPuPerA + saturationIncrementA(model.curve, behind);
}

/** Losses that are carried by the armature besides field and exciter, at a square of the current. */
function steadyLossPu(model: MotorModel, v: number, currentSquared: number): number {
  return (model.z.ra + model.strayPu) * currentSquared + model.corePu * v * v + model.frictionWindagePu;
}

/** Field and exciter loss together. [pu] */
export function excitationLossPu(model: MotorModel, fieldCurrentA: number): number {
  return (model.fieldLossPerA2 * fieldCurrentA ** 2) / model.motor.exciterEfficiency;
}

/**
 * State at a shaft load and a reactive power: the armature's power is solved with the losses by the secant method.
 *
 * @throws {NotConvergedError} when no armature power carries the load and its losses
 */
export function solveAtKvar(model: MotorModel, shaft: number, q: number, v: number): MachineState {
  const state = (p: number): MachineState => {
    const found = emfFor(v, p, q, model.z);
    return { v, p, q, ...found, fieldCurrentA: fieldCurrentFor(model, found.e, v, p, q) };
  };
  const carried = (s: MachineState) =>
    shaft + steadyLossPu(model, v, s.current ** 2) + (model.shaftFed ? excitationLossPu(model, s.fieldCurrentA) : 0);
  let before = shaft;
  let p = carried(state(before));
  let slack = before - p;
  for (let i = 0; i < 60; i++) {
    const s = state(p);
    const gap = p - carried(s);
    if (Math.abs(gap) <= 4e-16 * (1 + Math.abs(p))) return s;
    const step = gap === slack ? 0 : (gap * (p - before)) / (gap - slack);
    if (step === 0 || !Number.isFinite(step)) {
      if (Math.abs(gap) <= 1e-13 * (1 + Math.abs(p))) return s;
      break;
    }
    before = p;
    slack = gap;
    p -= step;
    if (Math.abs(step) <= 2e-16 * Math.abs(p) && Math.abs(gap) <= 1e-13 * (1 + Math.abs(p))) return state(p);
  }
  throw new NotConvergedError('armature power at a reactive power', 60, Math.abs(slack));
}

/** Total input of a solved state, the exciter's power beside the armature included. [pu] */
export function inputPu(model: MotorModel, s: MachineState): number {
  return model.shaftFed ? s.p : s.p + excitationLossPu(model, s.fieldCurrentA);
}

/**
 * State at a shaft load and a power factor of the whole input.
 *
 * @throws {NotConvergedError} when no reactive power gives that power factor
 */
export function solveAtPowerFactor(
  model: MotorModel,
  shaft: number,
  powerFactor: number,
  leading: boolean,
  v: number,
): MachineState {
  const ratio = (Math.sqrt(1 - powerFactor ** 2) / powerFactor) * (leading ? -1 : 1);
  if (ratio === 0) return solveAtKvar(model, shaft, 0, v);
  let before = ratio * shaft;
  let gapBefore = before - ratio * inputPu(model, solveAtKvar(model, shaft, before, v));
  let q = before - gapBefore;
  for (let i = 0; i < 60; i++) {
    const s = solveAtKvar(model, shaft, q, v);
    const gap = q - ratio * inputPu(model, s);
    if (Math.abs(gap) <= 1e-14 * (1 + Math.abs(q))) return s;
    if (gap === gapBefore) {
      if (Math.abs(gap) <= 1e-12 * (1 + Math.abs(q))) return s;
      break;
    }
    const step = (gap * (q - before)) / (gap - gapBefore);
    before = q;
    gapBefore = gap;
    q -= step;
  }
  throw new NotConvergedError('reactive power at a power factor', 60, Math.abs(gapBefore));
}

/**
 * State at a shaft load and a field current, on the stable side of the greatest shaft power over the load angle.
 *
 * @throws {PullOutError} with the greatest three-phase shaft power in watts
 */
export function solveAtField(model: MotorModel, shaft: number, fieldCurrentA: number, v: number): MachineState {
  return holdField(model, fieldCurrentA, v).solve(shaft);
}

/** A field current held at a voltage: its greatest shaft power and the state at any load below it. [pu] */
export interface HeldField {
  greatest: number;
  solve: (shaft: number) => MachineState;
}

/** Prepares the states of a constant field current; loads are then solved one by one without searching pull-out again. */
export function holdField(model: MotorModel, fieldCurrentA: number, v: number): HeldField {
  const held = shaftOverAngle(model, fieldCurrentA, v);
  const solve = (shaft: number): MachineState => {
    if (shaft > held.greatest + 1e-12 * (1 + shaft)) {
      const greatestW = held.greatest * model.baseKva * 1000;
      throw new PullOutError(
        `The shaft load of ${shaft * model.baseKva} kW exceeds the ${greatestW / 1000} kW that a field of ${fieldCurrentA} A can hold.`,
        greatestW,
      );
    }
    const spare = held.greatest - shaft;
    // Without field, saliency and load every angle gives the same power to rounding.
    const angle = angleFor(held.shaftAt, shaft, held.topRad) ?? (spare <= 1e-12 * (1 + shaft) ? held.topRad : null);
    if (angle === null) throw new NotConvergedError('load angle at a field current', 36, spare);
    const e = held.emfAt(angle);
    const { iq, x } = axisCurrents(v, e, angle, model.z);
    const p = v * (Math.cos(angle) * iq + Math.sin(angle) * x);
    const q = v * (Math.sin(angle) * iq - Math.cos(angle) * x);
    return { v, p, q, e, angle, current: Math.hypot(iq, x), fieldCurrentA };
  };
  return { greatest: held.greatest, solve };
}

interface HeldPower {
  shaftAt: (angle: number) => number;
  emfAt: (angle: number) => number;
  topRad: number;
  greatest: number;
}

/** Shaft power over the load angle at a field current, losses and saturation counted. [pu] */
function shaftOverAngle(model: MotorModel, fieldCurrentA: number, v: number): HeldPower {
  const heat = model.z.ra + model.strayPu;
  const constant = steadyLossPu(model, v, 0) + (model.shaftFed ? excitationLossPu(model, fieldCurrentA) : 0);
  if (!model.curve) {
    const e = fieldCurrentA / model.fieldPerEmf;
    const power = powerOverAngle(v, e, model.z, heat);
    const shaftAt = (angle: number) => valueAt(power, angle) - constant;
    const topRad = greatestAngle(power);
    return { shaftAt, emfAt: () => e, topRad, greatest: shaftAt(topRad) };
  }
  const emfAt = (angle: number) => saturatedEmf(model, fieldCurrentA, v, angle);
  const shaftAt = (angle: number) => {
    const { iq, x } = axisCurrents(v, emfAt(angle), angle, model.z);
    return v * (Math.cos(angle) * iq + Math.sin(angle) * x) - heat * (iq * iq + x * x) - constant;
  };
  let best = FIRST_STEP;
  let bestShaft = shaftAt(best * GRID_STEP_RAD);
  for (let k = FIRST_STEP + 1; k <= LAST_STEP; k++) {
    const held = shaftAt(k * GRID_STEP_RAD);
    if (held > bestShaft + SAME_POWER) [best, bestShaft] = [k, held];
  }
  const topRad = goldenMinimum((angle) => -shaftAt(angle), (best - 1) * GRID_STEP_RAD, (best + 1) * GRID_STEP_RAD);
  return { shaftAt, emfAt, topRad, greatest: shaftAt(topRad) };
}

/** Emf that a field current sustains at a load angle, saturation read behind the leakage reactance. [pu] */
function saturatedEmf(model: MotorModel, fieldCurrentA: number, v: number, angle: number): number {
  const curve = model.curve!;
  const excess = (e: number) => {
    const { iq, x } = axisCurrents(v, e, angle, model.z);
    const p = v * (Math.cos(angle) * iq + Math.sin(angle) * x);
    const q = v * (Math.sin(angle) * iq - Math.cos(angle) * x);
    return fieldCurrentFor(model, e, v, p, q) - fieldCurrentA;
  };
  let highest = fieldCurrentA * curve.airGapPuPerA;
  const above = excess(highest);
  if (above === 0) return highest;
  let lowest = above > 0 ? highest - above * curve.airGapPuPerA : highest;
  for (let i = 0; i < 60 && excess(lowest) > 0; i++) lowest -= Math.max(0.1, Math.abs(lowest));
  for (let i = 0; i < 60 && excess(highest) < 0; i++) highest += Math.max(0.1, Math.abs(highest));
  return brentRoot(excess, lowest, highest, 'emf of a saturated machine');
}
