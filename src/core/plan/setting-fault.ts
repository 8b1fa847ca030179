import {
  capability,
  heldFieldA,
  leastField,
  NotConvergedError,
  operatingPoint,
  PullOutError,
  reactiveRange,
  type FieldControl,
  type SynchronousMotor,
} from '../machine';
import { wordNumber } from '../units';

/** What a setting is checked against. */
export interface LimitedMotor {
  name: string;
  machine: SynchronousMotor;
  limits: {
    fieldA: number;
    armatureA: number;
    pullOutMargin: number;
    reservePercent: number;
    /** Least field current allowed besides the pull-out margin. [A] */
    leastFieldA?: number;
    /** Terminal voltages at which every limit must hold; rated alone when absent. [pu] */
    voltageBandPu?: { low: number; high: number };
  };
}

const amperes = (value: number) => `${wordNumber(value, 0.1).replace(/\.0$/, '')} A`;

const voltagesOf = ({ limits: { voltageBandPu } }: LimitedMotor) =>
  voltageBandPu ? [voltageBandPu.low, voltageBandPu.high] : [1];

/** "At its load of 1,119 kW M-1", with the voltage where it is not rated. */
function atWords({ name }: LimitedMotor, shaftKw: number, voltagePu: number): string {
  const voltage =
    voltagePu === 1 ? '' : ` and ${wordNumber(100 * voltagePu, 0.1).replace(/\.0$/, '')} % of rated voltage`;
  return `At its load of ${wordNumber(shaftKw, 1)} kW${voltage} ${name}`;
}

/**
 * Why a motor may not be set to hold something, naming motor, limit and load; null where it may.
 *
 * Held amperes and volts must keep every limit at every load and voltage. A regulator is kept within the limits by its limiters;
 * it is refused only where no excitation at all is admissible.
 *
 * @param loads  Every shaft load the motor runs at while the setting holds. [kW]
 * @throws {RangeError} naming the argument out of range
 */
export function settingFault(motor: LimitedMotor, control: FieldControl, loads: readonly number[]): string | null {
  if (control.holds !== 'field-current' && control.holds !== 'field-voltage') return rangeFault(motor, loads);
  const fieldA = heldFieldA(motor.machine, control);
  const set =
    control.holds === 'field-current'
      ? amperes(fieldA)
      : `${wordNumber(control.fieldVoltageV, 0.1).replace(/\.0$/, '')} V make ${amperes(fieldA)} of field, which`;
  return fieldLimitFault(motor, fieldA, set) ?? loadFault(motor, fieldA, loads);
}

function fieldLimitFault({ name, limits }: LimitedMotor, fieldA: number, set: string): string | null {
  const { leastFieldA = 0 } = limits;
  if (fieldA > limits.fieldA * (1 + 1e-9)) {
    const reserve = limits.reservePercent > 0 ? `, ${wordNumber(limits.reservePercent, 1)} % kept in reserve` : '';
    return (
      `${set} is ${amperes(fieldA - limits.fieldA)} beyond the field limit of ${name}, ` +
      `${amperes(limits.fieldA)}${reserve}. Set it lower.`
    );
  }
  if (fieldA < leastFieldA * (1 - 1e-9))
    return `${set} is ${amperes(leastFieldA - fieldA)} below the least field of ${name}, ${amperes(leastFieldA)}. Set it higher.`;
  return null;
}

function loadFault(motor: LimitedMotor, fieldA: number, loads: readonly number[]): string | null {
  const { machine, limits } = motor;
  for (const shaftKw of loads) {
    for (const voltagePu of voltagesOf(motor)) {
      const at = atWords(motor, shaftKw, voltagePu);
      try {
        const point = operatingPoint(machine, { shaftKw, voltagePu, fieldCurrentA: fieldA });
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
  }
  return null;
}

function rangeFault(motor: LimitedMotor, loads: readonly number[]): string | null {
  const { machine, limits } = motor;
  for (const shaftKw of loads) {
    for (const voltagePu of voltagesOf(motor)) {
      if (!reactiveRange(machine, { shaftKw, voltagePu, leastFieldA: limits.leastFieldA })) {
        return `${atWords(motor, shaftKw, voltagePu)} has no excitation within all its limits: no regulator can hold it there. Correct load or limits.`;
      }
    }
  }
  return null;
}

/**
 * Field currents a motor may hold at all of its loads and voltages; null where there are none.
 *
 * @param loads  Shaft loads it runs at. [kW]
 */
export function admissibleFieldA(
  motor: LimitedMotor,
  loads: readonly number[],
): { lowA: number; highA: number } | null {
  const { machine, limits } = motor;
  let [lowA, highA] = [limits.leastFieldA ?? 0, limits.fieldA];
  for (const shaftKw of loads) {
    for (const voltagePu of voltagesOf(motor)) {
      const high = capability(machine, { shaftKw, voltagePu }).fieldCurrentA;
      const low = leastField(machine, { shaftKw, voltagePu });
      if (high === null || !low) return null;
      lowA = Math.max(lowA, low.fieldCurrentA);
      highA = Math.min(highA, high);
    }
  }
  return lowA <= highA ? { lowA, highA } : null;
}
