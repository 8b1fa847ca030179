import { describe, expect, it } from 'vitest';
import { previewIntervals } from '@/core/intake';
import { bytesOf, readText } from './files';
import { codes, stamp, table, zone } from './tables';

describe('quality marks', () => {
  it('reads estimated and missing marks', async () => {
    const { load, report } = await readText(
      table('Time,kWh,Quality', [
        [3, 'A'],
        [4, 'E'],
        [0, 'N'],
        [5, 'A'],
      ]),
      zone,
    );
    expect([...load.quality]).toEqual([0, 1, 2, 0]);
    expect(load.kwh[2]).toBeNaN();
    expect(report).toMatchObject({ estimated: 1, missing: 1, totalKwh: 12 });
  });

  it('reads words of another language and leaves unknown marks measured, with a note', async () => {
    const { report } = await readText(
      table('Zeit,kWh,Status', [
        [3, 'Wahrer Wert'],
        [4, 'Ersatzwert'],
        [2, 'QZ'],
        [5, 'Wahrer Wert'],
      ]),
      zone,
    );
    expect(report.estimated).toBe(1);
    expect(report.notes.find((note) => note.code === 'quality-unknown')?.message).toContain('QZ');
  });
});

describe('stacked tables', () => {
  const rows = (at: number): string[] => [
    `M1,${stamp(at)},kWh,${10 + at}`,
    `M1,${stamp(at)},kVARh lagging,${4 + at}`,
    `M1,${stamp(at)},kVARh leading,0.5`,
    `M1,${stamp(at)},Voltage,400`,
  ];

  it('takes the quantity of each row from the column that names it', async () => {
    const text = `Meter,Time,Channel,Reading\n${[0, 1, 2, 3].flatMap(rows).join('\n')}`;
    const { load, report } = await readText(text, zone);
    expect([...load.kwh]).toEqual([10, 11, 12, 13]);
    expect([...load.kvarhLagging]).toEqual([4, 5, 6, 7]);
    expect([...load.kvarhLeading]).toEqual([0.5, 0.5, 0.5, 0.5]);
    expect(report).toMatchObject({ duplicates: 0, missing: 0, intervals: 4 });
    expect(report.notes.find((note) => note.code === 'channel-left-out')?.message).toContain('Voltage');
  });

  it('takes the unit of each row from its unit column', async () => {
    const text = `Time,Unit,Value\n${[0, 1, 2, 3].flatMap((at) => [`${stamp(at)},MWh,0.01`, `${stamp(at)},kvarh,3`]).join('\n')}`;
    const { load } = await readText(text, zone);
    expect([...load.kwh]).toEqual([10, 10, 10, 10]);
    expect([...load.kvarhLagging]).toEqual([3, 3, 3, 3]);
  });
});

describe('several meters in one file', () => {
  const text = `Meter,Time,kWh\n${['North', 'South'].flatMap((meter, m) => [0, 1, 2, 3].map((at) => `${meter},${stamp(at)},${m * 100 + at}`)).join('\n')}`;

  it('lists them and asks for one', async () => {
    await expect(readText(text, zone)).rejects.toThrow(/2 meters: North, South/);
    const preview = await previewIntervals(bytesOf(text), { fileName: 'two.csv', timeZone: zone });
    expect(preview.meters).toEqual(['North', 'South']);
    expect(preview.problems).toHaveLength(1);
  });

  it('reads the one the map picks', async () => {
    const { load, report } = await readText(text, zone, { kind: 'intervals', meter: 'South' });
    expect([...load.kwh]).toEqual([100, 101, 102, 103]);
    expect(report.rowsRead).toBe(4);
  });

  it('refuses a pick that the file does not have', async () => {
    await expect(readText(text, zone, { kind: 'intervals', meter: 'West' })).rejects.toThrow(/“West”/);
  });
});

describe('codes of channels', () => {
  it('reads OBIS codes in the names of columns', async () => {
    const text = table('Zeit,1-1:1.29.0 [kWh],1-1:2.29.0 [kWh],1-1:5.29.0 [kvarh],1-1:8.29.0 [kvarh]', [
      [9, 0, 4, 0],
      [8, 1, 0, 3],
      [9, 0, 2, 0],
      [7, 0, 0, 1],
    ]);
    const { load, report } = await readText(text, zone);
    expect([...load.kwh]).toEqual([9, 8, 9, 7]);
    expect([...load.kvarhLagging]).toEqual([4, 0, 2, 0]);
    expect([...load.kvarhLeading]).toEqual([0, 3, 0, 1]);
    expect(codes(report.notes)).toContain('export-left-out');
  });

  it('reads quadrants and leaves those of exported energy out', async () => {
    const text = table('Time,AE_kWh,AS_kWh,R1_kVArh,R2_kVArh,R3_kVArh,R4_kVArh', [
      [9, 0, 4, 0, 0, 1],
      [8, 1, 3, 0, 0, 2],
      [9, 0, 2, 5, 0, 1],
      [7, 0, 1, 0, 6, 1],
    ]);
    const { load } = await readText(text, zone);
    expect([...load.kwh]).toEqual([9, 8, 9, 7]);
    expect([...load.kvarhLagging]).toEqual([4, 3, 2, 1]);
    expect([...load.kvarhLeading]).toEqual([1, 2, 1, 1]);
  });

  it('takes the average rather than the extremes within the interval', async () => {
    const { load } = await readText(
      table('Time,Avg kW,Max kW,Min kW', [
        [40, 44, 36],
        [48, 52, 40],
        [40, 44, 36],
        [44, 60, 2],
      ]),
      zone,
    );
    expect([...load.kwh]).toEqual([10, 12, 10, 11]);
  });

  it('refuses many readings that contradict each other rather than dropping them', async () => {
    const rows = Array.from({ length: 40 }, (_, at) => `${stamp(at % 20)},${at}`);
    await expect(readText(`Time,kWh\n${rows.join('\n')}`, zone)).rejects.toThrow(/20 of 40 readings.*another figure/);
  });
});
