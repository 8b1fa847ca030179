import type { DocumentChoice } from './bill-types';

/** What a column of an interval file is taken for. */
export type IntervalRole =
  | 'stamp' // date and time in one column; begin or end by StampStyle.marks
  | 'date' // date alone
  | 'time' // time of day alone, beside a date column
  | 'interval-number' // 1..24, 1..48, 1..96 within the day, beside a date column
  | 'stamp-begin'
  | 'stamp-end'
  | 'day-value' // wide layout: the reading of one time of day
  | 'meter' // names the meter of the row
  | 'channel' // names the quantity of the row, one value column
  | 'unit' // names the unit of the row
  | 'value' // the value that `channel` or `unit` explains
  | 'active' // energy drawn (or average power drawn, or its register)
  | 'export' // energy delivered to the grid
  | 'reactive-lagging'
  | 'reactive-leading'
  | 'reactive-signed' // positive is lagging
  | 'apparent'
  | 'power-factor'
  | 'sense' // says whether the reactive share of the row lags or leads
  | 'quality'
  | 'ignore';

/** What a column of a table of bills is taken for. */
export type BillRole =
  | 'period-from'
  | 'period-to'
  | 'period' // first and last day in one cell
  | 'month'
  | 'year' // beside a month that names none
  | 'days'
  | 'meter' // account, meter or service point of the row
  | 'invoice'
  | 'read-type' // estimated, actual, corrected, credit note ...
  | 'quantity'
  | 'charge'
  | 'rate' // price of one of the charges
  | 'total'
  | 'line-label' // a row a line of the bill: what the line is for
  | 'line-quantity'
  | 'line-unit'
  | 'line-rate'
  | 'line-amount'
  | 'ignore';

/** What the figures of a column measure. */
export type Measure = 'energy' | 'power' | 'register';

/** What one column is taken for. */
export interface ColumnUse {
  /** Position in the file, 0 is the first. */
  index: number;
  /** Name in the header row; '' where the file has none. */
  name: string;
  role: IntervalRole | BillRole;
  /** Unit of the figures: Wh, kWh, MWh, W, kW, MW, varh, kvarh, Mvarh, var, kvar, Mvar, VAh, kVAh, VA, kVA, %, or a currency code. */
  unit?: string;
  measure?: Measure;
  /** Every figure is multiplied by this (a meter's multiplier that is not in the figures yet). */
  factor?: number;
  /** Bills: name of the quantity (kwh, kwhPeak, maxKw, billedKw, maxKva, kvarh, kvarhLeading, powerFactor ...). */
  quantity?: string;
  /** Bills, role `rate`: name of the column of the charge it prices. */
  charge?: string;
  /** Bills, role `rate`: name of the column of the quantity it is multiplied with. */
  times?: string;
  /** Wide layout: start of the reading, minutes after local midnight. */
  minuteOfDay?: number;
}

/** Order of day, month and year; `serial` counts days since 1899-12-30, `epoch` seconds or ms since 1970. */
export type DateOrder = 'DMY' | 'MDY' | 'YMD' | 'serial' | 'epoch';

/** How the stamps are to be read. */
export interface StampStyle {
  order?: DateOrder;
  /** `own-day-end`: as `end`, and the last interval of a day carries that day's own date with 00:00. */
  marks?: 'begin' | 'end' | 'own-day-end';
  /** `local`: wall clock with clock changes; `standard`: no summer time; `utc`; `offset`: each stamp carries its own. */
  clock?: 'local' | 'standard' | 'utc' | 'offset';
  stepMinutes?: number;
}

/**
 * A way to read one kind of file. Plain JSON, every field but `kind` optional: what is there is followed, what is not is
 * detected. The map a preview returns is complete and can be kept, corrected by a person and given again.
 */
export interface ColumnMap {
  kind: 'intervals' | 'bills';
  /** Name of the sheet of a workbook. */
  sheet?: string;
  delimiter?: string;
  decimalMark?: '.' | ',';
  /** Row of the file that holds the names, 1 is the first; null: the file has none. */
  headerRow?: number | null;
  /** First row of readings or bills, 1 is the first row of the file. */
  firstRow?: number;
  /** `items`: bills with a row for each of their lines. */
  layout?: 'long' | 'wide' | 'transposed' | 'items';
  columns?: ColumnUse[];
  stamp?: StampStyle;
  /** The meter to keep where the file holds several. */
  meter?: string;
  /** The file to read where an archive holds several: its name in there. */
  member?: string;
  /** Bills: whether the last day printed belongs to the period. */
  periodEnds?: 'inclusive' | 'exclusive';
  /** Bills: year of the first bill where the file names months alone. */
  year?: number;
  /** Bills: documents a person takes or leaves out against the proposal; one counts only where row and total agree. */
  documents?: DocumentChoice[];
}
