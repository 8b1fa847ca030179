import { cellKind, type CellKind } from './cells';
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

/** First day of the following month. */
export function nextMonth(day: number): number {
  const date = new Date(day * 86_400_000);
  return civilDay(date.getUTCFullYear() + (date.getUTCMonth() === 11 ? 1 : 0), ((date.getUTCMonth() + 1) % 12) + 1, 1);
}

/** As `cellKind`, with months counted as dates. */
export function billCellKind(text: string, scanner: StampScanner): CellKind {
  const kind = cellKind(text, scanner);
  return (kind === 'text' || (kind === 'number' && /[-/]/.test(text))) && !Number.isNaN(monthDay(text)) ? 'date' : kind;
}
