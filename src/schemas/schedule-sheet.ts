import type { ScheduleProblem } from '../core/tariff';
import type { ContractField } from './tariff';

/** A stretch of one window on one kind of day, in minutes of the local clock. */
export interface WindowSpan {
  window: number;
  from: number;
  to: number;
}

/** A year of a schedule's windows: a day a column, minutes of the local clock upward. Days count from 0, 1 January. */
export interface YearPicture {
  year: number;
  windows: { name: string; label: string; words: string; hours: number; isRest: boolean; bySeason: boolean }[];
  /** Stretches of days in one season, [from, to). */
  seasons: { season: number; name: string; from: number; to: number }[];
  seasonNames: string[];
  patterns: WindowSpan[][];
  /** Pattern of each day. */
  patternOfDay: number[];
  holidays: number[];
  /** Days whose local clock changes. */
  oddDays: { day: number; hours: number }[];
  /** Kinds of day that share a pattern: "Summer weekday". */
  strips: { label: string; pattern: number }[];
  totalHours: number;
}

/** A row of the charges. `line` is that of the text. */
export interface ChargeRow {
  name: string;
  label: string;
  words: string;
  group: string;
  clause: string | null;
  line: number | null;
}

export interface QuantityRow {
  name: string;
  label: string;
  words: string;
  unit: string;
  clause: string | null;
  line: number | null;
}

/** A schedule as its page reads. */
export interface ScheduleSheetView {
  id: string;
  fileName: string;
  sha256: string;
  lines: string[];
  problems: ScheduleProblem[];
  sheet: {
    title: string;
    publisher: string | null;
    sourceWords: string;
    status: string | null;
    currency: string;
    timeZone: string;
    inForce: string | null;
    charges: ChargeRow[];
    quantities: QuantityRow[];
    contract: ContractField[];
    versions: { from: string; note: string; current: boolean }[];
    rules: { label: string; words: string; line: number | null }[];
    notes: { where: string; message: string; line: number | null }[];
    year: YearPicture | null;
  } | null;
}
