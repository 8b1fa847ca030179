import { describe, expect, it } from 'vitest';
import { NotConvergedError } from '../../../src/core/machine';
import { brentRoot, goldenMinimum } from '../../../src/core/machine/roots';

describe('brentRoot', () => {
  it.each([
    // cos x = x at 0.7390851332151607 (Dottie number).
    [(x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
    [(x: number) => x ** 3 - 2, 0, 2, Math.cbrt(2)],
    [(x: number) => (x < 0.3 ? -1 : 1), 0, 1, 0.3],
  ])('finds the zero of a function in few steps', (f, lo, hi, zero) => {
    let steps = 0;
    const found = brentRoot((x) => (steps++, f(x)), lo, hi, 'zero');
    expect(Math.abs(found - zero)).toBeLessThan(1e-14);
    expect(steps).toBeLessThan(70);
  });

  it('finds a zero at exactly 0 of a function that is all but flat there', () => {
    expect(Math.abs(brentRoot((x) => x + 3.5e-323, -0.1, 1.2, 'zero'))).toBeLessThan(1e-17);
  });

  it('refuses ends of one sign', () => {
    expect(() => brentRoot((x) => x * x + 1, -1, 1, 'nothing')).toThrow(NotConvergedError);
    expect(() => brentRoot(() => 1e-200, -1, 1, 'nothing')).toThrow(NotConvergedError);
    expect(() => brentRoot(() => NaN, 0, 1, 'nothing')).toThrow(
      expect.objectContaining({ code: 'nothing', iterations: 0 }),
    );
  });
});

describe('goldenMinimum', () => {
  it('finds the least point to the square root of precision', () => {
    expect(goldenMinimum((x) => (x - 0.3) ** 2, -4, 1)).toBeCloseTo(0.3, 7);
    expect(goldenMinimum((x) => Math.abs(x + 2), -10, 1)).toBeCloseTo(-2, 7);
  });
});
