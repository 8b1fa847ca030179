import { describe, expect, it } from 'vitest';
import { wholeReadings, type LoadSeries } from '@/core/load';

const nan = Number.NaN;
const loadOf = (kwh: number[], lagging: number[], leading: number[], quality = kwh.map(() => 0)): LoadSeries => ({
  startMs: 0,
  stepMinutes: 60,
  kwh: Float64Array.from(kwh),
  kvarhLagging: Float64Array.from(lagging),
  kvarhLeading: Float64Array.from(leading),
  quality: Uint8Array.from(quality),
});

describe('wholeReadings', () => {
  it('counts an interval as missing where lagging kvarh are carried elsewhere only', () => {
    const whole = wholeReadings(loadOf([10, 10, 10], [nan, 5, 6], [nan, 0, 1]));
    expect([...whole.quality]).toEqual([2, 0, 0]);
    expect([...whole.kwh]).toEqual([nan, 10, 10]);
    expect([...whole.kvarhLeading]).toEqual([nan, 0, 1]);
  });

  it('takes leading kvarh as nought where a file of the same meter carries none', () => {
    const whole = wholeReadings(loadOf([10, 10], [4, 5], [nan, 3], [1, 0]));
    expect([...whole.kvarhLeading]).toEqual([0, 3]);
    expect([...whole.quality]).toEqual([1, 0]);
  });

  it('leaves a series alone whose registers are carried throughout or not at all', () => {
    for (const load of [
      loadOf([10, nan], [5, nan], [nan, nan], [0, 2]),
      loadOf([10, 11], [nan, nan], [nan, nan]),
      loadOf([10, 11], [1, 2], [0, 0]),
    ])
      expect(wholeReadings(load)).toBe(load);
  });
});
