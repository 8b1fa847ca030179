import { ASSUMED_SPLIT, compileMotor, ratedKva, remainingLossKw } from './motor';
import type { SynchronousMotor } from './motor';
import { operatingPoint } from './operating-point';
import { outputKwOf, polesOf } from './plate';
import type { AssumedValue, Nameplate, PlateRemark } from './plate';
import { checkPlate, checkRanges, checkRatedPoint, checkRemainder } from './plate-checks';
import {
  isPlausibleEfficiency,
  typicalEfficiency,
  typicalExciterEfficiency,
  typicalFieldShare,
  typicalFieldVoltageV,
  typicalLossShares,
  typicalRaPu,
  typicalXdPu,
  typicalXlPu,
  typicalXqShare,
} from './typical';
import type { TypicalValue } from './typical';

/** A nameplate made into a motor. */
export interface CompletedMotor {
  /** Null while a problem leaves no motor that could be computed. */
  motor: SynchronousMotor | null;
  assumed: AssumedValue[];
  /** Contradictions: the motor is not to be used for a setting before they are resolved. */
  problems: PlateRemark[];
  warnings: PlateRemark[];
}

/**
 * Makes a motor from a nameplate: fills what is missing from typical values by size, speed and rotor, each marked as
 * assumed with its range, and checks the plate against itself.
 *
 * @param plate  The nameplate. Output, voltage and frequency are needed; speed or poles too.
 * @returns The motor with what was assumed, problems (which data disagree, by how much, what to do) and warnings.
 * @source Typical values: common practice, see `typical.ts`.
 */
export function completeNameplate(plate: Nameplate): CompletedMotor {
  const problems = checkRanges(plate);
  if (problems.length > 0) return { motor: null, assumed: [], problems, warnings: [] };
  const assumed: AssumedValue[] = [];
  const assume = (field: string, typical: TypicalValue, why: string) => {
    assumed.push({ field, ...typical, why });
    return typical.value;
  };
  problems.push(...checkPlate(plate));
  const motor: SynchronousMotor = {
    ...ratingOf(plate, assume),
    ...reactancesOf(plate, assume),
    ...fieldOf(plate, assume),
  };
  if (plate.lossSplit) motor.lossSplit = plate.lossSplit;
  if (plate.limits) motor.limits = plate.limits;
  lowerAssumedResistance(motor, assumed);
  const remainder = checkRemainder(motor, assumed);
  if (remainder) return { motor: null, assumed, problems: [...problems, remainder], warnings: [] };
  if (!plate.lossSplit) assumeLossSplit(motor, assumed);
  try {
    compileMotor(motor);
    operatingPoint(motor, { shaftKw: motor.ratedOutputKw, powerFactor: motor.ratedPowerFactor, leading: true });
  } catch (error) {
    if (!(error instanceof Error)) throw error;
    const remedy = 'Correct the value named, or leave it out to have a typical one assumed.';
    return {
      motor: null,
      assumed,
      problems: [...problems, { field: 'motor', message: error.message, remedy }],
      warnings: [],
    };
  }
  return { motor, assumed, problems, warnings: checkRatedPoint(plate, motor) };
}

type Assume = (field: string, typical: TypicalValue, why: string) => number;

function ratingOf(plate: Nameplate, assume: Assume) {
  const ratedOutputKw = outputKwOf(plate);
  const apparent = plate.currentA === undefined ? null : (Math.sqrt(3) * plate.voltageV * plate.currentA) / 1000;
  let ratedPowerFactor = plate.powerFactor;
  let ratedEfficiency = plate.efficiency;
  if (ratedEfficiency === undefined && ratedPowerFactor !== undefined && apparent !== null) {
    const implied = ratedOutputKw / (apparent * ratedPowerFactor);
    if (isPlausibleEfficiency(implied, ratedOutputKw)) ratedEfficiency = implied;
  }
  ratedEfficiency ??= assume(
    'ratedEfficiency',
    typicalEfficiency(ratedOutputKw, ratedPowerFactor ?? 0.8),
    'The plate gives no efficiency: typical of motors of this size.',
  );
  if (ratedPowerFactor === undefined && apparent !== null) {
    const implied = ratedOutputKw / (ratedEfficiency * apparent);
    if (implied > 0.3 && implied <= 1.01) ratedPowerFactor = Math.min(1, implied);
  }
  ratedPowerFactor ??= assume(
    'ratedPowerFactor',
    { value: 0.8, low: 0.8, high: 1 },
    'The plate gives no power factor and no current to work it out from: 0.8 is the usual leading rating.',
  );
  return {
    ratedOutputKw,
    ratedVoltageV: plate.voltageV,
    frequencyHz: plate.frequencyHz,
    poles: polesOf(plate),
    ratedPowerFactor,
    ratedEfficiency,
  };
}

