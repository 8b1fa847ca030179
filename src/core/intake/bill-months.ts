import { cellKind, type CellKind } from './cells';
import { isFigure } from './bill-figures';
import { civilDay, monthOfWord, type StampScanner } from './stamps';

/**
 * First day of the month a cell names, as days since 1970-01-01: `2024-01`, `01/2024`, `Jan 2024`, `January-24`, `202401`;
 * NaN if it names none.
 */
export function monthDay(text: string): number {
  const cell = text.trim();
  const numeric = /^(?:(\d{4})[-/. ]?(0?[1-9]|1[0-2])|(0?[1-9]|1[0-2])[-/. ](\d{4}))$/.exec(cell);
  if (numeric) return civilDay(Number(numeric[1] ?? numeric[4]), Number(numeric[2] ?? numeric[3]), 1);
  const worded = /^(?:([\p{L}]{3,12})\.?[-/, ']{0,3}(\d{4}|\d{2})|(\d{4})[-/, ]{1,2}([\p{L}]{3,12})\.?)$/u.exec(cell);
  if (!worded) return Number.NaN;
  const month = monthOfWord(worded[1] ?? worded[4] ?? '');
  return month === 0 ? Number.NaN : civilDay(Number(worded[2] ?? worded[3]), month, 1);
}

/** Number of the month a cell names without a year: `January`, `Jan.`; 0 if it names none. */
export function bareMonth(text: string): number {
  const word = /^\s*(\p{L}{3,12})\.?\s*$/u.exec(text)?.[1] ?? '';
  return word.length === 3 ||
    word.length > 4 ||
    /^(june|july|sept|juin|juil|août|aout|mars|juni|juli|mayo|maio)$/i.test(word)
    ? monthOfWord(word)
    : 0;
}

/** First day of the following month. */
export function nextMonth(day: number): number {
  const date = new Date(day * 86_400_000);
  return civilDay(date.getUTCFullYear() + (date.getUTCMonth() === 11 ? 1 : 0), ((date.getUTCMonth() + 1) % 12) + 1, 1);
}

// Words and dashes with spaces first: within dates dashes stand without.
const spanMarks = [
  /\s+(?:-|–|—|to|thru|through|until|bis|au|al|a|tot|hasta)\s+/i,
  /\s*[–—]\s*/,
  /\s*\.{2,3}\s*/,
  /(?<=\d{4})\s*-\s*(?=\d)/,
];

/** The two dates of a cell such as `6/10/2025 - 7/9/2025`; null if it does not name two. */
export function spanParts(text: string): [string, string] | null {
  const cell = text.replace(/^\s*(from|von|du|del|dal|desde|de)\s+/i, '').trim();
  if (cell.length > 60) return null;
  for (const mark of spanMarks) {
    const parts = cell.split(mark);
    const [from = '', to = ''] = parts;
    if (parts.length === 2 && isDateLike(from) && isDateLike(to)) return [from, to];
  }
  return null;
}

const isDateLike = (text: string): boolean =>
  text.length >= 6 && /\d/.test(text) && /^[\p{L}\d][\p{L}\d./, -]*$/u.test(text) && /\d[./ -]|\p{L}/u.test(text);

/** As `cellKind`, with months and spans of dates counted as dates, and figures with units or signs beside them as figures. */
export function billCellKind(text: string, scanner: StampScanner): CellKind {
  const kind = cellKind(text, scanner);
  if (kind === 'blank') return kind;
  const isOpen = kind === 'text' || (kind === 'number' && /[-/]/.test(text));
  if (isOpen && !Number.isNaN(monthDay(text))) return 'date';
  if (kind === 'text' && bareMonth(text) > 0) return 'date';
  if ((kind === 'text' || kind === 'stamp') && spanParts(text)) return 'date';
  return kind !== 'number' && kind !== 'date' && isFigure(text) ? 'number' : kind;
}
