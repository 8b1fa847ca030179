import { isoDate } from '../load';
import { monthDay, nextMonth } from './bill-months';
import type { BillPlan } from './bill-plan';
import { footerWords } from './cells';
import { IntakeError, intakeError } from './errors';
import { columnLetter } from './grid';
import { isBlankWord } from './numbers';
import { StampScanner } from './stamps';
import type { ColumnUse, IntakeNote, IntakeProblem, ReadOptions } from './types';

/** A bill with the row it stands in and its dates as printed (days since 1970-01-01, NaN where absent). */
export interface DatedRow {
  row: number;
  from: number;
  to: number;
  days: number;
}

/** Where a bill stands, in words. */
export const placeOf = (plan: BillPlan, row: number): string =>
  plan.isTransposed ? `column ${columnLetter(row)}` : `row ${plan.grid.rowNumber(row)}`;

/** Column of a role, -1 if the table has none. */
export const columnFor = (plan: BillPlan, role: ColumnUse['role']): number =>
  plan.columns.find((use) => use.role === role)?.index ?? -1;

/** Columns that say when; -1 where the table has none. */
interface PeriodColumns {
  from: number;
  to: number;
  month: number;
  days: number;
}

/**
 * Dates of every bill, in the order of time.
 * @throws {IntakeError} for dates that cannot be read.
 */
export function readDates(plan: BillPlan, options: ReadOptions, notes: IntakeNote[]): DatedRow[] {
  const { grid, block } = plan;
  const columns: PeriodColumns = {
    from: columnFor(plan, 'period-from'),
    to: columnFor(plan, 'period-to'),
    month: columnFor(plan, 'month'),
    days: columnFor(plan, 'days'),
  };
  const present = [columns.from, columns.to, columns.month].filter((column) => column >= 0);
  if (present.length === 0) {
    throw intakeError(
      'No column holds the period of the bills.',
      options.fileName,
      'Say in the column map which columns are the first and the last day, or which is the month.',
    );
  }
  const rows: DatedRow[] = [];
  const left: string[] = [];
  const problems: IntakeProblem[] = [];
  const scanner = new StampScanner();
  for (let row = block.firstRow; row <= block.lastRow; row += 1) {
    if (grid.width(row) === 0) continue;
    const dated = readRow(plan, row, columns, scanner);
    if (dated) rows.push(dated);
    else if (isNoBill(plan, row, present)) left.push(placeOf(plan, row));
    else problems.push(unreadable(plan, row, present, options));
  }
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
  if (rows.length === 0) {
    throw intakeError(
      'The table holds no bill.',
      options.fileName,
      'Check the first row of bills and the columns of the period in the column map.',
    );
  }
  if (left.length > 0) {
    notes.push({
      code: 'rows-left-out',
      message: `${left.length} undated ${left.length === 1 ? 'row is' : 'rows are'} no bill: totals or remarks.`,
      where: left.slice(0, 8).join(', '),
    });
  }
  return rows.sort((a, b) => startOf(a) - startOf(b) || a.row - b.row);
}

/** The dates of a row; null if any that should be there cannot be read. */
function readRow(plan: BillPlan, row: number, columns: PeriodColumns, scanner: StampScanner): DatedRow | null {
  const { grid, order, decimalMark } = plan;
  const dayOf = (column: number): number => {
    if (order === 'serial') return Math.floor(grid.number(row, column, decimalMark) - 25_569);
    return grid.scan(row, column, scanner) && scanner.resolve(order) ? scanner.day : Number.NaN;
  };
  const days = columns.days >= 0 ? grid.number(row, columns.days, decimalMark) : Number.NaN;
  if (columns.month >= 0) {
    // A month names its own bounds; the end is kept as exclusive.
    const named = monthDay(grid.text(row, columns.month));
    const scanned = Number.isNaN(named) ? dayOf(columns.month) : named;
    const from = Number.isNaN(scanned) ? Number.NaN : monthDay(isoDate(scanned).slice(0, 7));
    return Number.isNaN(from) ? null : { row, from, to: nextMonth(from), days };
  }
  const from = columns.from >= 0 ? dayOf(columns.from) : Number.NaN;
  const to = columns.to >= 0 ? dayOf(columns.to) : Number.NaN;
  const lacks = (columns.from >= 0 && Number.isNaN(from)) || (columns.to >= 0 && Number.isNaN(to));
  return lacks ? null : { row, from, to, days };
}

/** Rows without any date, and rows of totals. */
function isNoBill({ grid }: BillPlan, row: number, present: readonly number[]): boolean {
  if (present.every((column) => isBlankWord(grid.text(row, column)))) return true;
  return [0, 1, 2, ...present].some((column) => footerWords.test(grid.text(row, column)));
}

function unreadable(plan: BillPlan, row: number, present: readonly number[], options: ReadOptions): IntakeProblem {
  const shown = present.map((column) => `“${plan.grid.text(row, column)}”`).join(' to ');
  return {
    message: `The period ${shown} cannot be read as dates.`,
    where: `${options.fileName}, ${placeOf(plan, row)}`,
    remedy: 'Correct the cell, or the order of day and month in the column map.',
  };
}

const startOf = (row: DatedRow): number => (Number.isNaN(row.from) ? row.to : row.from);
