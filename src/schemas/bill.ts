import { z } from 'zod';
import { isCalendarDate } from '../core/load';
import { placesShape, type BillPages, type Places } from './attachment';
import type { IntakeRow } from './intake';

/** A line charge as printed. */
export interface BillLineView {
  id: number;
  label: string;
  amountMinor: number;
  /** What the amount was worked out from, where the bill prints it. */
  quantity?: number | null;
  unit?: string | null;
  /** Per unit, in major units of the currency; with the unit `%` a percentage of the quantity. */
  rate?: number | null;
}

/** A kept bill with its lines, period [from, to). */
export interface BillView {
  id: number;
  /** Goes back with a change, so that two people do not overwrite each other. */
  version: number;
  from: string;
  to: string;
  days: number;
  /** As printed, by name; energies in kWh and kvarh, demands in kW and kVA, power factor as a fraction. */
  quantities: Record<string, number>;
  currency: string;
  lines: BillLineView[];
  linesMinor: number;
  /** The total as printed; null where the bill shows none. */
  totalMinor: number | null;
  /** Sum of the lines less the printed total; null without a total or without lines. */
  differenceMinor: number | null;
  /** The file the bill came in; null where it was typed. */
  source: { intakeId: number; fileName: string; row: string | null } | null;
  /** The bill itself, as PDF or photo. */
  pages?: BillPages[];
  /** Where on the pages a value was taken from, by field. */
  places?: Places;
  /** Number of the invoice as printed; null where none is known, or where several are joined. */
  invoice?: string | null;
  /** Day the meter was read. */
  readOn?: string | null;
  /** Whether the utility estimated the reading. */
  estimated?: boolean;
  /** The invoices that make this bill together, in order; absent where one invoice is the bill. */
  parts?: BillView[];
  /** Why they are one bill, as a person wrote it. */
  joinNote?: string | null;
}

/** Days of a half-open period. */
export const daysBetween = (from: string, to: string) => Math.round((Date.parse(to) - Date.parse(from)) / 86_400_000);

const demandLine = /demand|capacity|\bkw\b|\bkva\b/i;
const demandQuantities = ['billedKw', 'billedKva'];

/** Whether a bill asks for demand: a line of that name with an amount, or a billed demand. */
export function billsDemand({ lines, quantities }: BillView): boolean {
  const named = lines.filter((line) => demandLine.test(line.label));
  if (named.length > 0) return named.some((line) => line.amountMinor !== 0);
  return demandQuantities.some((name) => (quantities[name] ?? 0) > 0);
}

/** A quantity that bills print, with its unit. */
export interface BillQuantity {
  name: string;
  label: string;
  unit: string;
  decimals: number;
}

/** Quantities a bill is likely to print, in the order of the form and the table. */
export const billQuantities: readonly BillQuantity[] = [
  { name: 'kwh', label: 'Energy', unit: 'kWh', decimals: 0 },
  { name: 'kwhPeak', label: 'Energy, on peak', unit: 'kWh', decimals: 0 },
  { name: 'kwhShoulder', label: 'Energy, shoulder', unit: 'kWh', decimals: 0 },
  { name: 'kwhOffPeak', label: 'Energy, off peak', unit: 'kWh', decimals: 0 },
  { name: 'maxKw', label: 'Peak demand', unit: 'kW', decimals: 0 },
  { name: 'billedKw', label: 'Billed demand', unit: 'kW', decimals: 0 },
  { name: 'maxKva', label: 'Peak demand', unit: 'kVA', decimals: 0 },
  { name: 'billedKva', label: 'Billed demand', unit: 'kVA', decimals: 0 },
  { name: 'kvarh', label: 'Reactive, lagging', unit: 'kvarh', decimals: 0 },
  { name: 'kvarhLeading', label: 'Reactive, leading', unit: 'kvarh', decimals: 0 },
  { name: 'maxKvar', label: 'Peak reactive', unit: 'kvar', decimals: 0 },
  { name: 'powerFactor', label: 'Power factor', unit: '', decimals: 4 },
];

