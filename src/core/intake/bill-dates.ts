import { isoDate } from '../load';
import { monthDay, nextMonth } from './bill-months';
import type { BillPlan } from './bill-plan';
import { footerWords } from './cells';
import { IntakeError, intakeError } from './errors';
import { guess, type Test } from './evidence';
import { columnLetter } from './grid';
import { isBlankWord } from './numbers';
import { StampScanner } from './stamps';
import type { ColumnUse, Guess, IntakeNote, IntakeProblem, ReadOptions } from './types';

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

const columnFor = (plan: BillPlan, role: ColumnUse['role']): number =>
  plan.columns.find((use) => use.role === role)?.index ?? -1;

/**
 * Dates of every bill, in the order of time.
 * @throws {IntakeError} for dates that cannot be read.
 */
export function readDates(plan: BillPlan, options: ReadOptions, notes: IntakeNote[]): DatedRow[] {
  const { grid, block } = plan;
  const scanner = new StampScanner();
  const [from, to, month, days] = (['period-from', 'period-to', 'month', 'days'] as const).map((role) =>
    columnFor(plan, role),
  );
  if ((from ?? -1) < 0 && (to ?? -1) < 0 && (month ?? -1) < 0) {
    throw intakeError(
      'No column holds the period of the bills.',
      options.fileName,
      'Say in the column map which columns are the first and the last day, or which is the month.',
    );
  }
  const dayOf = (row: number, column: number | undefined): number => {
    if (column === undefined || column < 0) return Number.NaN;
    if (plan.order === 'serial') return Math.floor(grid.number(row, column, plan.decimalMark) - 25_569);
    return grid.scan(row, column, scanner) && scanner.resolve(plan.order) ? scanner.day : Number.NaN;
  };
  const rows: DatedRow[] = [];
  const left: string[] = [];
  const problems: IntakeProblem[] = [];
  for (let row = block.firstRow; row <= block.lastRow; row += 1) {
    if (grid.width(row) === 0) continue;
    const dated: DatedRow = {
      row,
      from: dayOf(row, from),
      to: dayOf(row, to),
      days: days !== undefined && days >= 0 ? grid.number(row, days, plan.decimalMark) : Number.NaN,
    };
    if (month !== undefined && month >= 0) readMonth(plan, row, month, dated, scanner);
    const lacks = [from, to, month]
      .filter((column) => column !== undefined && column >= 0)
      .every((column) => isBlankWord(grid.text(row, column ?? 0)));
    const isFooter = [0, 1, 2, from, to, month].some(
      (column) => column !== undefined && column >= 0 && footerWords.test(grid.text(row, column)),
    );
    const isRead =
      month !== undefined && month >= 0
        ? !Number.isNaN(dated.from)
        : (from === undefined || from < 0 || !Number.isNaN(dated.from)) &&
          (to === undefined || to < 0 || !Number.isNaN(dated.to));
    if (isRead) rows.push(dated);
    else if (lacks || isFooter) left.push(placeOf(plan, row));
    else {
      const shown = [from, to, month]
        .filter((column) => column !== undefined && column >= 0)
        .map((column) => `“${grid.text(row, column ?? 0)}”`);
      problems.push({
        message: `The period ${shown.join(' to ')} cannot be read as dates.`,
        where: `${options.fileName}, ${placeOf(plan, row)}`,
        remedy: 'Correct the cell, or the order of day and month in the column map.',
      });
    }
  }
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
  if (rows.length === 0)
    throw intakeError(
      'The table holds no bill.',
      options.fileName,
      'Check the first row of bills and the columns of the period in the column map.',
    );
  if (left.length > 0)
    notes.push({
      code: 'rows-left-out',
      message: `${left.length} undated ${left.length === 1 ? 'row is' : 'rows are'} no bill: totals or remarks.`,
      where: left.slice(0, 8).join(', '),
    });
  return rows.sort((a, b) => startOf(a) - startOf(b) || a.row - b.row);
}

const startOf = (row: DatedRow): number => (Number.isNaN(row.from) ? row.to : row.from);

/** A month names its own bounds; the end is stored as exclusive. */
function readMonth(plan: BillPlan, row: number, column: number, dated: DatedRow, scanner: StampScanner): void {
  const text = plan.grid.text(row, column);
  const named = monthDay(text);
  const scanned =
    Number.isNaN(named) && plan.grid.scan(row, column, scanner) && scanner.resolve(plan.order)
      ? scanner.day
      : Number.NaN;
  const first = Number.isNaN(named) ? monthDay(Number.isNaN(scanned) ? '' : isoDate(scanned).slice(0, 7)) : named;
  dated.from = first;
  dated.to = Number.isNaN(first) ? Number.NaN : nextMonth(first);
}

