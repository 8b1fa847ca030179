import { requireRange } from './errors';
import type { Impedance } from './angle-power';
import { emfFor } from './kernel';
import { noLoadFieldCurrentA } from './panel';
import { compileCurve } from './saturation';
import type { SaturationCurve } from './saturation';

/** Data of a synchronous motor. Per-unit values are on the machine's own rated kVA and voltage. */
export interface SynchronousMotor {
  /** Rated shaft output. [kW], > 0 */
  ratedOutputKw: number;
  /** Rated line-to-line voltage. [V], > 0 */
  ratedVoltageV: number;
  frequencyHz: number;
  /** Even, >= 2. */
  poles: number;
  /** Rated power factor, leading at rated output. [unitless], (0, 1] */
  ratedPowerFactor: number;
  /** Efficiency at rated output and power factor, field loss included. [unitless], (0, 1] */
  ratedEfficiency: number;
  ratedFieldCurrentA: number;
  /** Field resistance, hot. [ohm], >= 0 */
  fieldResistanceOhm: number;
  /** Temperature of the field winding that `fieldResistanceOhm` holds at, 95 when absent. [degC] */
  fieldHotC?: number;
  /** [unitless], (0, 1] */
  exciterEfficiency: number;
  /** `shaft` (default): the exciter's power comes through the armature; `bus`: it is drawn beside it. */
  exciterSupply?: 'shaft' | 'bus';
  raPu: number;
  xdPu: number;
  /** At most xdPu; equal to it for a round rotor. */
  xqPu: number;
  /** Leakage reactance; needed with an open-circuit curve. */
  xlPu?: number;
  /** Open-circuit voltage against field amperes, both ascending. With it, xdPu and xqPu are unsaturated. */
  openCircuitCurve?: { fieldCurrentA: number; voltagePu: number }[];
  /** Brushless: what the panel shows (the exciter's field), at rated field and at no load and rated voltage. [A] */
  exciterField?: { ratedA: number; noLoadA?: number };
  lossSplit?: { frictionWindageKw: number; coreKw: number; strayKw: number };
  /** Defaults: rated field and armature amperes, pull-out margin 1.3 (ratio), reserve 0 (share of both amperes). */
  limits?: { fieldCurrentA?: number; armatureCurrentA?: number; pullOutMargin?: number; reserve?: number };
}

/** Share of core, friction and windage, and stray loss in what remains of the losses when no split is known. Common practice. */
export const ASSUMED_SPLIT = { core: 1.0, frictionWindage: 0.7, stray: 0.5 } as const;

/** Least admissible ratio of pull-out to load when the motor's data give none. Common practice. */
export const DEFAULT_PULL_OUT_MARGIN = 1.3;

/** A limit is broken above this multiple of it. */
export const LIMIT_TOLERANCE = 1 + 1e-9;

/** A motor's data reduced to per unit on its own rating. Powers per unit of rated kVA. */
export interface MotorModel {
  motor: SynchronousMotor;
  baseKva: number;
  baseCurrentA: number;
  z: Impedance;
  /** Field amperes per per-unit emf where no curve is given. */
  fieldPerEmf: number;
  curve: SaturationCurve | null;
  strayPu: number;
  corePu: number;
  frictionWindagePu: number;
  /** Field loss per square ampere, per unit of rated kVA. */
  fieldLossPerA2: number;
  shaftFed: boolean;
  limits: { fieldCurrentA: number; armaturePu: number; pullOutMargin: number };
}

/** Rated apparent power: rated output / (rated efficiency x rated power factor). [kVA] */
export function ratedKva(
  motor: Pick<SynchronousMotor, 'ratedOutputKw' | 'ratedEfficiency' | 'ratedPowerFactor'>,
): number {
  return motor.ratedOutputKw / (motor.ratedEfficiency * motor.ratedPowerFactor);
}

/** Rated armature current, line. [A] */
export function ratedCurrentA(
  motor: Pick<SynchronousMotor, 'ratedOutputKw' | 'ratedEfficiency' | 'ratedPowerFactor' | 'ratedVoltageV'>,
): number {
  return (ratedKva(motor) * 1000) / (Math.sqrt(3) * motor.ratedVoltageV);
}

/**
 * Losses that stay of rated output x (1/efficiency - 1) after armature, field and exciter at the rated point. [kW]
 * Negative: the data contradict one another.
 */
export function remainingLossKw(motor: SynchronousMotor): number {
  const total = motor.ratedOutputKw * (1 / motor.ratedEfficiency - 1);
  const fieldKw = (motor.ratedFieldCurrentA ** 2 * motor.fieldResistanceOhm) / 1000;
  return total - motor.raPu * ratedKva(motor) - fieldKw / motor.exciterEfficiency;
}

/**
 * Checks a motor and reduces it to per unit.
 *
 * @throws {RangeError} naming the field out of range, or that the losses exceed what the efficiency leaves
 */
