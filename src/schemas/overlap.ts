/** Readings of a file beside the kept ones over a month or the whole stretch. */
export interface IntervalsBeside {
  /** First day of the month; null for the whole. */
  from: string | null;
  inCommon: number;
  equal: number;
  /** Energy of the readings in common. [kWh] */
  keptKwh: number | null;
  comesKwh: number | null;
  /** The interval whose mean power differs most, new less kept; kW, or kvar of the channel named. */
  greatest: { ms: number; channel: 'kwh' | 'kvarhLagging' | 'kvarhLeading'; difference: number } | null;
  onlyKept: number;
  onlyComes: number;
}

/** What is kept of a meter under the span of a file, and what the file brings. */
export interface IntervalsOverlap {
  kind: 'intervals';
  /** Whether a choice is needed: some interval has a reading in both. */
  asks: boolean;
  /** From the first to the last of what both cover; null where they do not meet. */
  span: { fromMs: number; toMs: number } | null;
  /** The kept files under it; a file of another engagement without its name. */
  files: { intakeId: number | null; fileName: string | null }[];
  /** Lengths of interval: kept, of the file, and that in which the two are compared. */
  stepMinutes: { kept: number[]; comes: number; compared: number };
  months: IntervalsBeside[];
  total: IntervalsBeside | null;
  /** Why the new readings cannot go above the kept ones; null where they can. */
  keepNewRefused: string | null;
}

/** What of a bill stands beside another one of the same time. */
export interface BillBeside {
  from: string;
  to: string;
  invoice: string | null;
  isEstimated: boolean;
  kwh: number | null;
  /** Metered or else billed demand. */
  kw: number | null;
  /** Printed, or the sum of the lines where none is. */
  totalMinor: number | null;
}

/** Two bills of one time: that of the file and the kept ones it shares days with. */
export interface BillsBeside {
  comes: BillBeside & { row: string | null };
  kept: (BillBeside & { id: number; fileName: string | null; isJoined: boolean })[];
  /** In what they differ, a sentence each; empty where they are the same bill twice. */
  differences: string[];
}

/** The kept bills that share days with those of a file. */
export interface BillsOverlap {
  kind: 'bills';
  asks: boolean;
  currency: string;
  /** Bills of the file that share no day with a kept one. */
  apart: number;
  bills: BillsBeside[];
}

/** What is kept and what comes, side by side. */
export type IntakeOverlap = IntervalsOverlap | BillsOverlap;
