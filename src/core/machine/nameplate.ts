import { ASSUMED_SPLIT, compileMotor, ratedKva, remainingLossKw } from './motor';
import type { SynchronousMotor } from './motor';
import { operatingPoint } from './operating-point';
import { outputKwOf, polesOf } from './plate';
import type { AssumedValue, Assume, Nameplate, PlateRemark } from './plate';
import { checkPlate, checkRanges, checkRatedPoint, checkRemainder } from './plate-checks';
import { fieldOf } from './plate-field';
import { impedancesOf } from './plate-impedance';
import { resolveLimits } from './plate-limits';
import type { LimitsBeside } from './plate-limits';
import { checkTemperature, hotTemperatureC } from './plate-temperature';
import { isPlausibleEfficiency, typicalEfficiency, typicalLossShares } from './typical';

/** A nameplate made into a motor. */
export interface CompletedMotor extends LimitsBeside {
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
  if (problems.length > 0) return unusable(problems, []);
  const assumed: AssumedValue[] = [];
  const assume: Assume = (field, typical, why) => {
    assumed.push({ field, ...typical, why });
    return typical.value;
  };
  problems.push(...checkPlate(plate));
  const rating = ratingOf(plate, assume);
  const motor: SynchronousMotor = {
    ...rating,
    ...impedancesOf(plate, rating, assume),
    ...fieldOf(plate, rating, assume),
  };
  if (plate.lossSplit) motor.lossSplit = plate.lossSplit;
  if (plate.temperatureRiseC ?? plate.insulationClass) motor.fieldHotC = hotTemperatureC(plate).value;
  lowerAssumedResistance(motor, assumed);
  const remainder = checkRemainder(motor, assumed);
  if (remainder) return unusable([...problems, remainder], assumed);
  if (!plate.lossSplit) assumeLossSplit(motor, assumed);
  try {
    const resolved = resolveLimits(motor, plate.limits ?? {});
    if (plate.limits) motor.limits = resolved.limits;
    compileMotor(motor);
    operatingPoint(motor, { shaftKw: motor.ratedOutputKw, powerFactor: motor.ratedPowerFactor, leading: true });
    const warnings = [checkTemperature(plate), ...checkRatedPoint(plate, motor)].filter((remark) => remark !== null);
    return { motor, assumed, problems: [...problems, ...resolved.problems], warnings, ...resolved.beside };
  } catch (error) {
    if (!(error instanceof Error)) throw error;
    const remedy = 'Correct the value named, or leave it out to have a typical one assumed.';
    return unusable([...problems, { field: 'motor', message: error.message, remedy }], assumed);
  }
}

const unusable = (problems: PlateRemark[], assumed: AssumedValue[]): CompletedMotor => ({
  motor: null,
  assumed,
  problems,
  warnings: [],
  fieldLimitBy: 'field',
});

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
