import { z } from 'zod';

/** What tells a motor's shaft load: the shift calendar, a profile by hour, or what its submeter read. */
export const loadSources = ['calendar', 'profile', 'submeter'] as const;
export type LoadSource = (typeof loadSources)[number];

/** What holds where the submeter has no reading. */
export const gapLoads = ['calendar', 'standstill'] as const;
export type GapLoad = (typeof gapLoads)[number];

export const profileDays = ['weekday', 'saturday', 'sunday'] as const;
export type ProfileDay = (typeof profileDays)[number];

const hourLoad = z
  .number({ error: 'Write the load, 0 at standstill.' })
  .min(0, 'The load is 0 or more.')
  .max(200_000, 'The load is at most 200,000 kW.');
const dayLoads = z.array(hourLoad).length(24, 'A day has 24 hours: write 24 loads, from midnight on.');

/** Shaft load by local clock hour and kind of day. */
export const profileInput = z
  .object({ unit: z.enum(['percent', 'kW']), weekday: dayLoads, saturday: dayLoads, sunday: dayLoads })
  .superRefine(({ unit, ...days }, context) => {
    for (const day of profileDays) {
      days[day].forEach((load, hour) => {
        if (unit === 'kW' || load <= 150) return;
        const message = 'A load above 150 % of rated output is no lasting load. Check the figure.';
        context.addIssue({ code: 'custom', path: [day, hour], message });
      });
    }
  });
export type ProfileInput = z.output<typeof profileInput>;

const absent = z.union([z.null(), z.undefined()]).transform(() => undefined);
const optional = (least: number, most: number, words: string) =>
  z.union([absent, z.number({ error: words }).min(least, words).max(most, words)]).optional();

/** What was read at the motor at one load. */
export const loadTestRow = z.object({
  /** As the panel shows it. */
  fieldA: z
    .number({ error: 'Write the field current.' })
    .positive('The field current must be above 0 A.')
    .max(5_000, 'The field current is at most 5,000 A.'),
  inputKw: z
    .number({ error: 'Write the input in kW.' })
    .positive('The input must be above 0 kW: a motor that runs takes its losses at least.')
    .max(200_000, 'The input is at most 200,000 kW.'),
  kvar: optional(0, 200_000, 'The kvar lie between 0 and 200,000; whether they lead is said beside.'),
  powerFactor: optional(0.01, 1, 'A power factor lies between 0.01 and 1.'),
  sense: z.enum(['leading', 'lagging']),
  lineA: optional(0.1, 20_000, 'The stator current lies between 0.1 and 20,000 A.'),
  voltageV: optional(50, 40_000, 'The voltage lies between 50 and 40,000 V between lines.'),
});
export type LoadTestRowInput = z.output<typeof loadTestRow>;

/** Where a motor's shaft load comes from, and its load test, as the form sends them. */
export const shaftLoadInput = z
  .object({
    version: z.number().int(),
    source: z.enum(loadSources),
    profile: profileInput.nullable(),
    whenMissing: z.enum(gapLoads),
    loadTest: z.array(loadTestRow).max(40, 'At most 40 rows.'),
  })
  .refine((input) => input.source !== 'profile' || input.profile !== null, {
    path: ['profile'],
    message: 'Write the loads of the day, or take the shift calendar.',
  });
export type ShaftLoadInput = z.output<typeof shaftLoadInput>;

/** How a submeter's file is sent: what it is called, and by what its figures are multiplied. */
export const submeterQuery = z.object({
  fileName: z.string().trim().min(1, 'The file needs a name.').max(255, 'The name of the file is too long.'),
  factor: z.coerce
    .number({ error: 'Write the multiplier as a number.' })
    .positive('The multiplier is above 0.')
    .max(1e6, 'The multiplier is at most 1,000,000.')
    .default(1),
});

/** Which file of a submeter is taken back. */
export const submeterRemoval = z.object({ fileId: z.number({ error: 'Say which file.' }).int().positive() });

/** A file of the motor's submeter. */
export interface SubmeterFileView {
  id: number;
  fileName: string;
  bytes: number;
  factor: number;
  fromMs: number;
  toMs: number;
  stepMinutes: number;
  intervals: number;
  missing: number;
  /** After the multiplier. [kW] */
  highestKw: number;
  totalKwh: number;
  /** What was assumed in reading it. */
  notes: string[];
  broughtAt: string;
}

/** A row of the load test beside the motor's data; kvar delivered are positive. */
export interface LoadTestRowView {
  shaftKw: number;
  shaftPercent: number;
  kvarDelivered: number;
  kvarOff: number | null;
  lineA: number;
  lineOffA: number | null;
  instrumentsOffPercent: number | null;
  fault: 'stands' | 'pull-out' | null;
}

/** A value of the motor that would explain the readings if it were another. */
export interface SuspectView {
  label: string;
  unit: string;
  value: number;
  fitted: number;
  assumed: boolean;
  leftPercent: number;
}

/** What the load test says. */
export interface LoadTestView {
  rows: LoadTestRowView[];
  offPercent: number | null;
  compared: number;
  agrees: boolean;
  suspects: SuspectView[];
}

/** A motor's shaft load over the year as it is told, and by what. */
export interface ShaftLoadView {
  motorId: number;
  version: number;
  source: LoadSource;
  profile: ProfileInput | null;
  whenMissing: GapLoad;
  loadTest: LoadTestRowInput[];
  files: SubmeterFileView[];
  /** What the source gives over the engagement's year. */
  year: {
    hoursRunning: number;
    usualShaftKw: number;
    highestShaftKw: number;
    /** Of a submeter: hours without reading, hours set to the most the field can hold. */
    hoursMissing: number;
    hoursBeyond: number;
  };
  test: LoadTestView | null;
}
