import { emfFor } from './kernel';
import { curveCurrentA, compileCurve } from './saturation';
import type { SynchronousMotor } from './motor';

/**
 * Field current that holds rated voltage on open circuit. [A]
 *
 * From the open-circuit curve where there is one; else proportional to the emf through the rated point.
 */
export function noLoadFieldCurrentA(motor: SynchronousMotor): number {
  if (motor.openCircuitCurve) return curveCurrentA(compileCurve(motor.openCircuitCurve, motor.xlPu), 1);
  const sine = Math.sqrt(Math.max(0, 1 - motor.ratedPowerFactor ** 2));
  const z = { ra: motor.raPu, xd: motor.xdPu, xq: motor.xqPu };
  return motor.ratedFieldCurrentA / emfFor(1, motor.ratedPowerFactor, -sine, z).e;
}

/** Straight line from field to panel amperes: panel = offset + slope x field. Identity without an exciter's field. */
function panelLine(motor: SynchronousMotor): { offsetA: number; slope: number } {
  const exciter = motor.exciterField;
  if (!exciter) return { offsetA: 0, slope: 1 };
  if (exciter.noLoadA === undefined) return { offsetA: 0, slope: exciter.ratedA / motor.ratedFieldCurrentA };
  const noLoadA = noLoadFieldCurrentA(motor);
  const slope = (exciter.ratedA - exciter.noLoadA) / (motor.ratedFieldCurrentA - noLoadA);
  return { offsetA: exciter.ratedA - slope * motor.ratedFieldCurrentA, slope };
}

/**
 * What the panel's field ammeter shows at a field current: the exciter's field for a brushless machine.
 *
 * Linear between no load at rated voltage and rated field; through the origin when no-load amperes are not known.
 *
 * @param motor  Motor data.
 * @param fieldCurrentA  Current of the machine's own field. [A], >= 0
 * @returns Panel reading. [A]
 */
export function panelCurrentA(motor: SynchronousMotor, fieldCurrentA: number): number {
  const { offsetA, slope } = panelLine(motor);
  return offsetA + slope * fieldCurrentA;
}

/** Field current of the machine at a panel reading: the inverse of `panelCurrentA`. [A] */
export function fieldCurrentAtPanelA(motor: SynchronousMotor, panelA: number): number {
  const { offsetA, slope } = panelLine(motor);
  return (panelA - offsetA) / slope;
}
