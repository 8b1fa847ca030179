import {
  completeNameplate,
  type CompletedMotor,
  type Nameplate,
  type PlateLimits,
  type SynchronousMotor,
} from '../../core/machine';
import type { PlateInput } from '../../schemas/plate';
import { invalid, type FieldErrors } from '../errors';

const fraction = (percent: number | undefined) => (percent === undefined ? undefined : percent / 100);

/** A plate in the words of the core. */
export function toNameplate(plate: PlateInput): Nameplate {
  const { exciterFieldA, exciterNoLoadA, coldFieldResistanceOhm, coldFieldAtC } = plate;
  return {
    output: plate.output,
    outputUnit: plate.outputUnit,
    voltageV: plate.voltageV,
    currentA: plate.currentA,
    apparentKva: plate.apparentKva,
    powerFactor: plate.powerFactor,
    speedRpm: plate.speedRpm,
    poles: plate.poles,
    frequencyHz: plate.frequencyHz,
    efficiency: fraction(plate.efficiencyPercent),
    serviceFactor: plate.serviceFactor,
    temperatureRiseC: plate.temperatureRiseC,
    insulationClass: plate.insulationClass,
    ambientC: plate.ambientC,
    fieldCurrentA: plate.fieldCurrentA,
    fieldVoltageV: plate.fieldVoltageV,
    fieldResistanceOhm: plate.fieldResistanceOhm,
    coldField:
      coldFieldResistanceOhm === undefined || coldFieldAtC === undefined
        ? undefined
        : { resistanceOhm: coldFieldResistanceOhm, atC: coldFieldAtC },
    exciter: plate.exciterKind,
    exciterEfficiency: fraction(plate.exciterEfficiencyPercent),
    exciterField: exciterFieldA === undefined ? undefined : { ratedA: exciterFieldA, noLoadA: exciterNoLoadA },
    rotor: plate.rotor,
    raPu: plate.raPu,
    xdPu: plate.xdPu,
    xqPu: plate.xqPu,
    xlPu: plate.xlPu,
    ohms: windingOhms(plate),
    openCircuitCurve: plate.openCircuitCurve,
    limits: plateLimits(plate.limits),
  };
}

function windingOhms({ connection, xdOhm, xqOhm, raOhm, raAtC }: PlateInput): Nameplate['ohms'] {
  return connection && { connection, xdOhm, xqOhm, raOhm, raAtC };
}

function plateLimits({ reservePercent, voltageLowPu, voltageHighPu, ...limits }: PlateInput['limits']): PlateLimits {
  const band = voltageLowPu !== undefined && voltageHighPu !== undefined;
  return {
    ...limits,
    reserve: fraction(reservePercent),
    voltageBandPu: band ? { low: voltageLowPu, high: voltageHighPu } : undefined,
  };
}

/** Where an entry of the core's nameplate stands in the form. */
const formPaths: Record<string, string> = {
  efficiency: 'plate.efficiencyPercent',
  exciter: 'plate.exciterKind',
  exciterEfficiency: 'plate.exciterEfficiencyPercent',
  exciterField: 'plate.exciterFieldA',
  coldField: 'plate.coldFieldResistanceOhm',
  motor: 'plate.output',
  lossSplit: 'plate.efficiencyPercent',
  'ohms.xdOhm': 'plate.xdOhm',
  'ohms.xqOhm': 'plate.xqOhm',
  'ohms.raOhm': 'plate.raOhm',
  'limits.voltageBandPu': 'plate.limits.voltageLowPu',
};

/** Where an entry of the core's nameplate stands in the form, `plate.xdPu` for instance. */
export const formPath = (field: string) => formPaths[field] ?? `plate.${field}`;

/** The completed motor of a stored plate. */
export function completePlate(plate: PlateInput): CompletedMotor {
  return completeNameplate(toNameplate(plate));
}

/**
 * The machine of a plate that agrees with itself.
 *
 * @throws {ServiceError} 422 at the entries that disagree, with by how much and what to do
 */
export function machineOrThrow(plate: PlateInput): SynchronousMotor {
  const { motor, problems } = completePlate(plate);
  if (motor && problems.length === 0) return motor;
  const fields: FieldErrors = {};
  for (const { field, message, remedy } of problems) (fields[formPath(field)] ??= []).push(`${message} ${remedy}`);
  throw invalid('The plate contradicts itself. Each entry that disagrees is marked with by how much.', fields);
}
