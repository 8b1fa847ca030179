import { describe, expect, it } from 'vitest';
import { readText } from './files';

const zone = 'UTC';
const codes = (notes: { code: string }[]) => notes.map((note) => note.code);
const stampAt = (at: number) => new Date(Date.UTC(2025, 5, 10) + at * 900_000).toISOString().slice(0, 16);
const table = (header: string, rows: (number | string)[][]) =>
  [header, ...rows.map((cells, at) => [stampAt(at), ...cells].join(','))].join('\n');
const rowsOf = (count: number, cells: (at: number) => (number | string)[]) =>
  Array.from({ length: count }, (_, at) => cells(at));

// A register that runs by 3 kWh a quarter-hour, twenty readings: nineteen intervals of 3 kWh, 57 kWh, 12 kW.
describe('registers beside other columns', () => {
  it('takes an export register that stands still for a register too', async () => {
    const rows = rowsOf(20, (at) => [50_000 + at * 3, 0]);
    const { report } = await readText(table('Time,Import register kWh,Export register kWh', rows), zone);
    expect(report).toMatchObject({ rowsRead: 20, intervals: 19, missing: 0, totalKwh: 57, maxKw: 12 });
    expect(report.notes.find((note) => note.code === 'export-left-out')?.message).toContain('0 kWh');
  });

  it('takes differences of reactive registers, one of which stands still above nought', async () => {
    const rows = rowsOf(20, (at) => [50_000 + at * 3, 9000 + at, 12]);
    const { report } = await readText(
      table('Time,kWh register,Lagging kvarh register,Leading kvarh register', rows),
      zone,
    );
    expect(report).toMatchObject({ totalKwh: 57, totalKvarhLagging: 19, totalKvarhLeading: 0 });
  });

  it('adds registers of tariffs that are in force by turns', async () => {
    const rows = rowsOf(20, (at) => [50_000 + Math.max(0, at - 10) * 3, 60_000 + Math.min(at, 10) * 2]);
    const { load } = await readText(table('Time,Stand T1 kWh,Stand T2 kWh', rows), zone);
    expect([...load.kwh]).toEqual([...new Array<number>(10).fill(2), ...new Array<number>(9).fill(3)]);
  });

  it('carries one of two registers over its last digit: 3 + 1 kWh in every interval', async () => {
    const rows = rowsOf(60, (at) => [(99_940 + at * 3) % 100_000, 55_000 + at]);
    const { load, report } = await readText(table('Time,T1 register kWh,T2 register kWh', rows), zone);
    expect([...load.kwh]).toEqual(new Array<number>(59).fill(4));
    expect(codes(report.notes)).toContain('register-falls');
  });

  it('leaves energy beside a register as it is: the last reading begins no interval of the register', async () => {
    const rows = rowsOf(20, (at) => [50_000 + at * 3, 5 + (at % 3)]);
    const { load, report } = await readText(table('Time,kWh register,Lagging kvarh', rows), zone);
    expect([...load.kwh.slice(0, 3)]).toEqual([3, 3, 3]);
    expect([...load.kvarhLagging.slice(0, 3)]).toEqual([5, 6, 7]);
    expect(report).toMatchObject({ intervals: 20, missing: 1, totalKwh: 57 });
  });

  it('sees a register in three readings where the name says so', async () => {
    const rows = rowsOf(3, (at) => [50_000 + at * 3]);
    const { load } = await readText(table('Time,Meter reading register (kWh)', rows), zone);
    expect([...load.kwh]).toEqual([3, 3]);
  });

  it('finds the roll-over and the reset of a register without being told', async () => {
    const figures = [99_990, 99_994, 99_998, 2, 6, 10, 14, 1, 5, 9, 13, 17];
    const { load } = await readText(
      table(
        'Time,Cumulative kWh',
        figures.map((figure) => [figure]),
      ),
      zone,
    );
    expect([...load.kwh]).toEqual([4, 4, 4, 4, 4, 4, Number.NaN, 4, 4, 4, 4]);
  });

  it('takes cumulative rows of a stacked table (OBIS 1.8.0, 3.8.0) as registers', async () => {
    const rows = [0, 1, 2, 3, 4, 5].flatMap((at) => [
      `${stampAt(at)},1-1:1.8.0,${1000 + at * 4},kWh`,
      `${stampAt(at)},1-1:3.8.0,${500 + at * 2},kvarh`,
    ]);
    const { load, report } = await readText(['Time,OBIS,Value,Unit', ...rows].join('\n'), zone);
    expect([...load.kwh]).toEqual([4, 4, 4, 4, 4]);
    expect([...load.kvarhLagging]).toEqual([2, 2, 2, 2, 2]);
    expect(report.rowsRead).toBe(12);
  });
});
