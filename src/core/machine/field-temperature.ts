import { requireRange } from './errors';
import type { SynchronousMotor } from './motor';

/** Temperature below zero at which copper's resistance, prolonged in a straight line, would vanish. [degC] */
export const COPPER_ZERO_C = 234.5;

/** Temperature that `fieldResistanceOhm` is taken to hold at when the motor's data name none: common practice for class 130 (B). [degC] */
export const DEFAULT_FIELD_HOT_C = 95;

/**
 * Resistance of the field winding at a temperature.
 *
 *     R2/R1 = (k + T2)/(k + T1), k = 234.5 for copper           [I115]
 *
 * @param motor  Motor data: `fieldResistanceOhm` holds at `fieldHotC`.
 * @param fieldC  Temperature of the winding. [degC], > -234.5
 * @returns [ohm]
 * @throws {RangeError} naming the argument out of range
 * @source [I115], copper constant from memory.
 */
export function fieldResistanceAtOhm(motor: SynchronousMotor, fieldC: number): number {
  requireRange(fieldC > -COPPER_ZERO_C && Number.isFinite(fieldC), 'fieldC', `> -${COPPER_ZERO_C}`, fieldC);
  const hotC = motor.fieldHotC ?? DEFAULT_FIELD_HOT_C;
  return (motor.fieldResistanceOhm * (COPPER_ZERO_C + fieldC)) / (COPPER_ZERO_C + hotC);
}
