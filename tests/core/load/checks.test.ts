import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readIntervals } from '@/core/intake';
import { checkLoad, localDateStartMs, zoneOffsetMs, type LoadSeries } from '@/core/load';
import { hasShared, sharedFile } from '../../setup/shared';

const zone = 'America/Chicago';
const quarter = 15 * 60_000;

/** Numbers in [0, 1) that are the same on every run: the minimal standard generator of Park and Miller. */
function noise(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

/**
 * A plant with a day shift from 06:00 to 18:00 on weekdays, a lunch break, a base load and a little noise, by the local
 * clock; three decimals, as meters print.
 */
function plant(from: string, to: string): LoadSeries {
  const startMs = localDateStartMs(from, zone);
  const count = (localDateStartMs(to, zone) - startMs) / quarter;
  const random = noise(7);
  const load: LoadSeries = {
    startMs,
    stepMinutes: 15,
    kwh: new Float64Array(count),
    kvarhLagging: new Float64Array(count),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
  for (let index = 0; index < count; index++) {
    const ms = startMs + index * quarter;
    const local = new Date(ms + zoneOffsetMs(ms, zone));
    const hour = local.getUTCHours() + local.getUTCMinutes() / 60;
    const works = local.getUTCDay() % 6 !== 0 && hour >= 6 && hour < 18;
    const lunch = hour >= 12 && hour < 12.5 ? 0.6 : 1;
    const kw = (works ? 900 * lunch : 240) * (0.95 + 0.1 * random());
    load.kwh[index] = Math.round((kw / 4) * 1000) / 1000;
    load.kvarhLagging[index] = Math.round((kw / 4) * (0.6 + 0.05 * random()) * 1000) / 1000;
  }
  return load;
}

/** The first interval of a local time. */
const indexOf = (load: LoadSeries, date: string, hour: number) =>
  (localDateStartMs(date, zone) - load.startMs) / quarter + hour * 4;

const look = (load: LoadSeries, more: Partial<Parameters<typeof checkLoad>[1]> = {}) =>
  checkLoad(load, { timeZone: zone, ...more });

function winter(): LoadSeries {
  return plant('2026-01-01', '2026-03-01');
}

describe('a year without faults', () => {
  it('has no findings, over both changes of the clock', () => {
    expect(look(plant('2025-11-01', '2026-11-01'))).toEqual([]);
  });

  it('is not changed by looking at it', () => {
    const load = winter();
    const before = structuredClone(load);
    look(load);
    expect(load).toEqual(before);
  });
});

describe('one fault each', () => {
  it('a spike of two intervals, against the same time of the days around', () => {
    const load = winter();
    const at = indexOf(load, '2026-01-20', 3);
    load.kwh[at] = 400;
    load.kwh[at + 1] = 390;
    const [found, ...others] = look(load);
    expect(others).toEqual([]);
    // 400 kWh in a quarter-hour is 1,600 kW; at three in the night the plant draws 240 kW, give or take 5 %.
    expect(found).toMatchObject({ fault: 'spike', severity: 'caution', intervals: 2, found: 1600 });
    expect(found!.fromMs).toBe(load.startMs + at * quarter);
    expect(found!.against).toBeGreaterThan(225);
    expect(found!.against).toBeLessThan(255);
  });

  it('a spike of the whole plant at once, but no long rise: that is another way of working', () => {
    const load = winter();
    const at = indexOf(load, '2026-01-20', 3);
    load.kwh.fill(320, at, at + 8);
    expect(look(load).map(({ fault }) => fault)).not.toContain('spike');
  });

  it('a reading of ten times the usual peak cannot be', () => {
    const load = winter();
    load.kwh[indexOf(load, '2026-01-20', 10)] = 2250;
    expect(look(load)).toMatchObject([{ fault: 'impossible', severity: 'fault', intervals: 1, found: 9000 }]);
  });

  it('a negative energy cannot be', () => {
    const load = winter();
    load.kwh[500] = -3;
    expect(look(load)[0]).toMatchObject({ fault: 'negative', severity: 'fault', found: -12 });
  });

  it('more than the service carries, only where that is known', () => {
    const load = winter();
    expect(look(load, { serviceKw: 2000 })).toEqual([]);
    const at = indexOf(load, '2026-01-20', 10);
    load.kwh.fill(245, at, at + 4);
    expect(look(load, { serviceKw: 960 })).toMatchObject([
      { fault: 'over-capacity', intervals: 4, found: 980, against: 960 },
    ]);
  });

  it('the same figure for nine hours', () => {
    const load = winter();
    const at = indexOf(load, '2026-02-03', 20);
    load.kwh.fill(61.237, at, at + 36);
    load.kvarhLagging.fill(37.111, at, at + 36);
    expect(look(load)).toMatchObject([{ fault: 'flat', intervals: 36, fromMs: load.startMs + at * quarter }]);
  });

  it('but not where the meter prints few digits', () => {
    const load = winter();
    load.kwh = load.kwh.map((energy) => Math.round(energy / 20) * 20);
    load.kvarhLagging = load.kvarhLagging.map((energy) => Math.round(energy / 50) * 50);
    expect(look(load).filter(({ fault }) => fault === 'flat')).toEqual([]);
  });

  it('noughts while the plant works', () => {
    const load = winter();
    const at = indexOf(load, '2026-01-21', 9);
    load.kwh.fill(0, at, at + 3);
    load.kvarhLagging.fill(0, at, at + 3);
    expect(look(load)).toMatchObject([{ fault: 'zeros', intervals: 3, found: 0 }]);
  });

  it('reactive energy while no active energy is counted', () => {
    const load = winter();
    const at = indexOf(load, '2026-01-21', 9);
    load.kwh.fill(0, at, at + 8);
    expect(look(load)).toMatchObject([{ fault: 'reactive-alone', intervals: 8, against: 0 }]);
  });

  it('a power factor no plant has, told once with the number of intervals', () => {
    const load = winter();
    const [from, to] = [indexOf(load, '2026-02-02', 0), indexOf(load, '2026-02-07', 0)];
    for (let index = from; index < to; index++) load.kvarhLagging[index]! *= 10;
    // Q/P of 6 to 6.5: pf = 1 / sqrt(1 + 6.25^2) = 0.158.
    const [found, ...others] = look(load);
    expect(others).toEqual([]);
    expect(found).toMatchObject({ fault: 'poor-factor', intervals: 480 });
    expect(found!.found).toBeCloseTo(0.158, 2);
  });

  it('a logger that did not follow the clock of March, an hour late from then on', () => {
    const load = plant('2026-01-01', '2026-06-01');
    const at = (Date.UTC(2026, 2, 8, 8) - load.startMs) / quarter;
    // The plant still begins at 06:00 by the wall clock; its readings come an hour too late.
    load.kwh.set(load.kwh.slice(at - 4, -4), at);
    const found = look(load);
    expect(found).toMatchObject([{ fault: 'clock-shift', found: 60, fromMs: Date.UTC(2026, 2, 8, 8) }]);
  });

  it('a bill of another energy than the readings of its period', () => {
    const load = winter();
    const [from, to] = [indexOf(load, '2026-01-05', 0), indexOf(load, '2026-02-05', 0)];
    const kwh = load.kwh.subarray(from, to).reduce((sum, energy) => sum + energy, 0);
    const said = { name: 'Jan', fromMs: load.startMs + from * quarter, toMs: load.startMs + to * quarter, kwh };
    expect(look(load, { said: [said, { ...said, kwh: Math.round(kwh) }] })).toEqual([]);
    expect(look(load, { said: [{ ...said, kwh: kwh * 4 }] })).toMatchObject([
      { fault: 'energy-differs', severity: 'fault', name: 'Jan', against: kwh * 4 },
    ]);
    load.quality[from + 10] = 2;
    load.kwh[from + 10] = load.kvarhLagging[from + 10] = load.kvarhLeading[from + 10] = NaN;
    expect(look(load, { said: [{ ...said, kwh: kwh * 4 }] })).toEqual([]);
  });
});

describe.skipIf(!hasShared)('the real year of a steel plant (skipped where ../shared is absent)', () => {
  // The one row of the file with 0 kWh is 07/11/2018 00:00, the quarter-hour that ends that day; the row before it has 3.56 kWh.
  it('shows its one reading of nought, and nothing else', async () => {
    const bytes = readFileSync(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv'));
    const { load } = await readIntervals(bytes, { fileName: 'steel.csv', timeZone: 'Asia/Seoul' });
    expect(checkLoad(load, { timeZone: 'Asia/Seoul' })).toMatchObject([
      { fault: 'zeros', severity: 'caution', intervals: 1, fromMs: Date.UTC(2018, 10, 7, 14, 45), against: 4 * 3.56 },
    ]);
  });
});
