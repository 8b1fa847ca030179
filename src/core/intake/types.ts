import type { BillDocument, BillRecord, RateFault } from './bill-types';
import type { BillRole, ColumnMap, IntervalRole, Measure } from './column-map';
import type { LoadSeries } from '../load';

/** How a file is to be read. */
export interface ReadOptions {
  /** Name as uploaded; used in messages only, never trusted for the format. */
  fileName: string;
  /** IANA zone of local stamps without offset, such as `America/Chicago`. */
  timeZone: string;
  /** A column map to follow; what it leaves out is detected. Omitted: detect everything. */
  columnMap?: ColumnMap;
  /** Hears how far reading is. */
  onProgress?: (progress: ReadProgress) => void;
}

/** How far reading is: bytes taken in, or one stage after another where a format cannot be counted. */
export interface ReadProgress {
  unit: 'bytes' | 'stages';
  done: number;
  planned: number;
}

/** Container and dialect family a file was recognised as. */
export type IntakeFormat = 'delimited' | 'spreadsheet' | 'espi' | 'nem12';

/** One thing wrong with a file: what, where in it, and what to do. */
export interface IntakeProblem {
  message: string;
  where: string;
  remedy: string;
}

/** An assumption or repair, in words, with the rows it concerns. */
export interface IntakeNote {
  code: string;
  message: string;
  where?: string;
}

/** Stretch of missing intervals, half-open UTC. */
export interface IntakeGap {
  fromMs: number;
  toMs: number;
  intervals: number;
}

/** What reading a file found. */
export interface IntakeReport {
  format: IntakeFormat;
  rowsRead: number;
  intervals: number;
  missing: number;
  duplicates: number;
  estimated: number;
  firstMs: number;
  lastMs: number;
  totalKwh: number;
  totalKvarhLagging: number;
  totalKvarhLeading: number;
  maxKw: number;
  notes: IntakeNote[];
  /** Intervals: every stretch of missing readings, in order. */
  gaps?: IntakeGap[];
  /** Intervals: the highest average power and the beginning of its interval. */
  peak?: { ms: number; kw: number };
  /** Intervals whose net energy in the file is below nought: export. */
  negative?: number;
  stepMinutes?: number;
  /** The complete map the file was read with. */
  columnMap?: ColumnMap;
  /** Bills: the row of the file each bill stands in, in the order of the bills. */
  billRows?: number[];
  /** Bills: every document met in the file, in its order. */
  documents?: BillDocument[];
  /** Bills: lines whose quantity times rate is more than a cent off the amount. */
  rateFaults?: RateFault[];
  /** Bills: the currency named in the file, as an ISO code, where one could be told. */
  currency?: string;
}

/** How the bytes of a file were turned into cells. */
export interface Dialect {
  encoding?: string;
  delimiter?: string;
  decimalMark?: '.' | ',';
  sheet?: string;
  sheets?: string[];
  /** Files of readings or bills in an archive, where it holds several. */
  members?: string[];
}

/** One decision about the whole file and what speaks for it. */
export interface Guess {
  key:
    | 'header-row'
    | 'delimiter'
    | 'decimal-mark'
    | 'layout'
    | 'date-order'
    | 'marks'
    | 'clock'
    | 'step'
    | 'period-ends'
    | 'year'
    | 'meter'
    | 'member';
  takenAs: string;
  why: string;
  testsMet: number;
  testsTotal: number;
  /** False: a person has to confirm it. */
  sure: boolean;
}

/** What one column (or a run of like columns) is taken for, and what speaks for it. */
export interface ColumnEvidence {
  /** Position of the first column, 0 is the first in the file. */
  index: number;
  /** How many neighbouring columns this line speaks for; 1 but for the readings of a wide layout. */
  span: number;
  /** Spreadsheet letter of the first column. */
  letter: string;
  name: string;
  /** Range or values met, as text, such as `375.9 to 1170.5` or `A, E`. */
  values: string;
  takenAs: IntervalRole | BillRole;
  unit: string;
  /** No unit is named in the file: `unit` is what is usual. */
  isUnitAssumed?: boolean;
  measure?: Measure;
  quantity?: string;
  why: string;
  testsMet: number;
  testsTotal: number;
  sure: boolean;
}

/** A row of the file as shown to a person. */
export interface PreviewRow {
  /** Number of the row in the file, 1 is the first. */
  number: number;
  cells: string[];
  isHeader: boolean;
}

interface Preview {
  fileName: string;
  format: IntakeFormat;
  dialect: Dialect;
  /** Rows of the file with anything in them. */
  rowsInFile: number;
  /** Number of the row with the names, null where there is none. */
  headerRow: number | null;
  /** Numbers of the first and last row of data. */
  firstRow: number;
  lastRow: number;
  /** The first rows, at most twelve, all columns. */
  rows: PreviewRow[];
  /** Complete map: the one proposed, or the one given with what it left out. */
  columnMap: ColumnMap;
  /** True if a map was given and followed. */
  mapApplied: boolean;
  /** Equal for files of one shape, so that a map can be remembered and offered again. */
  shape: string;
  columns: ColumnEvidence[];
  guesses: Guess[];
  /** Why the file cannot be read with this map; empty if it can. */
  problems: IntakeProblem[];
  /** What reading with this map gives; null if it cannot be read. */
  report: IntakeReport | null;
}

/** What the steps Read and Match show of an interval file. */
export interface IntervalPreview extends Preview {
  kind: 'intervals';
  /** Meters met in the file, as named there. */
  meters: string[];
}

/** What the steps Read and Match show of a table of bills. */
export interface BillPreview extends Preview {
  kind: 'bills';
  /** Accounts or meters met in the file, where they hold bills of the same days. */
  meters: string[];
  /** Every document met, also where the bills cannot be read as they stand. */
  documents: BillDocument[];
  /** The bills as they would be kept; empty if the table cannot be read. */
  bills: BillRecord[];
}

/** Result of reading intervals. */
export interface IntervalReading {
  load: LoadSeries;
  report: IntakeReport;
}

/** Result of reading a table of bills. */
export interface BillReading {
  bills: BillRecord[];
  report: IntakeReport;
}
