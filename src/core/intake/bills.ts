import { isoDate } from '../load';
import { checkPeriods, noteFigures, rateFaults, type PlacedBill } from './bill-checks';
import { currencyOf } from './bill-currency';
import { placeOf, readDates } from './bill-dates';
import { settleDocuments, type Settled } from './bill-documents';
import { draftOf, type BillDraft } from './bill-drafts';
import { settleEnds } from './bill-ends';
import { itemDrafts } from './bill-item-drafts';
import { checkMeters, metersOf, noteMeters } from './bill-meters';
import { joinedDraft } from './bill-parts';
import type { BillPlan } from './bill-plan';
import { documentsOf, noteDocuments, reportOfBills } from './bill-report';
import { IntakeError } from './errors';
import { guess } from './evidence';
import { openNotes } from './guesses';
import type { BillDocument, BillRecord } from './bill-types';
import type { BillReading, Guess, IntakeNote, IntakeProblem, ReadOptions } from './types';

/** What a table of bills holds, whether or not it can stand. */
export interface BillTable {
  documents: BillDocument[];
  meters: string[];
  guesses: Guess[];
  problems: IntakeProblem[];
  reading: BillReading;
}

/**
 * Reads the bills of a planned table.
 * @throws {IntakeError} for periods that cannot be told, run backwards or overlap, and for cells that hold no figure.
 */
export function readPlannedBills(plan: BillPlan, options: ReadOptions): BillReading {
  const { reading, problems } = readBillTable(plan, options);
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
  return reading;
}

/**
 * As `readPlannedBills`, with the documents and what speaks against them as bills.
 * @throws {IntakeError} for dates and figures that cannot be read, several meters, several currencies.
 */
export function readBillTable(plan: BillPlan, options: ReadOptions): BillTable {
  const notes: IntakeNote[] = openNotes(plan.guesses, plan.opened);
  const meters = metersOf(plan);
  checkMeters(plan, meters, options);
  const { dated, undated } = readDates(plan, options);
  noteMeters(plan, dated, notes);
  const drafts = draftsOf(plan, dated, options, notes).filter(
    ({ meter }) => meters.length === 0 || meter === plan.columnMap.meter || meters.length === 1,
  );
  noteUndated(plan, undated, notes);
  const ends = settleEnds(
    plan,
    drafts.map((draft) => draft.dated),
    options,
    notes,
  );
  const rowOf = (draft: BillDraft): number => plan.grid.rowNumber(draft.dated.row);
  const settled = settleDocuments(drafts, plan.columnMap.documents ?? [], rowOf);
  const placed = placedBills(settled);
  const problems = checkPeriods(placed, options, notes);
  noteDocuments(settled, notes);
  noteFigures(placed, notes);
  const rows = drafts.flatMap((draft) => draft.rows);
  const currency = currencyOf(plan, rows, options);
  const faults = rateFaults(placed, currency, notes);
  const documents = documentsOf(plan, settled, placed);
  const report = reportOfBills(plan, placed, { notes, currency, documents, rateFaults: faults });
  const meterGuess = plan.columnMap.meter
    ? [guess('meter', plan.columnMap.meter, [[true, `One of ${meters.length} in the file`]])]
    : [];
  return {
    documents,
    meters,
    problems,
    guesses: [ends, ...meterGuess],
    reading: { bills: placed.map(({ bill }) => bill), report },
  };
}

function draftsOf(
  plan: BillPlan,
  dated: Parameters<typeof itemDrafts>[1],
  options: ReadOptions,
  notes: IntakeNote[],
): BillDraft[] {
  return plan.isItems ? itemDrafts(plan, dated, options, notes) : dated.map((row) => draftOf(plan, row, options));
}

function noteUndated(plan: BillPlan, undated: readonly number[], notes: IntakeNote[]): void {
  if (undated.length === 0) return;
  notes.push({
    code: 'rows-left-out',
    message: `${undated.length} undated ${undated.length === 1 ? 'row is' : 'rows are'} no bill: totals or remarks.`,
    where: undated
      .slice(0, 8)
      .map((row) => placeOf(plan, row))
      .join(', '),
  });
}

/** The bills that stand, in the order of time. */
function placedBills(settled: readonly Settled[]): PlacedBill[] {
  return settled
    .filter((one) => one.stands && !one.into)
    .map((one) =>
      joinedDraft(
        one,
        settled.filter((other) => other.stands && other.into === one),
      ),
    )
    .sort((a, b) => a.dated.from - b.dated.from || a.dated.row - b.dated.row)
    .map((draft) => ({ draft, bill: billOf(draft) }));
}

const billOf = ({ dated, quantities, charges, total, invoice, marks }: BillDraft): BillRecord => ({
  period: { from: isoDate(dated.from), to: isoDate(dated.to) },
  quantities,
  charges,
  total,
  ...(invoice ? { invoice } : {}),
  ...(marks.has('estimated') && !marks.has('corrected') ? { isEstimated: true } : {}),
});
