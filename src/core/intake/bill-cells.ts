import { readFigure, type BillFigure } from './bill-figures';
import type { Grid } from './grid';

/** The figure of a cell: a number a spreadsheet stores, or one written as text. */
export function readCell(grid: Grid, row: number, column: number, decimalMark: '.' | ','): BillFigure {
  const text = grid.figureText(row, column);
  return text === '' ? { value: grid.number(row, column, decimalMark) } : readFigure(text, decimalMark);
}
