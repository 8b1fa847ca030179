import { z } from 'zod';
import type { ScheduleProblem } from '../core/tariff';
import type { ScheduleSheetView } from './schedule-sheet';

/** Ids that are addresses of pages. */
const takenByPages = ['new', 'forms', 'guide', 'check'];

const longest = 200_000;
const textSchema = z.string().max(longest, `A schedule has at most ${longest} characters.`);

/** Id of a schedule of one's own. */
const slugSchema = z
  .string()
  .trim()
  .min(2, 'Give the schedule an id of two signs or more.')
  .max(60, 'An id has at most 60 signs.')
  .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'Write small letters, digits and single hyphens: millrace-large.')
  .refine((slug) => !takenByPages.includes(slug), 'This word is the address of a page. Choose another id.');

/** What a schedule of one's own is begun from. */
const beginningSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('blank') }),
  z.object({ kind: z.literal('form'), id: z.string() }),
  z.object({ kind: z.literal('schedule'), id: z.string() }),
]);
export type Beginning = z.infer<typeof beginningSchema>;

/** What beginning a schedule sends. */
export const newScheduleInput = z.object({
  slug: slugSchema,
  title: z.string().trim().min(1, 'Give the schedule a title.').max(120, 'A title has at most 120 signs.'),
  from: beginningSchema,
});
export type NewScheduleInput = z.infer<typeof newScheduleInput>;

/** What keeping a text sends. */
export const keepRevisionInput = z.object({
  text: textSchema,
  note: z.string().trim().max(300, 'A note has at most 300 signs.'),
  /** Revision the text was begun on; 0 for a file of the library. */
  baseNumber: z.number().int().min(0),
});
export type KeepRevisionInput = z.infer<typeof keepRevisionInput>;

/** What keeping a draft sends. */
export const draftInput = z.object({ text: textSchema, baseNumber: z.number().int().min(0) });
export type DraftInput = z.infer<typeof draftInput>;

/** What putting a schedule away, or bringing it back, sends. */
export const putAwayInput = z.object({ putAway: z.boolean(), version: z.number().int() });
export type PutAwayInput = z.infer<typeof putAwayInput>;

/** A month of an engagement a text can be priced on. */
const monthChoice = z.object({ code: z.string(), billId: z.number().int().positive() });
export type MonthChoice = z.infer<typeof monthChoice>;

/** What looking over a text sends; without `slug` the text stands for itself. */
export const checkInput = z.object({
  slug: z.string().nullable(),
  text: textSchema,
  month: monthChoice.nullable(),
});
export type CheckInput = z.infer<typeof checkInput>;

/** An engagement whose bills a text can be priced on. */
export interface MonthSource {
  code: string;
  title: string;
  /** Whether it is priced on this schedule. */
  uses: boolean;
  bills: { id: number; name: string }[];
}

/** One figure of a worked bill of the text. */
export interface ExampleFigure {
  name: string;
  expected: number;
  found: number | null;
  fits: boolean;
}

/** A worked bill the text must reproduce. */
export interface ExampleView {
  title: string;
  source: string | null;
  line: number | null;
  fits: boolean;
  /** Why it could not be priced; null where it was. */
  problem: string | null;
  figures: ExampleFigure[];
  bill: BillWords | null;
}

/** A bill priced, as the guide and the editor list it. */
export interface BillWords {
  currency: string;
  lines: { id: string; label: string; amount: number; explanation: string }[];
  total: number;
  reactiveCost: number;
}

/** A line of a month under the kept text and under one's own. Amounts in minor units. */
export interface MonthLine {
  id: string;
  label: string;
  quantity: number | null;
  unit: string | null;
  keptMinor: number | null;
  yoursMinor: number | null;
  explanation: string | null;
}

/** A month priced under two texts, beside what was billed. */
export interface MonthView {
  code: string;
  name: string;
  currency: string;
  lines: MonthLine[];
  keptMinor: number | null;
  yoursMinor: number | null;
  billedMinor: number | null;
  /** Why one's own text, or the kept one, does not price it. */
  problem: string | null;
  keptProblem: string | null;
}

/** Everything that can be said of a text. */
export interface CheckView {
  problems: ScheduleProblem[];
  sheet: ScheduleSheetView['sheet'];
  examples: ExampleView[];
  month: MonthView | null;
}

/** A text as it was kept. */
export interface RevisionView {
  number: number;
  note: string | null;
  by: string | null;
  /** ISO instant. */
  at: string;
  sha256: string;
  /** Engagements that stand on it, as far as the person may know. */
  uses: string[];
}

/** A line of the differences of two texts. */
export interface DifferenceLine {
  kind: 'same' | 'added' | 'removed' | 'gap';
  /** Number in the older and in the newer text. */
  before: number | null;
  after: number | null;
  pieces: { text: string; changed: boolean }[];
}

/** What changed between two kept texts. */
export interface DifferenceView {
  before: number;
  after: number;
  added: number;
  removed: number;
  lines: DifferenceLine[];
}

/** Everything the editor begins with. */
export interface EditorView {
  id: string;
  title: string;
  /** Newest kept revision; 0 for a file of the library. */
  revision: number;
  keptText: string;
  draft: { text: string; baseNumber: number; at: string } | null;
  months: MonthSource[];
  uses: string[];
  /** Others who have a draft on it. */
  othersWriting: string[];
}
