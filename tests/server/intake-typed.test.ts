import { describe, expect, it } from 'vitest';
import { readTyped, typedAmount, type TypedBill } from '@/components/intake/typed';

const typed: TypedBill = {
  from: '2026-05-11',
  lastDay: '2026-06-09',
  quantities: [
    { name: 'kwh', figure: '2,479,826' },
    { name: 'powerFactor', figure: '0.83' },
    { name: 'maxKva', figure: '' },
  ],
  lines: [
    { label: 'Service', amount: '415.00' },
    { label: '', amount: '' },
    { label: 'Credit', amount: '\u22125.00' },
  ],
  total: '410.00',
};

describe('typedAmount', () => {
  it('gives minor units of the currency', () => {
    expect(typedAmount('134,651.58', 'USD')).toBe(13_465_158);
    expect(typedAmount('1,200', 'JPY')).toBe(1200);
    expect(typedAmount('1.125', 'KWD')).toBe(1125);
  });

  it('refuses what is finer than the smallest coin', () => {
    expect(typedAmount('1.005', 'USD')).toBeNull();
    expect(typedAmount('1.5', 'JPY')).toBeNull();
  });
});

describe('readTyped', () => {
  it('makes the last day the end of a half-open period and leaves empty rows out', () => {
    expect(readTyped(typed, 'USD')).toEqual({
      bill: {
        from: '2026-05-11',
        to: '2026-06-10',
        quantities: { kwh: 2_479_826, powerFactor: 0.83 },
        lines: [
          { label: 'Service', amountMinor: 41_500 },
          { label: 'Credit', amountMinor: -500 },
        ],
        totalMinor: 41_000,
      },
    });
  });

  it('names the field of every fault', () => {
    const lines = [
      { label: 'Service', amount: '' },
      { label: '', amount: '12.00' },
      { label: 'Tax', amount: '1.2.3' },
    ];
    const quantities = [{ name: 'powerFactor', figure: '83' }];
    const read = readTyped({ ...typed, lastDay: '2026-05-01', lines, quantities, total: 'x' }, 'USD');
    expect('faults' in read && Object.keys(read.faults).sort()).toEqual([
      'lastDay',
      'lines.1.label',
      'lines.2.amount',
      'quantities.0.figure',
      'total',
    ]);
  });
});
