import { readFileSync, readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compilePricing, readSchedule } from '@/core/tariff';
import type { LoadSeries } from '@/core/load';
import { buildSeries } from './build';

const periods = [
  { from: '2026-02-20', to: '2026-03-20' },
  { from: '2026-03-20', to: '2026-04-12' },
  { from: '2026-04-12', to: '2026-04-20' },
];
const files = [
  'tests/bench/heavy.yaml',
  ...['tariffs', 'tariffs/forms'].flatMap((folder) =>
    readdirSync(folder)
      .filter((name) => name.endsWith('.yaml'))
      .map((name) => `${folder}/${name}`),
  ),
];

function noise(seed: number, timeZone: string): LoadSeries {
  let state = seed;
  const next = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
  return buildSeries({
    from: '2026-02-20',
    to: '2026-04-20',
    timeZone,
    stepMinutes: 15,
    powers: () => {
      const kw = 200 + 1800 * next();
      return next() < 0.75 ? [kw, kw * next(), 0] : [kw, 0, 300 * next()];
    },
  });
}

/** The first load with the intervals of one period from another. */
function withPeriod(load: LoadSeries, other: LoadSeries, first: number, end: number): LoadSeries {
  const mixed = (own: Float64Array, its: Float64Array) =>
    own.map((value, i) => (i >= first && i < end ? its[i]! : value));
  return {
    ...load,
    kwh: mixed(load.kwh, other.kwh),
    kvarhLagging: mixed(load.kvarhLagging, other.kvarhLagging),
    kvarhLeading: mixed(load.kvarhLeading, other.kvarhLeading),
  };
}

describe('totals after a change within some periods', () => {
  it.each(files)('are those of pricing everything: %s', (file) => {
    const schedule = readSchedule(readFileSync(file, 'utf8'));
    let load = noise(7, schedule.timeZone);
    const count = load.kwh.length;
    const grid = { startMs: load.startMs, stepMinutes: 15, count };
    const pricing = compilePricing(schedule, grid, { periods });
    const whole = compilePricing(schedule, grid, { periods });
    expect(pricing.totals(load, { changed: new Set() })).toEqual(whole.totals(load));
    // Well inside each period, whatever the zone: a fifth of its days from its middle.
    for (const [k, first, end] of [
      [1, 33 * 96, 40 * 96],
      [0, 8 * 96, 14 * 96],
      [2, 54 * 96, 56 * 96],
      [0, 15 * 96, 20 * 96],
    ] as const) {
      load = withPeriod(load, noise(100 + first, schedule.timeZone), first, end);
      expect(pricing.totals(load, { changed: new Set([k]) })).toEqual(whole.totals(load));
    }
    pricing.bills(noise(9, schedule.timeZone));
    expect(pricing.totals(load, { changed: new Set() })).toEqual(whole.totals(load));
  });
});
