import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { shiftRegisters } from '../../../src/core/plan';

const energy = fc.double({ min: 0, max: 1e4, noNaN: true });
const change = fc.double({ min: -2e4, max: 2e4, noNaN: true });

describe('shiftRegisters', () => {
  it.each([
    // Only lagging ran: exact subtraction, then over into leading.
    [100, 0, -30, 70, 0],
    [100, 0, -130, 0, 30],
    [100, 0, 30, 130, 0],
    // Only leading ran.
    [0, 40, 25, 0, 15],
    [0, 40, 55, 15, 0],
    [0, 40, -5, 0, 45],
    // Both zero: the register of the sign.
    [0, 0, 7, 7, 0],
    [0, 0, -7, 0, 7],
    // Both ran, f = 0.75: a = 30 + 0.75 e, b = 10 - 0.25 e.
    [30, 10, 8, 36, 8],
    [30, 10, -8, 24, 12],
    // e = 60: a = 75, b = -5, so lagging 80 and leading 0. e = -60: a = -15, b = 25, leading 40.
    [30, 10, 60, 80, 0],
    [30, 10, -60, 0, 40],
  ])('turns %d lagging and %d leading by %d into %d and %d', (lagging, leading, e, newLagging, newLeading) => {
    const found = shiftRegisters(lagging, leading, e);
    expect(found.kvarhLagging).toBeCloseTo(newLagging, 10);
    expect(found.kvarhLeading).toBeCloseTo(newLeading, 10);
  });

  it('changes nothing at e = 0, and the net by exactly e', () => {
    fc.assert(
      fc.property(energy, energy, change, (lagging, leading, e) => {
        expect(shiftRegisters(lagging, leading, 0)).toEqual({ kvarhLagging: lagging, kvarhLeading: leading });
        const found = shiftRegisters(lagging, leading, e);
        expect(Math.abs(found.kvarhLagging - found.kvarhLeading - (lagging - leading + e))).toBeLessThan(
          1e-9 * (1 + Math.abs(e) + lagging + leading),
        );
        expect(Math.min(found.kvarhLagging, found.kvarhLeading)).toBeGreaterThanOrEqual(0);
      }),
      { numRuns: 1000 },
    );
  });

  it('is continuous in e', () => {
    fc.assert(
      fc.property(energy, energy, change, (lagging, leading, e) => {
        const a = shiftRegisters(lagging, leading, e);
        const b = shiftRegisters(lagging, leading, e + 1e-6);
        expect(Math.abs(a.kvarhLagging - b.kvarhLagging)).toBeLessThan(1e-5);
        expect(Math.abs(a.kvarhLeading - b.kvarhLeading)).toBeLessThan(1e-5);
      }),
      { numRuns: 1000 },
    );
  });

  it('keeps a missing register missing, both of them', () => {
    expect(shiftRegisters(NaN, 0, 5)).toEqual({ kvarhLagging: NaN, kvarhLeading: NaN });
    expect(shiftRegisters(3, NaN, 5)).toEqual({ kvarhLagging: NaN, kvarhLeading: NaN });
  });

  it('refuses a negative register', () => {
    expect(() => shiftRegisters(-1, 0, 0)).toThrow(/kvarhLagging must be >= 0 or NaN, got -1/);
    expect(() => shiftRegisters(0, -1, 0)).toThrow(RangeError);
  });
});
