import { findBlock } from './block';
import { billCellKind } from './bill-months';
import { IntakeError } from './errors';
import { transpose, type Grid } from './grid';
import { headerWords } from './words';

/**
 * Equal for tables of one shape: the same names in the same order, or without names the same number of columns. Figures,
 * rows and preamble do not enter, so that next month's export has the shape of this month's.
 */
export function shapeOf(grid: Grid, delimiter: string | undefined): string {
  const names = namesOf(grid);
  return hash(`${delimiter ?? 'sheet'}\n${names.map((name) => headerWords(name).join(' ')).join('\n')}`);
}

function namesOf(grid: Grid): string[] {
  for (const table of [grid, grid.rows < 300 ? transpose(grid) : grid]) {
    try {
      return findBlock(table, '', {}, 'bills', billCellKind).names;
    } catch (cause) {
      if (!(cause instanceof IntakeError)) throw cause;
    }
  }
  return Array.from({ length: grid.width(0) }, (_, column) => grid.text(0, column));
}

/** Signature of a list of names, for formats that name their channels themselves. */
export function shapeOfNames(format: string, names: readonly string[]): string {
  return hash(`${format}\n${names.join('\n')}`);
}

/** FNV-1a from two seeds, 64 bits as hex: for telling shapes apart, not for secrets. */
function hash(text: string): string {
  return [0x811c9dc5, 0x9747b28c]
    .map((seed) => {
      let state = seed;
      for (let at = 0; at < text.length; at += 1) state = Math.imul(state ^ text.charCodeAt(at), 0x01000193) >>> 0;
      return state.toString(16).padStart(8, '0');
    })
    .join('');
}
