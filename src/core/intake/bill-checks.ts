import { addDays, isoDate } from '../load';
import { isNought } from './bill-documents';
import type { BillDraft } from './bill-drafts';
import type { BillRecord, RateFault } from './bill-types';
import type { IntakeNote, IntakeProblem, ReadOptions } from './types';

/** A bill beside the document it is read from, in the order of time. */
export interface PlacedBill {
  draft: BillDraft;
  bill: BillRecord;
}

/** Periods that run backwards, are too long or overlap; gaps are noted. */
export function checkPeriods(
  placed: readonly PlacedBill[],
  options: ReadOptions,
  notes: IntakeNote[],
): IntakeProblem[] {
  const problems: IntakeProblem[] = [];
  placed.forEach(({ draft, bill }, at) => {
    problems.push(...lengthProblems(draft, bill, options));
    const next = placed[at + 1];
    if (!next) return;
    if (next.draft.dated.from < draft.dated.to) {
      problems.push({
        message: `The bills in ${draft.where} and ${next.draft.where} are of days that overlap, from ${isoDate(next.draft.dated.from)} on.`,
        where: `${options.fileName}, ${draft.where} and ${next.draft.where}`,
        remedy:
          'Leave one of them out in the table of documents: an estimated bill and its correction, or two meters, cannot both stand for the same days.',
      });
    } else if (next.draft.dated.from > draft.dated.to) {
      notes.push({
        code: 'period-gap',
        message: `No bill covers ${bill.period.to} to ${addDays(isoDate(next.draft.dated.from), -1)}.`,
        where: `between ${draft.where} and ${next.draft.where}`,
      });
    } else noteSplit(draft, next.draft, notes);
  });
  return problems;
}

function lengthProblems({ dated, where }: BillDraft, { period }: BillRecord, options: ReadOptions): IntakeProblem[] {
  const place = `${options.fileName}, ${where}`;
  if (dated.to <= dated.from)
    return [
      {
        message: `The period from ${period.from} to ${period.to} has no day.`,
        where: place,
        remedy: 'Check which column is the first and which the last day, and the order of day and month.',
      },
    ];
  if (dated.to - dated.from <= 400) return [];
  return [
    {
      message: `The period from ${period.from} to ${period.to} is longer than a year.`,
      where: place,
      remedy: 'Check the dates of the row and the order of day and month in the column map.',
    },
  ];
}

/** Two short bills that meet within what is usually one period. */
function noteSplit(draft: BillDraft, next: BillDraft, notes: IntakeNote[]): void {
  const [own, other] = [draft, next].map(({ dated }) => dated.to - dated.from);
  const isShort = (own ?? 0) < 25 && (other ?? 0) < 25 && (own ?? 0) + (other ?? 0) <= 35;
  const isSame = draft.invoice !== '' && draft.invoice === next.invoice;
  if (!isShort && !isSame) return;
  notes.push({
    code: 'bill-split',
    message: isSame
      ? `Both carry the invoice ${draft.invoice}: they may be one bill in two parts. Both are read as they are.`
      : 'Two short periods meet within a month: they may be one bill in two parts. Both are read as they are.',
    where: `${draft.where} and ${next.where}`,
  });
}

/** Sums against totals, printed days against the period, noughts. */
export function noteFigures(placed: readonly PlacedBill[], notes: IntakeNote[]): void {
  for (const { draft, bill } of placed) {
    const { where, dated } = draft;
    const days = dated.to - dated.from;
    if (!Number.isNaN(dated.days) && dated.days !== days)
      notes.push({ code: 'days-differ', message: `${dated.days} days are printed, the period has ${days}.`, where });
    if (isNought(draft))
      notes.push({ code: 'nought-bill', message: 'All its figures are nought. It is read as it is.', where });
    if (bill.quantities.powerFactorLeading !== undefined)
      notes.push({
        code: 'pf-leading',
        message: 'Its power factor is leading: it is kept apart from lagging ones.',
        where,
      });
    if (bill.total === null || bill.charges.length === 0) continue;
    const sum = bill.charges.reduce((running, charge) => running + charge.amount, 0);
    if (Math.abs(sum - bill.total) < 0.005 + 1e-9 * Math.abs(sum)) continue;
    notes.push({
      code: 'sum-differs',
      message: `The lines add up to ${sum.toFixed(2)}, the total printed is ${bill.total.toFixed(2)}: ${(bill.total - sum).toFixed(2)} apart.`,
      where,
    });
  }
}

const wholeCurrencies: ReadonlySet<string> = new Set(['JPY', 'KRW', 'VND', 'CLP', 'IDR']);

/** Lines whose quantity times rate is more than a cent off the amount, noted with the working; nothing is corrected. */
export function rateFaults(
  placed: readonly PlacedBill[],
  currency: string | undefined,
  notes: IntakeNote[],
): RateFault[] {
  const coin = wholeCurrencies.has(currency ?? '') ? 1 : 0.01;
  const faults = placed.flatMap(({ draft, bill }, at) =>
    bill.charges.flatMap(({ label, amount, quantity, unit = '', rate }, line): RateFault[] => {
      if (quantity === undefined || rate === undefined) return [];
      const isOff = Math.abs(quantity * rate - amount) > coin * (1 + 1e-6) + Math.abs(amount) * 1e-12;
      return isOff
        ? [{ bill: at, where: draft.places?.[line] ?? draft.where, label, quantity, unit, rate, amount }]
        : [];
    }),
  );
  for (const { label, quantity, unit, rate, amount, where } of faults.slice(0, 200)) {
    const product = quantity * rate;
    notes.push({
      code: 'rate-differs',
      message: `“${label}”: ${quantity}${unit ? ` ${unit}` : ''} times ${rate} make ${product.toFixed(2)}, printed are ${amount.toFixed(2)}: ${(amount - product).toFixed(2)} apart.`,
      where,
    });
  }
  return faults;
}
