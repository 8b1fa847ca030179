import { cellKind, type CellKind } from './cells';
import { intakeError } from './errors';
import { gridCaps, type Grid } from './grid';
import { StampScanner } from './stamps';
import { unitMeaning, unitOfHeader } from './units';
import { namesTime } from './words';

/** Where the table begins in a grid. Rows count from 0. */
export interface TableBlock {
  headerRow: number | null;
  firstRow: number;
  lastRow: number;
  names: string[];
  /** Rows above the header with anything in them. */
  preambleRows: number;
  /** First column of each of several tables laid side by side; absent where there is one. */
  sections?: number[];
}

const searchRows = 80;

const isDateKind = (kind: CellKind | undefined): boolean => kind === 'stamp' || kind === 'date';

/**
 * Finds the table: its first row is the first that holds a date and a figure and whose next rows hold the like in the same
 * columns; the header is the nearest row of words above. A column map's rows overrule.
 * @throws {IntakeError} if no row looks like data.
 */
export function findBlock(
  grid: Grid,
  fileName: string,
  given: { headerRow?: number | null; firstRow?: number },
  what: 'readings' | 'bills',
  kindOf: (text: string, scanner: StampScanner) => CellKind = cellKind,
): TableBlock {
  const scanner = new StampScanner();
  const kinds: CellKind[][] = [];
  const limit = Math.min(grid.rows, searchRows);
  for (let row = 0; row < limit; row += 1) kinds.push(kindsOf(grid, row, scanner, kindOf));
  const lastRow = lastFilledRow(grid);
  const givenHeader = typeof given.headerRow === 'number' ? rowOfNumber(grid, given.headerRow) : given.headerRow;
  let firstRow = given.firstRow === undefined ? -1 : rowOfNumber(grid, given.firstRow);
  if (firstRow < 0 && typeof givenHeader === 'number')
    firstRow = withBlanksAbove(kinds, firstDataRow(kinds, givenHeader + 1));
  if (firstRow < 0) firstRow = withBlanksAbove(kinds, firstDataRow(kinds, 0));
  if (firstRow < 0) firstRow = firstSerialRow(grid, kinds);
  if (firstRow < 0 || firstRow >= grid.rows) {
    throw intakeError(
      `No row in the first ${limit} holds a date beside a figure, so no table of ${what} was found.`,
      fileName,
      `Check that this is the file of ${what}, or name the header row and the first row of data in the column map.`,
    );
  }
  const headerRow = givenHeader === undefined ? headerAbove(kinds, firstRow) : givenHeader;
  const width = blockWidth(grid, firstRow, headerRow);
  if (width > gridCaps.columns) {
    throw intakeError(
      `The table has ${width} columns; at most ${gridCaps.columns} are read.`,
      fileName,
      'Take out the columns that hold no readings and bring the file in again.',
    );
  }
  const names =
    headerRow === null ? Array.from({ length: width }, () => '') : headerNames(grid, kinds, headerRow, firstRow, width);
  let preambleRows = 0;
  for (let row = 0; row < (headerRow ?? firstRow); row += 1) if (grid.width(row) > 0) preambleRows += 1;
  return { headerRow, firstRow, lastRow, names, preambleRows };
}

function kindsOf(grid: Grid, row: number, scanner: StampScanner, kindOf: typeof cellKind): CellKind[] {
  const width = Math.min(grid.width(row), gridCaps.columns + 1);
  return Array.from({ length: width }, (_, column) =>
    kindOf(grid.text(row, column).slice(0, gridCaps.wordCharacters), scanner),
  );
}

function rowOfNumber(grid: Grid, number: number): number {
  const guess = Math.max(0, Math.min(grid.rows - 1, number - 1));
  let row = guess;
  while (row > 0 && grid.rowNumber(row) > number) row -= 1;
  return row;
}

function lastFilledRow(grid: Grid): number {
  let row = grid.rows - 1;
  while (row > 0 && grid.width(row) === 0) row -= 1;
  return row;
}

function firstDataRow(kinds: CellKind[][], from: number): number {
  for (let row = from; row < kinds.length; row += 1) {
    const here = kinds[row] ?? [];
    const dateColumn = here.findIndex(isDateKind);
    if (dateColumn < 0 || !here.includes('number')) continue;
    const next = kinds
      .slice(row + 1)
      .filter((other) => other.some((kind) => kind !== 'blank'))
      .slice(0, 6);
    const alike = next.filter((other) => isDateKind(other[dateColumn])).length;
    if (next.length === 0 || alike * 2 >= next.length) return row;
  }
  return -1;
}

