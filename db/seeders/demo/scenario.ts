import type { CalendarInput, MotorInput } from '../../../src/schemas/motor';

/** The invented scenario of the demo: one client in full and a small second one. No firm, place or person of it exists. */
export const kestrel = {
  code: 'KG-02',
  timeZone: 'America/Chicago',
  yearFrom: '2025-11-01',
  yearTo: '2026-11-01',
  scheduleId: 'ostrander-lp4',
  contract: { contractKw: 2500 },
  /** Days on which the utility read the meter; each ends one bill and begins the next. */
  readings: [
    '2025-11-01',
    '2025-12-01',
    '2025-12-31',
    '2026-02-01',
    '2026-02-28',
    '2026-03-31',
    '2026-04-30',
    '2026-05-31',
    '2026-06-30',
    '2026-07-31',
    '2026-08-31',
    '2026-09-30',
    '2026-11-01',
  ],
  /** The kiln is relined: everything that hangs on it stands, both dates included. */
  shutdown: { from: '2025-12-29', to: '2026-01-31' },
  /** The revenue meter failed; the utility filled these days in by estimate, both included. */
  meterFailure: { from: '2026-04-20', to: '2026-04-26' },
  holidays: ['2025-11-27', '2025-12-25', '2026-01-01', '2026-05-25', '2026-07-03', '2026-09-07'],
} as const;

/** Pf-adjusted demand of the 24 months before the year, oldest first: read off the client's older bills. [kW] */
export const earlierAdjustedKw = [
  4590.1, 4571.8, 4498.2, 4533.0, 4607.4, 4688.9, 4752.3, 5012.6, 5180.2, 5096.4, 4955.7, 4703.3, 4588.0, 4560.9,
  4512.7, 4549.6, 4620.8, 4671.2, 4718.5, 4801.9, 4866.3, 4840.7, 4779.4, 4690.6,
];

/** What an inattentive utility went on using: the highest summer of the year before, which has left the look-back. */
export const releasedSummerKw = 5180.2;

const everyDay: CalendarInput['rules'][number]['days'] = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
const shutdowns = [{ from: kestrel.shutdown.from, lastDay: kestrel.shutdown.to }];

/** The two synchronous motors as their plates word them. */
export const kestrelMotors: readonly [mill: MotorInput, compressor: MotorInput] = [
  {
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
      rotor: 'salient',
      xdPu: 1.1,
      raPu: 0.01,
      limits: { reservePercent: 5 },
      source: 'Photograph of the plate, excitation data sheet',
    },
    calendar: {
      rules: [{ days: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'], fromHour: 6, toHour: 22, load: 75, unit: 'percent' }],
      shutdowns: [...shutdowns, ...kestrel.holidays.map((day) => ({ from: day, lastDay: day }))],
    },
    fieldTodayA: 109,
    fieldReadAt: 'field',
  },
  {
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
      rotor: 'salient',
      limits: { reservePercent: 5 },
      source: 'Photograph of the plate',
    },
    calendar: { rules: [{ days: everyDay, fromHour: 0, toHour: 24, load: 60, unit: 'percent' }], shutdowns },
    fieldTodayA: 70,
    fieldReadAt: 'field',
  },
];
