import { bareMonth } from './bill-months';
import { guess } from './evidence';
import type { Grid } from './grid';
import type { ColumnMap } from './column-map';
import type { Guess } from './types';

interface YearInput {
  grid: Grid;
  /** Column of the months; -1 where there is none. */
  month: number;
  rows: readonly number[];
  /** Texts in which a year may stand: above the table, its name, its sheet and its file. */
  texts: readonly string[];
  map: Partial<ColumnMap>;
}

/** Years of rows that name a month alone; null where no year can be told. */
export interface FoundYears {
  yearOf: ReadonlyMap<number, number>;
  first: number;
  guess: Guess;
}

/**
 * Years of months written without one: from the year named about the table, counted on where a month is earlier in the year
 * than the one before it.
 */
export function findYears(input: YearInput): FoundYears | null {
  const { grid, month, rows, map } = input;
  const months = rows
    .map((row) => ({ row, month: month < 0 ? 0 : bareMonth(grid.text(row, month)) }))
    .filter((one) => one.month > 0);
  if (months.length === 0) return null;
  const steps = months.slice(1).map((one, at) => one.month - (months[at]?.month ?? 0));
  const isBackwards = steps.filter((step) => step < 0).length > steps.filter((step) => step > 0).length;
  const ordered = isBackwards ? [...months].reverse() : months;
  const wraps = ordered.slice(1).filter((one, at) => one.month < (ordered[at]?.month ?? 0)).length;
  const named = yearsIn(input.texts);
  const first = map.year ?? named[0];
  if (first === undefined) return null;
  const yearOf = new Map<number, number>();
  let year = first;
  ordered.forEach((one, at) => {
    if (at > 0 && one.month < (ordered[at - 1]?.month ?? 0)) year += 1;
    yearOf.set(one.row, year);
  });
  return { yearOf, first, guess: yearGuess(first, named, wraps, map) };
}

function yearGuess(first: number, named: readonly number[], wraps: number, map: Partial<ColumnMap>): Guess {
  if (map.year !== undefined && map.year !== named[0])
    return guess('year', String(first), [[true, 'Given by the column map']]);
  const isTold = named.length === wraps + 1;
  const why = `The months name no year; ${named.join(' and ')} ${named.length === 1 ? 'is' : 'are'} named about the table`;
  const run = wraps > 0 ? `, and the months run over the end of a year: the first is taken to be of ${first}` : '';
  return guess('year', String(first), [[isTold, isTold ? why : why + run]]);
}

/** Years met in texts, in order: `2025`, `2024/25`. */
function yearsIn(texts: readonly string[]): number[] {
  const years = new Set<number>();
  for (const text of texts) {
    for (const [, year = '', next] of text.matchAll(/(?<!\d)(20\d\d|19[789]\d)(?:\s?[/–-]\s?(\d\d)(?!\d))?(?!\d)/g)) {
      years.add(Number(year));
      if (next && Number(next) === (Number(year) + 1) % 100) years.add(Number(year) + 1);
    }
    if (years.size > 0) break;
  }
  return [...years].sort((a, b) => a - b);
}
