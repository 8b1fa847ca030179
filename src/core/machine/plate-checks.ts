import { remainingLossKw } from './motor';
import type { SynchronousMotor } from './motor';
import { KW_PER_HP, KW_PER_METRIC_HP, outputKwOf, polesOf } from './plate';
import type { AssumedValue, Nameplate, PlateRemark } from './plate';
import { checkField } from './plate-field-checks';
import { percent } from './plate-words';
import { isPlausibleEfficiency } from './typical';
import { operatingPoint } from './operating-point';

/** Agreement expected of figures on one plate, which are rounded. [unitless] */
const PLATE_TOLERANCE = 0.02;

/** Values out of any range: no motor can be made of them. */
export function checkRanges(plate: Nameplate): PlateRemark[] {
  return [...checkPositive(plate), ...checkFractions(plate), ...checkPoles(plate)];
}

function checkPositive(plate: Nameplate): PlateRemark[] {
  const needed = ['output', 'voltageV', 'frequencyHz'] as const;
  const optional = [
    'currentA',
    'speedRpm',
    'fieldCurrentA',
    'fieldVoltageV',
    'fieldResistanceOhm',
    'xdPu',
    'xqPu',
    'apparentKva',
    'temperatureRiseC',
  ] as const;
  return [...needed, ...optional.filter((name) => plate[name] !== undefined)]
    .filter((field) => !(plate[field]! > 0 && Number.isFinite(plate[field])))
    .map((field) => ({
      field,
      message: `${field} is ${plate[field]}: it must be above zero.`,
      remedy: 'Read it again from the plate.',
    }));
}

function checkFractions(plate: Nameplate): PlateRemark[] {
  return (['powerFactor', 'efficiency', 'exciterEfficiency'] as const).flatMap((field) => {
    const entered = plate[field];
    if (entered === undefined || (entered > 0 && entered <= 1)) return [];
    const asPercent = entered > 1 && entered <= 100 ? ` ${entered} % is written ${entered / 100}.` : '';
    const message = `${field} is ${entered}: it must be above 0 and not above 1.`;
    return [{ field, message, remedy: `Enter it as a fraction.${asPercent}` }];
  });
}

function checkPoles({ poles, speedRpm }: Nameplate): PlateRemark[] {
  if (poles === undefined && speedRpm === undefined) {
    const remedy = 'Enter the rated speed or the number of poles.';
    return [{ field: 'speedRpm', message: 'Neither speed nor poles are given.', remedy }];
  }
  if (poles === undefined || (Number.isInteger(poles / 2) && poles >= 2)) return [];
  return [
    { field: 'poles', message: `poles is ${poles}: it must be even, 2 or more.`, remedy: 'Poles = 120 x Hz / rpm.' },
  ];
}

/** Data of the plate that contradict one another. */
export function checkPlate(plate: Nameplate): PlateRemark[] {
  const remarks = [checkSpeed(plate), checkCurrent(plate), checkApparent(plate), checkTwice(plate)];
  return [...remarks.filter((remark) => remark !== null), ...checkField(plate)];
}

function checkSpeed(plate: Nameplate): PlateRemark | null {
  if (plate.speedRpm === undefined) return null;
  const poles = polesOf(plate);
  const synchronous = (120 * plate.frequencyHz) / poles;
  const off = plate.speedRpm / synchronous - 1;
  if (Math.abs(off) <= 0.005) return null;
  const fits = 2 * Math.round((60 * plate.frequencyHz) / plate.speedRpm);
  const exact = Math.abs((120 * plate.frequencyHz) / fits / plate.speedRpm - 1) <= 0.005;
  return {
    field: 'speedRpm',
    message:
      `Speed and ${plate.poles === undefined ? 'frequency' : 'poles'} disagree: ${poles} poles at ${plate.frequencyHz} Hz turn at ` +
      `${synchronous.toFixed(1)} rpm, the plate says ${plate.speedRpm} rpm, ${percent(off)} off.`,
    remedy: exact
      ? `${plate.speedRpm} rpm at ${plate.frequencyHz} Hz has ${fits} poles.`
      : 'A synchronous motor turns at exactly 120 x Hz / poles: an induction motor, another frequency or a misread figure.',
  };
}

