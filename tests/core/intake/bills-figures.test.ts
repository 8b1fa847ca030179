import { describe, expect, it } from 'vitest';
import { readFigure } from '@/core/intake/bill-figures';

describe('readFigure', () => {
  // Common practice in accounting: brackets, a trailing minus and CR stand for amounts in the customer's favour.
  it.each([
    ['$1,234.56', '.', 1234.56],
    ['-$1,234.56', '.', -1234.56],
    ['$-1,234.56', '.', -1234.56],
    ['($1,234.56)', '.', -1234.56],
    ['$(1,234.56)', '.', -1234.56],
    ['1,234.56-', '.', -1234.56],
    ['123.45 CR', '.', -123.45],
    ['$123.45CR', '.', -123.45],
    ['123.45 DR', '.', 123.45],
    ['−12.30', '.', -12.3],
    ['1.234,56 €', ',', 1234.56],
    ['-12,30 €', ',', -12.3],
    ['€ 1.234,56-', ',', -1234.56],
    ['EUR 1.234,56', ',', 1234.56],
    ['1 234,56 zł', ',', 1234.56],
    ['1\u00a0234,56', ',', 1234.56],
    ['1\u202f234,56', ',', 1234.56],
    ["CHF 1'234.50", '.', 1234.5],
    ['1’234.50', '.', 1234.5],
    ['Rs. 12,34,567.00', '.', 1_234_567],
    ['₹12,34,567', '.', 1_234_567],
    ['US$ 10.00', '.', 10],
    ['.145', '.', 0.145],
    ['1.2E+05', '.', 120_000],
    ['0', '.', 0],
  ] as const)('reads %s with “%s” as %d', (text, mark, value) => {
    expect(readFigure(text, mark).value).toBe(value);
  });

  it.each([
    ['2,726,444 kWh', { value: 2_726_444, unit: 'kWh' }],
    ['2.5 MWh', { value: 2.5, unit: 'MWh' }],
    ['2610kW', { value: 2610, unit: 'kW' }],
    ['6.2 Mvarh', { value: 6.2, unit: 'Mvarh' }],
    ['85 %', { value: 85, isPercent: true }],
    ['0.85 lag', { value: 0.85, sense: 'lagging' }],
    ['0.85 ind.', { value: 0.85, sense: 'lagging' }],
    ['cos phi 0.92', { value: 0.92 }],
    ['0.97 lead', { value: 0.97, sense: 'leading' }],
    ['0.97 cap.', { value: 0.97, sense: 'leading' }],
    ['$0.0652/kWh', { value: 0.0652, currency: '$', per: 'kWh' }],
    ['6.52 ct/kWh', { value: 6.52, isMinor: true, per: 'kWh' }],
    ['12.00 EUR per kW', { value: 12, currency: 'EUR', per: 'kW' }],
  ])('tells what stands beside the figure in %s', (text, expected) => {
    expect(readFigure(text, '.')).toEqual(expected);
  });

  it.each([
    '',
    '-',
    'n/a',
    'pending',
    'LP-4',
    '88-104',
    '6/10/2025',
    '2025-06-10',
    'Rate 4 LP',
    '12 apples',
    '1.2.3.4',
  ])('finds no figure in “%s”', (text) => {
    expect(readFigure(text, '.').value).toBeNaN();
  });
});
