import type { SynchronousMotor } from './motor';
import { fieldCurrentAtPanelA, panelCurrentA } from './panel';
import type { PlateLimits, PlateRemark } from './plate';

/** Limits of a motor that stand beside those `capability` keeps. */
export interface LimitsBeside {
  /** Whether field current ends at the field's own limit or at what its exciter gives. */
  fieldLimitBy: 'field' | 'exciter';
  /** Least current of the machine's own field, besides the pull-out margin. [A] */
  leastFieldA?: number;
  /** Terminal voltages at which every limit must hold. [pu of rated] */
  voltageBandPu?: { low: number; high: number };
}

/** Limits in the machine's own amperes. */
export interface ResolvedLimits {
  limits: NonNullable<SynchronousMotor['limits']>;
  beside: LimitsBeside;
  problems: PlateRemark[];
}

/**
 * Brings the limits a person set to the machine's own field: the exciter's ratings become the lower field limit they are.
 *
 * @param motor  The motor without limits; its panel line converts exciter-field amperes.
 * @param set  The limits as set.
 */
export function resolveLimits(motor: SynchronousMotor, set: PlateLimits): ResolvedLimits {
  const { exciterFieldA, exciterOutputA, exciterOutputV, leastPanelA, voltageBandPu, ...limits } = set;
  const ownA = limits.fieldCurrentA ?? motor.ratedFieldCurrentA;
  const exciterA = Math.min(
    exciterOutputA ?? Infinity,
    exciterOutputV === undefined ? Infinity : exciterOutputV / motor.fieldResistanceOhm,
    exciterFieldA === undefined || !motor.exciterField ? Infinity : fieldCurrentAtPanelA(motor, exciterFieldA),
  );
  const byExciter = exciterA < ownA * (1 - 1e-9);
  if (byExciter && exciterA > 0) limits.fieldCurrentA = exciterA;
  const leastFieldA = leastPanelA === undefined ? undefined : Math.max(0, fieldCurrentAtPanelA(motor, leastPanelA));
  return {
    limits,
    beside: {
      fieldLimitBy: byExciter ? 'exciter' : 'field',
      ...(leastFieldA !== undefined && { leastFieldA }),
      ...(voltageBandPu && { voltageBandPu }),
    },
    problems: [
      ...checkExciterField(motor, set),
      ...checkLeastField(motor, leastFieldA, (limits.fieldCurrentA ?? ownA) * (1 - (limits.reserve ?? 0))),
      ...checkBand(voltageBandPu),
    ],
  };
}

function checkExciterField(motor: SynchronousMotor, { exciterFieldA }: PlateLimits): PlateRemark[] {
  if (exciterFieldA === undefined) return [];
  if (!motor.exciterField) {
    const message = `A limit of ${exciterFieldA} A of the exciter's field cannot be compared with the motor's field.`;
    const remedy = "Enter the exciter's field current at rated field too.";
    return [{ field: 'limits.exciterFieldA', message, remedy }];
  }
  if (fieldCurrentAtPanelA(motor, exciterFieldA) > 0) return [];
  const message = `A limit of ${exciterFieldA} A of the exciter's field leaves the motor without field.`;
  return [
    { field: 'limits.exciterFieldA', message, remedy: 'Read the limit again from the exciter or its regulator.' },
  ];
}

function checkLeastField(motor: SynchronousMotor, leastA: number | undefined, mostA: number): PlateRemark[] {
  if (leastA === undefined || leastA < mostA) return [];
  const shown = (fieldA: number) => `${panelCurrentA(motor, fieldA).toFixed(2)} A`;
  const message = `The least field of ${shown(leastA)} is not below the most, ${shown(mostA)}: no setting is left.`;
  return [
    { field: 'limits.leastPanelA', message, remedy: 'Lower the least field, or correct the limit or the reserve.' },
  ];
}

function checkBand(band: PlateLimits['voltageBandPu']): PlateRemark[] {
  if (!band || (band.low > 0 && band.low <= 1 && band.high >= 1 && band.high <= 2)) return [];
  const message = `The voltage band runs from ${band.low} to ${band.high} per unit: it must hold rated voltage, 1.`;
  return [
    { field: 'limits.voltageBandPu', message, remedy: 'Write low and high as shares of rated voltage: 0.95 and 1.05.' },
  ];
}