/** Decides whether the last day printed belongs to the period, and makes every `to` exclusive. */
export function settleEnds(plan: BillPlan, rows: DatedRow[], options: ReadOptions, notes: IntakeNote[]): Guess {
  if (columnFor(plan, 'month') >= 0) return guess('period-ends', 'whole months', [[true, 'Each bill names its month']]);
  const hasFrom = columnFor(plan, 'period-from') >= 0;
  const hasTo = columnFor(plan, 'period-to') >= 0;
  if (!hasFrom || !hasTo) return settleSingleDates(plan, rows, hasFrom, options, notes);
  const votes = { inclusive: 0, exclusive: 0 };
  const tests: Test[] = [];
  rows.forEach((row, at) => {
    const next = rows[at + 1];
    if (next && next.from === row.to + 1) votes.inclusive += 1;
    if (next && next.from === row.to) votes.exclusive += 1;
  });
  const pairs = rows.length - 1;
  let ends: 'inclusive' | 'exclusive' = votes.inclusive > votes.exclusive ? 'inclusive' : 'exclusive';
  const byDays = {
    inclusive: rows.filter((row) => row.to - row.from + 1 === row.days).length,
    exclusive: rows.filter((row) => row.to - row.from === row.days).length,
  };
  if (votes.inclusive + votes.exclusive > 0)
    tests.push([
      votes[ends] > votes[ends === 'inclusive' ? 'exclusive' : 'inclusive'],
      `${votes[ends]} of ${pairs} periods ${ends === 'inclusive' ? 'end the day before the next begins' : 'end on the day the next begins'}`,
    ]);
  if (byDays.inclusive + byDays.exclusive > 0) {
    const days = byDays.inclusive > byDays.exclusive ? 'inclusive' : 'exclusive';
    if (votes.inclusive === votes.exclusive) ends = days;
    tests.push([
      days === ends,
      `The days printed count the last day ${days === 'inclusive' ? 'in' : 'out'} (${byDays[days]} of ${rows.length})`,
    ]);
  }
  if (tests.length === 0) {
    const isMonthEnd = rows.every((row) => isoDate(row.to + 1).endsWith('-01'));
    ends = isMonthEnd ? 'inclusive' : 'exclusive';
    tests.push([
      isMonthEnd,
      isMonthEnd
        ? 'Every period ends on the last day of a month'
        : 'Nothing tells whether the last day belongs to the period',
    ]);
  }
  const given = plan.columnMap.periodEnds;
  const isOverruled = given !== undefined && given !== ends;
  const settled = given ?? ends;
  plan.columnMap.periodEnds = settled;
  if (settled === 'inclusive') for (const row of rows) row.to += 1;
  notes.push({
    code: 'period-ends',
    message:
      settled === 'inclusive'
        ? 'The last day printed belongs to its period.'
        : 'The last day printed belongs to the next period: periods run from reading to reading.',
  });
  return guess(
    'period-ends',
    settled === 'inclusive' ? 'last day included' : 'last day not included',
    isOverruled ? [[true, 'Given by the column map']] : tests,
  );
}

/** One date a bill: periods run from one date to the next, the first by its printed days or dropped. */
function settleSingleDates(
  plan: BillPlan,
  rows: DatedRow[],
  hasFrom: boolean,
  options: ReadOptions,
  notes: IntakeNote[],
): Guess {
  rows.forEach((row, at) => {
    const neighbour = hasFrom ? rows[at + 1] : rows[at - 1];
    if (hasFrom) row.to = Number.isNaN(row.days) ? (neighbour?.from ?? Number.NaN) : row.from + row.days;
    else row.from = Number.isNaN(row.days) ? (neighbour?.to ?? Number.NaN) : row.to - row.days;
  });
  const open = rows.find((row) => Number.isNaN(row.from) || Number.isNaN(row.to));
  if (open) {
    if (rows.length === 1)
      throw intakeError(
        'The only bill has one date, so its period cannot be told.',
        `${options.fileName}, ${placeOf(plan, open.row)}`,
        'Add a column with the first day or with the days of the period.',
      );
    notes.push({
      code: 'period-open',
      message: `The ${hasFrom ? 'last' : 'first'} bill has no ${hasFrom ? 'end' : 'beginning'} and is left out.`,
      where: placeOf(plan, open.row),
    });
    rows.splice(rows.indexOf(open), 1);
  }
  return guess('period-ends', 'from date to date', [[false, 'Each bill has one date']]);
}
