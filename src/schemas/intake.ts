import { z } from 'zod';
import type { BillPreview, ColumnEvidence, ColumnMap, Guess, IntakeProblem, IntervalPreview } from '../core/intake';
import { isCalendarDate, isTimeZone, type LoadFinding } from '../core/load';
import type { MeterView } from './engagement';
import type { GapFillView } from './gap-fill';
import type { JobProgress } from './job';

export type IntakePreview = IntervalPreview | BillPreview;

/** What the row of a file holds besides its state: what reading found, and the word of the person. */
export interface StoredReading {
  timeZone: string;
  /** Keys of the columns and guesses a person gave their word for. */
  confirmed: string[];
  readWithId: number | null;
  preview: IntakePreview;
}

/** A remembered way to read files of one shape. */
export interface RememberedMap {
  id: number;
  name: string;
  /** ISO instant of its making or last change. */
  at: string;
}

/** A file on its way in, as lists show it. */
export interface IntakeRow {
  id: number;
  kind: 'intervals' | 'bills';
  fileName: string;
  bytes: number;
  sha256: string;
  state: 'reading' | 'read' | 'refused' | 'kept' | 'undone' | 'given-up';
  /** Who brought it in. */
  broughtBy: string | null;
  broughtAt: string;
  keptAt: string | null;
  undoneAt: string | null;
  version: number;
}

/** A file on its way in with everything its four steps show. */
export interface IntakeView extends IntakeRow {
  engagement: { code: string; currency: string; meter: string; yearFrom: string; yearTo: string; siteTimeZone: string };
  /** Zone of stamps without offset. */
  timeZone: string;
  /** Keys of the columns and guesses a person gave their word for. */
  confirmed: string[];
  preview: IntakePreview | null;
  problems: IntakeProblem[];
  /** The job that reads it; null where none does. */
  reading: JobProgress | null;
  /** The remembered map it was read with. */
  readWith: RememberedMap | null;
  /** Remembered maps of files of this shape, newest first. */
  offered: RememberedMap[];
}

/** Name under which a person's word for a column is kept. */
export const columnKey = (column: Pick<ColumnEvidence, 'index'>) => `column:${column.index}`;

/** Name under which a person's word for a decision about the whole file is kept. */
export const guessKey = (guess: Pick<Guess, 'key'>) => `guess:${guess.key}`;

/** What still wants a person's word before the file can be kept. */
export function toConfirm(
  preview: IntakePreview,
  confirmed: readonly string[],
): { columns: ColumnEvidence[]; guesses: Guess[]; count: number } {
  const asks = new Set(confirmed);
  const columns = preview.columns.filter((column) => !column.sure && !asks.has(columnKey(column)));
  const guesses = preview.guesses.filter((guess) => !guess.sure && !asks.has(guessKey(guess)));
  return { columns, guesses, count: columns.length + guesses.length };
}

const shortText = z.string().max(200);
const index = z.number().int().min(0).max(5000);

const columnUse = z.object({
  index,
  name: z.string().max(1000),
  role: z.enum([
    'stamp',
    'date',
    'time',
    'interval-number',
    'stamp-begin',
    'stamp-end',
    'day-value',
    'meter',
    'channel',
    'unit',
    'value',
    'active',
    'export',
    'reactive-lagging',
    'reactive-leading',
    'reactive-signed',
    'apparent',
    'power-factor',
    'sense',
    'quality',
    'period-from',
    'period-to',
    'period',
    'month',
    'year',
    'days',
    'invoice',
    'read-type',
    'quantity',
    'charge',
    'rate',
    'total',
    'line-label',
    'line-quantity',
    'line-unit',
    'line-rate',
    'line-amount',
    'ignore',
  ]),
  unit: shortText.optional(),
  measure: z.enum(['energy', 'power', 'register']).optional(),
  factor: z
    .number('Write the multiplier as a number.')
    .positive('A multiplier is above nought.')
    .max(1e9, 'The multiplier is too large.')
    .optional(),
  quantity: z.string().max(60).optional(),
  charge: z.string().max(1000).optional(),
  times: z.string().max(1000).optional(),
  minuteOfDay: z.number().int().min(0).max(1499).optional(),
});

