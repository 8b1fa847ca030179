import { describe, expect, it } from 'vitest';
import { IntakeError, previewIntervals, readBills, readIntervals, shapeSignature, type ColumnMap } from '@/core/intake';
import { bytesOf } from './files';

const good = Array.from(
  { length: 96 },
  (_, at) =>
    `2025-03-13 ${String(Math.floor(at / 4)).padStart(2, '0')}:${String((at % 4) * 15).padStart(2, '0')},${at + 1},7`,
);
const table = ['Time,kWh,Lagging kvarh', ...good].join('\n');

async function problemsOf(bytes: Uint8Array, columnMap?: ColumnMap, timeZone = 'Etc/UTC') {
  const refused = readIntervals(bytes, { fileName: 'plant.csv', timeZone, ...(columnMap ? { columnMap } : {}) });
  const error = await refused.then(
    () => null,
    (cause: unknown) => cause,
  );
  expect(error).toBeInstanceOf(IntakeError);
  const { problems } = error as IntakeError;
  for (const problem of problems) {
    expect(problem.message.length).toBeGreaterThan(10);
    expect(problem.where.length).toBeGreaterThan(3);
    expect(problem.remedy.length).toBeGreaterThan(10);
  }
  return problems;
}

describe('files that are no readings', () => {
  it.each([
    ['an empty file', new Uint8Array(), /empty/],
    ['blanks', bytesOf(' \n\n '), /nothing but blanks/],
    ['a PNG picture', new Uint8Array([0x89, 0x50, 0x4e, 0x47, 0x0d]), /PNG picture/],
    ['a PDF document', bytesOf('%PDF-1.7 ...'), /PDF document/],
    ['a gzip archive', new Uint8Array([0x1f, 0x8b, 8, 0]), /gzip/],
    ['binary bytes', new Uint8Array([1, 2, 0, 3, 4, 0, 0, 9, 200, 0, 1]), /binary/],
    ['prose', bytesOf('Dear colleague,\nplease find attached the meter data.\nRegards\n'), /no table of readings/],
    ['a list without dates', bytesOf('a,b\n1,2\n3,4\n5,6\n'), /no table of readings/],
  ])('refuses %s', async (_name, bytes, message) => {
    const [problem] = await problemsOf(bytes);
    expect(problem?.message).toMatch(message);
  });
});

describe('tables that cannot be read as they stand', () => {
  it.each([
    [
      'a quote that is never closed',
      table.replace('2025-03-13 05:00,21', '"2025-03-13 05:00,21'),
      /never closed|not closed/,
      /row 22/,
    ],
    [
      'no column of energy',
      ['Time,Volts', ...good.map((row) => row.replace(/,.*/, ',400'))].join('\n'),
      /No column holds energy/,
      /Volts/,
    ],
    [
      'stamps an hour and a half apart',
      `Time,kWh\n${[0, 90, 180, 270].map((minute) => `2025-03-13 0${Math.floor(minute / 60)}:${minute % 60 === 0 ? '00' : '30'},5`).join('\n')}`,
      /90 minutes apart/,
      /plant/,
    ],
    [
      'words among the figures',
      table.replace(/,7$/gm, (cell, at: number) => (at % 3 === 0 ? ',broken' : cell)),
      /hold words/,
      /row \d+, column C/,
    ],
    [
      'stamps off the grid',
      `Time,kWh\n${good.map((row, at) => (at % 10 === 3 ? row.replace(/:(\d\d),/, (_all, minute: string) => `:${String(Number(minute) + 4).padStart(2, '0')},`) : row).replace(/,7$/, '')).join('\n')}`,
      /regular 15-minute grid/,
      /rows 5, 15/,
    ],
    ['a year far off', `${table}\n2125-03-13 00:00,1,7`, /from 2025-03-13 to 2125-03-13/, /plant/],
  ])('refuses %s and says where', async (_name, text, message, where) => {
    const [problem] = await problemsOf(bytesOf(text));
    expect(problem?.message).toMatch(message);
    expect(problem?.where).toMatch(where);
  });

  it('refuses a zone that is none', async () => {
    const [problem] = await problemsOf(bytesOf(table), undefined, 'Mars/Olympus');
    expect(problem?.message).toContain('Mars/Olympus');
  });

  it('refuses bills whose periods cannot be told', async () => {
    await expect(
      readBills(bytesOf(table.replaceAll(':', '.')), { fileName: 'b.csv', timeZone: 'Etc/UTC' }),
    ).rejects.toBeInstanceOf(IntakeError);
  });
});

