import { z } from 'zod';
import type { BillPreview, ColumnEvidence, ColumnMap, Guess, IntakeProblem, IntervalPreview } from '../core/intake';
import { isCalendarDate, isTimeZone } from '../core/load';
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

const latestMs = 8.64e15;

/** What is traced to its file: the interval that begins at an instant, or the bill whose period begins on a day. */
export const tracePoint = z.union(
  [
    z.object({ ms: z.coerce.number().int().min(-latestMs).max(latestMs) }),
    z.object({ from: z.string().refine(isCalendarDate) }),
  ],
  'Say ms, the beginning of an interval, or from, the first day of a bill as YYYY-MM-DD.',
);
