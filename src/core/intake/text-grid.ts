import { isLetterCode, type Grid } from './grid';
import { parseNumberAt, parseNumberText } from './numbers';
import type { StampScanner } from './stamps';

/** A grid over delimited text: cells are found in the text and cut out only when asked for. */
abstract class TextGrid implements Grid {
  /** Bounds of the cell found last. */
  protected cellStart = 0;
  protected cellEnd = 0;

  constructor(
    readonly source: string,
    readonly rows: number,
  ) {}

  /** Sets the bounds of a cell; false if the row has no such cell. */
  protected abstract locate(row: number, column: number): boolean;

  abstract width(row: number): number;

  abstract rowNumber(row: number): number;

  text(row: number, column: number): string {
    if (!this.locate(row, column)) return '';
    const cell = this.source.slice(this.cellStart, this.cellEnd).trim();
    if (cell.startsWith('"') && cell.endsWith('"') && cell.length > 1) {
      return cell.slice(1, -1).replaceAll('""', '"').trim();
    }
    // A formula that only protects leading noughts, ="0012", is the text inside.
    const guarded = /^="(.*)"$/.exec(cell);
    return guarded ? (guarded[1] ?? '') : cell;
  }

  figureText(row: number, column: number): string {
    return this.text(row, column);
  }

  number(row: number, column: number, decimalMark: '.' | ','): number {
    if (!this.locate(row, column)) return Number.NaN;
    const quick = parseNumberAt(this.source, this.cellStart, this.cellEnd, decimalMark === ',' ? 44 : 46);
    return Number.isNaN(quick) ? parseNumberText(this.text(row, column), decimalMark) : quick;
  }

  isWordAt(row: number, column: number): boolean {
    if (!this.locate(row, column)) return false;
    let at = this.cellStart;
    while (at < this.cellEnd && (this.source.charCodeAt(at) === 32 || this.source.charCodeAt(at) === 34)) at += 1;
    return at < this.cellEnd && isLetterCode(this.source.charCodeAt(at));
  }

  scan(row: number, column: number, scanner: StampScanner): boolean {
    if (!this.locate(row, column)) return false;
    // A guard of ="..." is taken off first.
    if (this.source.charCodeAt(this.cellStart) === 61) {
      const text = this.text(row, column);
      return scanner.scan(text, 0, text.length);
    }
    return scanner.scan(this.source, this.cellStart, this.cellEnd);
  }
}

/** Text without quotes: only rows are found beforehand, cells as they are asked for, from the cell before on. */
export class PlainTextGrid extends TextGrid {
  private cursorRow = -1;
  private cursorColumn = 0;

  constructor(
    source: string,
    private readonly mark: number,
    private readonly rowStarts: Uint32Array,
    private readonly rowEnds: Uint32Array,
  ) {
    super(source, rowStarts.length);
  }

  protected locate(row: number, column: number): boolean {
    const rowEnd = this.rowEnds[row] ?? 0;
    if (row !== this.cursorRow || column < this.cursorColumn) {
      if (row < 0 || row >= this.rows) return false;
      this.cursorRow = row;
      this.cursorColumn = 0;
      this.cellStart = this.rowStarts[row] ?? 0;
      this.cellEnd = this.markFrom(this.cellStart, rowEnd);
    }
    while (this.cursorColumn < column) {
      if (this.cellEnd >= rowEnd) return false;
      this.cellStart = this.cellEnd + 1;
      this.cellEnd = this.markFrom(this.cellStart, rowEnd);
      this.cursorColumn += 1;
    }
    return true;
  }

  private markFrom(start: number, rowEnd: number): number {
    let at = start;
    while (at < rowEnd && this.source.charCodeAt(at) !== this.mark) at += 1;
    return at;
  }

  width(row: number): number {
    const rowEnd = this.rowEnds[row] ?? 0;
    let cells = 1;
    for (let at = this.rowStarts[row] ?? 0; at < rowEnd; at += 1)
      if (this.source.charCodeAt(at) === this.mark) cells += 1;
    return cells === 1 && this.text(row, 0) === '' ? 0 : cells;
  }

  rowNumber(row: number): number {
    return row + 1;
  }
}

/** Text with quotes: every cell is found beforehand. */
export class QuotedTextGrid extends TextGrid {
  constructor(
    source: string,
    private readonly at: {
      /** Beginning of every cell; a cell ends before the next one's beginning less one (its delimiter). */
      cellStarts: Uint32Array;
      /** First cell of every row, and one past the last cell of the last row. */
      rowCells: Uint32Array;
      rowEnds: Uint32Array;
      /** Line of the file each row begins on: quoted cells may hold line breaks. */
      lines: Uint32Array;
    },
  ) {
    super(source, at.rowEnds.length);
  }

  protected locate(row: number, column: number): boolean {
    const { cellStarts, rowCells, rowEnds } = this.at;
    const cell = (rowCells[row] ?? 0) + column;
    const after = rowCells[row + 1] ?? 0;
    if (cell >= after) return false;
    this.cellStart = cellStarts[cell] ?? 0;
    this.cellEnd = cell + 1 < after ? (cellStarts[cell + 1] ?? 0) - 1 : (rowEnds[row] ?? 0);
    return true;
  }

  width(row: number): number {
    const cells = (this.at.rowCells[row + 1] ?? 0) - (this.at.rowCells[row] ?? 0);
    return cells === 1 && this.text(row, 0) === '' ? 0 : cells;
  }

  rowNumber(row: number): number {
    return this.at.lines[row] ?? row + 1;
  }
}