/** The whole map as a person corrected it. */
export const columnMapInput = z.object({
  kind: z.enum(['intervals', 'bills']),
  sheet: shortText.optional(),
  delimiter: z.string().max(4).optional(),
  decimalMark: z.enum(['.', ',']).optional(),
  headerRow: z.number().int().min(1).max(1_000_000).nullable().optional(),
  firstRow: z.number().int().min(1).max(1_000_000).optional(),
  layout: z.enum(['long', 'wide', 'transposed', 'items']).optional(),
  columns: z.array(columnUse).max(5000).optional(),
  stamp: z
    .object({
      order: z.enum(['DMY', 'MDY', 'YMD', 'serial', 'epoch']).optional(),
      marks: z.enum(['begin', 'end', 'own-day-end']).optional(),
      clock: z.enum(['local', 'standard', 'utc', 'offset']).optional(),
      stepMinutes: z.number().int().min(1).max(60).optional(),
    })
    .optional(),
  meter: shortText.optional(),
  member: z.string().max(1000).optional(),
  periodEnds: z.enum(['inclusive', 'exclusive']).optional(),
  year: z.number().int().min(1970).max(2200).optional(),
  documents: z
    .array(
      z.object({ row: z.number().int().min(1).max(1_000_000), total: z.number().nullable(), isTaken: z.boolean() }),
    )
    .max(2000)
    .optional(),
}) satisfies z.ZodType<ColumnMap>;

const version = z.number().int().min(0);
const confirmed = z.array(z.string().max(40)).max(6000);

/** A correction of the step Match: the file is read again with it. */
export const matchInput = z.object({
  version,
  timeZone: z.string().max(80).refine(isTimeZone, 'Write a time zone such as America/Chicago.'),
  columnMap: columnMapInput,
  confirmed,
});
export type MatchInput = z.infer<typeof matchInput>;

/** A remembered map to read the file with. */
export const useMapInput = z.object({ version, mapId: z.number().int().min(1) });

/** A name for the map the file was read with. */
export const rememberInput = z.object({
  name: z
    .string()
    .trim()
    .min(3, 'Give the map a name of at least three letters.')
    .max(80, 'The name is longer than 80 characters.'),
});

/** Undo, give up: the version of the row the person saw. */
export const intakeStep = z.object({ version });

/** Keep: where the file overlaps what is kept, which of the two stands. */
export const keepStep = z.object({ version, overlap: z.enum(['keep-old', 'keep-new']).optional() });

/** `keep-old`: the file fills only what is not there; `keep-new`: it lies above what is kept, which comes back when it is undone. */
export type OverlapChoice = NonNullable<z.infer<typeof keepStep>['overlap']>;

/** Readings of a file beside the kept ones over a month or the whole stretch. */
export interface IntervalsBeside {
  /** First day of the month; null for the whole. */
  from: string | null;
  inCommon: number;
  equal: number;
  /** Energy of the readings in common. [kWh] */
  keptKwh: number | null;
  comesKwh: number | null;
  /** The interval whose mean power differs most, new less kept; kW, or kvar of the channel named. */
  greatest: { ms: number; channel: 'kwh' | 'kvarhLagging' | 'kvarhLeading'; difference: number } | null;
  onlyKept: number;
  onlyComes: number;
}

/** What is kept of a meter under the span of a file, and what the file brings. */
export interface IntervalsOverlap {
  kind: 'intervals';
  /** Whether a choice is needed: some interval has a reading in both. */
  asks: boolean;
  /** From the first to the last of what both cover; null where they do not meet. */
  span: { fromMs: number; toMs: number } | null;
  /** The kept files under it; a file of another engagement without its name. */
  files: { intakeId: number | null; fileName: string | null }[];
  /** Lengths of interval: kept, of the file, and that in which the two are compared. */
  stepMinutes: { kept: number[]; comes: number; compared: number };
  months: IntervalsBeside[];
  total: IntervalsBeside | null;
  /** Why the new readings cannot go above the kept ones; null where they can. */
  keepNewRefused: string | null;
}

/** What of a bill stands beside another one of the same time. */
export interface BillBeside {
  from: string;
  to: string;
  invoice: string | null;
  isEstimated: boolean;
  kwh: number | null;
  /** Metered or else billed demand. */
  kw: number | null;
  /** Printed, or the sum of the lines where none is. */
  totalMinor: number | null;
}

