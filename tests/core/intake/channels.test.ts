import { describe, expect, it } from 'vitest';
import { previewIntervals } from '@/core/intake';
import { bytesOf, readText } from './files';
import { codes, stamp, table, zone } from './tables';

describe('units', () => {
  // A quarter-hour at 400 kW is 100 kWh (power times time; SI).
  it.each([
    ['Energy (kWh)', 100],
    ['Energy (MWh)', 0.1],
    ['Wh', 100_000],
    ['Active power [kW]', 400],
    ['Leistung (W)', 400_000],
    ['P (MW)', 0.4],
  ])('reads %s', async (header, figure) => {
    const { load, report } = await readText(
      table(
        `Time,${header}`,
        Array.from({ length: 4 }, () => [figure]),
      ),
      zone,
    );
    expect(load.kwh[0]).toBeCloseTo(100, 9);
    expect(report.maxKw).toBeCloseTo(400, 9);
  });

  it.each([
    ['kvarh', 30],
    ['kVARh', 30],
    ['varh', 30_000],
    ['Mvarh', 0.03],
    ['kvar', 120],
    ['kVAr', 120],
  ])('reads reactive figures in %s', async (unit, figure) => {
    const { load } = await readText(
      table(
        `Time,kWh,Lagging (${unit}),Leading (${unit})`,
        Array.from({ length: 4 }, () => [100, figure, 0]),
      ),
      zone,
    );
    expect(load.kvarhLagging[0]).toBeCloseTo(30, 9);
    expect(load.kvarhLeading[0]).toBe(0);
  });

  it('takes a unit row beneath the names', async () => {
    const text = `Meter 12\nTime,Active,Reactive lag,Reactive lead\n,kW,kvar,kvar\n${[0, 1, 2, 3].map((at) => `${stamp(at)},400,120,8`).join('\n')}`;
    const { load } = await readText(text, zone);
    expect([load.kwh[0], load.kvarhLagging[0], load.kvarhLeading[0]]).toEqual([100, 30, 2]);
  });

  it('takes the unit named above the table', async () => {
    const text = `Unit: kW\n\nTime,Value\n${[0, 1, 2, 3].map((at) => `${stamp(at)},400`).join('\n')}`;
    const { load, report } = await readText(text, zone);
    expect(load.kwh[0]).toBe(100);
    expect(codes(report.notes)).not.toContain('unit-assumed');
  });

  it('takes a nameless unit as kWh and asks', async () => {
    const text = table('Time,Value', [[5], [6], [5], [6]]);
    const preview = await previewIntervals(bytesOf(text), { fileName: 'v.csv', timeZone: zone });
    expect(preview.columns[1]).toMatchObject({ takenAs: 'active', unit: 'kWh', sure: false, isUnitAssumed: true });
    expect(codes(preview.report?.notes ?? [])).toContain('unit-assumed');
  });

  it('mentions a multiplier and does not apply it', async () => {
    const text = `Multiplier,2400,applied\n${table('Time,kWh', [[5], [6], [5], [6]])}`;
    const { report } = await readText(text, zone);
    expect(report.totalKwh).toBe(22);
    expect(codes(report.notes)).toContain('multiplier-mentioned');
  });
});

describe('registers', () => {
  // Twelve readings of a counter that grows by 1.5 a quarter-hour: eleven intervals of 1.5 kWh.
  it('takes differences of a register that only grows', async () => {
    const rows = Array.from({ length: 12 }, (_, at) => [48_000 + at * 1.5]);
    const { load, report } = await readText(table('Time,Meter index kWh', rows), zone);
    expect([...load.kwh]).toEqual(Array.from({ length: 11 }, () => 1.5));
    expect(report).toMatchObject({ rowsRead: 12, intervals: 11, missing: 0 });
    expect(load.startMs).toBe(Date.UTC(2025, 5, 10));
    expect(codes(report.notes)).toContain('register-differences');
  });

  it('carries a register over its last digit and leaves a reset missing', async () => {
    const figures = [99_990, 99_994, 99_998, 2, 6, 10, 14, 1, 5, 9, 13, 17];
    const { load } = await readText(
      table(
        'Time,Cumulative kWh',
        figures.map((figure) => [figure]),
      ),
      zone,
      {
        kind: 'intervals',
        columns: [{ index: 1, name: 'Cumulative kWh', role: 'active', unit: 'kWh', measure: 'register' }],
      },
    );
    expect([...load.kwh]).toEqual([4, 4, 4, 4, 4, 4, Number.NaN, 4, 4, 4, 4]);
  });
});