function checkCurrent(plate: Nameplate): PlateRemark | null {
  const { currentA, efficiency, powerFactor, voltageV } = plate;
  if (currentA === undefined || powerFactor === undefined) return null;
  if (efficiency === undefined) return checkImpliedEfficiency(plate, currentA, powerFactor);
  const expected = (outputKwOf(plate) * 1000) / (Math.sqrt(3) * voltageV * efficiency * powerFactor);
  const off = currentA / expected - 1;
  if (Math.abs(off) <= PLATE_TOLERANCE + 0.5 / expected) return null;
  return {
    field: 'currentA',
    message:
      `Current disagrees with output, voltage, efficiency and power factor by ${percent(off)}: ` +
      `the plate says ${currentA} A, the others make ${expected.toFixed(1)} A.`,
    remedy:
      explainRatio(currentA / expected, plate) ??
      'Read the five figures again; one of them belongs to another load or voltage.',
  };
}

function checkImpliedEfficiency(plate: Nameplate, currentA: number, powerFactor: number): PlateRemark | null {
  const inputKw = (Math.sqrt(3) * plate.voltageV * currentA * powerFactor) / 1000;
  const implied = outputKwOf(plate) / inputKw;
  if (isPlausibleEfficiency(implied, outputKwOf(plate))) return null;
  return {
    field: 'currentA',
    message:
      `Current and output disagree: ${currentA} A at power factor ${powerFactor} take ${inputKw.toFixed(1)} kW for ` +
      `${outputKwOf(plate).toFixed(1)} kW of output, an efficiency of ${implied.toFixed(3)}.`,
    remedy: explainRatio(0.95 / implied, plate, 0.04) ?? 'Read output, voltage, current and power factor again.',
  };
}

/** The plate's kVA against volts and amperes, or against output, efficiency and power factor. */
function checkApparent(plate: Nameplate): PlateRemark | null {
  const { apparentKva, currentA, voltageV, efficiency, powerFactor } = plate;
  if (apparentKva === undefined) return null;
  const byCurrent = currentA === undefined ? null : (Math.sqrt(3) * voltageV * currentA) / 1000;
  const byOutput = efficiency && powerFactor ? outputKwOf(plate) / (efficiency * powerFactor) : null;
  const others = byCurrent ?? byOutput;
  if (others === null || Math.abs(apparentKva / others - 1) <= PLATE_TOLERANCE) return null;
  const pair = byCurrent === null ? 'output, efficiency and power factor' : 'voltage and current';
  return {
    field: 'apparentKva',
    message:
      `Rated kVA disagrees with ${pair} by ${percent(apparentKva / others - 1)}: the plate says ${apparentKva} kVA, ` +
      `the others make ${others.toFixed(1)} kVA.`,
    remedy:
      Math.abs(apparentKva / outputKwOf(plate) - 1) <= PLATE_TOLERANCE
        ? 'The kVA entered is the output in kW: leave it empty where the plate states none.'
        : 'Read kVA, volts and amperes again; kVA are what the motor takes, not its output.',
  };
}

/** A value given in ohms and per unit at once. */
function checkTwice(plate: Nameplate): PlateRemark | null {
  for (const name of ['xd', 'xq', 'ra'] as const) {
    if (plate[`${name}Pu`] === undefined || plate.ohms?.[`${name}Ohm`] === undefined) continue;
    const message = `${name}Pu and ${name}Ohm are both given.`;
    return { field: `ohms.${name}Ohm`, message, remedy: 'Enter the value once, per unit or in ohms.' };
  }
  return null;
}

/** The usual slips that explain a current off by a ratio. */
function explainRatio(ratio: number, plate: Nameplate, tolerance = PLATE_TOLERANCE): string | null {
  const slips: [number, string][] = [
    plate.outputUnit === 'kW'
      ? [KW_PER_HP, 'They agree if the output is in hp.']
      : [1 / (plate.outputUnit === 'hp' ? KW_PER_HP : KW_PER_METRIC_HP), 'They agree if the output is in kW.'],
    [Math.sqrt(3), 'They agree if the current belongs to the other connection of the winding (delta).'],
    [
      1 / Math.sqrt(3),
      'They agree if the voltage entered is per phase (enter line-to-line volts) or the current is that of a delta’s winding.',
    ],
    [plate.powerFactor ?? 1, 'They agree at unity power factor.'],
    [(plate.powerFactor ?? 1) / 0.8, 'They agree at power factor 0.8.'],
  ];
  const found = slips.find(([factor]) => Math.abs(factor - 1) > 0.05 && Math.abs(ratio / factor - 1) <= tolerance);
  return found ? found[1] : null;
}

