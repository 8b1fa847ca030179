import { parseNumberText } from './numbers';
import type { StampScanner } from './stamps';

/** Most rows, columns and characters of a cell that a file may have, and how many of them are looked at for meaning. */
export const gridCaps = { rows: 1_200_000, columns: 512, cellCharacters: 20_000, wordCharacters: 200 };

/** A table of raw cells, whatever file it came from. Rows and columns count from 0; absent cells read as ''. */
export interface Grid {
  readonly rows: number;
  /** Cells in one row, absent trailing ones not counted. */
  width(row: number): number;
  /** The cell as text, trimmed. */
  text(row: number, column: number): string;
  /** The cell as text if its figure hangs on the decimal mark; '' for numbers a spreadsheet stores as such. */
  figureText(row: number, column: number): string;
  /** The cell as a number; NaN if it is blank or no number. */
  number(row: number, column: number, decimalMark: '.' | ','): number;
  /** Hands the cell to the scanner; false if it is blank or cannot be a date or time. */
  scan(row: number, column: number, scanner: StampScanner): boolean;
  /** Whether the cell begins with a letter. */
  isWordAt(row: number, column: number): boolean;
  /** Number of the row in the file as people see it, 1 is the first. */
  rowNumber(row: number): number;
  /** Column of the file a column shows, where tables one below the other are laid side by side. */
  sourceColumn?(column: number): number;
}

/** Whether a code is that of a letter. */
export const isLetterCode = (code: number): boolean =>
  (code >= 65 && code <= 90) || (code >= 97 && code <= 122) || code >= 192;

/** A cell of a spreadsheet: text (dates already as ISO text), a number, or nothing. */
export type Cell = string | number | null;

/** A grid over the cells of a sheet. */
export class CellGrid implements Grid {
  readonly rows: number;

  constructor(
    private readonly cells: readonly (readonly Cell[])[],
    private readonly firstRowNumber = 1,
  ) {
    this.rows = cells.length;
  }

  width(row: number): number {
    const cells = this.cells[row] ?? [];
    let width = cells.length;
    while (width > 0 && (cells[width - 1] === null || cells[width - 1] === '')) width -= 1;
    return width;
  }

  text(row: number, column: number): string {
    const cell = this.cells[row]?.[column];
    if (typeof cell === 'string') return cell;
    return cell === null || cell === undefined ? '' : String(cell);
  }

  figureText(row: number, column: number): string {
    const cell = this.cells[row]?.[column];
    return typeof cell === 'string' ? cell : '';
  }

  number(row: number, column: number, decimalMark: '.' | ','): number {
    const cell = this.cells[row]?.[column];
    if (typeof cell === 'number') return cell;
    return typeof cell === 'string' ? parseNumberText(cell, decimalMark) : Number.NaN;
  }

  scan(row: number, column: number, scanner: StampScanner): boolean {
    const text = this.text(row, column);
    return text !== '' && scanner.scan(text, 0, text.length);
  }

  isWordAt(row: number, column: number): boolean {
    return isLetterCode(this.text(row, column).charCodeAt(0));
  }

  rowNumber(row: number): number {
    return this.firstRowNumber + row;
  }
}

/** Rows become columns, at most as many of either as are read: a table with a column a month read as one with a row a month. */
export function transpose(grid: Grid): CellGrid {
  let columns = 0;
  const rows = Math.min(grid.rows, gridCaps.columns);
  for (let row = 0; row < rows; row += 1) columns = Math.max(columns, grid.width(row));
  columns = Math.min(columns, gridCaps.columns);
  const cellAt = (row: number, column: number): Cell => {
    const stored = grid.figureText(row, column) === '' ? grid.number(row, column, '.') : Number.NaN;
    return Number.isNaN(stored) ? grid.text(row, column) : stored;
  };
  return new CellGrid(
    Array.from({ length: columns }, (_, column) => Array.from({ length: rows }, (_unused, row) => cellAt(row, column))),
  );
}

/** Spreadsheet letters of a column, 0 is A. */
export function columnLetter(column: number): string {
  const last = String.fromCharCode(65 + (column % 26));
  return column < 26 ? last : columnLetter(Math.floor(column / 26) - 1) + last;
}

/** Place of a cell as people write it, such as `row 12, column C`. */
export function cellPlace(grid: Grid, row: number, column: number): string {
  return `row ${grid.rowNumber(row)}, column ${columnLetter(grid.sourceColumn?.(column) ?? column)}`;
}