describe('reactive energy', () => {
  it('splits one signed column: positive lagging, negative leading', async () => {
    const { load, report } = await readText(
      table('Time,kWh,kvarh', [
        [9, 4],
        [9, -3],
        [9, 0],
        [9, 2],
      ]),
      zone,
    );
    expect([...load.kvarhLagging]).toEqual([4, 0, 0, 2]);
    expect([...load.kvarhLeading]).toEqual([0, 3, 0, 0]);
    expect(codes(report.notes)).toContain('reactive-signed');
  });

  it('takes one column without a sense and without a negative as lagging, leading absent', async () => {
    const { load, report } = await readText(
      table('Time,kWh,kvarh', [
        [9, 4],
        [9, 3],
        [9, 0],
        [9, 2],
      ]),
      zone,
    );
    expect([...load.kvarhLagging]).toEqual([4, 3, 0, 2]);
    expect([...load.kvarhLeading].every(Number.isNaN)).toBe(true);
    expect(report.totalKvarhLeading).toBeNaN();
    expect([...load.quality]).toEqual([0, 0, 0, 0]);
    expect(codes(report.notes)).toContain('channel-absent');
  });

  it('takes delivered and received kvarh as lagging and leading, and asks', async () => {
    const text = table('Time,kWh Del,kVARh Del,kVARh Rec', [
      [9, 4, 1],
      [9, 3, 0],
      [9, 2, 0],
      [9, 2, 0],
    ]);
    const preview = await previewIntervals(bytesOf(text), { fileName: 'd.csv', timeZone: zone });
    expect(preview.columns.map((column) => column.takenAs)).toEqual([
      'stamp',
      'active',
      'reactive-lagging',
      'reactive-leading',
    ]);
    expect(preview.columns.map((column) => column.sure)).toEqual([true, true, false, false]);
  });

  it('asks about a column that is nought throughout', async () => {
    const text = table('Time,kWh,Lagging kvarh,Leading kvarh', [
      [9, 4, 0],
      [9, 3, 0],
      [9, 2, 0],
      [9, 2, 0],
    ]);
    const preview = await previewIntervals(bytesOf(text), { fileName: 'n.csv', timeZone: zone });
    expect(preview.columns[3]).toMatchObject({ sure: false, testsMet: 1, testsTotal: 2 });
  });

  it('keeps the size of a leading column printed negative', async () => {
    const { load } = await readText(
      table('Time,kWh,Lagging kvarh,Leading kvarh', [
        [9, 4, -1],
        [9, 0, -3],
        [9, 0, 0],
        [9, 2, -2],
      ]),
      zone,
    );
    expect([...load.kvarhLeading]).toEqual([1, 3, 0, 2]);
  });

  it('works kvarh out from kVAh: 3, 4, 5', async () => {
    const { load, report } = await readText(
      table('Time,kWh,kVAh', [
        [3, 5],
        [4, 5],
        [3, 3],
        [6, 10],
      ]),
      zone,
    );
    expect([...load.kvarhLagging]).toEqual([4, 3, 0, 8]);
    expect(codes(report.notes)).toContain('reactive-derived');
  });

  it('works kvarh out from a power factor in per cent: 80 % is 3 to 4', async () => {
    const { load } = await readText(
      table('Time,kWh,Power factor', [
        [4, 80],
        [8, 80],
        [4, 100],
        [12, 80],
      ]),
      zone,
    );
    [3, 6, 0, 9].forEach((kvarh, at) => expect(load.kvarhLagging[at]).toBeCloseTo(kvarh, 9));
  });

  it('ignores power factor, current, cost and nameplate columns beside metered kvarh', async () => {
    const text = table('Time,kWh,Lagging kvarh,Leading kvarh,PF,Volts,Cost ($),Temp (C),CO2 (kg)', [
      [9, 4, 1, 0.9, 400, 1.2, 20, 5],
      [9, 4, 1, 0.9, 400, 1.2, 20, 5],
    ]);
    const preview = await previewIntervals(bytesOf(text), { fileName: 'many.csv', timeZone: zone });
    expect(preview.columns.slice(4).map((column) => column.takenAs)).toEqual([
      'ignore',
      'ignore',
      'ignore',
      'ignore',
      'ignore',
    ]);
  });
});

describe('several columns of energy', () => {
  it('adds time-of-use registers of one direction', async () => {
    const { load } = await readText(
      table('Time,kWh peak,kWh off-peak', [
        [3, 0],
        [0, 4],
        [2, 1],
        [0, 5],
      ]),
      zone,
    );
    expect([...load.kwh]).toEqual([3, 4, 3, 5]);
  });

  it('does not add the parts of a total to the total', async () => {
    const { load } = await readText(
      table('Time,kWh total,kWh T1,kWh T2', [
        [3, 3, 0],
        [4, 0, 4],
        [3, 2, 1],
        [5, 0, 5],
      ]),
      zone,
    );
    expect([...load.kwh]).toEqual([3, 4, 3, 5]);
  });

  it('takes energy rather than the power that says the same', async () => {
    const { load } = await readText(
      table('Time,kW,kWh', [
        [40, 10],
        [44, 11],
        [48, 12],
        [52, 13],
      ]),
      zone,
    );
    expect([...load.kwh]).toEqual([10, 11, 12, 13]);
  });

  it('refuses columns that may be several meters and names them', async () => {
    await expect(
      readText(
        table('Time,Mill A,Mill B', [
          [3, 1],
          [4, 2],
          [3, 1],
          [5, 2],
        ]),
        zone,
      ),
    ).rejects.toThrow(/Mill A, Mill B/);
  });

  it('keeps one of them where the map ignores the other', async () => {
    const { load } = await readText(
      table('Time,Mill A,Mill B', [
        [3, 1],
        [4, 2],
        [3, 1],
        [5, 2],
      ]),
      zone,
      {
        kind: 'intervals',
        columns: [{ index: 1, name: 'Mill A', role: 'ignore' }],
      },
    );
    expect([...load.kwh]).toEqual([1, 2, 1, 2]);
  });
});

describe('export', () => {
  it('neither nets nor keeps an export column', async () => {
    const { load, report } = await readText(
      table('Time,kWh import,kWh export', [
        [3, 0],
        [0, 4],
        [2, 0],
        [0, 1.5],
      ]),
      zone,
    );
    expect([...load.kwh]).toEqual([3, 0, 2, 0]);
    expect(report.notes.find((note) => note.code === 'export-left-out')?.message).toContain('5.5 kWh');
  });

  it('takes negative figures of a net column as export', async () => {
    const { load, report } = await readText(table('Time,Net kWh', [[3], [-4], [2], [-1.5]]), zone);
    expect([...load.kwh]).toEqual([3, 0, 2, 0]);
    expect(report.negative).toBe(2);
    expect(report.notes.find((note) => note.code === 'export-left-out')?.message).toContain('5.5 kWh');
  });
});
