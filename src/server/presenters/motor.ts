import {
  assumedSensitivity,
  capability,
  capabilityOverBand,
  DEFAULT_PULL_OUT_MARGIN,
  operatingPoint,
  panelCurrentA,
  ratedCurrentA,
  ratedKva,
  type AssumedSwing,
  type Capability,
  type CompletedMotor,
  type LimitsBeside,
  type SynchronousMotor,
} from '../../core/machine';
import { wordNumber } from '../../core/units';
import type { AssumedValue, MotorInput, MotorView, PanelView, PlateNote } from '../../schemas/motor';
import type { LoadSource } from '../../schemas/shaft-load';
import type { Motor } from '../models/Motor';

/** What a motor's row holds, as the form that wrote it: today's field of a brushless machine as its panel shows it. */
export function storedMotor(
  motor: Motor,
  machine: SynchronousMotor | null,
): Omit<MotorInput, 'meterId'> & {
  meterId: number;
  version: number;
} {
  const atPanel = machine?.exciterField !== undefined;
  return {
    name: motor.name,
    drives: motor.drives ?? undefined,
    meterId: motor.meterId,
    plate: motor.plate,
    calendar: motor.calendar,
    fieldTodayA: atPanel ? readingA(machine, motor.fieldTodayA) : motor.fieldTodayA,
    fieldReadAt: atPanel ? 'panel' : 'field',
    version: motor.version,
  };
}

/** A panel's reading, to the microampere: what was typed comes back as it was typed. */
const readingA = (machine: SynchronousMotor, fieldA: number) => Number(panelCurrentA(machine, fieldA).toFixed(6));

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
      kvarMost: kvarDelivered,
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
export function limitsOf(machine: SynchronousMotor, beside: LimitsBeside = { fieldLimitBy: 'field' }) {
  const reserve = machine.limits?.reserve ?? 0;
  const fieldA = machine.limits?.fieldCurrentA ?? machine.ratedFieldCurrentA;
  const armatureA = machine.limits?.armatureCurrentA ?? ratedCurrentA(machine);
  return {
    fieldA: fieldA * (1 - reserve),
    fieldBy: beside.fieldLimitBy,
    armatureA: armatureA * (1 - reserve),
    fieldBeforeReserveA: fieldA,
    armatureBeforeReserveA: armatureA,
    pullOutMargin: machine.limits?.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN,
    reservePercent: reserve * 100,
    leastFieldA: beside.leastFieldA,
    voltageBandPu: beside.voltageBandPu,
  };
}

/** What the panel of a brushless machine shows; nothing where the panel shows the field itself. */
function presentPanel(machine: SynchronousMotor, fieldTodayA: number, limitA: number): PanelView | undefined {
  if (!machine.exciterField) return undefined;
  const { ratedA } = machine.exciterField;
  return { todayA: readingA(machine, fieldTodayA), ratedA, limitA: panelCurrentA(machine, limitA) };
}

/** A motor with its present state and what it may give at its usual load. */
export function presentMotor(
  row: Motor,
  completed: CompletedMotor & { motor: SynchronousMotor },
  load: {
    source: LoadSource;
    usualShaftKw: number;
    hoursRunning: number;
    hours: { shaftKw: number; hours: number }[];
  },
): MotorView {
  const machine = completed.motor;
  const { usualShaftKw: shaftKw, hoursRunning, hours } = load;
  const today = operatingPoint(machine, { shaftKw, fieldCurrentA: row.fieldTodayA });
  const most = mostOf(machine, shaftKw, completed.voltageBandPu);
  const { version, fieldReadAt: _readAt, ...stored } = storedMotor(row, machine);
  const limits = limitsOf(machine, completed);
  return {
    ...stored,
    id: row.id,
    version,
    drives: row.drives,
    fieldTodayA: row.fieldTodayA,
    panel: presentPanel(machine, row.fieldTodayA, limits.fieldA),
    machine,
    assumed: presentAssumed(row, completed, shaftKw),
    notes: [
      ...completed.warnings.map(({ field, message, remedy }): PlateNote => ({
        field,
        message: `${message} ${remedy}`,
        severity: 'warning',
      })),
      ...notesOfToday(row.fieldTodayA, limits),
    ],
    ratedKva: ratedKva(machine),
    ratedCurrentA: ratedCurrentA(machine),
    speedRpm: (120 * machine.frequencyHz) / machine.poles,
    loadSource: load.source,
    usualShaftKw: shaftKw,
    usualLoadPercent: (100 * shaftKw) / machine.ratedOutputKw,
    hoursRunning,
    loadHours: hours,
    kvarToday: -today.kvar,
    pullOutToday: today.pullOutRatio,
    armatureTodayA: today.lineCurrentA,
    capability: most,
    band: presentBand(machine, shaftKw, completed.voltageBandPu),
    limits,
    wattsPerKvar: wattsPerKvar(machine, shaftKw, today, most.fieldCurrentA),
  };
}

/** The most a motor may deliver: at rated voltage, or what both ends of its voltage band admit. */
function mostOf(machine: SynchronousMotor, shaftKw: number, voltageBandPu: LimitsBeside['voltageBandPu']): Capability {
  if (!voltageBandPu) return capability(machine, { shaftKw });
  const { kvarDelivered, fieldCurrentA, binding } = capabilityOverBand(machine, { shaftKw, voltageBandPu });
  return { kvarDelivered, fieldCurrentA, binding };
}

/** The most at both ends of a voltage band. */
function presentBand(
  machine: SynchronousMotor,
  shaftKw: number,
  band: LimitsBeside['voltageBandPu'],
): MotorView['band'] {
  if (!band) return null;
  const at = (voltagePu: number) => ({ voltagePu, ...capability(machine, { shaftKw, voltagePu }) });
  return { low: at(band.low), high: at(band.high) };
}

/** What today's setting breaks that no plan may break. */
function notesOfToday(fieldTodayA: number, { leastFieldA }: { leastFieldA?: number }): PlateNote[] {
  if (leastFieldA === undefined || fieldTodayA >= leastFieldA) return [];
  const short = wordNumber(leastFieldA - fieldTodayA, 0.1);
  const message = `The field of today lies ${short} A below the least field that was set. Read the ammeter again, or correct the least field.`;
  return [{ field: 'fieldTodayA', message, severity: 'warning' }];
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
