import { capability } from './capability';
import type { SynchronousMotor } from './motor';
import { lossSplitKw } from './motor';
import type { AssumedValue } from './plate';

/** How far the deliverable kvar moves when one assumed value moves over its typical range. */
export interface AssumedSwing {
  field: string;
  /** Deliverable kvar with the value at the low and the high end; null where nothing is admissible. [kvar] */
  kvarAtLow: number | null;
  kvarAtHigh: number | null;
  /** Difference of the two, absolute; null with either. [kvar] */
  swingKvar: number | null;
}

/**
 * Moves each assumed value over its range, the others kept, and finds the capability at each end.
 *
 * @param motor  The motor as completed.
 * @param assumed  What was assumed, from `completeNameplate`.
 * @param at  Shaft load [kW] and voltage [pu].
 * @returns kvar deliverable as completed, and one row per assumed value, the widest swing first.
 */
export function assumedSensitivity(
  motor: SynchronousMotor,
  assumed: AssumedValue[],
  at: { shaftKw: number; voltagePu?: number },
): { kvarDelivered: number | null; swings: AssumedSwing[] } {
  const kvarWith = (field: string, value: number) => {
    try {
      return capability(withAssumed(motor, field, value), at).kvarDelivered;
    } catch (error) {
      if (error instanceof RangeError) return null;
      throw error;
    }
  };
  const swings = assumed.map(({ field, low, high }) => {
    const kvarAtLow = kvarWith(field, low);
    const kvarAtHigh = kvarWith(field, high);
    const swingKvar = kvarAtLow === null || kvarAtHigh === null ? null : Math.abs(kvarAtHigh - kvarAtLow);
    return { field, kvarAtLow, kvarAtHigh, swingKvar };
  });
  swings.sort((a, b) => (b.swingKvar ?? Infinity) - (a.swingKvar ?? Infinity));
  return { kvarDelivered: capability(motor, at).kvarDelivered, swings };
}

/**
 * The motor with one assumed value replaced; what hangs on it by a fixed ratio moves along.
 *
 * @param field  Path in `SynchronousMotor`, as in `AssumedValue`.
 */
export function withAssumed(motor: SynchronousMotor, field: string, value: number): SynchronousMotor {
  if (field.startsWith('lossSplit.')) {
    return { ...motor, lossSplit: { ...lossSplitKw(motor), [field.slice('lossSplit.'.length)]: value } };
  }
  const changed = { ...motor, [field]: value } as SynchronousMotor;
  if (field === 'xdPu') changed.xqPu = (motor.xqPu / motor.xdPu) * value;
  if (field === 'xqPu') changed.xqPu = Math.min(value, motor.xdPu);
  return field === 'ratedFieldCurrentA' ? rescaledField(changed, value / motor.ratedFieldCurrentA) : changed;
}

/** Amperes nobody read are a scale: the field's power and the place of its limit stay what they were. */
function rescaledField(motor: SynchronousMotor, scale: number): SynchronousMotor {
  const limitA = motor.limits?.fieldCurrentA;
  return {
    ...motor,
    fieldResistanceOhm: motor.fieldResistanceOhm / scale ** 2,
    ...(limitA !== undefined && { limits: { ...motor.limits, fieldCurrentA: limitA * scale } }),
  };
}
