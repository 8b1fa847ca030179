import type { FieldControl } from '../core/machine';
import type { BankInput, ReplacementInput } from './plan-input';

/** What one motor is set to: a constant field current for the year, or controls, one for all spans or one for each. */
export interface MotorSetting {
  motorId: number;
  /** Constant for the year; absent where `controls` say it. [A] */
  fieldA?: number;
  controls?: FieldControl[];
}

/** The controls of a setting, whichever way it was said. */
export function controlsOf({ fieldA, controls }: Pick<MotorSetting, 'fieldA' | 'controls'>): FieldControl[] {
  return controls ?? [{ holds: 'field-current', fieldCurrentA: fieldA ?? NaN }];
}

/** The entry of each control that may go by span. */
export const controlValueKey = {
  'field-current': 'fieldCurrentA',
  'field-voltage': 'fieldVoltageV',
  'power-factor': 'powerFactor',
  kvar: 'kvarDelivered',
  voltage: 'setPu',
  'plant-power-factor': 'powerFactor',
} as const satisfies Record<FieldControl['holds'], string>;

/** The constant field current of the year; null where a setting is no such thing. */
export function constantFieldA(setting: Pick<MotorSetting, 'fieldA' | 'controls'>): number | null {
  const [first, ...rest] = controlsOf(setting);
  return first?.holds === 'field-current' && rest.length === 0 ? first.fieldCurrentA : null;
}

/** One action of a stored plan. What it costs once is in minor units. */
export type PlanAction =
  | ({ kind: 'field'; equipmentCostMinor?: number } & MotorSetting)
  | ({ kind: 'bank'; costMinor: number } & Omit<BankInput, 'cost'>)
  | ({ kind: 'replacement'; costMinor: number } & Omit<ReplacementInput, 'cost'>);
