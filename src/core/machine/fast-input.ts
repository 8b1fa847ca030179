import type { MotorModel } from './motor';

/** Input power at a voltage, solved without allocating: for many thousands of points. Everything per unit. */
export interface FastInput {
  /**
   * Whole input at a shaft load and a reactive power absorbed, to 1e-9.
   *
   * @param near  Armature power to begin at; the nearer, the faster.
   */
  inputAt: (shaft: number, q: number, near: number) => number;
  /** Change of that input with reactive power absorbed. [unitless] */
  slopeAt: (shaft: number, q: number, near: number) => number;
}

/** A last correction follows a gap smaller than this: it squares what is left, or at a corner of the curve takes a hundredth. */
const LAST_GAP = 2e-6;

/**
 * Prepares the fast solution of the same equations as `solveAtKvar`: armature power by Newton's method.
 *
 *     p = shaft + h (p^2 + q^2)/v^2 + core + friction + X(p, q),   X = field and exciter loss where the shaft carries them
 */
export function fastInput(model: MotorModel, v: number): FastInput {
  const heat = (model.z.ra + model.strayPu) / (v * v);
  const steady = model.corePu * v * v + model.frictionWindagePu;
  const excitation = model.fieldLossPerA2 / model.motor.exciterEfficiency;
  const carried = model.shaftFed ? excitation : 0;
  const beside = model.shaftFed ? 0 : excitation;
  const field = fieldSlopes(model, v);
  const found = new Float64Array(2);
  const armature = (shaft: number, q: number, near: number): number => {
    let p = near;
    for (let i = 0; i < 30; i++) {
      field(p, q, 1, 0, found);
      const amperes = found[0]!;
      const gap = p - shaft - steady - heat * (p * p + q * q) - carried * amperes * amperes;
      p -= gap / (1 - 2 * heat * p - 2 * carried * amperes * found[1]!);
      if (Math.abs(gap) < LAST_GAP) break;
    }
    return p;
  };
  const inputAt = (shaft: number, q: number, near: number): number => {
    const p = armature(shaft, q, near);
    if (beside === 0) return p;
    field(p, q, 1, 0, found);
    return p + beside * found[0]! * found[0]!;
  };
  const slopeAt = (shaft: number, q: number, near: number): number => {
    const p = armature(shaft, q, near);
    field(p, q, 1, 0, found);
    const overP = 2 * excitation * found[0]! * found[1]!;
    field(p, q, 0, 1, found);
    const overQ = 2 * excitation * found[0]! * found[1]!;
    if (beside === 0) return (2 * heat * q + overQ) / (1 - 2 * heat * p - overP);
    const armatureSlope = (2 * heat * q) / (1 - 2 * heat * p);
    return armatureSlope + overQ + overP * armatureSlope;
  };
  return { inputAt, slopeAt };
}

/**
 * Field current at an armature power, and its change along a direction.
 *
 * Derivation: `emfFor` and `fieldCurrentFor` with the angle's sine and cosine written as ratios,
 * E = b + (Xd - Xq) n/b, b = |V - (Ra + jXq) I|, n = b times the current's leading part, differentiated term by term.
 *
 * @returns Writes the current [A] and its slope along (dp, dq) [A/pu] into `out`.
 */
function fieldSlopes(model: MotorModel, v: number) {
  const { ra, xd, xq } = model.z;
  const { curve, fieldPerEmf } = model;
  const saturate = curve ? incrementSlopes(curve) : null;
  const perEmf = curve ? 1 / curve.airGapPuPerA : fieldPerEmf;
  const xl = curve ? curve.xl : 0;
  return (p: number, q: number, dp: number, dq: number, out: Float64Array): void => {
    const re = p / v;
    const im = -q / v;
    const dRe = dp / v;
    const dIm = -dq / v;
    const bRe = v - ra * re + xq * im;
    const bIm = -ra * im - xq * re;
    const dbRe = -ra * dRe + xq * dIm;
    const dbIm = -ra * dIm - xq * dRe;
    const b = Math.sqrt(bRe * bRe + bIm * bIm);
    const db = (bRe * dbRe + bIm * dbIm) / b;
    const n = im * bRe - re * bIm;
    const dn = dIm * bRe + im * dbRe - dRe * bIm - re * dbIm;
    out[0] = (b + ((xd - xq) * n) / b) * perEmf;
    out[1] = (db + ((xd - xq) * (dn - (n * db) / b)) / b) * perEmf;
    if (!saturate) return;
    const wRe = v - ra * re + xl * im;
    const wIm = -ra * im - xl * re;
    const w = Math.sqrt(wRe * wRe + wIm * wIm);
    const dw = (wRe * (xl * dIm - ra * dRe) - wIm * (ra * dIm + xl * dRe)) / w;
    saturate(w, dw, out);
  };
}

/** Adds saturation's amperes at a voltage behind leakage reactance, and their slope, to `out`. */
function incrementSlopes(curve: { voltagesPu: number[]; currentsA: number[]; airGapPuPerA: number }) {
  const volts = Float64Array.from(curve.voltagesPu);
  const amperes = Float64Array.from(curve.currentsA);
  const airGap = 1 / curve.airGapPuPerA;
  return (w: number, dw: number, out: Float64Array): void => {
    let k = 1;
    while (k < volts.length - 1 && w > volts[k]!) k++;
    const slope = (amperes[k]! - amperes[k - 1]!) / (volts[k]! - volts[k - 1]!);
    out[0]! += amperes[k - 1]! + slope * (w - volts[k - 1]!) - airGap * w;
    out[1]! += (slope - airGap) * dw;
  };
}
