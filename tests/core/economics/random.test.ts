import { describe, expect, it } from 'vitest';
import { normalStream, uniformStream, xoshiro128 } from '../../../src/core/economics/random';

describe('xoshiro128', () => {
  it('has the outputs of the published algorithm from the state 1, 2, 3, 4 (computed apart from this code in exact integers)', () => {
    const next = xoshiro128([1, 2, 3, 4]);
    expect([next(), next(), next(), next(), next()]).toEqual([11520, 0, 5927040, 70819200, 2031721883]);
  });
});

describe('uniformStream and normalStream', () => {
  it('have the moments of their distributions', () => {
    const uniform = uniformStream(1);
    const normal = normalStream(uniformStream(2));
    const n = 200000;
    let [mean, square, zMean, zSquare, beyond] = [0, 0, 0, 0, 0];
    for (let i = 0; i < n; i++) {
      const u = uniform();
      const z = normal();
      mean += u / n;
      square += (u * u) / n;
      zMean += z / n;
      zSquare += (z * z) / n;
      beyond += z > 1.2815515655446004 ? 1 / n : 0;
    }
    expect(mean).toBeCloseTo(0.5, 2);
    expect(square).toBeCloseTo(1 / 3, 2);
    expect(Math.abs(zMean)).toBeLessThan(0.01);
    expect(zSquare).toBeCloseTo(1, 1);
    expect(beyond).toBeCloseTo(0.1, 2);
  });
});
