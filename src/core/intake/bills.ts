import { addDays, isoDate } from '../load';
import { placeOf, readDates, type DatedRow } from './bill-dates';
import { settleEnds } from './bill-ends';
import { reportOfBills } from './bill-report';
import type { BillPlan } from './bill-plan';
import { IntakeError, intakeError } from './errors';
import { columnLetter } from './grid';
import { openNotes } from './guesses';
import { isBlankWord } from './numbers';
import type { BillReading, BillRecord, ColumnUse, Guess, IntakeNote, IntakeProblem, ReadOptions } from './types';
import { scaled, unitMeaning } from './units';

/**
 * Reads the bills of a planned table.
 * @throws {IntakeError} for periods that cannot be told, run backwards or overlap, and for cells that hold no figure.
 */
export function readPlannedBills(plan: BillPlan, options: ReadOptions): BillReading & { guesses: Guess[] } {
  const notes: IntakeNote[] = openNotes(plan.guesses, plan.opened);
  const dated = readDates(plan, options, notes);
  const ends = settleEnds(plan, dated, options, notes);
  const bills = dated.map((row) => billOf(plan, row, options));
  checkPeriods(plan, dated, bills, options, notes);
  noteSums(plan, dated, bills, notes);
  return { bills, report: reportOfBills(plan, dated, bills, notes), guesses: [ends] };
}

function billOf(plan: BillPlan, dated: DatedRow, options: ReadOptions): BillRecord {
  const { grid, decimalMark } = plan;
  const quantities: [string, number][] = [];
  const charges: BillRecord['charges'] = [];
  let total: number | null = null;
  for (const use of plan.columns) {
    if (use.role !== 'quantity' && use.role !== 'charge' && use.role !== 'total') continue;
    const text = grid.text(dated.row, use.index);
    if (isBlankWord(text)) continue;
    const figure = grid.number(dated.row, use.index, decimalMark) * (use.factor ?? 1);
    if (Number.isNaN(figure)) {
      throw intakeError(
        `“${text.slice(0, 40)}” under “${use.name}” is no figure.`,
        `${options.fileName}, ${placeOf(plan, dated.row)}`,
        'Correct the cell, or leave the column out in the column map.',
      );
    }
    if (use.role === 'total') total = figure;
    else if (use.role === 'charge')
      charges.push({ label: use.name || `Column ${columnLetter(use.index)}`, amount: figure });
    else quantities.push([use.quantity ?? 'kwh', quantityFigure(use, figure, text)]);
  }
  return {
    period: { from: isoDate(dated.from), to: isoDate(dated.to) },
    quantities: Object.fromEntries(quantities),
    charges,
    total,
  };
}

/** In kWh, kW, kVA, kvarh, kvar; the power factor as a fraction. */
function quantityFigure(use: ColumnUse, figure: number, text: string): number {
  if (use.quantity === 'powerFactor')
    return text.includes('%') || use.unit === '%' || Math.abs(figure) > 1.5 ? figure / 100 : figure;
  return scaled(figure, unitMeaning(use.unit ?? '')?.factor ?? 1);
}

function checkPeriods(
  plan: BillPlan,
  rows: readonly DatedRow[],
  bills: readonly BillRecord[],
  options: ReadOptions,
  notes: IntakeNote[],
): void {
  const problems: IntakeProblem[] = [];
  rows.forEach((row, at) => {
    const bill = bills[at];
    const next = rows[at + 1];
    const place = placeOf(plan, row.row);
    if (!bill) return;
    if (row.to <= row.from) {
      problems.push({
        message: `The period from ${bill.period.from} to ${bill.period.to} has no day.`,
        where: `${options.fileName}, ${place}`,
        remedy: 'Check which column is the first and which the last day, and the order of day and month.',
      });
    } else if (row.to - row.from > 400) {
      problems.push({
        message: `The period from ${bill.period.from} to ${bill.period.to} is longer than a year.`,
        where: `${options.fileName}, ${place}`,
        remedy: 'Check the dates of the row and the order of day and month in the column map.',
      });
    }
    if (!next) return;
    const [own, other] = [placeOf(plan, row.row), placeOf(plan, next.row)];
    if (next.from < row.to) {
      problems.push({
        message: `The bills in ${own} (${bill.period.from} to ${bill.period.to}) and ${other} (from ${isoDate(next.from)}) overlap.`,
        where: `${options.fileName}, ${own} and ${other}`,
        remedy:
          'Keep one of them: an estimated bill and its correction, or two meters, cannot both stand for the same days.',
      });
    } else if (next.from > row.to) {
      notes.push({
        code: 'period-gap',
        message: `No bill covers ${bill.period.to} to ${addDays(isoDate(next.from), -1)}.`,
        where: `between ${own} and ${other}`,
      });
    }
  });
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
}

function noteSums(plan: BillPlan, rows: readonly DatedRow[], bills: readonly BillRecord[], notes: IntakeNote[]): void {
  bills.forEach((bill, at) => {
    if (bill.total === null || bill.charges.length === 0) return;
    const sum = bill.charges.reduce((running, charge) => running + charge.amount, 0);
    if (Math.abs(sum - bill.total) < 0.005 + 1e-9 * Math.abs(sum)) return;
    notes.push({
      code: 'sum-differs',
      message: `The lines add up to ${sum.toFixed(2)}, the total printed is ${bill.total.toFixed(2)}: ${(bill.total - sum).toFixed(2)} apart.`,
      where: placeOf(plan, rows[at]?.row ?? 0),
    });
  });
}
