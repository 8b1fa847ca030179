import type { TableBlock } from './block';
import type { Grid } from './grid';
import { unitMeaning, type UnitMeaning } from './units';

/** A unit standing alone in a cell above the table, or behind "unit:". */
export function preambleUnit(grid: Grid, block: TableBlock): UnitMeaning | null {
  for (let row = 0; row < (block.headerRow ?? block.firstRow); row += 1) {
    for (let column = 0; column < Math.min(grid.width(row), 40); column += 1) {
      const text = grid.text(row, column).replace(/^(unit|units|einheit|unité|unita|unità|unidad)\s*[:=]\s*/i, '');
      const meaning = text.length < 8 ? unitMeaning(text) : null;
      if (meaning) return meaning;
    }
  }
  return null;
}

/** Figures and words of a multiplier above the table, as printed; '' if none is mentioned. */
export function preambleMultiplier(grid: Grid, block: TableBlock): string {
  for (let row = 0; row < (block.headerRow ?? block.firstRow); row += 1) {
    const cells = Array.from({ length: Math.min(grid.width(row), 12) }, (_, column) => grid.text(row, column)).filter(
      (cell) => cell !== '',
    );
    if (cells.some((cell) => /multiplier|meter constant|ct ratio|faktor|moltiplicatore|wandlerfaktor/i.test(cell)))
      return cells.join(' ');
  }
  return '';
}
