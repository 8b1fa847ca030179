import { currencyDecimals, formatAmount, formatNumber } from './format';
import type { MarkProps } from './Mark';
import type { WhyContent } from './why';

/** One column. The unit stands in the head, never in the cells. */
export interface LedgerColumn {
  key: string;
  head: string;
  unit?: string;
  /** `number`: a quantity; `money`: integer minor units of `currency`; `text`: as it is. Default text. */
  kind?: 'text' | 'number' | 'money';
  decimals?: number;
  /** For money; also the unit where none is given. */
  currency?: string;
  /** Default: text left, figures right. */
  align?: 'left' | 'right' | 'middle';
  /** Signs positive figures too: differences. */
  signed?: boolean;
  strong?: boolean;
  quiet?: boolean;
  /** The chosen column, on verdigris wash: a plan among plans. */
  picked?: boolean;
  /** Head for readers only. */
  headUnseen?: boolean;
  wrap?: boolean;
  /** Left out where rows are stacked on a phone: what opens from the row says it. */
  spare?: boolean;
  width?: string;
}

/** A cell that says more than its value. */
export interface LedgerCell {
  value: string | number | null;
  tone?: 'lagging' | 'leading' | 'warn' | 'fault' | 'quiet';
  strong?: boolean;
  /** Not from a nameplate or a bill: dashed ochre underline. */
  assumed?: boolean;
  /** Small second line. */
  note?: string;
  /** Word before the figure: "r" for ratchet. */
  prefix?: string;
  href?: string;
  mark?: MarkProps;
  /** Opens under the row when the figure is pressed. */
  why?: WhyContent;
  /** The same, with what the table's `renderPanel` gives. */
  opens?: boolean;
}

export type LedgerValue = string | number | null | undefined | LedgerCell;

export interface LedgerRow {
  id: string;
  cells: Record<string, LedgerValue>;
  /** Letter in a square at the row's end, the same as on its slip. */
  finding?: string;
  /** The letter in ochre instead of madder, as on its slip. */
  caution?: boolean;
  /** `chosen`: opened or picked; `asks`: wants a word; `refused`. `subtotal`, `total`: sums among the rows. */
  kind?: 'plain' | 'chosen' | 'asks' | 'refused' | 'subtotal' | 'total';
  /** Heading line above this row. */
  group?: string;
}

/** Plain JSON of a table; the same shape is a chart's table twin and its CSV. */
export interface LedgerData {
  columns: LedgerColumn[];
  rows: LedgerRow[];
  /** Single rule above, double below. */
  total?: Record<string, LedgerValue>;
}

export function toCell(value: LedgerValue): LedgerCell {
  if (value !== null && typeof value === 'object') return value;
  return { value: value ?? null };
}

/** Text of a cell. An absent value is an empty string; the page says in words what is absent. */
export function cellText(column: LedgerColumn, value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'string') return value;
  if (column.kind === 'money') return formatAmount(value, column.currency ?? 'USD', { signed: column.signed });
  return formatNumber(value, { decimals: column.decimals ?? 0, signed: column.signed });
}

/** Whether a figure prints as nought and so steps back in ink-2. */
export function isNought(column: LedgerColumn, value: string | number | null): boolean {
  return typeof value === 'number' && !/[1-9]/.test(cellText(column, value));
}

export function columnAlign(column: LedgerColumn): 'left' | 'right' | 'middle' {
  return column.align ?? (column.kind === undefined || column.kind === 'text' ? 'left' : 'right');
}

export function columnUnit(column: LedgerColumn): string | undefined {
  return column.unit ?? (column.kind === 'money' ? column.currency : undefined);
}

/** Text that a spreadsheet would run as a formula is kept text by an apostrophe. */
function csvField(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) && !/^-?\d+(\.\d+)?$/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

function csvValue(column: LedgerColumn, value: LedgerValue): string {
  const plain = toCell(value).value;
  if (plain === null) return '';
  if (typeof plain === 'string') return plain;
  if (column.kind !== 'money') return String(Number(plain.toPrecision(12)));
  const places = currencyDecimals(column.currency ?? 'USD');
  return (plain / 10 ** places).toFixed(places);
}

/** The table as comma-separated text: plain figures with a point, no grouping; units in the head. */
export function ledgerCsv(data: LedgerData): string {
  const head = data.columns.map((column) => {
    const unit = columnUnit(column);
    return csvField(unit ? `${column.head} (${unit})` : column.head);
  });
  const bodies = [...data.rows.map((row) => row.cells), ...(data.total ? [data.total] : [])];
  const lines = bodies.map((cells) => data.columns.map((column) => csvField(csvValue(column, cells[column.key]))));
  return [head, ...lines].map((line) => `${line.join(',')}\r\n`).join('');
}
