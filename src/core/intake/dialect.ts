import { isBlankWord } from './numbers';

/** The delimiter of a text file and how many of its lines agree. */
export interface DelimiterVote {
  delimiter: string;
  /** Cells in most lines. */
  columns: number;
  linesAgreeing: number;
  linesTried: number;
}

const candidates = [';', '\t', '|', ','];
const sampleLines = 400;

/**
 * Votes for the delimiter. Each candidate splits the first lines outside quotes; it scores by the share of lines with the
 * most frequent number of cells and by the share of cells that then look whole (a figure, a date, a time, a blank, a word
 * without another candidate inside). Preambles and commas inside figures therefore do not fool it.
 */
export function voteDelimiter(text: string): DelimiterVote {
  const lines = text
    .slice(0, 400_000)
    .split(/\r\n|\n|\r/)
    .slice(0, sampleLines)
    .filter((line) => line.trim() !== '');
  let best: DelimiterVote & { score: number } = {
    delimiter: ',',
    columns: 1,
    linesAgreeing: 0,
    linesTried: lines.length,
    score: 0,
  };
  for (const delimiter of candidates) {
    const rows = lines.map((line) => splitLine(line, delimiter));
    const { columns, lines: agreeing } = modalWidth(rows);
    if (columns < 2) continue;
    const alike = rows.filter((row) => row.length === columns).slice(0, 60);
    const cells = alike.flat();
    const whole = cells.filter((cell) => isWhole(cell, delimiter)).length / Math.max(1, cells.length);
    const score = (agreeing / lines.length) * whole * (1 - 1 / (columns + 2));
    if (score > best.score) best = { delimiter, columns, linesAgreeing: agreeing, linesTried: lines.length, score };
  }
  return {
    delimiter: best.delimiter,
    columns: best.columns,
    linesAgreeing: best.linesAgreeing,
    linesTried: best.linesTried,
  };
}

/** Cells of one line, quotes respected and kept off the cells. */
function splitLine(line: string, delimiter: string): string[] {
  if (!line.includes('"')) return line.split(delimiter);
  const cells: string[] = [];
  let cell = '';
  let inside = false;
  for (const sign of line) {
    if (sign === '"') inside = !inside;
    else if (sign === delimiter && !inside) {
      cells.push(cell);
      cell = '';
    } else cell += sign;
  }
  cells.push(cell);
  return cells;
}

function modalWidth(rows: string[][]): { columns: number; lines: number } {
  const counts = new Map<number, number>();
  for (const row of rows) if (row.length > 1) counts.set(row.length, (counts.get(row.length) ?? 0) + 1);
  let columns = 1;
  let lines = 0;
  for (const [width, count] of counts) {
    if (count > lines || (count === lines && width > columns)) {
      columns = width;
      lines = count;
    }
  }
  return { columns, lines };
}

function isWhole(cell: string, delimiter: string): boolean {
  const text = cell.trim();
  if (isBlankWord(text)) return true;
  if (/^[-+(]?[$€£]?\s?\d[\d.,' \u00a0]*\)?\s?[%€$£]?$/.test(text)) return true;
  return (
    !candidates.some((other) => other !== delimiter && other !== ',' && text.includes(other)) && !/\d,\d/.test(text)
  );
}
