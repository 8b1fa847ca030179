import { describe, expect, it } from 'vitest';
import { traceBill, traceInterval, type ReadOptions, type Trace } from '@/core/intake';
import { bytesOf, workbook } from './files';

const hourMs = 3_600_000;
const startMs = Date.parse('2025-03-13T00:00:00Z');
const options: ReadOptions = { fileName: 'meter.csv', timeZone: 'Etc/UTC' };
const stamps = Array.from({ length: 24 }, (_, hour) => `2025-03-13 ${String(hour).padStart(2, '0')}:00`);
const texts = (trace: Trace) => trace.rows.map((row) => [row.number, ...row.cells.map((cell) => cell.text)]);

describe('tracing an interval to its rows', () => {
  it('names the row of a table behind a preamble, without the columns left out', async () => {
    const table = `Plant of Tarn Ltd\n\nTime,kWh,Remark\n${stamps.map((stamp, hour) => `${stamp},${hour + 0.5},north`).join('\n')}\n`;
    const trace = await traceInterval(bytesOf(table), options, startMs + 5 * hourMs);
    // Three rows stand above; the sixth reading is in row 9.
    expect(texts(trace)).toEqual([[9, '2025-03-13 05:00', '5.5']]);
    expect(trace).toMatchObject({ fileName: 'meter.csv', unit: 'row', more: 0 });
  });

  it('names both readings of a register', async () => {
    const table = `Time,Register kWh\n${stamps.map((stamp, hour) => `${stamp},${90_000 + hour * 10 + (hour % 3)}`).join('\n')}\n`;
    const columnMap = {
      kind: 'intervals' as const,
      columns: [
        { index: 0, name: 'Time', role: 'stamp' as const },
        { index: 1, name: 'Register kWh', role: 'active' as const, unit: 'kWh', measure: 'register' as const },
      ],
      stamp: { marks: 'begin' as const },
    };
    const trace = await traceInterval(bytesOf(table), { ...options, columnMap }, startMs + 2 * hourMs);
    expect(texts(trace).map(([number]) => number)).toEqual([4, 5]);
  });

  it('shows the one reading of a wide row', async () => {
    const head = ['Date', ...Array.from({ length: 24 }, (_, hour) => `${String(hour).padStart(2, '0')}:00`)].join(',');
    const days = ['2025-03-13', '2025-03-14', '2025-03-15'];
    const rows = days.map((day, at) =>
      [day, ...Array.from({ length: 24 }, (_, hour) => at * 100 + hour + 1)].join(','),
    );
    const trace = await traceInterval(bytesOf([head, ...rows].join('\n')), options, startMs + 30 * hourMs);
    // The seventh hour of the second day.
    expect(texts(trace)).toEqual([[3, '2025-03-14', '107']]);
    expect(trace.rows[0]!.cells[1]!.name).toBe('06:00');
  });

  it('names the sheet of a workbook', async () => {
    const cells = stamps.map((_stamp, hour) => [45_729 + hour / 24, hour + 0.5]);
    const book = workbook([['Time', 'kWh'], ...cells], { formats: { 0: 'yyyy-mm-dd hh:mm' }, sheet: 'March' });
    const trace = await traceInterval(book, { ...options, fileName: 'meter.xlsx' }, startMs + hourMs);
    expect(trace.sheet).toBe('March');
    expect(texts(trace)).toEqual([[3, '2025-03-13 01:00', '1.5']]);
  });

  it('names the record and the value of a NEM12 file', async () => {
    const values = Array.from({ length: 48 }, (_, at) => (at + 1) / 10);
    const file = `100,NEM12,202503140000,A,B\n200,NMI1,E1,1,E1,,M1,kWh,30,\n300,20250313,${values.join(',')},A,,,,\n900\n`;
    // Market time is UTC+10: the third half-hour of 13 March begins at 01:00, which is 15:00 UTC of the day before.
    const trace = await traceInterval(bytesOf(file), options, Date.parse('2025-03-12T15:00:00Z'));
    expect(texts(trace)).toEqual([[3, '300', 'E1', '20250313', '0.3', 'A']]);
  });

  it('says where the file holds no such interval', async () => {
    const table = `Time,kWh\n${stamps.map((stamp) => `${stamp},1`).join('\n')}\n`;
    await expect(traceInterval(bytesOf(table), options, startMs - hourMs)).rejects.toThrow(/No row of the file/);
  });
});

describe('tracing a bill to its row', () => {
  it('names the row of a table of bills', async () => {
    const table = 'From,To,kWh,Total\n2025-01-01,2025-02-01,1000,150.00\n2025-02-01,2025-03-01,900,140.00\n';
    const trace = await traceBill(bytesOf(table), options, '2025-02-01');
    expect(texts(trace)).toEqual([[3, '2025-02-01', '2025-03-01', '900', '140.00']]);
  });
});
