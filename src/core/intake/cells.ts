import { gridCaps, type Grid } from './grid';
import { isBlankWord, parseNumberAt, parseNumberText } from './numbers';
import { StampScanner } from './stamps';
import type { DateOrder } from './column-map';

/** What a cell looks like by itself. */
export type CellKind = 'blank' | 'number' | 'stamp' | 'date' | 'time' | 'text';

const orders: DateOrder[] = ['DMY', 'MDY', 'YMD'];

/** Kind of a cell: figures in either decimal style, dates in any order, times, stamps, blanks, words. */
export function cellKind(text: string, scanner: StampScanner): CellKind {
  const isPlain = text.length < 8 && !Number.isNaN(parseNumberAt(text, 0, text.length, 46));
  if (isPlain) return 'number';
  if (isBlankWord(text)) return 'blank';
  if (text.length > 60) return 'text';
  const compact = /^\d{8}(\d{4}(\d{2})?)?$/.test(text);
  if (!compact && isNumberText(text)) return 'number';
  if (scanner.scan(text, 0, text.length) && orders.some((order) => scanner.resolve(order))) {
    if (Number.isNaN(scanner.day)) return Number.isNaN(scanner.minute) || !/[:h]/i.test(text) ? 'text' : 'time';
    return Number.isNaN(scanner.minute) ? 'date' : 'stamp';
  }
  return compact || isNumberText(text) ? 'number' : 'text';
}

/** Whether a cell is a figure with either decimal mark. */
function isNumberText(text: string): boolean {
  return /\d/.test(text) && (!Number.isNaN(parseNumberText(text, '.')) || !Number.isNaN(parseNumberText(text, ',')));
}

/** What a column holds, from a sample of its rows. */
export interface ColumnProfile {
  index: number;
  name: string;
  sampled: number;
  kinds: Record<CellKind, number>;
  /** Distinct texts met, at most 40. */
  distinct: Map<string, number>;
  isManyValued: boolean;
  first: string;
  last: string;
}

/** Row indices that stand for all rows from `first` to `last`: the beginning, an even spread and the end. */
export function sampleRows(first: number, last: number, wanted = 500): number[] {
  const count = last - first + 1;
  if (count <= wanted) return Array.from({ length: Math.max(0, count) }, (_, at) => first + at);
  const rows = new Set<number>();
  const third = Math.floor(wanted / 3);
  for (let at = 0; at < third; at += 1) {
    rows.add(first + at);
    rows.add(first + Math.floor((count * at) / third));
    rows.add(last - at);
  }
  return [...rows].sort((a, b) => a - b);
}

/** First words of rows of totals, averages and remarks under or between the data. */
export const footerWords =
  /^["'\s]*((grand|daily|day|weekly|monthly|hourly|yearly|annual|tages|wochen|monats|jahres|zwischen|end)[\s-]*)?(sub)?(total|sum|summe|gesamt|totale|somma|suma|average|mean|mittel|media|moyenne|max|maximum|min|minimum|end of|note|remark|source|eof|report|generated|printed)/i;

/** The rows that do not begin like a footer. */
export function withoutFooters(grid: Grid, rows: readonly number[]): number[] {
  return rows.filter((row) => ![0, 1, 2].some((column) => footerWords.test(grid.text(row, column))));
}

/** Profiles every column over sample rows. */
export function profileColumns(
  grid: Grid,
  names: readonly string[],
  rows: readonly number[],
  kindOf: (text: string, scanner: StampScanner) => CellKind = cellKind,
): ColumnProfile[] {
  const scanner = new StampScanner();
  return names.map((name, index) => {
    const profile: ColumnProfile = {
      index,
      name,
      sampled: rows.length,
      kinds: { blank: 0, number: 0, stamp: 0, date: 0, time: 0, text: 0 },
      distinct: new Map(),
      isManyValued: false,
      first: '',
      last: '',
    };
    for (const row of rows) {
      const text = grid.text(row, index).slice(0, gridCaps.wordCharacters);
      const kind = kindOf(text, scanner);
      profile.kinds[kind] += 1;
      if (kind === 'blank') continue;
      if (profile.first === '') profile.first = text;
      profile.last = text;
      const seen = profile.distinct.get(text);
      if (seen !== undefined) profile.distinct.set(text, seen + 1);
      else if (profile.distinct.size < 40) profile.distinct.set(text, 1);
      else profile.isManyValued = true;
    }
    return profile;
  });
}

/** Share of the filled cells that are of one of the kinds; 0 if none is filled. */
export function shareOf(profile: ColumnProfile, ...kinds: CellKind[]): number {
  const filled = profile.sampled - profile.kinds.blank;
  return filled === 0 ? 0 : kinds.reduce((sum, kind) => sum + profile.kinds[kind], 0) / filled;
}
