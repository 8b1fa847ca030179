import { isoDate } from '../load';
import { bareMonth, monthDay, nextMonth, spanParts } from './bill-months';
import type { BillPlan } from './bill-plan';
import { footerWords } from './cells';
import { IntakeError, intakeError } from './errors';
import { columnLetter } from './grid';
import { isBlankWord } from './numbers';
import { civilDay, StampScanner } from './stamps';
import type { ColumnUse } from './column-map';
import type { IntakeProblem, ReadOptions } from './types';

/** A bill with the row it stands in and its dates as printed (days since 1970-01-01, NaN where absent). */
export interface DatedRow {
  row: number;
  from: number;
  to: number;
  days: number;
}

/** Rows with dates in the order of time, and rows without, in the order of the file. */
interface ReadRows {
  dated: DatedRow[];
  undated: number[];
}

/** Where a bill stands, in words. */
export const placeOf = (plan: BillPlan, row: number): string =>
  plan.isTransposed ? `column ${columnLetter(row)}` : `row ${plan.grid.rowNumber(row)}`;

/** Column of a role, -1 if the table has none. */
export const columnFor = (plan: Pick<BillPlan, 'columns'>, role: ColumnUse['role']): number =>
  plan.columns.find((use) => use.role === role)?.index ?? -1;

/** Columns that say when; -1 where the table has none. */
interface PeriodColumns {
  from: number;
  to: number;
  span: number;
  month: number;
  year: number;
  days: number;
}

/**
 * Dates of every row, in the order of time.
 * @throws {IntakeError} for dates that cannot be read.
 */
export function readDates(plan: BillPlan, options: ReadOptions): ReadRows {
  const { grid, block } = plan;
  const columns = periodColumns(plan);
  const present = [columns.from, columns.to, columns.span, columns.month].filter((column) => column >= 0);
  if (present.length === 0) {
    throw intakeError(
      'No column holds the period of the bills.',
      options.fileName,
      'Say in the column map which columns are the first and the last day, or which is the month.',
    );
  }
  checkYear(plan, columns, options);
  const dated: DatedRow[] = [];
  const undated: number[] = [];
  const problems: IntakeProblem[] = [];
  const scanner = new StampScanner();
  for (let row = block.firstRow; row <= block.lastRow; row += 1) {
    if (grid.width(row) === 0) continue;
    const found = isSumRow(plan, row) ? null : readRow(plan, row, columns, scanner);
    if (found) dated.push(found);
    else if (isNoBill(plan, row, present)) undated.push(row);
    else problems.push(unreadable(plan, row, present, options));
  }
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
  if (dated.length === 0) {
    throw intakeError(
      'The table holds no bill.',
      options.fileName,
      'Check the first row of bills and the columns of the period in the column map.',
    );
  }
  return { dated: dated.sort((a, b) => startOf(a) - startOf(b) || a.row - b.row), undated };
}

function periodColumns(plan: BillPlan): PeriodColumns {
  return {
    from: columnFor(plan, 'period-from'),
    to: columnFor(plan, 'period-to'),
    span: columnFor(plan, 'period'),
    month: columnFor(plan, 'month'),
    year: columnFor(plan, 'year'),
    days: columnFor(plan, 'days'),
  };
}

/** Months without a year can be read only where the year stands somewhere about the table. */
function checkYear({ grid, block, years }: BillPlan, { month, year }: PeriodColumns, options: ReadOptions): void {
  if (month < 0 || year >= 0 || years || bareMonth(grid.text(block.firstRow, month)) === 0) return;
  throw intakeError(
    `The months carry no year: “${grid.text(block.firstRow, month)}” could be of any.`,
    options.fileName,
    'Write the year into the column of months or above the table, or say it in the column map.',
  );
}

/** The dates of a row; null if any that should be there cannot be read. */
function readRow(plan: BillPlan, row: number, columns: PeriodColumns, scanner: StampScanner): DatedRow | null {
  const { grid, order, decimalMark } = plan;
  const dayOf = (column: number): number => {
    if (order === 'serial') return Math.floor(grid.number(row, column, decimalMark) - 25_569);
    return grid.scan(row, column, scanner) && scanner.resolve(order) ? scanner.day : Number.NaN;
  };
  const days = columns.days >= 0 ? grid.number(row, columns.days, decimalMark) : Number.NaN;
  if (columns.span >= 0) {
    const [from, to] = (spanParts(grid.text(row, columns.span)) ?? ['', '']).map((part) =>
      part !== '' && scanner.scan(part, 0, part.length) && scanner.resolve(order) ? scanner.day : Number.NaN,
    );
    return from === undefined || to === undefined || Number.isNaN(from + to) ? null : { row, from, to, days };
  }
  if (columns.month >= 0) {
    // A month names its own bounds; the end is kept as exclusive.
    const named = monthOf(plan, row, columns);
    const scanned = Number.isNaN(named) ? dayOf(columns.month) : named;
    const from = Number.isNaN(scanned) ? Number.NaN : monthDay(isoDate(scanned).slice(0, 7));
    return Number.isNaN(from) ? null : { row, from, to: nextMonth(from), days };
  }
  const from = columns.from >= 0 ? dayOf(columns.from) : Number.NaN;
  const to = columns.to >= 0 ? dayOf(columns.to) : Number.NaN;
  const lacks = (columns.from >= 0 && Number.isNaN(from)) || (columns.to >= 0 && Number.isNaN(to));
  return lacks ? null : { row, from, to, days };
}

/** First day of the month of a row; its year may stand in another column or about the table. */
function monthOf({ grid, years }: BillPlan, row: number, { month, year }: PeriodColumns): number {
  const text = grid.text(row, month);
  if (year >= 0) {
    const number = /^\d{1,2}$/.test(text) ? Number(text) : bareMonth(text);
    return number >= 1 && number <= 12 ? civilDay(Number(grid.text(row, year)), number, 1) : Number.NaN;
  }
  const own = monthDay(text);
  return Number.isNaN(own) && years ? civilDay(years.yearOf.get(row) ?? Number.NaN, bareMonth(text), 1) : own;
}

const sumWords = /^["'\s]*(grand\s+)?(sub-?)?(totals?|sum|summe|gesamt|totale|suma|somme)\b|\b(totals?|sum)\s*$/i;

/** A row of sums may carry dates: those of the whole table. */
const isSumRow = ({ grid, isItems }: BillPlan, row: number): boolean =>
  !isItems && [0, 1, 2].some((column) => sumWords.test(grid.text(row, column)));

/** Rows without any date, and rows of totals. */
function isNoBill(plan: BillPlan, row: number, present: readonly number[]): boolean {
  const { grid } = plan;
  if (isSumRow(plan, row) || present.every((column) => isBlankWord(grid.text(row, column)))) return true;
  return [0, 1, 2, ...present].some(
    (column) => footerWords.test(grid.text(row, column)) || sumWords.test(grid.text(row, column)),
  );
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