const unitEndings: [RegExp, string][] = [
  [/kwh/i, 'kWh'],
  [/kvarh/i, 'kvarh'],
  [/kvar$/i, 'kvar'],
  [/kva$/i, 'kVA'],
  [/kw$/i, 'kW'],
];

/** What a quantity is called on the screen; one that is not among the usual ones keeps its own name. */
export function billQuantity(name: string): BillQuantity {
  const known = billQuantities.find((quantity) => quantity.name === name);
  if (known) return known;
  const unit = unitEndings.find(([pattern]) => pattern.test(name))?.[1] ?? '';
  return { name, label: name, unit, decimals: /factor|^pf/i.test(name) ? 4 : 0 };
}

/** The name of a line without the currency that a head of a column carries: `Energy charge (USD)` -> `Energy charge`. */
export function lineLabel(head: string, currency: string): string {
  const bare = head.replace(new RegExp(`[\\s,]*[([]?\\b${currency}\\b[)\\]]?\\s*$`, 'i'), '').trim();
  return bare === '' ? head : bare;
}

const localDate = z.string().refine(isCalendarDate, 'Write a day of the calendar, such as 9 Jun 2026.');
const amountMinor = z
  .number('Write an amount, such as 1,947.33.')
  .int('An amount cannot be finer than the smallest coin of the currency.')
  .min(-1e13, 'The amount is too large.')
  .max(1e13, 'The amount is too large.');
const quantity = z
  .number('Write a number, such as 2,479,826.')
  .min(0, 'A printed quantity is not negative.')
  .max(1e12, 'The quantity is too large.');

const signedNumber = z
  .number('Write a number, such as 0.00376.')
  .min(-1e12, 'The number is too large.')
  .max(1e12, 'The number is too large.');

/** A period asked about, half-open. */
export const billPeriod = z
  .object({ from: localDate, to: localDate })
  .refine(({ from, to }) => from < to && daysBetween(from, to) <= 400, {
    path: ['to'],
    message: 'The period ends after it begins and covers at most 400 days.',
  });

/** A bill typed or changed by hand, period half-open. */
export const billInput = z
  .object({
    from: localDate,
    to: localDate,
    quantities: z
      .record(z.string().regex(/^[a-z][A-Za-z0-9]{0,40}$/, 'A quantity has a name such as kwhPeak.'), quantity)
      .refine((quantities) => (quantities.powerFactor ?? 1) <= 1, {
        path: ['powerFactor'],
        message: 'A power factor lies between 0 and 1.',
      }),
    lines: z
      .array(
        z.object({
          label: z
            .string()
            .trim()
            .min(1, 'Name the line as the bill does.')
            .max(120, 'The name is longer than 120 characters.'),
          amountMinor,
          quantity: signedNumber.nullish(),
          unit: z.string().trim().max(20, 'The unit is longer than 20 characters.').nullish(),
          rate: signedNumber.nullish(),
        }),
      )
      .max(60, 'A bill has at most 60 lines here; add small ones together.'),
    totalMinor: amountMinor.nullable(),
    places: placesShape.optional(),
    /** Waiting pages that go with the bill. */
    attachmentIds: z.array(z.number().int().positive()).max(50, 'A bill takes at most 50 files of pages.').optional(),
    invoice: z.string().trim().max(60, 'The number is longer than 60 characters.').nullish(),
    readOn: localDate.nullish(),
    estimated: z.boolean().optional(),
  })
  .refine((bill) => bill.from < bill.to, { path: ['to'], message: 'The last day lies before the first.' })
  .refine((bill) => !(bill.from < bill.to) || daysBetween(bill.from, bill.to) <= 400, {
    path: ['to'],
    message: 'A bill covers at most 400 days. Look at the years of the two dates.',
  })
  .refine((bill) => !bill.readOn || Math.abs(daysBetween(bill.to, bill.readOn)) <= 120, {
    path: ['readOn'],
    message: 'The meter is read about the end of the period. Look at the month and the year.',
  })
  .refine((bill) => bill.lines.length > 0 || bill.totalMinor !== null, {
    path: ['totalMinor'],
    message: 'Type at least one line or the printed total.',
  });

