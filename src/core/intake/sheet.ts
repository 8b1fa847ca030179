import XLSX from 'xlsx';
import { intakeError } from './errors';
import { CellGrid, gridCaps, type Cell } from './grid';
import { PlainCells } from './plain-cells';
import { sheetNotes } from './sheet-notes';
import type { IntakeNote } from './types';

/** A cell as the parser of workbooks gives it. */
export interface SheetCell {
  t: string;
  v?: unknown;
  w?: string;
  z?: unknown;
  /** Formula behind the value. */
  f?: string;
}

/** A sheet opened as a grid, its name and the names of all sheets. */
interface OpenedSheet {
  grid: CellGrid;
  sheet: string;
  sheets: string[];
  /** Other visible sheets that seem to hold as much. */
  others: string[];
  /** Formulas, hidden rows, columns and sheets. */
  notes: IntakeNote[];
}

/** Rows of a sheet that are read; a year of five-minute readings has 105,120. */
const sheetRowCap = 250_000;

/**
 * Opens a workbook (.xlsx, .xls, .ods). Dates are taken from raw serials by whole seconds, never from Date objects, so
 * that no zone of the machine enters. Formulas are not run: their kept values are read.
 * @throws {IntakeError} if the workbook is damaged, locked, too large or lacks the sheet asked for.
 */
export function openWorkbook(bytes: Uint8Array, fileName: string, wanted?: string): OpenedSheet {
  const workbook = parse(bytes, fileName);
  const sheets = workbook.SheetNames;
  const is1904 = workbook.Workbook?.WBProps?.date1904 === true;
  if (wanted !== undefined && !sheets.includes(wanted)) {
    throw intakeError(
      `The workbook has no sheet “${wanted}”.`,
      `${fileName}, sheets: ${sheets.join(', ')}`,
      'Choose one of its sheets in the column map.',
    );
  }
  const opened = (wanted === undefined ? sheets : [wanted]).map((sheet) => {
    const cells = cellsOf(workbook.Sheets[sheet], is1904, fileName);
    const isHidden = (workbook.Workbook?.Sheets?.[sheets.indexOf(sheet)]?.Hidden ?? 0) !== 0;
    return { sheet, cells, isHidden, weight: weightOf(cells) };
  });
  // A hidden sheet is read only where no visible one holds a table.
  const rank = (one: (typeof opened)[number]): number => (one.isHidden && one.weight > 0 ? 1 : one.weight * 2);
  const [best] = opened.sort((a, b) => rank(b) - rank(a) || b.weight - a.weight);
  if (!best || best.weight === 0)
    throw intakeError(
      'The workbook holds no cell.',
      fileName,
      'Check that the right file was saved, then bring it in again.',
    );
  const others = opened.filter((one) => one !== best && !one.isHidden && one.weight * 2 >= best.weight);
  const hidden = opened.filter((one) => one !== best && one.isHidden && one.weight > 0).map((one) => one.sheet);
  return {
    grid: new CellGrid(best.cells),
    sheet: best.sheet,
    sheets,
    others: others.map((one) => one.sheet),
    notes: sheetNotes(best, workbook.Sheets[best.sheet], hidden),
  };
}

function parse(bytes: Uint8Array, fileName: string): XLSX.WorkBook {
  try {
    const workbook = XLSX.read(bytes, {
      type: 'array',
      dense: true,
      cellFormula: true,
      cellStyles: true,
      cellHTML: false,
      cellText: false,
      cellNF: true,
      sheetRows: sheetRowCap,
    });
    if (workbook.SheetNames.length === 0) throw new Error('no sheet');
    return workbook;
  } catch (cause) {
    const isLocked = cause instanceof Error && /password|encrypt/i.test(cause.message);
    throw intakeError(
      isLocked
        ? 'The workbook is locked by a password.'
        : 'The workbook is damaged or cut off: its parts cannot be read.',
      fileName,
      isLocked
        ? 'Save it without a password and bring it in again.'
        : 'Open it in a spreadsheet program, save it again, and bring in the new file.',
    );
  }
}

/** Rows with two cells or more: the sheet with the most of them holds the table. */
function weightOf(cells: Cell[][]): number {
  let rows = 0;
  for (const row of cells) {
    let filled = 0;
    for (let column = 0; column < row.length && filled < 2; column += 1)
      if (row[column] !== null && row[column] !== '') filled += 1;
    if (filled > 1) rows += 1;
  }
  return rows;
}

function cellsOf(sheet: XLSX.WorkSheet | undefined, is1904: boolean, fileName: string): Cell[][] {
  const rows = (Array.isArray(sheet) ? sheet : []) as (SheetCell | undefined)[][];
  const cells: Cell[][] = [];
  const plain = new PlainCells(is1904);
  for (let row = 0; row < rows.length; row += 1) {
    const source = rows[row] ?? [];
    if (source.length > gridCaps.columns && reachesBeyond(source)) {
      throw intakeError(
        `Row ${row + 1} has more than ${gridCaps.columns} cells.`,
        fileName,
        'Keep the table alone on its sheet and bring the file in again.',
      );
    }
    cells.push(plainRow(source, plain));
  }
  fillMergedDates(cells, Array.isArray(sheet) ? ((sheet as XLSX.WorkSheet)['!merges'] ?? []) : []);
  return cells;
}

function plainRow(source: readonly (SheetCell | undefined)[], plain: PlainCells): Cell[] {
  const width = Math.min(source.length, gridCaps.columns);
  const row = new Array<Cell>(width).fill(null);
  for (let column = 0; column < width; column += 1) {
    const cell = source[column];
    if (cell !== undefined) row[column] = plain.of(cell);
  }
  return row;
}

/** Whether a row holds anything beyond the cap. A row may claim any width: only the cells it has are walked. */
function reachesBeyond(row: readonly (SheetCell | undefined)[]): boolean {
  return Object.entries(row).some(([column, cell]) => Number(column) >= gridCaps.columns && cell?.v !== undefined);
}

/** A date merged over several rows stands in the first only: it holds for all of them. Figures and words are not repeated. */
function fillMergedDates(cells: Cell[][], merges: readonly XLSX.Range[]): void {
  for (const { s: first, e: last } of merges.slice(0, gridCaps.columns * 100)) {
    const cell = cells[first.r]?.[first.c] ?? null;
    if (first.c !== last.c || typeof cell !== 'string' || !/^\d{4}-\d{2}-\d{2}/.test(cell)) continue;
    for (let row = first.r + 1; row <= Math.min(last.r, cells.length - 1); row += 1) {
      const below = cells[row];
      if (below) below[first.c] = cell;
    }
  }
}