/** Two bills of one time: that of the file and the kept ones it shares days with. */
export interface BillsBeside {
  comes: BillBeside & { row: string | null };
  kept: (BillBeside & { id: number; fileName: string | null; isJoined: boolean })[];
  /** In what they differ, a sentence each; empty where they are the same bill twice. */
  differences: string[];
}

/** The kept bills that share days with those of a file. */
export interface BillsOverlap {
  kind: 'bills';
  asks: boolean;
  currency: string;
  /** Bills of the file that share no day with a kept one. */
  apart: number;
  bills: BillsBeside[];
}

/** What is kept and what comes, side by side. */
export type IntakeOverlap = IntervalsOverlap | BillsOverlap;

const latestMs = 8.64e15;

/** What is traced to its file: the interval that begins at an instant, or the bill whose period begins on a day. */
export const tracePoint = z.union(
  [
    z.object({ ms: z.coerce.number().int().min(-latestMs).max(latestMs) }),
    z.object({ from: z.string().refine(isCalendarDate) }),
  ],
  'Say ms, the beginning of an interval, or from, the first day of a bill as YYYY-MM-DD.',
);

/** Mean kW of every interval by local day, for the carpet picture; null where missing. */
export interface LoadDays {
  stepMinutes: number;
  days: DayOfLoad[];
}

/** One local day of readings; null where missing. */
export interface DayOfLoad {
  date: string;
  /** Mean kW. */
  readings: (number | null)[];
  /** Mean kvar, lagging less leading: below nought where the plant delivers; absent where the readings carry none. */
  kvar?: (number | null)[];
  /** Positions that are estimated; absent where none is. */
  estimated?: number[];
}

/** The picture of a file before it is kept, and what its readings show that may not be true. */
export interface IntakePicture extends LoadDays {
  findings: LoadFinding[];
}

/** A stretch of missing readings, half-open. */
export interface ReadingGap {
  fromMs: number;
  toMs: number;
  intervals: number;
}

/** A kept file and what of the meter it covers. */
export interface KeptFile {
  intakeId: number;
  fileName: string;
  fromMs: number;
  toMs: number;
  stepMinutes: number;
  intervals: number;
  missing: number;
}

/** Totals of one calendar month of the site's time; null where nothing is known. */
export interface MonthOfLoad {
  /** First day of the month within the year. */
  from: string;
  intervals: number;
  present: number;
  estimated: number;
  kwh: number | null;
  kvarhLagging: number | null;
  kvarhLeading: number | null;
  maxKw: number | null;
  maxKwMs: number | null;
}

/** One interval of a day: minutes after its local midnight, means over the interval. */
export interface DayReading {
  minute: number;
  kw: number | null;
  kvarLagging: number | null;
  kvarLeading: number | null;
}

/** The interval of the highest mean kW and the day it lies in. */
export interface PeakOfYear {
  ms: number;
  /** The kept file it comes from; null where it is estimated here or came with another engagement. */
  intakeId: number | null;
  kw: number;
  date: string;
  minute: number;
  kvarLagging: number | null;
  day: DayReading[];
}

/** What is kept of the engagement's year of one meter, in figures. */
export interface MeterOfYear {
  id: number;
  label: string;
  intervals: number;
  present: number;
  kwh: number | null;
  kvarhLagging: number | null;
  /** Highest mean of an interval. */
  maxKw: number | null;
}

/** What is kept of the engagement's year. */
export interface KeptYear {
  stepMinutes: number;
  intervals: number;
  present: number;
  estimated: number;
  peak: PeakOfYear | null;
  gaps: ReadingGap[];
  gapCount: number;
  /** Gaps that were estimated. */
  fills: GapFillView[];
  findings: LoadFinding[];
  months: MonthOfLoad[];
}

/** The meters billed together, and what could be among them. */
export interface MetersOfYear {
  meters: MeterOfYear[];
  /** All of them added up; null with one meter, or where one has no readings. */
  together: Omit<MeterOfYear, 'id' | 'label'> | null;
  /** Meters of the site that are not among them. */
  others: MeterView[];
}

/** The station Intervals, of one of the engagement's meters. */
export interface IntervalsStation {
  /** The meter shown. */
  meter: MeterView;
  files: IntakeRow[];
  kept: KeptFile[];
  /** By local day; null where nothing is kept. */
  picture: LoadDays | null;
  timeZone: string;
  fromMs: number;
  toMs: number;
  year: KeptYear | null;
}
