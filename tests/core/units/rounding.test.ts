import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  decimalsOf,
  fromMinorUnits,
  minorUnitDecimals,
  roundToMinorUnit,
  roundToStep,
  toMinorUnits,
  wordMoney,
  wordNumber,
} from '@/core/units';

describe('roundToStep', () => {
  it.each([
    // value, step, nearest, half down, down, up: by hand
    [2.675, 0.01, 2.68, 2.67, 2.67, 2.68],
    [-2.675, 0.01, -2.68, -2.67, -2.67, -2.68],
    [38_528.375, 0.01, 38_528.38, 38_528.37, 38_528.37, 38_528.38],
    [260.5, 1, 261, 260, 260, 261],
    [260.6, 1, 261, 261, 260, 261],
    [1.005, 0.01, 1.01, 1, 1, 1.01],
    [0.83, 0.05, 0.85, 0.85, 0.8, 0.85],
    [1234, 100, 1200, 1200, 1200, 1300],
    [0.004, 0.01, 0, 0, 0, 0.01],
    [3, 0.1, 3, 3, 3, 3],
    [0.1 + 0.2, 0.1, 0.3, 0.3, 0.3, 0.3],
  ])('rounds %d by %d', (value, step, nearest, halfDown, down, up) => {
    expect(roundToStep(value, { step, mode: 'nearest' })).toBe(nearest);
    expect(roundToStep(value, { step, mode: 'half down' })).toBe(halfDown);
    expect(roundToStep(value, { step, mode: 'down' })).toBe(down);
    expect(roundToStep(value, { step, mode: 'up' })).toBe(up);
  });

  it('takes a value farther from a tie than 1e-12 of its steps, or 1e-9, as it is', () => {
    expect(roundToStep(0.4999999, { step: 1, mode: 'nearest' })).toBe(0);
    expect(roundToStep(0.4999999999, { step: 1, mode: 'nearest' })).toBe(1);
    expect(roundToStep(1_000_000.49999, { step: 1, mode: 'nearest' })).toBe(1_000_000);
  });

  it('gives the nearest double to the decimal, and is settled by one rounding', () => {
    fc.assert(
      fc.property(fc.integer({ min: -1e9, max: 1e9 }), fc.constantFrom(0.01, 0.1, 1, 0.001, 0.05), (whole, step) => {
        const rounded = roundToStep(whole * step, { step, mode: 'nearest' });
        expect(rounded).toBe(Number((whole * step).toFixed(decimalsOf(step))));
        expect(roundToStep(rounded, { step, mode: 'nearest' })).toBe(rounded);
      }),
    );
  });

  it('never gives minus zero', () => {
    expect(Object.is(roundToStep(-0.001, { step: 0.01, mode: 'nearest' }), 0)).toBe(true);
  });

  it('refuses what is no number or no step', () => {
    expect(() => roundToStep(NaN, { step: 1, mode: 'nearest' })).toThrow('value must be finite, got NaN');
    expect(() => roundToStep(1, { step: 0, mode: 'nearest' })).toThrow('step must be a positive number, got 0');
  });
});

describe('minor units', () => {
  // ISO 4217: yen without, euro with two, Kuwaiti dinar with three decimals.
  it.each([
    ['JPY', 0],
    ['EUR', 2],
    ['KWD', 3],
  ])('%s has %d decimals', (currency, decimals) => {
    expect(minorUnitDecimals(currency)).toBe(decimals);
  });

  it('goes to minor units and back', () => {
    expect(toMinorUnits(1.005, 'EUR')).toBe(101);
    expect(toMinorUnits(-1234.5, 'JPY')).toBe(-1235);
    expect(fromMinorUnits(101, 'EUR')).toBe(1.01);
    expect(roundToMinorUnit(1.0005, 'KWD')).toBe(1.001);
    expect(() => fromMinorUnits(1.5, 'EUR')).toThrow('amountMinor must be an integer');
    expect(() => minorUnitDecimals('euro')).toThrow('ISO 4217');
  });
});

describe('wordNumber', () => {
  it.each([
    [2400, '2,400'],
    [0.8944271909999159, '0.894427'],
    [346_375, '346,375'],
    [138.25301204819277, '138.253012'],
    [1382.5331204819277, '1,382.533'],
    [1_234_567.891, '1,234,567.891'],
    [0.00041554, '0.00041554'],
    [-12.5, '-12.5'],
    [0, '0'],
    [NaN, 'unknown'],
  ])('writes %d', (value, words) => {
    expect(wordNumber(value)).toBe(words);
  });

  it('writes all decimals of a rounded value', () => {
    expect(wordNumber(1385.5, 0.01)).toBe('1,385.50');
    expect(wordNumber(2400, 1)).toBe('2,400');
  });

  it('writes money in minor units', () => {
    expect(wordMoney(27_600, 'EUR')).toBe('27,600.00 EUR');
    expect(wordMoney(4_158_540, 'JPY')).toBe('4,158,540 JPY');
    expect(wordMoney(-0.001, 'EUR')).toBe('0.00 EUR');
  });
});
