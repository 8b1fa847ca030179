import { intakeError } from './errors';
import { gridCaps, type Grid } from './grid';
import { PlainTextGrid, QuotedTextGrid } from './text-grid';

/** A list of offsets that grows without boxing. */
class Offsets {
  values: Uint32Array;
  length = 0;

  constructor(capacity: number) {
    this.values = new Uint32Array(capacity);
  }

  push(offset: number): void {
    if (this.length === this.values.length) this.values = grown(this.values);
    this.values[this.length] = offset;
    this.length += 1;
  }

  finish(): Uint32Array {
    return this.values.subarray(0, this.length);
  }
}

function grown(values: Uint32Array): Uint32Array {
  const larger = new Uint32Array(values.length * 2);
  larger.set(values);
  return larger;
}

/**
 * Splits delimited text into a grid: quotes doubled inside quoted cells (RFC 4180), line ends LF, CRLF or CR, line breaks
 * inside quotes, rows of any length.
 * @throws {IntakeError} beyond the caps, or when a quote is opened and never closed.
 */
export function splitDelimited(text: string, delimiter: string, fileName: string): Grid {
  const isPlain = !text.includes('"') && (text.includes('\n') || !text.includes('\r'));
  return isPlain ? splitPlain(text, delimiter, fileName) : splitQuoted(text, delimiter, fileName);
}

/** The fast path: every line feed ends a row. */
function splitPlain(text: string, delimiter: string, fileName: string): PlainTextGrid {
  const starts = new Offsets(Math.max(64, text.length >> 6));
  const ends = new Offsets(Math.max(64, text.length >> 6));
  let at = 0;
  while (at < text.length) {
    const feed = text.indexOf('\n', at);
    const end = feed < 0 ? text.length : feed;
    starts.push(at);
    ends.push(end > at && text.charCodeAt(end - 1) === 13 ? end - 1 : end);
    at = end + 1;
    if (starts.length > gridCaps.rows) throw tooLarge(fileName);
  }
  return new PlainTextGrid(text, delimiter.charCodeAt(0), starts.finish(), ends.finish());
}

function splitQuoted(text: string, delimiter: string, fileName: string): QuotedTextGrid {
  const mark = delimiter.charCodeAt(0);
  const cells = new Offsets(Math.max(64, text.length >> 2));
  const rows = new Offsets(1024);
  const ends = new Offsets(1024);
  const lines = new Offsets(1024);
  const length = text.length;
  let line = 1;
  let at = 0;
  while (at < length) {
    rows.push(cells.length);
    lines.push(line);
    cells.push(at);
    for (; at < length; at += 1) {
      const code = text.charCodeAt(at);
      if (code === mark) cells.push(at + 1);
      else if (code === 10 || code === 13) break;
      else if (code === 34 && isCellStart(text, at, mark)) {
        const close = closingQuote(text, at);
        if (close < 0) throw unclosedQuote(fileName, line);
        for (let inner = at; inner < close; inner += 1) if (text.charCodeAt(inner) === 10) line += 1;
        at = close;
      }
    }
    ends.push(at);
    if (text.charCodeAt(at) === 13 && text.charCodeAt(at + 1) === 10) at += 1;
    at += 1;
    line += 1;
    if (rows.length > gridCaps.rows) throw tooLarge(fileName);
  }
  rows.push(cells.length);
  return new QuotedTextGrid(text, {
    cellStarts: cells.finish(),
    rowCells: rows.finish(),
    rowEnds: ends.finish(),
    lines: lines.finish(),
  });
}

/** A quote opens a quoted cell only as the first sign of the cell, blanks and the guard of ="..." apart. */
function isCellStart(text: string, at: number, mark: number): boolean {
  let before = at - 1;
  while (before >= 0 && (text.charCodeAt(before) === 32 || text.charCodeAt(before) === 61)) before -= 1;
  const code = text.charCodeAt(before);
  return before < 0 || code === mark || code === 10 || code === 13;
}

function closingQuote(text: string, open: number): number {
  let at = text.indexOf('"', open + 1);
  while (at >= 0 && text.charCodeAt(at + 1) === 34) at = text.indexOf('"', at + 2);
  if (at - open > gridCaps.cellCharacters) return -1;
  return at;
}

const unclosedQuote = (fileName: string, line: number) =>
  intakeError(
    'A quotation mark is opened and not closed.',
    `${fileName}, row ${line}`,
    'Close or remove the quotation mark, or export the file again: it may have been cut off.',
  );

const tooLarge = (fileName: string) =>
  intakeError(
    `The file has more than ${gridCaps.rows} rows.`,
    fileName,
    'Split the file by year or by meter and bring in the parts.',
  );
