import { z } from 'zod';
import type { ScheduleProblem } from '../core/tariff';
import { isCalendarDate } from '../core/load';
import { mostToleranceMinor } from './pricing';

/** One contract input as a form asks for it. */
export interface ContractField {
  name: string;
  label: string;
  unit: string;
  /** `flag` is yes or no (1, 0), `date` a day written 20260115. */
  kind: 'number' | 'flag' | 'date';
  default: number | null;
  range: readonly [number, number] | null;
  clause: string | null;
}

/** A quantity the schedule looks back at: earlier months may be told, since no bill of the year shows them. */
export interface HistoryField {
  name: string;
  label: string;
  unit: string;
  /** Months back the schedule looks at most. */
  months: number;
}

/** A file of the library, readable or not. */
export interface LibraryEntry {
  id: string;
  fileName: string;
  bytes: number;
  sha256: string;
  title: string | null;
  publisher: string | null;
  status: 'found' | 'memory' | 'invented' | null;
  currency: string | null;
  timeZone: string | null;
  inForce: string | null;
  problems: ScheduleProblem[];
  contract: ContractField[];
  history: HistoryField[];
}

/** The schedule an engagement is priced on. */
export interface ChoiceView {
  scheduleId: string;
  title: string;
  sha256: string;
  contract: Record<string, number>;
  history: Record<string, number[]> | null;
  lineMatches: Record<string, string>;
  toleranceMinor: number;
  contractFields: ContractField[];
  historyFields: HistoryField[];
  version: number;
  /** The library's file is no longer the text kept here, or is gone. */
  library: 'same' | 'changed' | 'gone';
}

const numbers = z.record(z.string(), z.number({ error: 'Write a number.' }));

const toleranceRange = `The tolerance lies between 0 and ${mostToleranceMinor} of the currency's smallest unit.`;

/** What choosing a schedule sends. */
export const chooseInput = z.object({
  scheduleId: z.string().min(1, 'Choose a schedule.'),
  contract: numbers,
  history: z
    .record(
      z.string(),
      z
        .array(z.number({ error: 'Write numbers with blanks between them, such as 5,210 5,340.' }))
        .max(60, 'Sixty months are enough.'),
    )
    .nullable(),
  /** Version of the choice the person saw; null where none was made yet. */
  version: z.number().int().nullable(),
  /** Take the library's file as it stands now instead of the text kept with the engagement. */
  takeNewText: z.boolean(),
  /** Tolerance of a line in minor units; left out, it stays as it is. */
  toleranceMinor: z
    .number({ error: toleranceRange })
    .int(toleranceRange)
    .min(0, toleranceRange)
    .max(mostToleranceMinor, toleranceRange)
    .optional(),
});
export type ChooseInput = z.infer<typeof chooseInput>;

/** What correcting a match sends: which line of the schedule a printed label means; null gives it back to the machine. */
export const lineMatchInput = z.object({
  label: z.string().min(1),
  lineId: z.string().nullable(),
  version: z.number().int(),
});
export type LineMatchInput = z.infer<typeof lineMatchInput>;

/** Line id that says: this printed label belongs to no line of the schedule. */
export const noLine = '-';

/** A date input of a contract, 20260115, as a form shows it: `20260115` -> `2026-01-15`. */
export const fromDateNumber = (value: number) => String(value).replace(/^(\d{4})(\d{2})(\d{2})$/, '$1-$2-$3');

/** A day as a form gives it, as a date input of a contract: `2026-01-15` -> `20260115`. */
export const toDateNumber = (date: string) => Number(date.replaceAll('-', ''));

function fieldSchema(field: ContractField) {
  const name = field.label;
  if (field.kind === 'flag') return z.union([z.literal(0), z.literal(1)], { error: `${name} is yes or no.` });
  if (field.kind === 'date') {
    const message = `${name} is a day of the calendar.`;
    return z.number({ error: message }).refine((value) => isCalendarDate(fromDateNumber(value)), { error: message });
  }
  const number = z.number({ error: `Write a number for ${name}.` });
  if (!field.range) return number;
  const [least, most] = field.range;
  const message = `${name} lies between ${least} and ${most}${field.unit ? ` ${field.unit}` : ''}.`;
  return number.min(least, message).max(most, message);
}

/** Checks contract inputs against what a schedule asks for; what has a default may be left out. Shared by form and server. */
export function contractSchema(fields: ContractField[]) {
  const shape = fields.map((field) => {
    const schema = fieldSchema(field);
    return [field.name, field.default === null ? schema : schema.optional()] as const;
  });
  return z.strictObject(Object.fromEntries(shape));
}
