import { footerWords } from './cells';
import type { ColumnPlan } from './extract';
import { columnLetter, type Grid } from './grid';
import { isBlankWord } from './numbers';
import { StampScanner } from './stamps';
import type { ColumnUse, DateOrder } from './column-map';
import type { IntakeNote } from './types';

/** Stamps of every usable row. */
interface StampRows {
  walls: Float64Array;
  offsets: Float64Array | null;
  spans: Float64Array | null;
  days: Float64Array | null;
  rows: Uint32Array;
  badStamps: { place: string; text: string }[];
  notes: IntakeNote[];
}

type StampReader = (row: number) => number;

/** Reads the stamp of every row of a long table, one meter's rows only; minutes of the wall clock. */
export function readStamps(plan: ColumnPlan): StampRows {
  const { grid, block } = plan;
  const scanner = new StampScanner();
  const wallOf = stampReader(plan, scanner);
  const endColumn = plan.columns.find((use) => use.role === 'stamp-end')?.index ?? -1;
  const hasBegin = plan.columns.some((use) => use.role === 'stamp-begin');
  const isWanted = meterFilter(plan);
  const count = Math.max(0, block.lastRow - block.firstRow + 1);
  const walls = new Float64Array(count);
  const offsets = new Float64Array(count);
  const spans = hasBegin && endColumn >= 0 ? new Float64Array(count) : null;
  const isNumbered = plan.columns.some((use) => use.role === 'interval-number');
  const days = isNumbered ? new Float64Array(count) : null;
  const rows = new Uint32Array(count);
  const order: DateOrder = plan.stamp.order ?? 'YMD';
  const left: { row: number; text: string }[] = [];
  const badStamps: StampRows['badStamps'] = [];
  let used = 0;
  let hasOffset = false;
  const stampColumn = mainColumn(plan.columns);
  for (let row = block.firstRow; row <= block.lastRow; row += 1) {
    if (isWanted && !isWanted(row)) continue;
    const wall = wallOf(row);
    if (Number.isNaN(wall)) {
      if (isLeftOut(grid, row, plan, left)) continue;
      badStamps.push({
        place: `row ${grid.rowNumber(row)}, column ${columnLetter(grid.sourceColumn?.(stampColumn) ?? stampColumn)}`,
        text: grid.text(row, stampColumn),
      });
      continue;
    }
    walls[used] = wall;
    if (days) days[used] = order === 'serial' ? Math.floor(wall / 1440) : scanner.day;
    const offset = scanner.offsetMinutes;
    offsets[used] = offset;
    if (!Number.isNaN(offset)) hasOffset = true;
    if (spans) spans[used] = spanOf(grid, row, endColumn, order, { wall, offset }, scanner);
    rows[used] = row;
    used += 1;
  }
  const notes = left.length === 0 ? [] : [leftOutNote(grid, left)];
  return {
    walls: walls.subarray(0, used),
    offsets: hasOffset ? offsets.subarray(0, used) : null,
    spans: spans?.subarray(0, used) ?? null,
    days: days?.subarray(0, used) ?? null,
    rows: rows.subarray(0, used),
    badStamps,
    notes,
  };
}

/** Minutes from a beginning to the end in another column; each end carries its own offset, so time that passes counts. */
function spanOf(
  grid: Grid,
  row: number,
  endColumn: number,
  order: DateOrder,
  begin: { wall: number; offset: number },
  scanner: StampScanner,
): number {
  if (!grid.scan(row, endColumn, scanner) || !scanner.resolve(order)) return Number.NaN;
  const end = scanner.day * 1440 + (Number.isNaN(scanner.minute) ? 0 : scanner.minute);
  return end - begin.wall - (Number.isNaN(begin.offset) ? 0 : scanner.offsetMinutes - begin.offset);
}

function mainColumn(columns: readonly ColumnUse[]): number {
  return columns.find((use) => ['stamp', 'stamp-begin', 'date', 'stamp-end'].includes(use.role))?.index ?? 0;
}

/** Blank rows, repeated headers and rows of totals are no readings. */
function isLeftOut(grid: Grid, row: number, plan: ColumnPlan, left: { row: number; text: string }[]): boolean {
  if (grid.width(row) === 0) return true;
  const cells = Array.from({ length: Math.min(grid.width(row), 8) }, (_, column) => grid.text(row, column));
  if (cells.every((cell) => isBlankWord(cell))) return true;
  const own = plan.columns.filter((use) => use.role !== 'ignore' && use.role !== 'meter');
  if (own.every((use) => isBlankWord(grid.text(row, use.index)))) return true;
  const isHeader =
    plan.block.headerRow !== null &&
    cells.every((cell, column) => cell === grid.text(plan.block.headerRow ?? 0, column));
  const isFooter = cells.some((cell) => footerWords.test(cell));
  if (isHeader || isFooter) left.push({ row, text: cells.find((cell) => cell !== '') ?? '' });
  return isHeader || isFooter;
}

