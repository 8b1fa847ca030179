import type { LoadFinding } from '../core/load';
import type { MeterView } from './engagement';
import type { GapFillView } from './gap-fill';
import type { IntakeRow } from './intake';

/** Mean kW of every interval by local day, for the carpet picture; null where missing. */
export interface LoadDays {
  stepMinutes: number;
  days: DayOfLoad[];
}

/** One local day of readings; null where missing. */
export interface DayOfLoad {
  date: string;
  /** Mean kW. */
  readings: (number | null)[];
  /** Mean kvar, lagging less leading: below nought where the plant delivers; absent where the readings carry none. */
  kvar?: (number | null)[];
  /** Positions that are estimated; absent where none is. */
  estimated?: number[];
}

/** The picture of a file before it is kept, and what its readings show that may not be true. */
export interface IntakePicture extends LoadDays {
  findings: LoadFinding[];
}

/** A stretch of missing readings, half-open. */
export interface ReadingGap {
  fromMs: number;
  toMs: number;
  intervals: number;
}

/** A kept file and what of the meter it covers. */
export interface KeptFile {
  intakeId: number;
  fileName: string;
  fromMs: number;
  toMs: number;
  stepMinutes: number;
  intervals: number;
  missing: number;
}

/** Totals of one calendar month of the site's time; null where nothing is known. */
export interface MonthOfLoad {
  /** First day of the month within the year. */
  from: string;
  intervals: number;
  present: number;
  estimated: number;
  kwh: number | null;
  kvarhLagging: number | null;
  kvarhLeading: number | null;
  maxKw: number | null;
  maxKwMs: number | null;
}

/** One interval of a day: minutes after its local midnight, means over the interval. */
export interface DayReading {
  minute: number;
  kw: number | null;
  kvarLagging: number | null;
  kvarLeading: number | null;
}

/** The interval of the highest mean kW and the day it lies in. */
export interface PeakOfYear {
  ms: number;
  /** The kept file it comes from; null where it is estimated here or came with another engagement. */
  intakeId: number | null;
  kw: number;
  date: string;
  minute: number;
  kvarLagging: number | null;
  day: DayReading[];
}

/** What is kept of the engagement's year of one meter, in figures. */
export interface MeterOfYear {
  id: number;
  label: string;
  intervals: number;
  present: number;
  kwh: number | null;
  kvarhLagging: number | null;
  /** Highest mean of an interval. */
  maxKw: number | null;
}

/** What is kept of the engagement's year. */
export interface KeptYear {
  stepMinutes: number;
  intervals: number;
  present: number;
  estimated: number;
  peak: PeakOfYear | null;
  gaps: ReadingGap[];
  gapCount: number;
  /** Gaps that were estimated. */
  fills: GapFillView[];
  findings: LoadFinding[];
  months: MonthOfLoad[];
}

/** The meters billed together, and what could be among them. */
export interface MetersOfYear {
  meters: MeterOfYear[];
  /** All of them added up; null with one meter, or where one has no readings. */
  together: Omit<MeterOfYear, 'id' | 'label'> | null;
  /** Meters of the site that are not among them. */
  others: MeterView[];
}

/** The station Intervals, of one of the engagement's meters. */
export interface IntervalsStation {
  /** The meter shown. */
  meter: MeterView;
  files: IntakeRow[];
  kept: KeptFile[];
  /** By local day; null where nothing is kept. */
  picture: LoadDays | null;
  timeZone: string;
  fromMs: number;
  toMs: number;
  year: KeptYear | null;
}