export function compileMotor(motor: SynchronousMotor): MotorModel {
  checkMotor(motor);
  const baseKva = ratedKva(motor);
  const baseCurrentA = ratedCurrentA(motor);
  const z = { ra: motor.raPu, xd: motor.xdPu, xq: motor.xqPu };
  const sine = Math.sqrt(Math.max(0, 1 - motor.ratedPowerFactor ** 2));
  const calibrationEmf = emfFor(1, motor.ratedPowerFactor, -sine, z).e;
  const split = lossSplitKw(motor);
  const reserve = motor.limits?.reserve ?? 0;
  return {
    motor,
    baseKva,
    baseCurrentA,
    z,
    fieldPerEmf: motor.ratedFieldCurrentA / calibrationEmf,
    curve: motor.openCircuitCurve ? compileCurve(motor.openCircuitCurve, motor.xlPu) : null,
    strayPu: split.strayKw / baseKva,
    corePu: split.coreKw / baseKva,
    frictionWindagePu: split.frictionWindageKw / baseKva,
    fieldLossPerA2: motor.fieldResistanceOhm / 1000 / baseKva,
    shaftFed: motor.exciterSupply !== 'bus',
    limits: {
      fieldCurrentA: (motor.limits?.fieldCurrentA ?? motor.ratedFieldCurrentA) * (1 - reserve),
      armaturePu: ((motor.limits?.armatureCurrentA ?? baseCurrentA) / baseCurrentA) * (1 - reserve),
      pullOutMargin: motor.limits?.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN,
    },
  };
}

/** The losses that do not follow from resistances: as given, or the remainder split by common shares. [kW] */
export function lossSplitKw(motor: SynchronousMotor): { frictionWindageKw: number; coreKw: number; strayKw: number } {
  if (motor.lossSplit) return motor.lossSplit;
  const rest = remainingLossKw(motor);
  if (rest < -1e-9 * motor.ratedOutputKw) {
    throw new RangeError(
      `ratedEfficiency must leave room for armature, field and exciter loss, got ${motor.ratedEfficiency}: ` +
        `these exceed the total losses by ${-rest} kW. Lower the efficiency, raPu or the field's resistance.`,
    );
  }
  const share = Math.max(0, rest) / (ASSUMED_SPLIT.core + ASSUMED_SPLIT.frictionWindage + ASSUMED_SPLIT.stray);
  return {
    coreKw: share * ASSUMED_SPLIT.core,
    frictionWindageKw: share * ASSUMED_SPLIT.frictionWindage,
    strayKw: share * ASSUMED_SPLIT.stray,
  };
}

function checkMotor(motor: SynchronousMotor): void {
  for (const name of ['ratedOutputKw', 'ratedVoltageV', 'frequencyHz', 'ratedFieldCurrentA', 'xdPu', 'xqPu'] as const) {
    requireRange(motor[name] > 0 && Number.isFinite(motor[name]), name, '> 0', motor[name]);
  }
  for (const name of ['ratedPowerFactor', 'ratedEfficiency', 'exciterEfficiency'] as const) {
    requireRange(motor[name] > 0 && motor[name] <= 1, name, 'in (0, 1]', motor[name]);
  }
  requireRange(Number.isInteger(motor.poles / 2) && motor.poles >= 2, 'poles', 'even and >= 2', motor.poles);
  requireNotNegative({ fieldResistanceOhm: motor.fieldResistanceOhm, raPu: motor.raPu });
  requireRange(motor.xqPu <= motor.xdPu, 'xqPu', 'at most xdPu', motor.xqPu);
  if (motor.xlPu !== undefined) requireNotNegative({ xlPu: motor.xlPu });
  if (motor.fieldHotC !== undefined)
    requireRange(motor.fieldHotC > 0 && Number.isFinite(motor.fieldHotC), 'fieldHotC', '> 0', motor.fieldHotC);
  if (motor.lossSplit) requireNotNegative({ ...motor.lossSplit });
  const limits = motor.limits ?? {};
  for (const [name, limit] of Object.entries({
    fieldCurrentA: limits.fieldCurrentA,
    armatureCurrentA: limits.armatureCurrentA,
  })) {
    requireRange(limit === undefined || (limit > 0 && Number.isFinite(limit)), `limits.${name}`, '> 0', limit);
  }
  const margin = limits.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN;
  requireRange(margin > 0 && Number.isFinite(margin), 'limits.pullOutMargin', '> 0', margin);
  const reserve = limits.reserve ?? 0;
  requireRange(reserve >= 0 && reserve < 1, 'limits.reserve', 'in [0, 1)', reserve);
  checkExciterField(motor);
}

function checkExciterField(motor: SynchronousMotor): void {
  const exciter = motor.exciterField;
  if (!exciter) return;
  requireRange(exciter.ratedA > 0 && Number.isFinite(exciter.ratedA), 'exciterField.ratedA', '> 0', exciter.ratedA);
  const noLoadA = exciter.noLoadA ?? 0;
  requireRange(noLoadA >= 0 && noLoadA < exciter.ratedA, 'exciterField.noLoadA', 'in [0, ratedA)', noLoadA);
  if (exciter.noLoadA === undefined) return;
  const fieldA = noLoadFieldCurrentA(motor);
  const range = `above the ${fieldA} A that hold rated voltage at no load, as exciterField.noLoadA is given`;
  requireRange(motor.ratedFieldCurrentA > fieldA, 'ratedFieldCurrentA', range, motor.ratedFieldCurrentA);
}

function requireNotNegative(fields: Record<string, number>): void {
  for (const [name, amount] of Object.entries(fields)) {
    requireRange(amount >= 0 && Number.isFinite(amount), name, '>= 0', amount);
  }
}