export type BillInput = z.infer<typeof billInput>;

/** A changed bill carries the version its editor saw. */
export const billChange = z.object({ version: z.number().int().min(0), bill: billInput });
export const billRemoval = z.object({ version: z.number().int().min(0) });

/** The most days that invoices joined to one bill may cover: two months. */
export const mostJoinedDays = 70;

/** Invoices that make one bill together, each with the version seen. */
export const billJoin = z.object({
  bills: z
    .array(z.object({ id: z.number().int().positive(), version: z.number().int().min(0) }))
    .min(2, 'Name the invoices that make one bill: two or more.')
    .max(6, 'At most six invoices make one bill.')
    .refine((bills) => new Set(bills.map(({ id }) => id)).size === bills.length, 'Name each invoice once.'),
  note: z.string().trim().max(500, 'The reason is longer than 500 characters.').default(''),
});
export type BillJoin = z.infer<typeof billJoin>;

/** Bills that look like the invoices of one bill. */
export interface JoinSuggestion {
  ids: number[];
  from: string;
  to: string;
  /** On how many of them demand is billed: on one, where they are one bill. */
  demandBilledOn: number;
}

/** A stretch of the engagement's year that no bill covers, or that two cover, [from, to). */
export interface PeriodFlaw {
  kind: 'gap' | 'overlap';
  from: string;
  to: string;
  days: number;
}

/** Gaps and overlaps of periods, in order; with a year given also those at its ends. */
export function periodFlaws(
  periods: readonly { from: string; to: string }[],
  year?: { from: string; to: string },
): PeriodFlaw[] {
  const flaws: PeriodFlaw[] = [];
  const add = (kind: PeriodFlaw['kind'], from: string, to: string) =>
    flaws.push({ kind, from, to, days: daysBetween(from, to) });
  const ordered = [...periods].sort((a, b) => a.from.localeCompare(b.from) || a.to.localeCompare(b.to));
  let reached = year?.from ?? ordered[0]?.from;
  if (reached === undefined) return [];
  ordered.forEach(({ from, to }, index) => {
    if (from > reached!) add('gap', reached!, from);
    else if (index > 0 && from < reached!) add('overlap', from, to < reached! ? to : reached!);
    if (to > reached!) reached = to;
  });
  if (year && reached < year.to) add('gap', reached, year.to);
  return flaws;
}

/** One printed quantity beside what the kept readings say. */
export interface MeterFigure {
  name: string;
  printed: number;
  /** From the readings that are present; null where the meter does not record it. */
  metered: number | null;
  /** Null where readings are missing or it is not metered, and nothing contradicts. */
  agrees: boolean | null;
}

/** One bill beside the kept readings of its period. */
export interface MeterCheck {
  billId: number;
  /** Readings of the period: all, missing, estimated. */
  expected: number;
  missing: number;
  estimated: number;
  figures: MeterFigure[];
  /** What differs and what would make it agree, a sentence each. */
  remarks: string[];
}

/** What the kept readings say of a period, for the form; `null` where none of it is kept or metered. */
export interface MeteredPeriod {
  expected: number;
  missing: number;
  estimated: number;
  kwh: number;
  kvarh: number | null;
  kvarhLeading: number | null;
  maxKw: number | null;
  maxKva: number | null;
  powerFactorAtPeak: number | null;
  powerFactorOfPeriod: number | null;
}

/** The station Bills. */
export interface BillsStation {
  code: string;
  currency: string;
  timeZone: string;
  year: { from: string; to: string };
  /** Bills whose middle day lies in the year, in order. */
  bills: BillView[];
  /** The others: earlier ones, and later ones for the proof. */
  laterBills: BillView[];
  files: IntakeRow[];
  /** Bills of the year beside the readings, where any of their period is kept. */
  meterChecks: MeterCheck[];
  /** Bills that look like the invoices of one bill. */
  joinable: JoinSuggestion[];
}
