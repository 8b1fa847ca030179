import { previewBills, readBills, type BillPreview, type BillReading, type ColumnMap } from '@/core/intake';
import { bytesOf, workbook } from './files';

/** Cells of a table of bills as a person sees them. */
export type Rows = (string | number | null)[][];

const quoted = (cell: string | number | null): string => {
  const text = cell === null ? '' : String(cell);
  return /[",;\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
};

/** The table as delimited text. */
export const csv = (rows: Rows, delimiter = ','): string =>
  rows.map((row) => row.map((cell) => quoted(cell)).join(delimiter)).join('\n');

/** The table as it may arrive: text or workbooks. */
export const containers: [string, (rows: Rows) => Uint8Array][] = [
  ['csv', (rows) => bytesOf(csv(rows))],
  ['xlsx', (rows) => workbook(rows, { sheet: 'Bills' })],
  ['ods', (rows) => workbook(rows, { sheet: 'Bills', bookType: 'ods' })],
];

interface How {
  timeZone?: string;
  fileName?: string;
  columnMap?: ColumnMap;
}

const optionsOf = ({ timeZone = 'America/Chicago', fileName = 'bills.csv', columnMap }: How) => ({
  fileName,
  timeZone,
  ...(columnMap ? { columnMap } : {}),
});
const bytesFrom = (table: Rows | string | Uint8Array): Uint8Array =>
  table instanceof Uint8Array ? table : bytesOf(typeof table === 'string' ? table : csv(table));

export const readTable = (table: Rows | string | Uint8Array, how: How = {}): Promise<BillReading> =>
  readBills(bytesFrom(table), optionsOf(how));

export const previewTable = (table: Rows | string | Uint8Array, how: How = {}): Promise<BillPreview> =>
  previewBills(bytesFrom(table), optionsOf(how));

/** Notes of a code, as `where: message`. */
export const notesOf = ({ report }: Pick<BillReading, 'report'>, code: string): string[] =>
  report.notes.filter((note) => note.code === code).map((note) => `${note.where ?? ''}: ${note.message}`);
