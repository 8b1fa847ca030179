import { metersOf } from './bill-meters';
import { planBills, type BillPlan } from './bill-plan';
import { readBillTable, type BillTable } from './bills';
import type { TableBlock } from './block';
import { IntakeError } from './errors';
import { guess } from './evidence';
import type { Grid } from './grid';
import { planIntervals, readPlanned, type IntervalPlan } from './intervals';
import type { OpenedTable } from './open';
import { shapeOf } from './shape';
import type { ColumnMap } from './column-map';
import type {
  BillPreview,
  BillReading,
  ColumnEvidence,
  Guess,
  IntakeFormat,
  IntakeProblem,
  IntervalPreview,
  IntervalReading,
  PreviewRow,
  ReadOptions,
} from './types';

const rowsShown = 12;
const charactersShown = 160;

/** What intake shows of a table of intervals, whether or not it can be read. */
export function previewOfIntervals(opened: OpenedTable, options: ReadOptions): IntervalPreview {
  const plan = attempt(() => planIntervals(opened, options));
  const reading = plan.result && attempt(() => readPlanned(plan.result as IntervalPlan, options));
  const read = reading?.result ?? null;
  return {
    kind: 'intervals',
    ...common(opened, options, plan.result, read),
    columnMap: read?.report.columnMap ?? plan.result?.columnMap ?? fallbackMap('intervals', options),
    problems: reading?.problems ?? plan.problems,
    meters: plan.result?.meters ?? [],
  };
}

/** What intake shows of a table of bills, whether or not it can be read. */
export function previewOfBills(opened: OpenedTable, options: ReadOptions): BillPreview {
  const plan = attempt(() => planBills(opened, options));
  const table = plan.result && attempt(() => readBillTable(plan.result as BillPlan, options));
  const found: BillTable | null = table?.result ?? null;
  const meters = found?.meters ?? (plan.result ? metersOf(plan.result) : []);
  const problems = found?.problems ?? table?.problems ?? plan.problems;
  const read = found && problems.length === 0 ? { ...found.reading, guesses: found.guesses } : null;
  return {
    kind: 'bills',
    ...common(opened, options, plan.result, read),
    columnMap: plan.result?.columnMap ?? fallbackMap('bills', options),
    problems: problems.slice(0, 20),
    meters,
    documents: found?.documents ?? [],
    bills: read?.bills ?? [],
    guesses: withReadGuesses(plan.result?.guesses ?? [], found?.guesses ?? accountGuess(meters)),
  };
}

/** Several meters stand in the way of reading: the choice is shown beside the other decisions. */
const accountGuess = (meters: readonly string[]): Guess[] =>
  meters.length < 2
    ? []
    : [
        guess('meter', meters.slice(0, 8).join(', '), [
          [false, `${meters.length} accounts or meters with bills of the same days`],
        ]),
      ];

interface Attempt<T> {
  result: T | null;
  problems: IntakeProblem[];
}

/** A refusal becomes problems to show; anything else is a fault of ours and passes on. */
export function attempt<T>(work: () => T): Attempt<T> {
  try {
    return { result: work(), problems: [] };
  } catch (cause) {
    if (!(cause instanceof IntakeError)) throw cause;
    return { result: null, problems: cause.problems };
  }
}

const fallbackMap = (kind: ColumnMap['kind'], options: ReadOptions): ColumnMap => options.columnMap ?? { kind };

type Common = Omit<IntervalPreview, 'kind' | 'meters' | 'problems' | 'columnMap'>;

