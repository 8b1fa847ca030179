/** The invented scenario of the demo: one client in full and a small second one. No firm, place or person of it exists. */
export const kestrel = {
  code: 'KG-02',
  timeZone: 'America/Chicago',
  yearFrom: '2025-11-01',
  yearTo: '2026-11-01',
  scheduleId: 'ostrander-lp4',
  contract: {} as Record<string, number>,
  /** Days on which the utility read the meter; each ends one bill and begins the next. */
  readings: [
    '2025-11-01',
    '2025-12-02',
    '2026-01-02',
    '2026-02-03',
    '2026-03-03',
    '2026-04-02',
    '2026-05-02',
    '2026-06-02',
    '2026-07-02',
    '2026-08-03',
    '2026-09-02',
    '2026-10-02',
    '2026-11-01',
  ],
  /** The kiln is relined: everything that hangs on it stands, both dates included. */
  shutdown: { from: '2026-01-12', to: '2026-02-08' },
  /** The revenue meter failed; the utility filled these days in by estimate, both included. */
  meterFailure: { from: '2026-04-20', to: '2026-04-26' },
  holidays: ['2025-11-27', '2025-12-25', '2026-01-01', '2026-05-25', '2026-07-03', '2026-09-07'],
} as const;

/** The two synchronous motors as their plates word them. */
export const kestrelMotors = [
  {
    name: 'M-1',
    drives: 'Raw mill',
    plate: {
      ratedOutput: 2000,
      outputUnit: 'hp',
      voltageV: 4160,
      currentA: 271,
      powerFactor: 0.8,
      speedRpm: 225,
      frequencyHz: 60,
      efficiency: 0.957,
      fieldCurrentA: 204,
      fieldVoltageV: 118,
      exciter: 'static',
      raPu: 0.01,
      xdPu: 1.1,
    },
    fieldTodayA: 109,
    /** Shaft load while it runs, share of rated output. */
    loadFraction: 0.75,
  },
  {
    name: 'M-2',
    drives: 'Kiln-gas compressor',
    plate: {
      ratedOutput: 900,
      outputUnit: 'hp',
      voltageV: 4160,
      currentA: 122.5,
      powerFactor: 0.8,
      speedRpm: 450,
      frequencyHz: 60,
      efficiency: 0.951,
      fieldCurrentA: 131,
      fieldVoltageV: 94,
      exciter: 'static',
    },
    fieldTodayA: 70,
    loadFraction: 0.6,
  },
] as const;
