import { describe, expect, it } from 'vitest';
import * as XLSX from 'xlsx';
import { previewIntervals, readIntervals, type ReadOptions } from '@/core/intake';
import { workbook } from './files';

const options: ReadOptions = { fileName: 'plant.xlsx', timeZone: 'Asia/Kolkata' };
const startMs = Date.parse('2024-04-30T18:30:00Z'); // 2024-05-01 00:00 in India
const firstSerial = 45_413; // 2024-05-01 in the 1900 system
const count = 96 * 3;
const figures = Array.from({ length: count }, (_, at) => 50 + (at % 37) / 4);

describe('workbooks', () => {
  const rows = (first: number) => [
    ['Works 3', null, null],
    ['Time', 'kWh', 'Lagging kvarh'],
    ...figures.map((figure, at) => [first + at / 96, figure, 4]),
  ];

  it.each(['xlsx', 'biff8', 'ods'] as const)('reads date serials of %s to the minute', async (bookType) => {
    const bytes = workbook(rows(firstSerial), { bookType, formats: { 0: 'yyyy-mm-dd hh:mm' } });
    const { load, report } = await readIntervals(bytes, options);
    expect(report.format).toBe('spreadsheet');
    expect(load.startMs).toBe(startMs);
    expect(load.stepMinutes).toBe(15);
    expect([...load.kwh]).toEqual(figures);
  });

  it('reads serials of the 1904 system', async () => {
    // The 1904 system counts 1462 days less (ECMA-376 part 1, 18.17.4.1).
    const bytes = workbook(rows(firstSerial - 1462), { formats: { 0: 'yyyy-mm-dd hh:mm' }, date1904: true });
    const { load } = await readIntervals(bytes, options);
    expect(load.startMs).toBe(startMs);
    expect([...load.kwh]).toEqual(figures);
  });

  it('reads serials without a date format where the name tells', async () => {
    const { load } = await readIntervals(workbook(rows(firstSerial)), options);
    expect(load.startMs).toBe(startMs);
    expect([...load.kwh]).toEqual(figures);
  });

  it('reads a date and a time apart, the last time of the day as 24:00', async () => {
    const table = [
      ['Date', 'Time', 'kWh'],
      ...figures.map((figure, at) => [firstSerial + Math.floor(at / 96), ((at % 96) + 1) / 96, figure]),
    ];
    const bytes = workbook(table, { formats: { 0: 'dd/mm/yyyy', 1: '[hh]:mm' } });
    const { load } = await readIntervals(bytes, options);
    expect(load.startMs).toBe(startMs);
    expect([...load.kwh]).toEqual(figures);
  });

  it('reads figures and stamps stored as text', async () => {
    const table = [
      ['Zeit', 'kWh'],
      ...figures.map((figure, at) => [
        `0${1 + Math.floor(at / 96)}.05.2024 ${String(Math.floor((at % 96) / 4)).padStart(2, '0')}:${String((at % 4) * 15).padStart(2, '0')}`,
        String(figure).replace('.', ','),
      ]),
    ];
    const { load } = await readIntervals(workbook(table), options);
    expect(load.startMs).toBe(startMs);
    expect([...load.kwh]).toEqual(figures);
  });

  it('chooses the sheet with the table and names the others', async () => {
    const book = XLSX.read(workbook(rows(firstSerial), { formats: { 0: 'yyyy-mm-dd hh:mm' }, sheet: 'Data' }), {
      type: 'array',
      cellNF: true,
    });
    XLSX.utils.book_append_sheet(
      book,
      XLSX.utils.aoa_to_sheet([['About'], ['This workbook holds readings.']]),
      'Cover',
    );
    book.SheetNames.reverse();
    const bytes = new Uint8Array(XLSX.write(book, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
    const preview = await previewIntervals(bytes, options);
    expect(preview.dialect).toMatchObject({ sheet: 'Data', sheets: ['Cover', 'Data'] });
    expect(preview.report?.intervals).toBe(count);
    await expect(
      readIntervals(bytes, { ...options, columnMap: { kind: 'intervals', sheet: 'Sheet9' } }),
    ).rejects.toThrow(/no sheet “Sheet9”/);
  });

  it('keeps a column named like a part of every object', async () => {
    const table = [
      ['Time', '__proto__', 'constructor', 'kWh'],
      ...figures.map((figure, at) => [firstSerial + at / 96, 'x', 'y', figure]),
    ];
    const { report } = await readIntervals(workbook(table, { formats: { 0: 'yyyy-mm-dd hh:mm' } }), options);
    expect(report.columnMap?.columns?.map((use) => use.name)).toEqual(['Time', '__proto__', 'constructor', 'kWh']);
    expect(({} as Record<string, unknown>).x).toBeUndefined();
  });
});

describe('damaged and hostile workbooks', () => {
  const good = workbook([
    ['Time', 'kWh'],
    [firstSerial, 1],
    [firstSerial + 1 / 96, 2],
  ]);

  it('refuses one that is cut off', async () => {
    await expect(readIntervals(good.subarray(0, Math.floor(good.length / 2)), options)).rejects.toThrow(
      /damaged or cut off/,
    );
  });

  it('refuses an old workbook that is cut off', async () => {
    const old = workbook(
      [
        ['Time', 'kWh'],
        [firstSerial, 1],
        [firstSerial + 1 / 96, 2],
      ],
      { bookType: 'biff8' },
    );
    await expect(readIntervals(old.subarray(0, 700), options)).rejects.toThrow(/damaged or cut off/);
  });

  it('refuses one that would unpack beyond the caps, before unpacking it', async () => {
    const bytes = good.slice();
    const view = new DataView(bytes.buffer);
    // The directory's word for the size of the first member: 1 GiB.
    const directory = view.getUint32(bytes.length - 22 + 16, true);
    view.setUint32(directory + 24, 1024 * 1024 * 1024, true);
    await expect(readIntervals(bytes, options)).rejects.toThrow(/would unpack to 1024 MiB/);
  });

  it('refuses a ratio that no honest file has', async () => {
    const bytes = good.slice();
    const view = new DataView(bytes.buffer);
    const directory = view.getUint32(bytes.length - 22 + 16, true);
    view.setUint32(directory + 24, 200 * 1024 * 1024, true);
    await expect(readIntervals(bytes, options)).rejects.toThrow(/times its size/);
  });

  it('refuses a workbook without a table', async () => {
    await expect(readIntervals(workbook([['Hello']]), options)).rejects.toThrow(/holds no cell|no table of readings/);
  });
});
