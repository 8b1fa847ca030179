import { headsOf, type BillHeads } from './bill-heads';
import { billCellKind } from './bill-months';
import { findBlock, type TableBlock } from './block';
import { IntakeError } from './errors';
import { CellGrid, gridCaps, transpose, type Cell, type Grid } from './grid';
import { StampScanner } from './stamps';
import type { ColumnMap } from './column-map';

/** A table of bills found in a file, with its names. */
export interface LocatedBills extends BillHeads {
  /** With a row a bill or a line; the file's own grid turned where it has a column a bill. */
  grid: Grid;
  block: TableBlock;
  isTransposed: boolean;
}

/**
 * Finds the table: a row a bill; a column a bill; or a row a line with the period in the first row of each bill alone.
 * @throws {IntakeError} if none is found.
 */
export function locateBills(grid: Grid, fileName: string, map: Partial<ColumnMap>): LocatedBills {
  const find = (table: Grid, given: Partial<ColumnMap>, isTransposed = false): LocatedBills => {
    const block = findBlock(table, fileName, given, 'bills', billCellKind);
    const heads = headsOf(table, block);
    return { grid: table, block: { ...block, names: heads.names }, isTransposed, ...heads };
  };
  if (map.layout === 'transposed') return find(transpose(grid), map, true);
  if (isTooWide(grid)) return find(grid, map);
  const attempts = [
    () => find(grid, { ...yearAndMonth(grid), ...map }),
    () => find(filledDown(grid), map),
    ...(map.layout === undefined && grid.rows <= 300 ? [() => find(transpose(grid), {}, true)] : []),
  ];
  const [first = () => find(grid, map), ...others] = map.layout === 'items' ? attempts.slice(1) : attempts;
  return firstFound(first, others);
}

/** Turned or filled, a table beyond the cap would lose its last columns: it is refused as it is. */
function isTooWide(grid: Grid): boolean {
  for (let row = 0; row < Math.min(grid.rows, 1000); row += 1) if (grid.width(row) > gridCaps.columns) return true;
  return false;
}

/** The first attempt that finds a table; where none does, what is wrong with the plain one. */
function firstFound(first: () => LocatedBills, others: readonly (() => LocatedBills)[]): LocatedBills {
  try {
    return first();
  } catch (cause) {
    if (!(cause instanceof IntakeError)) throw cause;
    for (const attempt of others) {
      try {
        return attempt();
      } catch (refusal) {
        if (!(refusal instanceof IntakeError)) throw refusal;
      }
    }
    throw cause;
  }
}

/** A table whose periods are a year and a month in figures has no date to be found by: its names tell where it begins. */
function yearAndMonth(grid: Grid): Partial<ColumnMap> {
  for (let row = 0; row < Math.min(grid.rows - 1, 40); row += 1) {
    const names = Array.from({ length: Math.min(grid.width(row), 60) }, (_, column) => grid.text(row, column));
    const month = names.findIndex((name) => /^(month|monat|mese|mois|mes)$/i.test(name));
    if (month < 0 || !names.some((name) => /^(year|jahr|anno|ann[ée]e|año)$/i.test(name))) continue;
    if (/^\d{1,2}$/.test(grid.text(row + 1, month)))
      return { headerRow: grid.rowNumber(row), firstRow: grid.rowNumber(row + 1) };
  }
  return {};
}

/** A grid with cells of its own and the row numbers of its file. */
class FilledGrid extends CellGrid {
  constructor(
    cells: readonly (readonly Cell[])[],
    private readonly source: Grid,
  ) {
    super(cells);
  }

  override rowNumber(row: number): number {
    return this.source.rowNumber(row);
  }
}

/** Columns that hold a date here and there keep it for the rows beneath, as far as these hold anything. */
export function filledDown(grid: Grid): Grid {
  const scanner = new StampScanner();
  const rows = Math.min(grid.rows, 100_000);
  let last: Cell[] = [];
  const cells = Array.from({ length: rows }, (_, row): Cell[] => {
    const width = Math.min(grid.width(row), gridCaps.columns);
    if (width < 2) {
      if (width === 1) last = [];
      return width === 1 ? [grid.text(row, 0)] : [];
    }
    const own = Array.from({ length: width }, (_unused, column) => cellAt(grid, row, column));
    const kinds = own.map((cell) => billCellKind(String(cell ?? '').slice(0, gridCaps.wordCharacters), scanner));
    const date = kinds.findIndex((kind) => kind === 'date' || kind === 'stamp');
    if (date >= 0) {
      last = own.map((cell, column) => (isKept(kinds[column], column, date, cell) ? cell : null));
      return own;
    }
    return kinds.every((kind) => kind === 'text' || kind === 'blank') && !last.some((cell) => cell !== null)
      ? own
      : own.map((cell, column) => (cell === null || cell === '' ? (last[column] ?? null) : cell));
  });
  return new FilledGrid(cells, grid);
}

/** Dates, and what stands before the first of them: account, invoice. */
const isKept = (kind: string | undefined, column: number, date: number, cell: Cell): boolean =>
  cell !== null && (kind === 'date' || kind === 'stamp' || column < date);

function cellAt(grid: Grid, row: number, column: number): Cell {
  const stored = grid.figureText(row, column) === '' ? grid.number(row, column, '.') : Number.NaN;
  return Number.isNaN(stored) ? grid.text(row, column) : stored;
}
