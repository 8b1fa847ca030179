import { copperResistanceOhm } from './copper';
import type { SynchronousMotor } from './motor';

/** Temperature that `fieldResistanceOhm` is taken to hold at when the motor's data name none: common practice for class 130 (B). [degC] */
export const DEFAULT_FIELD_HOT_C = 95;

/**
 * Resistance of the field winding at a temperature.
 *
 * @param motor  Motor data: `fieldResistanceOhm` holds at `fieldHotC`.
 * @param fieldC  Temperature of the winding. [degC], > -234.5
 * @returns [ohm]
 * @throws {RangeError} naming the argument out of range
 */
export function fieldResistanceAtOhm(motor: SynchronousMotor, fieldC: number): number {
  const fromC = motor.fieldHotC ?? DEFAULT_FIELD_HOT_C;
  return copperResistanceOhm({ ohm: motor.fieldResistanceOhm, fromC, toC: fieldC });
}
