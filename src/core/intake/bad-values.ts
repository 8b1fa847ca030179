import type { Extraction } from './extract';
import { cellPlace, type Grid } from './grid';
import { isBlankWord } from './numbers';

/** Keeps the place of a cell that is neither figure nor blank. */
export function collectBad(grid: Grid, row: number, column: number, extraction: Extraction): void {
  const text = grid.text(row, column);
  if (!isBlankWord(text)) extraction.badValues.push({ place: cellPlace(grid, row, column), text });
}
