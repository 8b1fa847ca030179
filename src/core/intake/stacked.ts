import type { TableBlock } from './block';
import { cellKind } from './cells';
import { gridCaps, type Grid } from './grid';
import { StampScanner } from './stamps';
import type { IntakeNote } from './types';
import { namesTime } from './words';

/** A table below another: its rows and where its columns are laid. */
interface Section {
  headerRow: number;
  /** Rows of its data, the last included. */
  firstRow: number;
  lastRow: number;
  names: string[];
  /** Column of the whole that its first column becomes. */
  offset: number;
}

/** Tables one below the other shown side by side: each row fills the columns of its own table alone. */
class StackedGrid implements Grid {
  readonly rows: number;

  constructor(
    private readonly grid: Grid,
    private readonly sections: readonly Section[],
  ) {
    this.rows = grid.rows;
  }

  /** Column of the file that shows in a column of a row, or -1. */
  private column(row: number, column: number): number {
    const [first] = this.sections;
    if (first && row < first.firstRow) return column;
    const section = this.sections.find((one) => row >= one.firstRow && row <= one.lastRow);
    const own = section ? column - section.offset : -1;
    return own >= 0 && own < (section?.names.length ?? 0) ? own : -1;
  }

  width(row: number): number {
    const section = this.sections.find((one) => row >= one.firstRow && row <= one.lastRow);
    const width = this.grid.width(row);
    if (row < (this.sections[0]?.firstRow ?? 0)) return width;
    return section && width > 0 ? section.offset + Math.min(width, section.names.length) : 0;
  }

  text(row: number, column: number): string {
    const own = this.column(row, column);
    return own < 0 ? '' : this.grid.text(row, own);
  }

  figureText(row: number, column: number): string {
    const own = this.column(row, column);
    return own < 0 ? '' : this.grid.figureText(row, own);
  }

  number(row: number, column: number, decimalMark: '.' | ','): number {
    const own = this.column(row, column);
    return own < 0 ? Number.NaN : this.grid.number(row, own, decimalMark);
  }

  scan(row: number, column: number, scanner: StampScanner): boolean {
    const own = this.column(row, column);
    return own >= 0 && this.grid.scan(row, own, scanner);
  }

  isWordAt(row: number, column: number): boolean {
    const own = this.column(row, column);
    return own >= 0 && this.grid.isWordAt(row, own);
  }

  rowNumber(row: number): number {
    return this.grid.rowNumber(row);
  }

  sourceColumn(column: number): number {
    const section = [...this.sections].reverse().find((one) => one.offset <= column);
    return column - (section?.offset ?? 0);
  }
}

/** Lays tables that stand one below the other, each under names of its own, side by side; a single table stays as it is. */
export function unstack(grid: Grid, block: TableBlock): { grid: Grid; block: TableBlock; notes: IntakeNote[] } {
  const sections = sectionsOf(grid, block);
  const width = sections.reduce((sum, section) => sum + section.names.length, 0);
  if (sections.length < 2 || width > gridCaps.columns) return { grid, block, notes: [] };
  const rows = sections.map((section) => grid.rowNumber(section.headerRow)).join(', ');
  return {
    grid: new StackedGrid(grid, sections),
    block: {
      ...block,
      names: sections.flatMap((section) => section.names),
      sections: sections.map((section) => section.offset),
    },
    notes: [
      {
        code: 'tables-stacked',
        message: `${sections.length} tables stand one below the other; they are read as channels of one series.`,
        where: `headers in rows ${rows}`,
      },
    ],
  };
}

function sectionsOf(grid: Grid, block: TableBlock): Section[] {
  const { headerRow, firstRow, lastRow, names } = block;
  const time = names.findIndex((name) => namesTime(name));
  if (headerRow === null || time < 0) return [];
  const sections: Section[] = [{ headerRow, firstRow, lastRow, names, offset: 0 }];
  for (let row = firstRow; row <= lastRow; row += 1) {
    if (!grid.isWordAt(row, time) || !isOtherHeader(grid, row, time, sections.at(-1)?.names ?? names)) continue;
    const before = sections.at(-1);
    if (before) before.lastRow = lastDataRow(grid, row, time, before.firstRow);
    const offset = (before?.offset ?? 0) + (before?.names.length ?? 0);
    const own = Array.from({ length: grid.width(row) }, (_, column) => wordAt(grid, row, column));
    sections.push({ headerRow: row, firstRow: row + 1, lastRow, names: own, offset });
  }
  return sections;
}

const wordAt = (grid: Grid, row: number, column: number): string =>
  grid.text(row, column).slice(0, gridCaps.wordCharacters);

/** Names a time in the column of the stamps, differs from the names in force, and has stamps beneath. */
function isOtherHeader(grid: Grid, row: number, time: number, names: readonly string[]): boolean {
  if (!namesTime(wordAt(grid, row, time)) || grid.width(row) < 2) return false;
  const width = Math.max(grid.width(row), names.length);
  const isSame = Array.from({ length: width }, (_, column) => column).every(
    (column) => wordAt(grid, row, column) === (names[column] ?? ''),
  );
  const below = [1, 2, 3].map((step) => (row + step < grid.rows ? wordAt(grid, row + step, time) : ''));
  const scanner = new StampScanner();
  return !isSame && below.some((text) => ['stamp', 'date', 'number'].includes(cellKind(text, scanner)));
}

/** The row of data above a header: titles and blank rows between them are no data. */
function lastDataRow(grid: Grid, headerRow: number, time: number, firstRow: number): number {
  const scanner = new StampScanner();
  const isData = (row: number): boolean =>
    ['stamp', 'date', 'number'].includes(cellKind(wordAt(grid, row, time), scanner));
  let row = headerRow - 1;
  while (row > firstRow && headerRow - row < 12 && !isData(row)) row -= 1;
  return row;
}