function leftOutNote(grid: Grid, left: { row: number; text: string }[]): IntakeNote {
  const shown = left.slice(0, 6).map(({ row, text }) => `${grid.rowNumber(row)} (${text.slice(0, 24)})`);
  return {
    code: 'rows-left-out',
    message: `${left.length} ${left.length === 1 ? 'row is' : 'rows are'} no reading: headers, totals or remarks.`,
    where: `row ${shown.join(', ')}`,
  };
}

function meterFilter(plan: ColumnPlan): ((row: number) => boolean) | null {
  const column = plan.columns.find((use) => use.role === 'meter')?.index ?? -1;
  const { meter, grid } = plan;
  if (column < 0 || meter === undefined) return null;
  return (row) => grid.text(row, column) === meter;
}

/** A function giving the wall-clock minute of a row, NaN if it has none. Seconds within one of a minute are rounded to it. */
function stampReader(plan: ColumnPlan, scanner: StampScanner): StampReader {
  const { grid, columns, decimalMark } = plan;
  const order: DateOrder = plan.stamp.order ?? 'YMD';
  const index = (role: ColumnUse['role']): number => columns.find((use) => use.role === role)?.index ?? -1;
  const stamp =
    index('stamp') >= 0 ? index('stamp') : index('stamp-begin') >= 0 ? index('stamp-begin') : index('stamp-end');
  if (stamp >= 0 && order === 'serial')
    return (row) => roundSeconds((grid.number(row, stamp, decimalMark) - 25_569) * 1440);
  if (stamp >= 0 && order === 'epoch') return (row) => epochMinute(grid.number(row, stamp, decimalMark));
  if (stamp >= 0) {
    scanner.steadyOrder = order;
    return (row) =>
      grid.scan(row, stamp, scanner) && scanner.resolve(order)
        ? roundSeconds(scanner.day * 1440 + (Number.isNaN(scanner.minute) ? 0 : scanner.minute))
        : Number.NaN;
  }
  const date = index('date');
  const time = index('time');
  const number = index('interval-number');
  const dayOf: StampReader = (row) =>
    order === 'serial'
      ? Math.floor(grid.number(row, date, decimalMark) - 25_569)
      : grid.scan(row, date, scanner) && scanner.resolve(order)
        ? scanner.day
        : Number.NaN;
  if (time >= 0) {
    return (row) => {
      const day = dayOf(row);
      return grid.scan(row, time, scanner) && scanner.resolveTimeOfDay()
        ? roundSeconds(day * 1440 + scanner.minute)
        : Number.NaN;
    };
  }
  if (number >= 0) {
    const numbering = intervalNumbering(plan, number);
    return (row) => dayOf(row) * 1440 + (grid.number(row, number, decimalMark) - numbering.first) * numbering.minutes;
  }
  return (row) => dayOf(row) * 1440;
}

/** Numbers within the day count from nought or one; a day of up to 25 is hours, 50 half-hours, 100 quarter-hours. */
function intervalNumbering(
  plan: Pick<ColumnPlan, 'grid' | 'block' | 'decimalMark'>,
  column: number,
): { first: number; minutes: number } {
  let least = Infinity;
  let greatest = 0;
  for (let row = plan.block.firstRow; row <= plan.block.lastRow; row += 1) {
    const figure = plan.grid.number(row, column, plan.decimalMark);
    if (Number.isNaN(figure)) continue;
    least = Math.min(least, figure);
    greatest = Math.max(greatest, figure);
  }
  const first = least === 0 ? 0 : 1;
  const perDay = greatest - first + 1;
  return { first, minutes: perDay <= 25 ? 60 : perDay <= 50 ? 30 : perDay <= 100 ? 15 : 5 };
}

const epochMinute = (figure: number): number => roundSeconds(figure > 1e10 ? figure / 60_000 : figure / 60);

/** The nearest minute if the stamp is within a second or so of it: 00:14:59 names a quarter past. */
function roundSeconds(minute: number): number {
  const nearest = Math.round(minute);
  return Math.abs(minute - nearest) < 0.02 ? nearest : minute;
}