/** The problem of losses that exceed what the efficiency leaves, or null. */
export function checkRemainder(motor: SynchronousMotor, assumed: AssumedValue[]): PlateRemark | null {
  if (motor.lossSplit) return null;
  const rest = remainingLossKw(motor);
  if (rest >= 0) return null;
  const known = (field: string) => !assumed.some((a) => a.field === field);
  const pair = known('fieldResistanceOhm')
    ? 'field current and resistance'
    : known('raPu')
      ? 'armature resistance'
      : 'typical losses';
  const total = motor.ratedOutputKw * (1 / motor.ratedEfficiency - 1);
  return {
    field: 'efficiency',
    message:
      `Efficiency and ${pair} disagree: ${motor.ratedEfficiency.toFixed(4)} leaves ${total.toFixed(2)} kW of losses, armature, field and ` +
      `exciter alone make ${(total - rest).toFixed(2)} kW, ${(-rest).toFixed(2)} kW more.`,
    remedy: 'Check the efficiency (field loss included?), the hot field resistance and the exciter efficiency.',
  };
}

/** Remarks on the finished motor at its rated point. */
export function checkRatedPoint(plate: Nameplate, motor: SynchronousMotor): PlateRemark[] {
  const warnings: PlateRemark[] = [];
  const rated = operatingPoint(motor, {
    shaftKw: motor.ratedOutputKw,
    powerFactor: motor.ratedPowerFactor,
    leading: true,
  });
  const fieldKw = (motor.ratedFieldCurrentA ** 2 * motor.fieldResistanceOhm) / 1000;
  const share = fieldKw / (rated.inputKw / rated.powerFactor);
  if (share > 0.06 || share < 0.001) {
    warnings.push({
      field: 'fieldCurrentA',
      message: `The field takes ${fieldKw.toFixed(2)} kW, ${(100 * share).toFixed(2)} % of rated kVA: unusual for a motor of this size.`,
      remedy:
        'For a brushless motor the plate or panel may show the exciter’s field: enter that as exciter field instead.',
    });
  }
  const off = rated.fieldCurrentA / motor.ratedFieldCurrentA - 1;
  if (motor.openCircuitCurve && Math.abs(off) > 0.1) {
    warnings.push({
      field: 'openCircuitCurve',
      message:
        `The open-circuit curve needs ${rated.fieldCurrentA.toFixed(1)} A at rated load, the plate says ` +
        `${motor.ratedFieldCurrentA.toFixed(1)} A, ${percent(off)} apart.`,
      remedy: 'Check that the curve is in amperes of the same field, and the unsaturated xdPu and xlPu.',
    });
  }
  if (motor.lossSplit) warnings.push(...checkSplit(motor, rated.inputKw));
  if (plate.efficiency === undefined && plate.currentA !== undefined && plate.powerFactor !== undefined) {
    warnings.push({
      field: 'efficiency',
      message: `Efficiency ${motor.ratedEfficiency.toFixed(3)} is worked out from output, voltage, current and power factor.`,
      remedy: 'Enter the efficiency of the plate or test report if there is one.',
    });
  }
  return warnings;
}

function checkSplit(motor: SynchronousMotor, inputKw: number): PlateRemark[] {
  const implied = motor.ratedOutputKw / inputKw;
  if (Math.abs(implied - motor.ratedEfficiency) <= 0.005) return [];
  return [
    {
      field: 'lossSplit',
      message: `The losses entered make an efficiency of ${implied.toFixed(4)}, the plate says ${motor.ratedEfficiency.toFixed(4)}.`,
      remedy: 'The losses entered are used; the efficiency sets only the rated kVA.',
    },
  ];
}