function reactancesOf(plate: Nameplate, assume: Assume) {
  const speedRpm = (120 * plate.frequencyHz) / polesOf(plate);
  const rotor = plate.rotor ?? (polesOf(plate) === 2 ? 'round' : 'salient');
  const kind = rotor === 'round' ? 'round rotors' : `salient poles at ${Math.round(speedRpm)} rpm`;
  const raPu =
    plate.raPu ?? assume('raPu', typicalRaPu(outputKwOf(plate)), 'Armature resistance typical of this size.');
  let typicalXd = typicalXdPu(speedRpm, rotor);
  if (plate.xqPu !== undefined && plate.xqPu > typicalXd.value) {
    const value = plate.xqPu / typicalXqShare(speedRpm, rotor).value;
    typicalXd = { value, low: plate.xqPu, high: Math.max(value, typicalXd.high) };
  }
  const xdPu = plate.xdPu ?? assume('xdPu', typicalXd, `Direct-axis reactance typical of ${kind}.`);
  const share = typicalXqShare(speedRpm, rotor);
  const typicalXq = { value: share.value * xdPu, low: share.low * xdPu, high: share.high * xdPu };
  const xqPu =
    plate.xqPu ?? assume('xqPu', typicalXq, `Quadrature-axis reactance typical of ${kind}: a share of xdPu.`);
  const curve = plate.openCircuitCurve;
  if (!curve) return { raPu, xdPu, xqPu, ...(plate.xlPu !== undefined && { xlPu: plate.xlPu }) };
  const xlPu =
    plate.xlPu ?? assume('xlPu', typicalXlPu, 'Leakage reactance typical of salient and round rotors alike.');
  return { raPu, xdPu, xqPu, xlPu, openCircuitCurve: curve };
}

function fieldOf(plate: Nameplate, assume: Assume) {
  const outputKw = outputKwOf(plate);
  const kva = outputKw / ((plate.efficiency ?? 0.95) * (plate.powerFactor ?? 0.8));
  const share = typicalFieldShare(kva);
  const watts = share.value * kva * 1000;
  const ratedFieldCurrentA =
    plate.fieldCurrentA ?? currentFromOthers(plate) ?? assumedFieldCurrent(plate, watts, assume);
  const resistanceFor = (power: number) => power / ratedFieldCurrentA ** 2;
  const fieldResistanceOhm =
    plate.fieldResistanceOhm ??
    (plate.fieldVoltageV === undefined
      ? assume(
          'fieldResistanceOhm',
          {
            value: resistanceFor(watts),
            low: resistanceFor(share.low * kva * 1000),
            high: resistanceFor(share.high * kva * 1000),
          },
          `Field power typical of this size: ${(100 * share.value).toFixed(2)} % of rated kVA.`,
        )
      : plate.fieldVoltageV / ratedFieldCurrentA);
  const kind = plate.exciter;
  const why = kind ? 'Typical of this kind of exciter.' : 'The kind of exciter is not known.';
  return {
    ratedFieldCurrentA,
    fieldResistanceOhm,
    exciterEfficiency: plate.exciterEfficiency ?? assume('exciterEfficiency', typicalExciterEfficiency(kind), why),
    exciterSupply: kind === 'static' ? ('bus' as const) : ('shaft' as const),
    ...(plate.exciterField && { exciterField: plate.exciterField }),
  };
}

function currentFromOthers(plate: Nameplate): number | null {
  if (plate.fieldVoltageV === undefined || plate.fieldResistanceOhm === undefined) return null;
  return plate.fieldVoltageV / plate.fieldResistanceOhm;
}

function assumedFieldCurrent(plate: Nameplate, watts: number, assume: Assume): number {
  const volts = typicalFieldVoltageV(outputKwOf(plate));
  const at = plate.fieldVoltageV;
  const typical =
    at === undefined
      ? { value: watts / volts.value, low: watts / volts.high, high: watts / volts.low }
      : { value: watts / at, low: (0.6 * watts) / at, high: (1.5 * watts) / at };
  return assume(
    'ratedFieldCurrentA',
    typical,
    'The plate gives no field current: settings in amperes need it. Ratios to rated field hold without.',
  );
}

/** An assumed armature resistance gives way, within its range, where the efficiency leaves too little for other losses. */
function lowerAssumedResistance(motor: SynchronousMotor, assumed: AssumedValue[]): void {
  const entry = assumed.find((a) => a.field === 'raPu');
  if (
    !entry ||
    motor.lossSplit ||
    remainingLossKw(motor) >= 0.2 * motor.ratedOutputKw * (1 / motor.ratedEfficiency - 1)
  )
    return;
  const spareKw = remainingLossKw(motor) - 0.2 * motor.ratedOutputKw * (1 / motor.ratedEfficiency - 1);
  motor.raPu = Math.max(entry.low, motor.raPu + spareKw / ratedKva(motor));
  entry.value = motor.raPu;
  entry.why += ' Lowered within its range so that the efficiency leaves room for the other losses.';
}

function assumeLossSplit(motor: SynchronousMotor, assumed: AssumedValue[]): void {
  const rest = Math.max(0, remainingLossKw(motor));
  const total = ASSUMED_SPLIT.core + ASSUMED_SPLIT.frictionWindage + ASSUMED_SPLIT.stray;
  const kva = ratedKva(motor);
  const shares = {
    coreKw: ASSUMED_SPLIT.core,
    frictionWindageKw: ASSUMED_SPLIT.frictionWindage,
    strayKw: ASSUMED_SPLIT.stray,
  };
  for (const name of ['coreKw', 'frictionWindageKw', 'strayKw'] as const) {
    const value = (rest * shares[name]) / total;
    assumed.push({
      field: `lossSplit.${name}`,
      value,
      low: Math.min(value, typicalLossShares[name].low * kva),
      high: Math.max(value, typicalLossShares[name].high * kva),
      why: 'What the efficiency leaves after windings and exciter, split core 1.0 : friction and windage 0.7 : stray 0.5.',
    });
  }
}