describe('column maps', () => {
  it('is complete in a preview and reads the same again', async () => {
    const options = { fileName: 'plant.csv', timeZone: 'Etc/UTC' };
    const preview = await previewIntervals(bytesOf(table), options);
    expect(preview.columnMap).toMatchObject({
      kind: 'intervals',
      delimiter: ',',
      decimalMark: '.',
      headerRow: 1,
      firstRow: 2,
      layout: 'long',
    });
    const again = await previewIntervals(bytesOf(table), { ...options, columnMap: preview.columnMap });
    expect(again.mapApplied).toBe(true);
    expect(again.columns).toEqual(preview.columns);
    expect(again.guesses).toEqual(preview.guesses);
    expect(again.report).toEqual(preview.report);
  });

  it('lets a person correct role, unit and factor of a column', async () => {
    const { load } = await readIntervals(bytesOf(table), {
      fileName: 'plant.csv',
      timeZone: 'Etc/UTC',
      columnMap: {
        kind: 'intervals',
        columns: [
          { index: 1, name: 'kWh', role: 'active', unit: 'kW', measure: 'power', factor: 100 },
          { index: 2, name: 'Lagging kvarh', role: 'reactive-leading', unit: 'kvarh' },
        ],
      },
    });
    // 1 kW times the multiplier of 100 over a quarter of an hour is 25 kWh.
    expect(load.kwh[0]).toBe(25);
    expect(load.kvarhLeading[0]).toBe(7);
    expect(load.kvarhLagging[0]).toBeNaN();
  });

  it('lets a person correct the end the stamps name and the order of the date', async () => {
    const options = { fileName: 'plant.csv', timeZone: 'Etc/UTC' };
    const ended = await readIntervals(bytesOf(table), {
      ...options,
      columnMap: { kind: 'intervals', stamp: { marks: 'end' } },
    });
    expect(new Date(ended.load.startMs).toISOString()).toBe('2025-03-12T23:45:00.000Z');
    const open = bytesOf(table.replaceAll('2025-03-13', '02/03/2025'));
    const turned = await readIntervals(open, { ...options, columnMap: { kind: 'intervals', stamp: { order: 'MDY' } } });
    expect(new Date(turned.load.startMs).toISOString()).toBe('2025-02-03T00:00:00.000Z');
  });

  it('finds a column that has moved by its name', async () => {
    const moved = ['Site,Time,kWh,Lagging kvarh', ...good.map((row) => `Works,${row}`)].join('\n');
    const { load } = await readIntervals(bytesOf(moved), {
      fileName: 'plant.csv',
      timeZone: 'Etc/UTC',
      columnMap: { kind: 'intervals', columns: [{ index: 1, name: 'kWh', role: 'active', unit: 'kWh' }] },
    });
    expect(load.kwh[4]).toBe(5);
  });

  it('refuses a map that speaks of a column the file does not have', async () => {
    const [problem] = await problemsOf(bytesOf(table), {
      kind: 'intervals',
      columns: [{ index: 7, name: 'Energie', role: 'active' }],
    });
    expect(problem?.message).toContain('“Energie” in column H');
    expect(problem?.where).toContain('Time, kWh, Lagging kvarh');
  });

  it('shows rows and problems of a file it cannot read', async () => {
    const preview = await previewIntervals(bytesOf('a,b\n1,2\n3,4\n'), { fileName: 'odd.csv', timeZone: 'Etc/UTC' });
    expect(preview.problems).toHaveLength(1);
    expect(preview.rows.map((row) => row.cells)).toEqual([
      ['a', 'b'],
      ['1', '2'],
      ['3', '4'],
    ]);
    expect(preview.report).toBeNull();
  });
});

describe('shapeSignature', () => {
  it('is equal for the next export of the same kind and differs for another', async () => {
    const next = table.replaceAll('2025-03-13', '2025-04-13').split('\n').slice(0, 50).join('\n');
    const other = table.replace('Lagging kvarh', 'Voltage');
    const shape = await shapeSignature(bytesOf(table), 'b.csv');
    expect(await shapeSignature(bytesOf(next), 'a.csv')).toBe(shape);
    expect(await shapeSignature(bytesOf(other), 'a.csv')).not.toBe(shape);
  });
});
