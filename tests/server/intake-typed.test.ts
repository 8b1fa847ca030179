import { describe, expect, it } from 'vitest';
import { emptyLine, readTyped, typedAmount, typedQuantity, type TypedBill } from '@/components/intake/typed';

const typed: TypedBill = {
  invoice: '856470',
  readOn: '2026-06-10',
  estimated: false,
  from: '2026-05-11',
  lastDay: '2026-06-09',
  quantities: [
    { name: 'kwh', figure: '2,479,826' },
    { name: 'powerFactor', figure: '0.83' },
    { name: 'maxKva', figure: '' },
  ],
  lines: [
    { ...emptyLine('Service'), amount: '415.00' },
    emptyLine(),
    { ...emptyLine('Credit', 'kWh'), amount: '\u22125.00', quantity: '100', rate: '-0.05' },
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
        invoice: '856470',
        readOn: '2026-06-10',
        estimated: false,
        from: '2026-05-11',
        to: '2026-06-10',
        quantities: { kwh: 2_479_826, powerFactor: 0.83 },
        lines: [
          { label: 'Service', amountMinor: 41_500, quantity: null, unit: null, rate: null },
          { label: 'Credit', amountMinor: -500, quantity: 100, unit: 'kWh', rate: -0.05 },
        ],
        totalMinor: 41_000,
      },
    });
  });

  it('names the field of every fault', () => {
    const lines = [
      emptyLine('Service'),
      { ...emptyLine(), amount: '12.00' },
      { ...emptyLine('Tax'), amount: '1.2.3' },
      { ...emptyLine('Fuel'), amount: '5', quantity: 'ten', rate: '1,5' },
    ];
    const quantities = [{ name: 'powerFactor', figure: '8.3' }];
    const read = readTyped({ ...typed, lastDay: '2026-05-01', lines, quantities, total: 'x' }, 'USD');
    expect('faults' in read && Object.keys(read.faults).sort()).toEqual([
      'lastDay',
      'lines.1.label',
      'lines.2.amount',
      'lines.3.quantity',
      'lines.3.rate',
      'quantities.0.figure',
      'total',
    ]);
  });
});

describe('typedQuantity', () => {
  it.each([
    ['85', 0.85],
    ['85 %', 0.85],
    ['85.3%', 0.853],
    ['100', 1],
    ['0.83', 0.83],
    ['1', 1],
    ['0.9 %', 0.009],
  ])('takes a power factor of %s for %s', (figure, fraction) =>
    expect(typedQuantity('powerFactor', figure)).toBe(fraction),
  );

  it('leaves other quantities and what is no number as they are', () => {
    expect(typedQuantity('maxKw', '85')).toBe(85);
    expect(typedQuantity('maxKw', '85 %')).toBeNaN();
    expect(typedQuantity('powerFactor', '%')).toBeNaN();
    expect(typedQuantity('powerFactor', '')).toBeUndefined();
    expect(typedQuantity('powerFactor', '1.2')).toBe(1.2);
  });
});
