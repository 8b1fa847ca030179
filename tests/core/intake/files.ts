import * as XLSX from 'xlsx';
import { readIntervals, type ColumnMap, type IntervalReading } from '@/core/intake';

/** Bytes of a text in UTF-8. */
export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);

/** An interval of an invented plant: its beginning in UTC and figures that tell it from every other near it. */
export interface Reading {
  utcMs: number;
  kwh: number;
  lagging: number;
}

/** Readings of a regular series over `[fromUtc, toUtc)`; figures repeat only after more than a day. */
export function readingsBetween(fromUtc: string, toUtc: string, stepMinutes: number): Reading[] {
  const stepMs = stepMinutes * 60_000;
  const count = (Date.parse(toUtc) - Date.parse(fromUtc)) / stepMs;
  return Array.from({ length: count }, (_, at) => ({
    utcMs: Date.parse(fromUtc) + at * stepMs,
    kwh: 100 + ((at * 7) % 251) / 2,
    lagging: 20 + ((at * 11) % 127) / 4,
  }));
}

/** Wall clock of an instant, worked out by the platform and not by the code under test. */
export interface Wall {
  date: string;
  day: string;
  month: string;
  year: string;
  time: string;
}

const formats = new Map<string, Intl.DateTimeFormat>();

export function wallOf(utcMs: number, timeZone: string): Wall {
  let format = formats.get(timeZone);
  if (!format) {
    format = new Intl.DateTimeFormat('en-GB', {
      timeZone,
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
      hourCycle: 'h23',
    });
    formats.set(timeZone, format);
  }
  const parts = Object.fromEntries(format.formatToParts(utcMs).map((part) => [part.type, part.value]));
  const { year = '', month = '', day = '', hour = '', minute = '' } = parts;
  return { date: `${year}-${month}-${day}`, day, month, year, time: `${hour}:${minute}` };
}

/** Reads text as intervals of a zone. */
export function readText(text: string, timeZone: string, columnMap?: ColumnMap): Promise<IntervalReading> {
  return readIntervals(bytesOf(text), { fileName: 'plant.csv', timeZone, ...(columnMap ? { columnMap } : {}) });
}

/** A workbook with one sheet of cells; numbers in `dateFormat` cells carry that number format. */
export function workbook(
  rows: (string | number | null)[][],
  options: { bookType?: XLSX.BookType; formats?: Record<number, string>; sheet?: string; date1904?: boolean } = {},
): Uint8Array {
  const sheet = XLSX.utils.aoa_to_sheet(rows);
  rows.forEach((row, r) =>
    row.forEach((cell, c) => {
      const format = options.formats?.[c];
      const target = sheet[XLSX.utils.encode_cell({ r, c })] as XLSX.CellObject | undefined;
      if (format && target && typeof cell === 'number') target.z = format;
    }),
  );
  const book = XLSX.utils.book_new();
  XLSX.utils.book_append_sheet(book, sheet, options.sheet ?? 'Readings');
  if (options.date1904) book.Workbook = { WBProps: { date1904: true } };
  return new Uint8Array(XLSX.write(book, { type: 'array', bookType: options.bookType ?? 'xlsx' }) as ArrayBuffer);
}