/** The first rows may hold a date and no figure yet: blanks are readings that are missing. */
function withBlanksAbove(kinds: CellKind[][], firstRow: number): number {
  const here = kinds[firstRow] ?? [];
  const dateColumn = here.findIndex(isDateKind);
  const isBlankReading = (row: CellKind[] | undefined): boolean =>
    row !== undefined &&
    row[dateColumn] === here[dateColumn] &&
    row.every((kind, column) => kind === here[column] || kind === 'blank');
  let row = firstRow;
  while (dateColumn >= 0 && row > 0 && isBlankReading(kinds[row - 1])) row -= 1;
  return row;
}

/** Dates as serials or epoch seconds look like figures: only a header that names a date or time tells. */
function firstSerialRow(grid: Grid, kinds: CellKind[][]): number {
  for (let row = 0; row + 1 < kinds.length; row += 1) {
    const here = kinds[row] ?? [];
    const named = here.findIndex((kind, column) => {
      const name = grid.text(row, column).slice(0, gridCaps.wordCharacters);
      return kind === 'text' && namesTime(name);
    });
    if (named < 0) continue;
    const below = kinds.slice(row + 1, row + 5);
    const figures = below.filter(
      (other) => (other[named] === 'number' || isDateKind(other[named])) && other.length > 1,
    ).length;
    if (figures > 0 && figures * 2 >= below.length)
      return row + 1 + below.findIndex((other) => other[named] === 'number' || isDateKind(other[named]));
  }
  return -1;
}

function headerAbove(kinds: CellKind[][], firstRow: number): number | null {
  for (let row = firstRow - 1; row >= Math.max(0, firstRow - 4); row -= 1) {
    const here = kinds[row] ?? [];
    const filled = here.filter((kind) => kind !== 'blank');
    if (filled.length === 0) continue;
    const words = filled.filter((kind) => kind === 'text' || kind === 'time').length;
    // A wide table may name its columns by times or numbers; a lone figure row above is data or preamble.
    return words > 0 || filled.length > 20 ? row : null;
  }
  return null;
}

function blockWidth(grid: Grid, firstRow: number, headerRow: number | null): number {
  let width = headerRow === null ? 0 : grid.width(headerRow);
  for (let row = firstRow; row < Math.min(grid.rows, firstRow + 50); row += 1) width = Math.max(width, grid.width(row));
  return width;
}

/** Names of the columns; a row of units beneath the names and merged group names above them are joined in. */
function headerNames(grid: Grid, kinds: CellKind[][], headerRow: number, firstRow: number, width: number): string[] {
  const nameIn = (row: number, column: number): string => grid.text(row, column).slice(0, gridCaps.wordCharacters);
  const own = Array.from({ length: width }, (_, column) => nameIn(headerRow, column));
  const above = headerRow > 0 ? Array.from({ length: width }, (_, column) => nameIn(headerRow - 1, column)) : [];
  const aboveKinds = kinds[headerRow - 1] ?? [];
  const filledAbove = above.filter((name) => name !== '').length;
  const filledOwn = own.filter((name) => name !== '').length;
  const isWords = filledAbove > 1 && aboveKinds.every((kind) => kind === 'text' || kind === 'blank');
  const isUnitRow =
    filledOwn > 0 &&
    own.every(
      (name) => name === '' || unitMeaning(name) !== null || /^[\W\d]*$/.test(name) || /^(hh?:mm|dd|yyyy)/i.test(name),
    );
  if (!isWords) return own;
  if (isUnitRow) return own.map((unit, column) => `${above[column] ?? ''} ${unit}`.trim());
  // Group names stand over the first of several columns: they help only where they name a quantity the columns leave out.
  const addsUnits =
    above.some((name) => unitOfHeader(name) !== null) && !own.some((name) => unitOfHeader(name) !== null);
  const isMerged = filledAbove < filledOwn && firstRow - headerRow === 1 && addsUnits;
  if (!isMerged && !addsUnits) return own;
  let group = '';
  return own.map((name, column) => {
    if (above[column]) group = above[column];
    return `${group} ${name}`.trim();
  });
}
