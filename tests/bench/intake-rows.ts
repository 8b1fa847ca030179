import { inferSchema, initParser } from 'udsv';
import XLSX from 'xlsx';
import { readIntervals } from '../../src/core/intake';
import type { Measured } from './run';

/** Median of a few turns of two works, taken by turns in one process. [ms] */
async function byTurns(
  turns: number,
  reference: () => unknown,
  own: () => Promise<unknown>,
): Promise<[number, number]> {
  const times: [number[], number[]] = [[], []];
  for (let turn = -1; turn < turns; turn += 1) {
    const startReference = performance.now();
    reference();
    const startOwn = performance.now();
    await own();
    if (turn < 0) continue;
    times[0].push(startOwn - startReference);
    times[1].push(performance.now() - startOwn);
  }
  const [referenceMs = Number.NaN, ownMs = Number.NaN] = times.map(
    (list) => list.sort((a, b) => a - b)[Math.floor(list.length / 2)],
  );
  return [referenceMs, ownMs];
}

const minuteRows = 1_000_000;

/** Two channels of one-minute data as text, a million rows. */
function minutes(): Uint8Array {
  const rows = Array.from({ length: minuteRows }, (_, at) => {
    const stamp = new Date(Date.UTC(2024, 0, 1) + at * 60_000).toISOString();
    return `${stamp.slice(0, 10)} ${stamp.slice(11, 16)},${((at * 7) % 2003) / 100},${((at * 11) % 997) / 100}`;
  });
  return new TextEncoder().encode(`Time,Active energy kWh,Reactive lagging kvarh\n${rows.join('\n')}\n`);
}

/** A million rows from bytes to load and report, against the fastest parser's bare pass over the same bytes. */
export async function benchIntakeRows(): Promise<Measured[]> {
  const bytes = minutes();
  const options = { fileName: 'minutes.csv', timeZone: 'America/Chicago' };
  const [referenceMs, ownMs] = await byTurns(
    5,
    () => {
      const text = new TextDecoder().decode(bytes);
      const rows = initParser(inferSchema(text)).stringArrs(text);
      if (rows.length !== minuteRows) throw new Error(`${rows.length} rows split`);
    },
    async () => {
      const { report } = await readIntervals(bytes, options);
      if (report.rowsRead !== minuteRows) throw new Error(`${report.rowsRead} rows read`);
    },
  );
  const figures = `${ownMs.toFixed(0)} ms to read, ${referenceMs.toFixed(0)} ms to split with udsv, ${(bytes.length / 1e6).toFixed(1)} MB, median of 5`;
  return [{ name: 'read a million rows of minutes', ratio: ownMs / referenceMs, atMost: 2.5, figures }];
}

const quarters = 35_040;

/** A year of quarter-hours with three channels as a workbook. */
function yearBook(): Uint8Array {
  const rows = Array.from({ length: quarters }, (_, at) => [
    45_658 + at / 96,
    ((at * 7) % 2003) / 8,
    ((at * 11) % 997) / 8,
    0,
  ]);
  const sheet = XLSX.utils.aoa_to_sheet([['Time', 'kWh', 'Lagging kvarh', 'Leading kvarh'], ...rows]);
  for (let row = 2; row <= quarters + 1; row += 1) (sheet[`A${row}`] as XLSX.CellObject).z = 'yyyy-mm-dd hh:mm';
  const book = XLSX.utils.book_new();
  XLSX.utils.book_append_sheet(book, sheet, 'Readings');
  return new Uint8Array(XLSX.write(book, { type: 'array', bookType: 'xlsx', compression: true }) as ArrayBuffer);
}

/** A year from .xlsx against the bare parse with the same options. */
export async function benchIntakeBook(): Promise<Measured[]> {
  const bytes = yearBook();
  const [referenceMs, ownMs] = await byTurns(
    7,
    () =>
      XLSX.read(bytes, {
        type: 'array',
        dense: true,
        cellFormula: true,
        cellStyles: true,
        cellHTML: false,
        cellText: false,
        cellNF: true,
        sheetRows: 250_000,
      }),
    async () => {
      const { report } = await readIntervals(bytes, { fileName: 'year.xlsx', timeZone: 'America/Chicago' });
      if (report.rowsRead !== quarters) throw new Error(`${report.rowsRead} rows read`);
    },
  );
  const figures = `${ownMs.toFixed(0)} ms to read, ${referenceMs.toFixed(0)} ms for the bare parse, median of 7`;
  return [{ name: 'read a year of quarter-hours from .xlsx', ratio: ownMs / referenceMs, atMost: 2, figures }];
}
