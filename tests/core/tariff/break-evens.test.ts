import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '@/core/load';
import {
  averagePowerFactor,
  breakEvens,
  compilePricing,
  energiesOf,
  scaledLoad,
  shareToReach,
  withoutLagging,
  type Schedule,
} from '@/core/tariff';
import { buildSchedule, buildSeries } from './build';

const range = { low: 0, high: 1, steps: 20, equalWithin: 0.005 };
const period = { from: '2026-04-01', to: '2026-05-01' };

/** April 2026, 720 hours, 1,000 kW and 750 kvar throughout: 720,000 kWh, 540,000 kvarh, power factor 0.8. */
const april = buildSeries({ ...period, timeZone: 'Europe/Lisbon', stepMinutes: 60, powers: () => [1000, 750, 0] });

function costOf(schedule: Schedule): (load: LoadSeries) => number {
  const grid = { startMs: april.startMs, stepMinutes: 60, count: april.kwh.length };
  const pricing = compilePricing(schedule, grid, { periods: [period] });
  return (load) => pricing.totals(load)[0]!;
}

const hourly = { demandWindow: '60 min' };
const perKvarh = buildSchedule(
  `quantities: { kwh: { sum: kwh }, kvarh: { sum: kvarhLagging } }
charges:
  energy: { per: kwh, rate: 0.10, group: energy }
  reactive: { per: kvarh, rate: 0.02, group: reactive }`,
  hourly,
);
const dearEnergy = buildSchedule(
  `quantities: { kwh: { sum: kwh } }
charges: { energy: { per: kwh, rate: 0.11, group: energy } }`,
  hourly,
);
const byShare = (first: Schedule, second: Schedule) => {
  const [a, b] = [costOf(first), costOf(second)];
  return (share: number) => a(withoutLagging(april, share)) - b(withoutLagging(april, share));
};
const byFactor = (first: Schedule, second: Schedule) => {
  const [a, b] = [costOf(first), costOf(second)];
  return (factor: number) => a(scaledLoad(april, factor)) - b(scaledLoad(april, factor));
};

