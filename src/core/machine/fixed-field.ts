import { requireRange } from './errors';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad, describeState } from './operating-point';
import type { OperatingPoint } from './operating-point';
import { holdField, inputPu } from './solve';
import type { HeldField } from './solve';

/** Error of a table's figures, as a share of rated kVA. */
const TABLE_TOLERANCE = 2e-8;

/** Least width of a table's piece, as a share of its range: where the open-circuit curve has a corner. */
const LEAST_WIDTH = 1e-7;

/** What a motor takes at a load. Load view. */
export interface TakenPower {
  kvar: number;
  inputKw: number;
}

/** A motor at a constant field current and voltage. */
export interface FixedField {
  fieldCurrentA: number;
  /** Greatest shaft load this field holds. [kW] */
  greatestShaftKw: number;
  /** The full operating point at a load. @throws {PullOutError} */
  point: (shaftKw: number) => OperatingPoint;
  /** What the motor takes at a load, solved. @throws {PullOutError} */
  taken: (shaftKw: number) => TakenPower;
  /**
   * What the motor takes at each of many loads: solved one by one when few, else read from a table of cubic pieces with an
   * error below 1e-7 of rated kVA.
   *
   * @param shaftKw  Loads, ascending. [kW], each >= 0
   * @returns kvar and inputKw, one value per load
   * @throws {PullOutError} when the highest load exceeds what the field holds
   */
  takenAt: (shaftKw: Float64Array) => { kvar: Float64Array; inputKw: Float64Array };
}

/** Loads up to this number are solved one by one. */
const FEW = 48;

/**
 * Prepares a motor at a constant field current for many loads.
 *
 * @param motor  Motor data.
 * @param at.fieldCurrentA  Field current held. [A], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @throws {RangeError} naming the argument out of range
 */
export function fixField(motor: SynchronousMotor, at: { fieldCurrentA: number; voltagePu?: number }): FixedField {
  const model = compileMotor(motor);
  const v = checkLoad({ shaftKw: 0, voltagePu: at.voltagePu });
  const { fieldCurrentA } = at;
  requireRange(fieldCurrentA >= 0 && Number.isFinite(fieldCurrentA), 'fieldCurrentA', '>= 0', fieldCurrentA);
  const held = holdField(model, fieldCurrentA, v);
  const stateAt = (shaftKw: number) => {
    requireRange(shaftKw >= 0 && Number.isFinite(shaftKw), 'shaftKw', '>= 0', shaftKw);
    return held.solve(shaftKw / model.baseKva);
  };
  const taken = (shaftKw: number) => {
    const s = stateAt(shaftKw);
    return { kvar: s.q * model.baseKva, inputKw: inputPu(model, s) * model.baseKva };
  };
  return {
    fieldCurrentA,
    greatestShaftKw: held.greatest * model.baseKva,
    point: (shaftKw) => describeState(model, stateAt(shaftKw), shaftKw),
    taken,
    takenAt: (loads) => takenAtMany(model, held, loads, taken),
  };
}

function takenAtMany(model: MotorModel, held: HeldField, loads: Float64Array, taken: (shaftKw: number) => TakenPower) {
  const kvar = new Float64Array(loads.length);
  const inputKw = new Float64Array(loads.length);
  if (loads.length <= FEW) {
    loads.forEach((shaftKw, i) => {
      const point = taken(shaftKw);
      kvar[i] = point.kvar;
      inputKw[i] = point.inputKw;
    });
    return { kvar, inputKw };
  }
  const from = loads[0]!;
  const to = loads[loads.length - 1]!;
  requireRange(from >= 0 && Number.isFinite(to), 'shaftKw', 'finite and >= 0', from);
  if (to / model.baseKva > held.greatest) taken(to);
  const table = buildTable(taken, from, to, TABLE_TOLERANCE * model.baseKva);
  let piece = 0;
  loads.forEach((shaftKw, i) => {
    while (piece < table.length - 1 && shaftKw > table[piece]!.to) piece++;
    const { from: start, scale, kvar: q, lossKw: l } = table[piece]!;
    const t = (shaftKw - start) * scale;
    kvar[i] = q[0] + t * (q[1] + t * (q[2] + t * q[3]));
    inputKw[i] = shaftKw + l[0] + t * (l[1] + t * (l[2] + t * l[3]));
  });
  return { kvar, inputKw };
}

type Cubic = [number, number, number, number];

interface Piece {
  from: number;
  to: number;
  scale: number;
  kvar: Cubic;
  lossKw: Cubic;
}

/** Cubic pieces through four solved loads each, halved until three more solved loads agree. */
function buildTable(taken: (shaftKw: number) => TakenPower, from: number, to: number, tolerance: number): Piece[] {
  const pieces: Piece[] = [];
  const least = (to - from) * LEAST_WIDTH;
  const build = (lo: number, hi: number) => {
    const at = (share: number) => {
      const shaftKw = lo + (hi - lo) * share;
      const { kvar, inputKw } = taken(Math.min(shaftKw, to));
      return { kvar, loss: inputKw - shaftKw };
    };
    const knots = [0, 1 / 3, 2 / 3, 1].map(at);
    const kvar = cubicThrough(knots.map((k) => k.kvar));
    const lossKw = cubicThrough(knots.map((k) => k.loss));
    const agrees = [1 / 6, 1 / 2, 5 / 6].every((t) => {
      const solved = at(t);
      return (
        Math.abs(cubic(kvar, t) - solved.kvar) <= tolerance && Math.abs(cubic(lossKw, t) - solved.loss) <= tolerance
      );
    });
    if (agrees || hi - lo <= least) pieces.push({ from: lo, to: hi, scale: 1 / (hi - lo), kvar, lossKw });
    else {
      build(lo, (lo + hi) / 2);
      build((lo + hi) / 2, hi);
    }
  };
  if (to > from) build(from, to);
  return pieces;
}

function cubic(c: Cubic, t: number): number {
  return c[0] + t * (c[1] + t * (c[2] + t * c[3]));
}

/** Cubic through values at 0, 1/3, 2/3 and 1. Derivation: Newton's forward differences with step 1/3. */
function cubicThrough(values: number[]): Cubic {
  const [a, b, c, d] = values as Cubic;
  const first = b - a;
  const second = (c - 2 * b + a) / 2;
  const third = (d - 3 * c + 3 * b - a) / 6;
  return [a, 3 * (first - second + 2 * third), 9 * (second - 3 * third), 27 * third];
}
