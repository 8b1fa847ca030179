import {
  assumedSensitivity,
  capability,
  DEFAULT_PULL_OUT_MARGIN,
  operatingPoint,
  panelCurrentA,
  ratedCurrentA,
  ratedKva,
  type AssumedSwing,
  type CompletedMotor,
  type SynchronousMotor,
} from '../../core/machine';
import type { AssumedValue, MotorInput, MotorView, PlateNote } from '../../schemas/motor';
import type { Motor } from '../models/Motor';

/** What a motor's row holds, as the form that wrote it. */
export function storedMotor(
  motor: Motor,
): Omit<MotorInput, 'fieldReadAt' | 'meterId'> & { meterId: number; version: number } {
  return {
    name: motor.name,
    drives: motor.drives ?? undefined,
    meterId: motor.meterId,
    plate: motor.plate,
    calendar: motor.calendar,
    fieldTodayA: motor.fieldTodayA,
    version: motor.version,
  };
}

const names: Record<string, [label: string, unit: string]> = {
  ratedEfficiency: ['Efficiency', ''],
  ratedPowerFactor: ['Power factor', ''],
  raPu: ['Ra', 'pu'],
  xdPu: ['Xd', 'pu'],
  xqPu: ['Xq', 'pu'],
  xlPu: ['Leakage reactance', 'pu'],
  ratedFieldCurrentA: ['Rated field current', 'A'],
  fieldResistanceOhm: ['Field resistance', 'ohm'],
  exciterEfficiency: ['Exciter efficiency', ''],
  'lossSplit.coreKw': ['Core loss', 'kW'],
  'lossSplit.frictionWindageKw': ['Friction and windage', 'kW'],
  'lossSplit.strayKw': ['Stray loss', 'kW'],
};

/** Assumed values of a motor with what their range does to the kvar in hand at a load. */
export function presentAssumed(motor: Motor, completed: CompletedMotor, shaftKw: number): AssumedValue[] {
  if (!completed.motor || completed.assumed.length === 0) return [];
  const { kvarDelivered, swings } = assumedSensitivity(completed.motor, completed.assumed, { shaftKw });
  return completed.assumed.map((one) => {
    const [label, unit] = names[one.field] ?? [one.field, ''];
    const swing = swings.find((other) => other.field === one.field);
    return {
      motorId: motor.id,
      motorName: motor.name,
      field: one.field,
      label,
      value: one.value,
      unit,
      range: [one.low, one.high],
      kvarEffect: effectOf(kvarDelivered, swing),
      why: one.why,
    };
  });
}

function effectOf(kvarDelivered: number | null, swing: AssumedSwing | undefined): [number, number] | null {
  if (!swing || kvarDelivered === null || swing.kvarAtLow === null || swing.kvarAtHigh === null) return null;
  return [swing.kvarAtLow - kvarDelivered, swing.kvarAtHigh - kvarDelivered];
}

/** Limits of a machine before and after the reserve. */
export function limitsOf(machine: SynchronousMotor) {
  const reserve = machine.limits?.reserve ?? 0;
  const fieldA = machine.limits?.fieldCurrentA ?? machine.ratedFieldCurrentA;
  const armatureA = machine.limits?.armatureCurrentA ?? ratedCurrentA(machine);
  return {
    fieldA: fieldA * (1 - reserve),
    armatureA: armatureA * (1 - reserve),
    fieldBeforeReserveA: fieldA,
    armatureBeforeReserveA: armatureA,
    pullOutMargin: machine.limits?.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN,
    reservePercent: reserve * 100,
  };
}

/** A motor with its present state and what it may give at its usual load. */
export function presentMotor(
  row: Motor,
  completed: CompletedMotor & { motor: SynchronousMotor },
  load: { usualShaftKw: number; hoursRunning: number },
): MotorView {
  const machine = completed.motor;
  const { usualShaftKw: shaftKw, hoursRunning } = load;
  const today = operatingPoint(machine, { shaftKw, fieldCurrentA: row.fieldTodayA });
  const most = capability(machine, { shaftKw });
  const { version, ...stored } = storedMotor(row);
  return {
    ...stored,
    id: row.id,
    version,
    drives: row.drives,
    panelTodayA: machine.exciterField ? panelCurrentA(machine, row.fieldTodayA) : undefined,
    machine,
    assumed: presentAssumed(row, completed, shaftKw),
    notes: completed.warnings.map(({ field, message, remedy }): PlateNote => ({
      field,
      message: `${message} ${remedy}`,
      severity: 'warning',
    })),
    ratedKva: ratedKva(machine),
    ratedCurrentA: ratedCurrentA(machine),
    speedRpm: (120 * machine.frequencyHz) / machine.poles,
    usualShaftKw: shaftKw,
    usualLoadPercent: (100 * shaftKw) / machine.ratedOutputKw,
    hoursRunning,
    kvarToday: -today.kvar,
    pullOutToday: today.pullOutRatio,
    armatureTodayA: today.lineCurrentA,
    capability: most,
    limits: limitsOf(machine),
    wattsPerKvar: wattsPerKvar(machine, shaftKw, today, most.fieldCurrentA),
  };
}

/** Extra watts per kvar from a point to the most the motor may deliver. */
function wattsPerKvar(
  machine: SynchronousMotor,
  shaftKw: number,
  today: { inputKw: number; kvar: number },
  fieldCurrentA: number | null,
): number | null {
  if (fieldCurrentA === null) return null;
  const most = operatingPoint(machine, { shaftKw, fieldCurrentA });
  const gained = today.kvar - most.kvar;
  return gained > 1 ? (1000 * (most.inputKw - today.inputKw)) / gained : null;
}
