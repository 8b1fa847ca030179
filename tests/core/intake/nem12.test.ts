import { describe, expect, it } from 'vitest';
import { previewIntervals, readIntervals, type ColumnMap } from '@/core/intake';
import { bytesOf } from './files';

// Records as the meter data file format of the Australian market lays them out (AEMO, MDFF, NEM12); figures invented.
const head = '100,NEM12,202506020900,INVMDP,INVRET';
const stream = (suffix: string, unit: string, minutes: number, nmi = 'NINV000001') =>
  `200,${nmi},E1Q1K1,1,${suffix},N1,M1,${unit},${minutes},20250901`;
const day = (date: string, figures: (number | string)[], quality = 'A') =>
  `300,${date},${figures.join(',')},${quality},,,20250602090000,`;
const flat = (count: number, figure: number) => new Array<number>(count).fill(figure);

const read = (lines: string[], columnMap?: ColumnMap) =>
  readIntervals(bytesOf(lines.join('\r\n')), {
    fileName: 'm.csv',
    timeZone: 'Australia/Melbourne',
    ...(columnMap ? { columnMap } : {}),
  });

describe('NEM12', () => {
  it('begins each day at market midnight, UTC+10, summer time or not', async () => {
    const { load, report } = await read([head, stream('E1', 'kWh', 30), day('20250110', flat(48, 2)), '900']);
    expect(new Date(load.startMs).toISOString()).toBe('2025-01-09T14:00:00.000Z');
    expect(report).toMatchObject({ format: 'nem12', rowsRead: 1, intervals: 48, totalKwh: 96, maxKw: 4 });
  });

  it('takes E as drawn, Q as lagging, K as leading, leaves B and V out, whatever the capitals of the unit', async () => {
    const { load, report } = await read([
      head,
      ...[stream('E1', 'KWH', 30), day('20250601', flat(48, 2))],
      ...[stream('B1', 'kWh', 30), day('20250601', flat(48, 0.5))],
      ...[stream('Q1', 'KVARH', 30), day('20250601', flat(48, 1))],
      ...[stream('K1', 'varh', 30), day('20250601', flat(48, 250))],
      ...[stream('V1', 'V', 10), day('20250601', flat(144, 240))],
      '900',
    ]);
    expect([load.kwh[0], load.kvarhLagging[0], load.kvarhLeading[0]]).toEqual([2, 1, 0.25]);
    expect(report.notes.find((note) => note.code === 'export-left-out')?.message).toContain('24 kWh');
    expect(report.notes.find((note) => note.code === 'channel-left-out')?.message).toContain('V1');
  });

  it('adds streams of one direction', async () => {
    const { report } = await read([
      head,
      stream('E1', 'kWh', 30),
      day('20250601', flat(48, 2)),
      stream('E2', 'kWh', 30),
      day('20250601', flat(48, 3)),
      '900',
    ]);
    expect(report.totalKwh).toBe(240);
  });

  it('reads qualities of days and of parts of days', async () => {
    const { load, report } = await read([
      head,
      stream('E1', 'kWh', 30),
      day('20250601', flat(48, 2), 'V'),
      '400,1,40,A,,',
      '400,41,44,S14,27,',
      '400,45,48,N,,',
      day('20250602', flat(48, 2), 'F19'),
      '300,20250603,V,,,',
      '900',
    ]);
    expect(report).toMatchObject({ estimated: 4 + 48, missing: 4 + 48, intervals: 144 });
    expect([load.quality[39], load.quality[40], load.quality[44], load.quality[48]]).toEqual([0, 1, 2, 1]);
    expect(load.kwh[44]).toBeNaN();
  });

  it('brings lengths of interval that change to the longest', async () => {
    const { load, report } = await read([
      head,
      stream('E1', 'kWh', 30),
      day('20250601', flat(48, 2)),
      stream('E1', 'kWh', 15),
      day('20250602', flat(96, 1)),
      stream('E1', 'kWh', 5),
      day('20250603', flat(288, 0.5)),
      '900',
    ]);
    expect(load.stepMinutes).toBe(30);
    expect([load.kwh[0], load.kwh[48], load.kwh[96]]).toEqual([2, 2, 3]);
    expect(report.notes.map((note) => note.code)).toContain('steps-joined');
  });

  it('reads files without first and last record, with padded commas and a blank line', async () => {
    const { report } = await read(['', stream('E1', 'kWh', 30), `${day('20250601', flat(48, 2))},,,,`]);
    expect(report.totalKwh).toBe(96);
    expect(report.notes.map((note) => note.code)).toContain('no-end-record');
  });

  it('believes the count of values rather than the length announced', async () => {
    const { load } = await read([head, stream('E1', 'kWh', 15), day('20250601', flat(48, 2)), '900']);
    expect(load.stepMinutes).toBe(30);
  });

  it('lists several meters and reads the one picked', async () => {
    const lines = [
      head,
      stream('E1', 'kWh', 30),
      day('20250601', flat(48, 2)),
      stream('E1', 'kWh', 30, 'NINV000002'),
      day('20250601', flat(48, 5)),
      '900',
    ];
    await expect(read(lines)).rejects.toThrow(/2 meters: NINV000001, NINV000002/);
    expect((await read(lines, { kind: 'intervals', meter: 'NINV000002' })).report.totalKwh).toBe(240);
    const preview = await previewIntervals(bytesOf(lines.join('\n')), {
      fileName: 'm.csv',
      timeZone: 'Australia/Melbourne',
    });
    expect(preview.meters).toHaveLength(2);
    expect(preview.columns.map((column) => column.takenAs)).toEqual(['active', 'active']);
  });

  it.each([
    [
      'accumulated data',
      [
        '100,NEM13,202506020900,A,B',
        '250,NINV000001,11,1,11,11,M1,E,1,20250501,A,,,2,20250601,A,,,1,kWh,20250901,20250602',
        '900',
      ],
      /NEM13/,
    ],
    [
      'a day that is not full',
      [head, stream('E1', 'kWh', 30), day('20250601', flat(47, 2)), '900'],
      /47 values.*row 3/,
    ],
    [
      'a word among the values',
      [head, stream('E1', 'kWh', 30), day('20250601', [...flat(40, 2), 'oops', ...flat(7, 2)]), '900'],
      /“oops” in column AQ/,
    ],
    ['a day before any stream', [head, day('20250601', flat(48, 2)), '900'], /before any stream/],
    [
      'a meter without energy',
      [head, stream('V1', 'V', 30), day('20250601', flat(48, 240)), '900'],
      /no stream of energy/,
    ],
  ])('refuses %s', async (_name, lines, message) => {
    await expect(read(lines)).rejects.toThrow(message);
  });

  it('takes a day of V without values as missing, though its stream announces no length', async () => {
    const { report } = await read([
      head,
      ...[stream('E1', 'kWh', 30), day('20250601', flat(48, 2))],
      ...['200,NINV000001,E1Q1K1,1,E1,N1,M1,kWh,,', '300,20250602,V,,,20250603,', '400,1,48,N,,'],
      '900',
    ]);
    expect(report).toMatchObject({ rowsRead: 2, intervals: 96, missing: 48, totalKwh: 96 });
  });

  it.each(['', '0', '-5', '0.0000001', '7'])('refuses an empty day under a length of “%s”', async (length) => {
    const lines = [head, `200,NINV000001,E1,1,E1,N1,M1,kWh,${length},`, '300,20250602,N,,,', '900'];
    await expect(read(lines)).rejects.toThrow(/no length of interval is announced/);
  });

  it('reads ranges of quality that begin at nought or run over the end', async () => {
    const lines = [head, stream('E1', 'kWh', 30), day('20250601', flat(48, 2), 'V'), '400,0,10,S14,,', '400,47,99,N,,'];
    const { report } = await read([...lines, '900']);
    expect(report).toMatchObject({ estimated: 10, missing: 2 });
  });

  it('lets neither estimates of export nor streams of voltage touch the load', async () => {
    const { report } = await read([
      head,
      ...[stream('E1', 'kWh', 30), day('20250601', flat(48, 2))],
      ...[stream('B1', 'kWh', 30), day('20250601', flat(48, 1), 'S14')],
      ...[stream('V1', 'V', 7), day('20250601', flat(200, 230))],
      '900',
    ]);
    expect(report).toMatchObject({ estimated: 0, missing: 0, totalKwh: 96 });
  });

  it('keeps the first of a day sent twice, however many differ', async () => {
    const twice = [day('20250601', flat(48, 2)), day('20250601', flat(48, 3)), day('20250602', flat(48, 2))];
    const { report } = await read([head, stream('E1', 'kWh', 30), ...twice, '900']);
    expect(report).toMatchObject({ intervals: 96, duplicates: 48, totalKwh: 192 });
    expect(report.notes.map((note) => note.code)).toContain('duplicates-differ');
  });
});
