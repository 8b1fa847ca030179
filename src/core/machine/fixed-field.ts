import { cubicTable } from './cubic-table';
import { newTaken } from './taken-many';
import type { TakenMany } from './taken-many';
import { requireRange } from './errors';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad, describeState } from './operating-point';
import type { OperatingPoint } from './operating-point';
import { holdField, inputPu } from './solve';
import type { HeldField } from './solve';

/** Error of a table's figures, as a share of rated kVA. */
const TABLE_TOLERANCE = 2e-8;

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
   * @param into  Arrays to write in; new ones when absent.
   * @returns kvar and inputKw, one value per load; no limit is kept
   * @throws {PullOutError} when the highest load exceeds what the field holds
   */
  takenAt: (shaftKw: Float64Array, into?: TakenMany) => TakenMany;
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
    takenAt: (loads, into = newTaken(loads.length)) => takenAtMany(model, held, loads, { taken, into }),
  };
}

function takenAtMany(
  model: MotorModel,
  held: HeldField,
  loads: Float64Array,
  { taken, into }: { taken: (shaftKw: number) => TakenPower; into: TakenMany },
): TakenMany {
  const { kvar, inputKw, limited } = into;
  if (loads.length <= FEW) {
    loads.forEach((shaftKw, i) => {
      const point = taken(shaftKw);
      kvar[i] = point.kvar;
      inputKw[i] = point.inputKw;
    });
    limited.fill(0);
    return into;
  }
  const from = loads[0]!;
  const to = loads[loads.length - 1]!;
  requireRange(from >= 0 && Number.isFinite(to), 'shaftKw', 'finite and >= 0', from);
  if (to / model.baseKva > held.greatest) taken(to);
  const sample = (shaftKw: number) => {
    const point = taken(shaftKw);
    return { a: point.kvar, b: point.inputKw - shaftKw };
  };
  const table = cubicTable(sample, from, to, TABLE_TOLERANCE * model.baseKva);
  table.read(loads, { a: kvar, b: inputKw, regime: limited });
  for (let i = 0; i < loads.length; i++) inputKw[i]! += loads[i]!;
  return into;
}
