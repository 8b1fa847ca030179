import { billCellKind } from './bill-months';
import { currencyCodes } from './bill-figures';
import type { TableBlock } from './block';
import { gridCaps, type Grid } from './grid';
import { StampScanner } from './stamps';
import { unitMeaning } from './units';
import { headerWords } from './words';

/** Names of the columns of a table of bills, and what a line of the bill is called by its column. */
export interface BillHeads {
  names: string[];
  labels: string[];
}

/** Rows of names at most: groups, names, units. */
const mostRows = 3;

const groupWords =
  /\b(charges?|costs?|amounts?|usage|use|energy|demand|consumption|quantit(y|ies)|period|billing|service|reactive|power|meter|readings?|delivery|supply|generation|transmission|distribution|taxes|fees|kosten|verbrauch|zeitraum|arbeit|leistung|periodo|importes?|consumo|consommation|montants?|p[eé]riode)\b/i;

/**
 * Names of the columns from up to three rows: names alone, units beneath them, and names of groups above that stand over the
 * first of several columns. A cell of the upper row over a blank one is a name of its own.
 */
export function headsOf(grid: Grid, block: TableBlock): BillHeads {
  const { headerRow, names } = block;
  if (headerRow === null) return { names, labels: names };
  const width = names.length;
  const rows = wordRows(grid, headerRow, width);
  const lowest = rows.at(-1) ?? [];
  const units = rows.length > 1 && isUnitRow(lowest) ? rows.pop() : undefined;
  const own = rows.at(-1) ?? lowest;
  const above = rows.at(-2);
  const joined = above && isGroupRow(above, own) ? withGroups(above, own) : own;
  const withUnits = joined.map((name, column) => `${name} ${units?.[column] ?? ''}`.trim());
  const isSole = (name: string): boolean => own.filter((other) => other === name).length === 1;
  return {
    names: withUnits,
    labels: joined.map((name, column) => (own[column] && isSole(own[column] ?? '') ? (own[column] ?? '') : name)),
  };
}

/** The rows of words that end with the header row, uppermost first. */
function wordRows(grid: Grid, headerRow: number, width: number): string[][] {
  const scanner = new StampScanner();
  const rows: string[][] = [];
  for (let row = headerRow; row >= 0 && rows.length < mostRows; row -= 1) {
    const cells = Array.from({ length: width }, (_, column) =>
      grid.text(row, column).slice(0, gridCaps.wordCharacters),
    );
    const isWords = cells.every((cell) => ['text', 'blank'].includes(billCellKind(cell, scanner)));
    const filled = cells.filter((cell) => cell !== '').length;
    if (row < headerRow && (!isWords || filled === 0 || (filled === 1 && cells[0] !== ''))) break;
    rows.unshift(cells);
  }
  return rows;
}

const isUnitWord = (cell: string): boolean =>
  unitMeaning(cell) !== null ||
  currencyCodes.has(cell.replace(/[^A-Za-z]/g, '').toUpperCase()) ||
  /^[\W\d]*$/.test(cell) ||
  /^(hh?:mm|dd|mm|yyyy|days?|date|units?|uom|einheit)\b/i.test(cell);

const isUnitRow = (cells: readonly string[]): boolean =>
  cells.some((cell) => cell !== '') && cells.every((cell) => cell === '' || isUnitWord(cell));

/** A row of group names has fewer cells than the names, or names where these are blank; a preamble speaks in `Name: value`. */
function isGroupRow(above: readonly string[], own: readonly string[]): boolean {
  const filled = above.filter((cell) => cell !== '');
  if (filled.some((cell) => cell.endsWith(':'))) return false;
  const fillsBlanks = own.every((cell, column) => cell !== '' || above[column] !== '' || column > own.length - 2);
  const isFewer = filled.length < own.filter((cell) => cell !== '').length;
  return (isFewer || fillsBlanks) && (filled.length > 2 || filled.some((cell) => groupWords.test(cell)));
}

/** Words of a period or an account need no name of a group before them. */
function withGroups(above: readonly string[], own: readonly string[]): string[] {
  let group = '';
  return own.map((name, column) => {
    const over = above[column] ?? '';
    if (over !== '') group = name === '' ? '' : over;
    if (name === '') return over;
    const repeats = headerWords(group).every((word) => headerWords(name).includes(word));
    return group === '' || repeats ? name : `${group} ${name}`;
  });
}
