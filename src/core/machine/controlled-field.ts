import { requireRange } from './errors';
import type { OwnFieldControl, PowerFactorControl, KvarControl } from './field-control';
import { fieldResistanceAtOhm } from './field-temperature';
import { fixField } from './fixed-field';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad, describeState } from './operating-point';
import type { OperatingPoint } from './operating-point';
import { checkLeastField, heldRangeStates } from './kvar-range';
import type { RangeLimit, RangeStates } from './kvar-range';
import { kvarRatio, reactiveSupply } from './kvar-supply';
import { newTaken } from './taken-many';
import type { TakenMany } from './taken-many';
import { brentRoot } from './roots';
import { inputPu, solveAtKvar } from './solve';
import type { MachineState } from './solve';

/** A motor under a field control at one voltage. Load view. */
export interface ControlledField {
  /**
   * What the motor takes at each of many loads, within 1e-6 of rated kVA, and the limit a regulator runs at.
   *
   * @param shaftKw  Loads, ascending. [kW], each >= 0
   * @param into  Arrays to write in; new ones when absent.
   * @throws {PullOutError} when the highest load exceeds what the held field, or a regulator's field limit, can hold
   */
  takenAt: (shaftKw: Float64Array, into?: TakenMany) => TakenMany;
  /** The full operating point at a load; `limited`: the limit a regulator runs at. @throws {PullOutError} */
  point: (shaftKw: number) => OperatingPoint & { limited: RangeLimit | null };
}

/**
 * Prepares a motor under a control for many loads.
 *
 * Held amperes and volts take no notice of limits: `beyond` of a point names those it breaks. Regulators are kept within
 * `reactiveRange`; where nothing is admissible they run where the over-excited limiters leave the motor.
 *
 * @param motor  Motor data with its limits.
 * @param control  What is held.
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @param at.leastFieldA  Least field current a regulator allows, 0 when absent. [A]
 * @throws {RangeError} naming the argument out of range
 */
export function controlField(
  motor: SynchronousMotor,
  control: OwnFieldControl,
  at: { voltagePu?: number; leastFieldA?: number } = {},
): ControlledField {
  if (control.holds === 'field-current' || control.holds === 'field-voltage') {
    const fieldCurrentA = heldFieldA(motor, control);
    const fixed = fixField(motor, { fieldCurrentA, voltagePu: at.voltagePu });
    return {
      takenAt: fixed.takenAt,
      point: (shaftKw) => ({ ...fixed.point(shaftKw), limited: null }),
    };
  }
  return regulated(motor, control, at);
}

/** Field current that held amperes or volts come to. [A] @throws {RangeError} naming the argument out of range */
export function heldFieldA(
  motor: SynchronousMotor,
  control: Extract<OwnFieldControl, { holds: 'field-current' | 'field-voltage' }>,
): number {
  if (control.holds === 'field-current') return control.fieldCurrentA;
  const { fieldVoltageV, fieldC } = control;
  requireRange(fieldVoltageV >= 0 && Number.isFinite(fieldVoltageV), 'fieldVoltageV', '>= 0', fieldVoltageV);
  const resistanceOhm = fieldC === undefined ? motor.fieldResistanceOhm : fieldResistanceAtOhm(motor, fieldC);
  requireRange(resistanceOhm > 0, 'fieldResistanceOhm', '> 0 where a field voltage is held', resistanceOhm);
  return fieldVoltageV / resistanceOhm;
}

function regulated(
  motor: SynchronousMotor,
  control: PowerFactorControl | KvarControl,
  at: { voltagePu?: number; leastFieldA?: number },
): ControlledField {
  const model = compileMotor(motor);
  const v = checkLoad({ shaftKw: 0, voltagePu: at.voltagePu });
  const leastFieldA = checkLeastField(at.leastFieldA);
  if (control.holds === 'power-factor') kvarRatio(control);
  else requireRange(Number.isFinite(control.kvarDelivered), 'kvarDelivered', 'finite', control.kvarDelivered);
  const takenAt = (loads: Float64Array, into = newTaken(loads.length)) => {
    reactiveSupply(motor, { loads, ...at }).hold(control, into);
    return into;
  };
  const point = (shaftKw: number) => {
    checkLoad({ shaftKw });
    const shaft = shaftKw / model.baseKva;
    const range = heldRangeStates(model, shaft, v, leastFieldA);
    const { state, limited } = withinRange(model, shaft, v, control, range);
    return { ...describeState(model, state, shaftKw), limited };
  };
  return { takenAt, point };
}

/** What a regulator holds is met within this. [pu of rated kVA] */
const MET = 1e-12;

/** State a regulator holds, or the end of the range it is stopped at. */
function withinRange(
  model: MotorModel,
  shaft: number,
  v: number,
  control: PowerFactorControl | KvarControl,
  range: RangeStates,
): { state: MachineState; limited: RangeLimit | null } {
  const wanted =
    control.holds === 'kvar'
      ? () => -control.kvarDelivered / model.baseKva
      : (s: MachineState) => kvarRatio(control) * inputPu(model, s);
  const at = (q: number) => solveAtKvar(model, shaft, q, v);
  const shortAt = (q: number) => {
    const s = at(q);
    return s.q - wanted(s);
  };
  // Asked of the solution the root is sought on: an end that is met to rounding is an end, not a bracket.
  const shortAtMost = shortAt(range.most.q);
  if (shortAtMost >= 0) return { state: range.most, limited: shortAtMost > MET ? range.mostBinding : null };
  const shortAtLeast = shortAt(range.least.q);
  if (shortAtLeast <= 0) return { state: range.least, limited: shortAtLeast < -MET ? range.leastBinding : null };
  const q = brentRoot(shortAt, range.most.q, range.least.q, 'reactive power of a regulator');
  return { state: at(q), limited: null };
}
