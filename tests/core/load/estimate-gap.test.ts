import { describe, expect, it } from 'vitest';
import { estimateGap, localDateStartMs, type LoadSeries } from '@/core/load';
import { loadOf } from './build-load';

const hour = 3_600_000;
const startMs = Date.UTC(2026, 0, 1);
const utc = { timeZone: 'UTC' };

/** Weeks of hours; the energy is the hour of the week, with a hundred more each week. */
function weeks(count: number, given: Partial<LoadSeries> = {}): LoadSeries {
  const kwh = Array.from({ length: count * 168 }, (_, i) => (i % 168) + 100 * Math.floor(i / 168));
  return loadOf(kwh, { stepMinutes: 60, startMs, ...given });
}

function blank(load: LoadSeries, from: number, to: number): { fromMs: number; toMs: number } {
  for (const channel of ['kwh', 'kvarhLagging', 'kvarhLeading'] as const) load[channel].fill(NaN, from, to);
  load.quality.fill(2, from, to);
  const stepMs = load.stepMinutes * 60_000;
  return { fromMs: load.startMs + from * stepMs, toMs: load.startMs + to * stepMs };
}

describe('the mean of the same weekday', () => {
  it('is that of up to four weeks on either side', () => {
    const load = weeks(11);
    const gap = blank(load, 5 * 168 + 10, 5 * 168 + 12);
    const { indexes, kwh, kvarhLagging, kvarhLeading, left } = estimateGap(load, gap, {
      method: 'same-weekday',
      ...utc,
    });
    // Weeks 1 to 4 and 6 to 9 at hour 10: 10 + 100 x (1+2+3+4+6+7+8+9) / 8 = 10 + 100 x 5 = 510.
    expect(indexes).toEqual([850, 851]);
    expect([...kwh]).toEqual([510, 511]);
    expect([...kvarhLagging]).toEqual([255, 255.5]);
    expect([...kvarhLeading]).toEqual([NaN, NaN]);
    expect(left).toBe(0);
  });

  it('passes over weeks that are missing or estimated, and needs two', () => {
    const load = weeks(4);
    const gap = blank(load, 10, 11);
    blank(load, 168 + 10, 168 + 11);
    // Left are weeks 2 and 3: 10 + 100 x 2.5.
    expect([...estimateGap(load, gap, { method: 'same-weekday', ...utc }).kwh]).toEqual([260]);
    load.quality[2 * 168 + 10] = 1;
    expect(estimateGap(load, gap, { method: 'same-weekday', ...utc })).toMatchObject({ indexes: [], left: 1 });
  });

  it('goes by the wall clock over a change of it', () => {
    // Chicago goes forward on 8 March 2026: a load that follows the wall clock is found an hour earlier in UTC behind it.
    const zone = 'America/Chicago';
    const from = localDateStartMs('2026-02-23', zone);
    const count = (localDateStartMs('2026-03-30', zone) - from) / hour;
    const change = (Date.UTC(2026, 2, 8, 8) - from) / hour;
    const local = Array.from({ length: count }, (_, i) => (i < change ? i : i + 1) % 24);
    const load = loadOf(local, { stepMinutes: 60, startMs: from });
    const at = (localDateStartMs('2026-03-09', zone) - from) / hour + 7;
    const gap = blank(load, at, at + 1);
    expect([...estimateGap(load, gap, { method: 'same-weekday', timeZone: zone }).kwh]).toEqual([7]);
  });
});

describe('a straight line', () => {
  it('runs evenly between the readings around the gap', () => {
    const load = loadOf([10, null, null, null, 30]);
    const gap = { fromMs: startMs, toMs: startMs + 5 * 15 * 60_000 };
    const { indexes, kwh, kvarhLagging } = estimateGap(load, gap, { method: 'linear', ...utc });
    expect(indexes).toEqual([1, 2, 3]);
    expect([...kwh]).toEqual([15, 20, 25]);
    expect([...kvarhLagging]).toEqual([7.5, 10, 12.5]);
  });

  it('is drawn over two hours, not over more, and not at an end', () => {
    const two = loadOf([8, ...Array<null>(8).fill(null), 8]);
    const more = loadOf([8, ...Array<null>(9).fill(null), 8]);
    const atEnd = loadOf([8, null]);
    const whole = { fromMs: startMs, toMs: startMs + 24 * hour };
    expect(estimateGap(two, whole, { method: 'linear', ...utc }).indexes).toHaveLength(8);
    expect(estimateGap(more, whole, { method: 'linear', ...utc })).toMatchObject({ indexes: [], left: 9 });
    expect(estimateGap(atEnd, whole, { method: 'linear', ...utc })).toMatchObject({ indexes: [], left: 1 });
  });

  it('touches nothing that is there, and not the series', () => {
    const load = loadOf([10, null, 30]);
    const before = structuredClone(load);
    estimateGap(load, { fromMs: startMs, toMs: startMs + hour }, { method: 'linear', ...utc });
    expect(load).toEqual(before);
  });
});
