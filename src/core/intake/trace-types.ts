/** What is traced back to the file: the interval that begins at an instant, or the bill whose period begins on a day. */
export type TracePoint = { ms: number } | { from: string };

/** A row of the file behind a kept value, with the cells that were read. */
export interface TraceRow {
  /** Number of the row (column, line) in the file, 1 is the first. */
  number: number;
  cells: { name: string; text: string }[];
}

/** Where in a file a kept value stands. */
export interface Trace {
  /** Name of the file; of one in an archive with the archive's before it. */
  fileName: string;
  /** What is counted: lines of XML, rows of a table, columns of a table with a bill a column. */
  unit: 'row' | 'column' | 'line';
  sheet?: string | undefined;
  rows: TraceRow[];
  /** Rows beyond those listed. */
  more: number;
}
