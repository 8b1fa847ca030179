import {
  capabilityCurve,
  controlField,
  operatingPoint,
  PullOutError,
  reactiveRange,
  type OwnFieldControl,
} from '../../core/machine';
import type { MotorView } from '../../schemas/motor';
import type { ControlLine, FieldControlData, KvarPoint, LimitPoint } from '../charts/field-control';
import { kvarAt } from '../charts/field-control';
import { formatNumber, formatQuantity } from '../ui/format';
import type { NamedField } from './curves';
import { fieldMeter } from './field-meter';

/** A field that has stood still: the winding as cold as the room. [degC] Common practice. */
const coldC = 25;

/** Shaft loads of the picture, per cent of rated. */
export const loadPercents = Array.from({ length: 25 }, (_, index) => index * 5);

/** Kvar over the loads under a control; loads it cannot hold are left out. */
function heldOver(motor: MotorView, control: OwnFieldControl): KvarPoint[] {
  const field = controlField(motor.machine, control, { leastFieldA: motor.limits.leastFieldA });
  return loadPercents.flatMap((loadPercent) => {
    try {
      const point = field.point((loadPercent / 100) * motor.machine.ratedOutputKw);
      return { loadPercent, kvarDelivered: -point.kvar };
    } catch (error) {
      if (error instanceof PullOutError) return [];
      throw error;
    }
  });
}

/** The limits over the loads: the most as `capability`, the least by pull-out, stator and least field. */
function limitsOver({ machine, limits }: MotorView): { most: LimitPoint[]; least: LimitPoint[] } {
  const loads = loadPercents.map((percent) => (percent / 100) * machine.ratedOutputKw);
  const most = capabilityCurve(machine, { loads }).flatMap(({ kvarDelivered, binding }, index): LimitPoint[] =>
    kvarDelivered === null ? [] : [{ loadPercent: loadPercents[index]!, kvarDelivered, binding }],
  );
  const least = loads.flatMap((shaftKw, index): LimitPoint[] => {
    const range = reactiveRange(machine, { shaftKw, leastFieldA: limits.leastFieldA });
    if (!range) return [];
    return [{ loadPercent: loadPercents[index]!, kvarDelivered: range.least, binding: range.leastBinding }];
  });
  return { most, least };
}

/**
 * What a motor delivers over its load for each thing a regulator may hold, all set to agree at the usual load with the
 * field current given. Held volts are those of that current in the hot winding; cold, the same volts drive more current.
 */
export function fieldControlData(motor: MotorView, at: NamedField): FieldControlData {
  const { machine, usualShaftKw, limits } = motor;
  const meter = fieldMeter(machine);
  const isToday = at.fieldA === motor.fieldTodayA;
  return {
    motorName: motor.name,
    loadPercents,
    ...limitsOver(motor),
    fieldBy: limits.fieldBy,
    lines: linesOf(motor, at.fieldA),
    usualLoadPercent: Math.round(motor.usualLoadPercent),
    marks: (isToday
      ? [{ ...at, name: 'today', shape: 'circle' as const }]
      : [
          { name: 'today', fieldA: motor.fieldTodayA, shape: 'circle' as const },
          { ...at, name: `${at.name} ${meter.words(at.fieldA)}`, shape: 'diamond' as const },
        ]
    ).flatMap(({ name, fieldA, shape }) => {
      const kvarDelivered = deliveredAt(motor, usualShaftKw, fieldA);
      return kvarDelivered === null ? [] : [{ name, shape, kvarDelivered }];
    }),
  };
}

function deliveredAt({ machine }: MotorView, shaftKw: number, fieldCurrentA: number): number | null {
  try {
    return -operatingPoint(machine, { shaftKw, fieldCurrentA }).kvar;
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}

function linesOf(motor: MotorView, fieldCurrentA: number): ControlLine[] {
  const { machine, usualShaftKw } = motor;
  const fieldVoltageV = fieldCurrentA * machine.fieldResistanceOhm;
  const amperes = fieldMeter(machine).words(fieldCurrentA);
  const volts = formatQuantity(fieldVoltageV, 'V');
  const lines: ControlLine[] = [
    {
      name: `held ${amperes}, or ${volts} warm`,
      points: heldOver(motor, { holds: 'field-current', fieldCurrentA }),
      strong: true,
    },
  ];
  if (fieldVoltageV > 0) {
    const control = { holds: 'field-voltage', fieldVoltageV, fieldC: coldC } as const;
    lines.push({ name: `held ${volts}, cold`, points: heldOver(motor, control), dash: '2 3' });
  }
  const usual = deliveredAt(motor, usualShaftKw, fieldCurrentA);
  if (usual === null) return lines;
  const { powerFactor, leading } = operatingPoint(machine, { shaftKw: usualShaftKw, fieldCurrentA });
  const sense = powerFactor > 0.9995 ? '' : leading ? ' leading' : ' lagging';
  return [
    ...lines,
    {
      name: `held power factor ${formatNumber(powerFactor, { decimals: 2 })}${sense}`,
      points: heldOver(motor, { holds: 'power-factor', powerFactor, leading }),
      dash: '8 4',
    },
    {
      name: `held ${formatQuantity(Math.abs(usual), 'kvar')} ${usual < 0 ? 'absorbed' : 'delivered'}`,
      points: heldOver(motor, { holds: 'kvar', kvarDelivered: usual }),
      dash: '10 3 2 3',
    },
  ];
}

/** The finding: what holding the amperes does between half and full load, beside a held power factor. */
export function fieldControlFinding({ lines }: FieldControlData): string {
  const [current, ...others] = lines;
  const factor = others.find((line) => line.name.includes('power factor'));
  const half = current && kvarAt(current.points, 50);
  const full = current && kvarAt(current.points, 100);
  if (half == null || full == null) return 'This field cannot hold the motor from half to full load.';
  const words = (kvar: number) => `${formatNumber(Math.abs(kvar))}${kvar < 0 ? ' absorbed' : ''}`;
  const held = `From half to full load a held current goes from ${words(half)} to ${words(full)} kvar`;
  const [halfFactor, fullFactor] = [50, 100].map((load) => (factor ? kvarAt(factor.points, load) : null));
  return halfFactor == null || fullFactor == null
    ? `${held}.`
    : `${held}, a held power factor from ${words(halfFactor)} to ${words(fullFactor)}.`;
}
