import { describe, expect, it } from 'vitest';
import { sumLoads, type LoadSeries } from '@/core/load';

const nan = Number.NaN;

function loadOf(kwh: number[], lagging: number[], leading: number[], quality: number[] = kwh.map(() => 0)): LoadSeries {
  return {
    startMs: Date.UTC(2026, 0, 1),
    stepMinutes: 15,
    kwh: Float64Array.from(kwh),
    kvarhLagging: Float64Array.from(lagging),
    kvarhLeading: Float64Array.from(leading),
    quality: Uint8Array.from(quality),
  };
}

describe('sumLoads', () => {
  it('adds register by register: one meter leading takes nothing from the lagging of another', () => {
    const sum = sumLoads([loadOf([100, 80], [40, 30], [0, 0]), loadOf([20, 25], [0, 5], [12, 0])]);
    expect([...sum.kwh]).toEqual([120, 105]);
    expect([...sum.kvarhLagging]).toEqual([40, 35]);
    expect([...sum.kvarhLeading]).toEqual([12, 0]);
  });

  it('is missing where one meter is missing, estimated where one is estimated', () => {
    const sum = sumLoads([
      loadOf([100, nan, 80, 70], [4, nan, 3, 2], [0, nan, 0, 0], [0, 2, 1, 0]),
      loadOf([10, 11, 12, 13], [1, 1, 1, 1], [0, 0, 0, 0], [0, 0, 0, 1]),
    ]);
    expect([...sum.quality]).toEqual([0, 2, 1, 1]);
    expect([...sum.kwh]).toEqual([110, nan, 92, 83]);
    expect([...sum.kvarhLagging]).toEqual([5, nan, 4, 3]);
  });

  it('adds nothing for a register that a meter does not carry, and carries none that no meter has', () => {
    const bare = loadOf([10, 10], [nan, nan], [nan, nan]);
    const sum = sumLoads([loadOf([100, 80], [40, 30], [nan, nan]), bare]);
    expect([...sum.kvarhLagging]).toEqual([40, 30]);
    expect([...sum.kvarhLeading]).toEqual([nan, nan]);
  });

  it('leaves its arguments and a single meter as they are', () => {
    const one = loadOf([1, 2], [3, 4], [5, 6]);
    const before = structuredClone(one);
    sumLoads([one, one]);
    expect(one).toEqual(before);
    expect(sumLoads([one])).toEqual(before);
  });

  it('refuses none, and series over other intervals', () => {
    const one = loadOf([1, 2], [3, 4], [5, 6]);
    expect(() => sumLoads([])).toThrow(/at least one/);
    expect(() => sumLoads([one, { ...one, startMs: 0 }])).toThrow(/loads\[1\]/);
    expect(() => sumLoads([one, { ...one, stepMinutes: 30 }])).toThrow(/2 of 15 minutes, got 2 of 30/);
  });
});
