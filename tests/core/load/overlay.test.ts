import { describe, expect, it } from 'vitest';
import { aggregateLoad, compareLoads, layersThatShow, overlayLoads } from '@/core/load';
import { loadOf } from './build-load';

const startMs = Date.UTC(2026, 0, 1);
const quarter = 15 * 60_000;

describe('aggregateLoad', () => {
  it('adds energies, and knows an hour only where all its quarters are known', () => {
    const load = loadOf([1, 2, 3, 4, 5, null, 7, 8, 9, 10, 11, 12]);
    load.quality[9] = 1;
    const hours = aggregateLoad(load, { startMs, stepMinutes: 60, count: 4 });
    // 1+2+3+4, a part missing, 9+10+11+12, behind the end.
    expect([...hours.kwh]).toEqual([10, NaN, 42, NaN]);
    expect([...hours.kvarhLagging]).toEqual([5, NaN, 21, NaN]);
    expect([...hours.quality]).toEqual([0, 2, 1, 2]);
  });

  it('leaves out an hour of which the series holds only the end', () => {
    const hours = aggregateLoad(loadOf([1, 2, 3, 4, 5, 6]), {
      startMs: startMs - 2 * quarter,
      stepMinutes: 60,
      count: 2,
    });
    expect([...hours.kwh]).toEqual([NaN, 3 + 4 + 5 + 6]);
  });

  it('refuses what does not divide', () => {
    const load = loadOf([1, 2, 3]);
    expect(() => aggregateLoad(load, { startMs, stepMinutes: 20, count: 1 })).toThrow(RangeError);
    expect(() => aggregateLoad(load, { startMs: startMs + 60_000, stepMinutes: 60, count: 1 })).toThrow(RangeError);
  });
});

describe('overlayLoads', () => {
  const grid = { startMs, stepMinutes: 15, count: 6 };
  const old = { load: loadOf([1, 2, null, 4]), rank: 0, source: 11 };
  const fresh = { load: loadOf([20, null, 40, 50], { startMs: startMs + quarter }), source: 22 };

  it('shows the higher rank, and lets through what lies under its missing readings', () => {
    const { load, sources } = overlayLoads([{ ...fresh, rank: 1 }, old], grid);
    expect([...load.kwh]).toEqual([1, 20, NaN, 40, 50, NaN]);
    expect([...sources]).toEqual([11, 22, 0, 22, 22, 0]);
    expect([...load.quality]).toEqual([0, 0, 2, 0, 0, 2]);
  });

  it('fills only what is not there from a lower rank', () => {
    const { load, sources } = overlayLoads([{ ...fresh, rank: -1 }, old], grid);
    expect([...load.kwh]).toEqual([1, 2, NaN, 4, 50, NaN]);
    expect([...sources]).toEqual([11, 11, 0, 11, 22, 0]);
  });

  it('gives back exactly what was there when a layer is taken away, and changes no layer', () => {
    const before = overlayLoads([old], grid);
    overlayLoads([old, { ...fresh, rank: 1 }], grid);
    expect(overlayLoads([old], grid)).toEqual(before);
    expect([...old.load.kwh]).toEqual([1, 2, NaN, 4]);
  });

  it('takes a channel only the lower one carries from there, with the worse mark of the two', () => {
    const active = loadOf([1, 2], { kvarhLagging: new Float64Array(2).fill(NaN) });
    const reactive = loadOf([7, 8]);
    reactive.quality[1] = 1;
    const { load } = overlayLoads(
      [
        { load: reactive, rank: 0, source: 1 },
        { load: active, rank: 1, source: 2 },
      ],
      { ...grid, count: 2 },
    );
    expect([...load.kwh]).toEqual([1, 2]);
    expect([...load.kvarhLagging]).toEqual([3.5, 4]);
    expect([...load.quality]).toEqual([0, 1]);
  });
});

describe('layersThatShow', () => {
  const hours = { load: loadOf([4, 4], { stepMinutes: 60 }), rank: 0, source: 1 };
  const quarters = { load: loadOf([1, 1, 1, 1, 1, null, 1, 1]), rank: 1, source: 2 };

  it('reads in the longer interval where the longer one shows', () => {
    expect(layersThatShow([hours, { ...quarters, rank: -1 }]).stepMinutes).toBe(60);
    const later = { ...hours, load: { ...hours.load, startMs: startMs + 8 * quarter } };
    expect(layersThatShow([later, quarters]).stepMinutes).toBe(60);
  });

  it('leaves a longer one out that lies wholly under a finer one, gaps and all', () => {
    expect(layersThatShow([hours, quarters])).toEqual({ layers: [quarters], stepMinutes: 15 });
  });
});

describe('compareLoads', () => {
  it('counts readings in common, equal and differing, and names the widest difference in kW', () => {
    const kept = loadOf([10, 20, 30, null, 50]);
    const comes = loadOf([10, 20.5, 27, 40, null]);
    // 27 - 30 = -3 kWh in a quarter-hour is -12 kW; the lagging energies differ by half of it.
    expect(compareLoads(kept, comes, 'UTC')).toEqual([
      {
        from: '2026-01-01',
        inCommon: 3,
        equal: 1,
        firstKwh: 60,
        secondKwh: 57.5,
        greatest: { ms: startMs + 2 * quarter, channel: 'kwh', difference: -12 },
        onlyFirst: 1,
        onlySecond: 1,
      },
    ]);
  });

  it('parts at the months of the zone', () => {
    // 2026-02-01 begins in Chicago at 06:00 UTC (UTC-6 in winter).
    const at = Date.UTC(2026, 1, 1, 5, 30);
    const load = loadOf([1, 1, 1, 1], { startMs: at });
    const months = compareLoads(load, load, 'America/Chicago');
    expect(months.map(({ from, inCommon }) => [from, inCommon])).toEqual([
      ['2026-01-31', 2],
      ['2026-02-01', 2],
    ]);
  });

  it('has nothing in common where the two carry different channels', () => {
    const active = loadOf([1, 2], { kvarhLagging: new Float64Array(2).fill(NaN) });
    const reactive = loadOf([1, 2]);
    reactive.kwh.fill(NaN);
    expect(compareLoads(active, reactive, 'UTC')).toEqual([]);
  });
});
