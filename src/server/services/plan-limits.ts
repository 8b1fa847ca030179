import { NotConvergedError, operatingPoint, PullOutError, type SynchronousMotor } from '../../core/machine';
import { wordNumber } from '../../core/units';

/** What a field current is checked against. */
export interface LimitedMotor {
  name: string;
  machine: SynchronousMotor;
  limits: { fieldA: number; armatureA: number; pullOutMargin: number; reservePercent: number };
}

const amperes = (value: number) => `${wordNumber(value, 0.1).replace(/\.0$/, '')} A`;

/**
 * Why a motor may not be set to a field current, naming motor and limit; null where it may.
 *
 * @param loads  every shaft load of its calendar. [kW]
 */
export function fieldFault(motor: LimitedMotor, fieldA: number, loads: readonly { shaftKw: number }[]): string | null {
  const { name, machine, limits } = motor;
  if (fieldA > limits.fieldA * (1 + 1e-9)) {
    const reserve = limits.reservePercent > 0 ? `, ${wordNumber(limits.reservePercent, 1)} % kept in reserve` : '';
    return (
      `${amperes(fieldA)} is ${amperes(fieldA - limits.fieldA)} beyond the field limit of ${name}, ` +
      `${amperes(limits.fieldA)}${reserve}. Set it lower.`
    );
  }
  for (const { shaftKw } of loads) {
    const at = `At its load of ${wordNumber(shaftKw, 1)} kW ${name}`;
    try {
      const point = operatingPoint(machine, { shaftKw, fieldCurrentA: fieldA });
      if (point.beyond.includes('armature')) {
        return `${at} would draw ${amperes(point.lineCurrentA)} at ${amperes(fieldA)} of field, beyond the stator limit of ${amperes(limits.armatureA)}.`;
      }
      if (point.beyond.includes('pull-out')) {
        return (
          `${at} would keep a pull-out of ${wordNumber(point.pullOutRatio, 0.01)} times the load at ${amperes(fieldA)}, ` +
          `below the ${wordNumber(limits.pullOutMargin, 0.01)} it must keep. Set it higher.`
        );
      }
    } catch (error) {
      if (!(error instanceof PullOutError || error instanceof NotConvergedError)) throw error;
      return `${at} would fall out of step at ${amperes(fieldA)} of field: the pull-out limit. Set it higher.`;
    }
  }
  return null;
}