describe('breakEvens of two schedules', () => {
  // 72,000 + 10,800 (1 - s) against 79,200: equal where 1 - s = 2/3. Then 360,000 kvarh, pf = 2 / sqrt(5) = 0.894427.
  it('finds the share of kvarh at which a kvarh price makes up for cheaper energy', () => {
    const found = breakEvens({ ...range, difference: byShare(perKvarh, dearEnergy) });
    expect(found.breakEvens).toHaveLength(1);
    const [{ at, cheaperBelow, cheaperAbove, isJump }] = found.breakEvens as [(typeof found.breakEvens)[0]];
    expect(at).toBeCloseTo(1 / 3, 5);
    expect([cheaperBelow, cheaperAbove, isJump]).toEqual(['second', 'first', false]);
    expect(averagePowerFactor(energiesOf(withoutLagging(april, at)))).toBeCloseTo(2 / Math.sqrt(5), 5);
  });

  // 5.00 a kVA against 6.00 a kW = 6,000.00: kVA = 1,200, so 750 (1 - s) = sqrt(1,200^2 - 1,000^2) = 663.3250, s = 0.115567.
  it('finds where a demand in kVA costs what a demand in kW does', () => {
    const kva = buildSchedule(
      'quantities: { maxKva: { highest: kva } }\ncharges: { power: { per: maxKva, rate: 5.00, group: demand } }',
      hourly,
    );
    const kw = buildSchedule(
      'quantities: { maxKw: { highest: kw } }\ncharges: { power: { per: maxKw, rate: 6.00, group: demand } }',
      hourly,
    );
    const found = breakEvens({ ...range, difference: byShare(kva, kw) });
    expect(found.breakEvens).toHaveLength(1);
    expect(found.breakEvens[0]?.at).toBeCloseTo(1 - Math.sqrt(1200 ** 2 - 1000 ** 2) / 750, 4);
  });

  // 1,000 + 0.12 kWh against 10,000 + 0.10 kWh: equal at 450,000 kWh, 0.625 of April's.
  it('finds the volume at which a fixed charge is worth its cheaper energy', () => {
    const small = buildSchedule(
      `quantities: { kwh: { sum: kwh } }
charges: { fixed: { amount: 1000, group: fixed }, energy: { per: kwh, rate: 0.12, group: energy } }`,
      hourly,
    );
    const large = buildSchedule(
      `quantities: { kwh: { sum: kwh } }
charges: { fixed: { amount: 10000, group: fixed }, energy: { per: kwh, rate: 0.10, group: energy } }`,
      hourly,
    );
    const found = breakEvens({ ...range, low: 0.25, high: 2, difference: byFactor(small, large) });
    expect(found.stretches.map(({ cheaper }) => cheaper)).toEqual(['first', 'second']);
    expect(found.breakEvens[0]?.at).toBeCloseTo(0.625, 5);
  });

  // A penalty of 5,000 below a power factor of 0.9 against 1,000 always. tan(arccos 0.9) = 0.4843221: s = 1 - 0.4843221 / 0.75 = 0.354237.
  it('tells a cliff, where the costs never meet, from a crossing', () => {
    const cliff = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  factor: { formula: pf(kwh; kvarh) }
charges: { penalty: { amount: 5000, when: factor < 0.9, group: reactive } }`,
      { ...hourly, zeroKwh: '{ pf: 1 }' },
    );
    const flat = buildSchedule(
      'quantities: { kwh: { sum: kwh } }\ncharges: { fixed: { amount: 1000, group: fixed } }',
      hourly,
    );
    const found = breakEvens({ ...range, difference: byShare(cliff, flat) });
    expect(found.breakEvens).toHaveLength(1);
    expect(found.breakEvens[0]).toMatchObject({ isJump: true, differenceBelow: 4000, differenceAbove: -1000 });
    expect(found.breakEvens[0]?.at).toBeCloseTo(0.354237, 5);
  });

  it('has none where one schedule is cheaper throughout', () => {
    const found = breakEvens({ ...range, low: 0.5, difference: byShare(perKvarh, dearEnergy) });
    expect(found).toEqual({ stretches: [{ from: 0.5, to: 1, cheaper: 'first' }], breakEvens: [] });
  });
});

describe('breakEvens of given differences', () => {
  it('reports every crossing, in order', () => {
    const difference = (x: number) => 1000 * (x - 0.21) * (x - 0.52) * (x - 0.83);
    const found = breakEvens({ ...range, difference });
    expect(found.breakEvens.map(({ at }) => at)).toEqual([0.21, 0.52, 0.83].map((at) => expect.closeTo(at, 5)));
    expect(found.stretches.map(({ cheaper }) => cheaper)).toEqual(['first', 'second', 'first', 'second']);
  });

  it('finds a crossing that falls on the grid itself, once', () => {
    const found = breakEvens({ ...range, difference: (x) => 100 * (x - 0.5) });
    expect(found.breakEvens.map(({ at }) => at)).toEqual([expect.closeTo(0.5, 5)]);
  });

  it('takes a bare touch for no crossing', () => {
    const found = breakEvens({ ...range, difference: (x) => 100 * (x - 0.5) ** 2 });
    expect(found.stretches).toEqual([{ from: 0, to: 1, cheaper: 'second' }]);
  });

  it('tells a stretch over which both cost the same', () => {
    const found = breakEvens({ ...range, difference: (x) => 100 * Math.max(0, 0.62 - x) });
    expect(found.stretches).toEqual([
      { from: 0, to: expect.closeTo(0.62, 3), cheaper: 'second' },
      { from: expect.closeTo(0.62, 3), to: 1, cheaper: 'neither' },
    ]);
    expect(breakEvens({ ...range, difference: () => 0 }).stretches).toEqual([{ from: 0, to: 1, cheaper: 'neither' }]);
  });

  it('changes sides where the two schedules do', () => {
    const difference = (x: number) => x - 0.3;
    const turned = (x: number) => -difference(x);
    const [one, other] = [difference, turned].map((of) => breakEvens({ ...range, difference: of }));
    expect(one?.breakEvens[0]?.at).toBeCloseTo(other?.breakEvens[0]?.at ?? NaN, 9);
    expect(one?.breakEvens[0]?.cheaperBelow).not.toBe(other?.breakEvens[0]?.cheaperBelow);
  });

  it('refuses a range that is none, a grid of no step, and costs that are no numbers', () => {
    const difference = () => 1;
    expect(() => breakEvens({ ...range, low: 1, difference })).toThrow('high must be above low, got 1 and 1');
    expect(() => breakEvens({ ...range, steps: 0, difference })).toThrow('steps must be an integer from 1 on, got 0');
    expect(() => breakEvens({ ...range, difference: () => NaN })).toThrow('difference must be finite, got NaN');
  });
});

describe('a load varied', () => {
  it('keeps its power factor when scaled, and its active energy when kvarh are taken away', () => {
    expect(energiesOf(scaledLoad(april, 0.5))).toEqual({ kwh: 360_000, kvarhLagging: 270_000 });
    expect(energiesOf(withoutLagging(april, 0.5))).toEqual({ kwh: 720_000, kvarhLagging: 270_000 });
    expect(energiesOf(april)).toEqual({ kwh: 720_000, kvarhLagging: 540_000 });
  });

  it('reaches a power factor with the share told, and needs more kvarh for a lower one', () => {
    // tan(arccos 0.95) = 0.3286841: 1 - 0.3286841 / 0.75.
    expect(shareToReach(energiesOf(april), 0.95)).toBeCloseTo(0.561755, 6);
    // 0.6: tan = 4/3, so 16/9 of today's kvarh.
    expect(shareToReach(energiesOf(april), 0.6)).toBeCloseTo(1 - 16 / 9, 9);
    expect(shareToReach({ kwh: 10, kvarhLagging: 0 }, 0.95)).toBeNull();
  });
});
