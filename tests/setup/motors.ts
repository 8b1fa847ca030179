import { motorInput, type MotorInput } from '@/schemas/motor';

/** The nameplate of an invented 2,000 hp raw mill motor, as a form would send it. */
export const millMotor: Record<string, unknown> = {
  name: 'M-1',
  drives: 'Raw mill',
  plate: {
    output: 2000,
    outputUnit: 'hp',
    voltageV: 4160,
    currentA: 271,
    powerFactor: 0.8,
    speedRpm: 225,
    frequencyHz: 60,
    efficiencyPercent: 95.7,
    fieldCurrentA: 204,
    fieldVoltageV: 118,
    exciterKind: 'static',
    raPu: 0.01,
    xdPu: 1.1,
  },
  calendar: {
    rules: [{ days: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'], fromHour: 6, toHour: 22, load: 75, unit: 'percent' }],
    shutdowns: [{ from: '2026-01-12', lastDay: '2026-02-08' }],
  },
  fieldTodayA: 109,
};

/** An invented 900 hp compressor motor that runs day and night. */
export const compressorMotor: Record<string, unknown> = {
  ...millMotor,
  name: 'M-2',
  drives: 'Kiln-gas compressor',
  plate: {
    output: 900,
    outputUnit: 'hp',
    voltageV: 4160,
    currentA: 122.5,
    powerFactor: 0.8,
    speedRpm: 450,
    frequencyHz: 60,
    efficiencyPercent: 95.1,
    fieldCurrentA: 131,
    fieldVoltageV: 94,
    exciterKind: 'static',
  },
  calendar: {
    rules: [
      {
        days: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'],
        fromHour: 0,
        toHour: 24,
        load: 60,
        unit: 'percent',
      },
    ],
    shutdowns: [{ from: '2026-01-12', lastDay: '2026-02-08' }],
  },
  fieldTodayA: 70,
};

/** A motor as the schema reads it, with entries of the plate and the rest replaced. */
export function motorOf(
  base: Record<string, unknown>,
  plate: Record<string, unknown> = {},
  rest: Record<string, unknown> = {},
): MotorInput {
  return motorInput.parse({ ...base, ...rest, plate: { ...(base.plate as object), ...plate } });
}
