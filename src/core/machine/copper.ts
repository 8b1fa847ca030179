import { requireRange } from './errors';

/** Temperature below zero at which copper's resistance, prolonged in a straight line, would vanish. [degC], from memory */
export const COPPER_ZERO_C = 234.5;

/**
 * Resistance of a copper winding at another temperature.
 *
 *     R2 / R1 = (234.5 + T2) / (234.5 + T1)                  [I115]
 *
 * @param at.ohm  Resistance R1 as measured. [ohm], >= 0
 * @param at.fromC  Temperature T1 it was measured at. [degC], > -234.5
 * @param at.toC  Temperature T2 wanted. [degC], > -234.5
 * @returns Resistance R2. [ohm]
 * @throws {RangeError} naming the argument out of range
 * @example copperResistanceOhm({ ohm: 1, fromC: 25, toC: 75 }) // => 309.5 / 259.5 = 1.1927
 */
export function copperResistanceOhm({ ohm, fromC, toC }: { ohm: number; fromC: number; toC: number }): number {
  requireRange(ohm >= 0 && Number.isFinite(ohm), 'ohm', '>= 0', ohm);
  requireRange(fromC > -COPPER_ZERO_C, 'fromC', `> -${COPPER_ZERO_C}`, fromC);
  requireRange(toC > -COPPER_ZERO_C, 'toC', `> -${COPPER_ZERO_C}`, toC);
  return (ohm * (COPPER_ZERO_C + toC)) / (COPPER_ZERO_C + fromC);
}

/**
 * Temperature at which a copper winding has a resistance, from one known pair: the inverse of `copperResistanceOhm`. [degC]
 *
 * @param at.ohm  Resistance at the temperature wanted. [ohm]
 * @param at.knownOhm, at.knownC  Resistance and temperature measured together.
 */
export function copperTemperatureC({
  ohm,
  knownOhm,
  knownC,
}: {
  ohm: number;
  knownOhm: number;
  knownC: number;
}): number {
  return (ohm / knownOhm) * (COPPER_ZERO_C + knownC) - COPPER_ZERO_C;
}