function common(
  opened: OpenedTable,
  options: ReadOptions,
  plan: IntervalPlan | BillPlan | null,
  read: ((IntervalReading | BillReading) & { guesses: Guess[] }) | null,
): Common {
  // A table that is turned is shown turned; cells filled down are shown as the file has them.
  const grid = plan && 'isTransposed' in plan && plan.isTransposed ? plan.grid : opened.grid;
  const block = plan?.block ?? null;
  return {
    fileName: options.fileName,
    format: opened.format,
    dialect: plan?.opened.dialect ?? opened.dialect,
    rowsInFile: filledRows(opened.grid),
    headerRow: block?.headerRow === null || !block ? null : grid.rowNumber(block.headerRow),
    firstRow: grid.rowNumber(block?.firstRow ?? 0),
    lastRow: grid.rowNumber(block?.lastRow ?? Math.max(0, grid.rows - 1)),
    rows: firstRows(grid, block),
    mapApplied: options.columnMap !== undefined,
    shape: shapeOf(opened.grid, opened.vote?.delimiter),
    columns: plan?.evidence ?? [],
    guesses: withReadGuesses(plan?.guesses ?? [], read?.guesses ?? []),
    report: read?.report ?? null,
  };
}

/** Decisions made while reading stand behind those made before. */
function withReadGuesses(planned: readonly Guess[], read: readonly Guess[]): Guess[] {
  return [...planned.filter((one) => !read.some((other) => other.key === one.key)), ...read];
}

function filledRows(grid: Grid): number {
  let filled = 0;
  for (let row = 0; row < grid.rows; row += 1) if (grid.width(row) > 0) filled += 1;
  return filled;
}

/** The beginning of the table with what stands just above it: enough to see header and data together. */
function firstRows(grid: Grid, block: TableBlock | null): PreviewRow[] {
  const start = Math.max(0, (block?.headerRow ?? block?.firstRow ?? 0) - 5);
  return Array.from({ length: Math.min(rowsShown, grid.rows - start) }, (_, at) => {
    const row = start + at;
    return {
      number: grid.rowNumber(row),
      cells: Array.from({ length: grid.width(row) }, (_unused, column) =>
        grid.text(row, column).slice(0, charactersShown),
      ),
      isHeader: row === block?.headerRow,
    };
  });
}

/** What intake shows of a file whose format says itself what its channels are. */
export function previewOfChannels(
  file: {
    format: IntakeFormat;
    /** Text of the beginning of the file. */
    head: string;
    rowsInFile: number;
    columns: ColumnEvidence[];
    meters: string[];
    shape: string;
    /** The map where the file cannot be read with it yet. */
    columnMap: ColumnMap;
  },
  options: ReadOptions,
  read: () => IntervalReading,
): IntervalPreview {
  const reading = attempt(read);
  return {
    kind: 'intervals',
    fileName: options.fileName,
    format: file.format,
    dialect: {},
    rowsInFile: file.rowsInFile,
    headerRow: null,
    firstRow: 1,
    lastRow: file.rowsInFile,
    rows: headRows(file.head, file.format === 'nem12' ? ',' : null),
    columnMap: reading.result?.report.columnMap ?? file.columnMap,
    mapApplied: options.columnMap !== undefined,
    shape: file.shape,
    columns: file.columns,
    guesses: meterGuess(file.meters, options.columnMap),
    problems: reading.problems,
    meters: file.meters,
    report: reading.result?.report ?? null,
  };
}

/** Which of several meters a format names is read; nothing to decide where there is one. */
export function meterGuess(meters: readonly string[], map: ColumnMap | undefined): Guess[] {
  if (meters.length < 2) return [];
  const picked = map?.meter !== undefined && meters.includes(map.meter);
  const taken = picked ? (map.meter ?? '') : 'none yet';
  return [guess('meter', taken, [[picked, `${meters.length} meters in one file`]])];
}

/** The first lines of a text as rows to show; of XML those from the first element on, each as one cell. */
export function headRows(head: string, delimiter: ',' | null): PreviewRow[] {
  const lines = head.split(/\r\n|\n|\r/, 400);
  const from =
    delimiter === null
      ? Math.max(
          0,
          lines.findIndex((line) => /<[\w-]*:?feed\b/.test(line)),
        )
      : 0;
  return lines.slice(from, from + rowsShown).map((line, at) => ({
    number: from + at + 1,
    cells: (delimiter === null ? [line] : line.split(delimiter, 60)).map((cell) =>
      cell.trim().slice(0, charactersShown),
    ),
    isHeader: false,
  }));
}
