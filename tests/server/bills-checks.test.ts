import { describe, expect, it } from 'vitest';
import {
  beginCheck,
  endCheck,
  factorCheck,
  lineCheck,
  meterCheck,
  peakCheck,
  priceCheck,
  quantityChecks,
} from '@/components/intake/bill-checks';
import { emptyLine, type TypedBill } from '@/components/intake/typed';
import type { BillView, MeteredPeriod } from '@/schemas/bill';

/** A month of the design's own example: 2,479,826 kWh, peak 4,469 kW, 196,632.07 USD over 30 days. */
const typed: TypedBill = {
  invoice: '856470',
  from: '2026-05-11',
  lastDay: '2026-06-09',
  readOn: '',
  estimated: false,
  quantities: [
    { name: 'kwh', figure: '2,479,826' },
    { name: 'maxKw', figure: '4,469' },
    { name: 'kvarh', figure: '1,600,000' },
    { name: 'powerFactor', figure: '83 %' },
  ],
  lines: [],
  total: '196,632.07',
};

const kept = (from: string, to: string, kwh: number, totalMinor: number) =>
  ({ from, to, quantities: { kwh }, totalMinor, linesMinor: totalMinor }) as unknown as BillView;
const april = kept('2026-04-10', '2026-05-11', 2_528_275, 18_785_875);
const july = kept('2026-06-10', '2026-07-10', 2_559_172, 20_396_694);

const metered: MeteredPeriod = {
  expected: 2880,
  missing: 0,
  estimated: 0,
  kwh: 2_479_800,
  kvarh: 1_650_000,
  kvarhLeading: 0,
  maxKw: 4469.2,
  maxKva: 5384,
  powerFactorAtPeak: 0.83,
  powerFactorOfPeriod: 0.84,
};
const plain = (words: string | undefined) => words?.replaceAll('\u00a0', ' ');

describe('the period of a typed bill', () => {
  it('joins the bill before and the bill after, or says by how much it does not', () => {
    expect(beginCheck('2026-05-11', [april, july])).toEqual({ words: 'joins 10 May' });
    expect(beginCheck('2026-05-14', [april])).toEqual({ words: '3 days after 10 May', tone: 'warn' });
    expect(beginCheck('2026-05-10', [april])).toEqual({ words: 'overlaps up to 10 May', tone: 'fault' });
    expect(endCheck('2026-05-11', '2026-06-09', [april, july])?.words).toBe('30 days, joins 10 Jun');
    expect(endCheck('2026-05-11', '2026-06-11', [april, july])).toEqual({
      words: '32 days, overlaps from 10 Jun on',
      tone: 'fault',
    });
    expect(endCheck('2026-05-11', '2026-05-01', [april])).toBeNull();
  });
});

describe('quantity times rate', () => {
  const line = { ...emptyLine('Demand', 'kW'), quantity: '5,115', rate: '8.95' };

  it('is said, agrees to the smallest coin, and is off where it is not', () => {
    // 5,115 x 8.95 = 45,779.25
    expect(lineCheck(line, 'USD')).toEqual({ words: 'comes to 45,779.25' });
    expect(lineCheck({ ...line, amount: '45,779.25' }, 'USD')).toEqual({ words: '= 45,779.25' });
    expect(lineCheck({ ...line, amount: '45,779.24' }, 'USD')).toEqual({ words: '= 45,779.25' });
    expect(lineCheck({ ...line, amount: '45,797.25' }, 'USD')).toEqual({
      words: 'comes to 45,779.25, +18.00 off',
      tone: 'fault',
    });
  });

  it('takes a rate in per cent for a percentage', () => {
    // 192,117.31 x 2.35 % = 4,514.757
    const tax = { ...emptyLine('Tax', '%'), quantity: '192,117.31', rate: '2.35', amount: '4,514.76' };
    expect(lineCheck(tax, 'USD')).toEqual({ words: '= 4,514.76' });
    expect(lineCheck(emptyLine('Tax'), 'USD')).toBeNull();
  });
});

describe('quantities against one another', () => {
  it('give a load factor, and refuse more energy than the peak can make', () => {
    // 4,469 kW x 720 h = 3,217,680 kWh; 2,479,826 / 3,217,680 = 0.77
    expect(peakCheck(typed)).toEqual({ words: 'load factor 0.77' });
    const low = { ...typed, quantities: [typed.quantities[0]!, { name: 'maxKw', figure: '3,000' }] };
    // 3,000 kW x 720 h = 2,160,000 kWh
    expect(peakCheck(low)?.tone).toBe('fault');
    expect(plain(peakCheck(low)?.words)).toBe('too low: held all hours it is 2,160,000 kWh');
  });

  it('hold the power factor against that of the energies', () => {
    // 2,479,826 / sqrt(2,479,826^2 + 1,600,000^2) = 2,479,826 / 2,951,217 = 0.840
    expect(factorCheck(typed)).toEqual({ words: 'kWh and kvarh give 0.84', tone: undefined });
    const odd = { ...typed, quantities: [...typed.quantities.slice(0, 3), { name: 'powerFactor', figure: '0.93' }] };
    expect(factorCheck(odd)?.tone).toBe('warn');
  });

  it('say how a power factor in per cent was understood', () => {
    expect(quantityChecks(typed, 3, metered).map(({ words }) => words)).toEqual([
      'taken as 0.83',
      'meter 0.83',
      'kWh and kvarh give 0.84',
    ]);
  });
});

describe('a figure against the meter', () => {
  it('is told in per cent for energies and by the value for others', () => {
    expect(plain(meterCheck('kwh', 2_479_826, metered)?.words)).toBe('meter 0.00 %');
    // (1,600,000 - 1,650,000) / 1,650,000 = -3.03 %
    expect(plain(meterCheck('kvarh', 1_600_000, metered)?.words)).toBe('meter \u22123.03 %');
    expect(meterCheck('kvarh', 1_600_000, metered)?.tone).toBe('warn');
    expect(meterCheck('maxKw', 4469, metered)?.words).toBe('meter 4,469');
    expect(meterCheck('billedKw', 5115, metered)).toBeNull();
    expect(meterCheck('powerFactor', 0.83, metered)?.words).toBe('meter 0.83');
    expect(meterCheck('powerFactor', 0.842, metered)?.words).toBe('meter 0.84 over the period');
  });

  it('is the least there can be where readings are missing, and nothing without a meter', () => {
    const gappy = { ...metered, missing: 4 };
    expect(meterCheck('kwh', 2_479_826, gappy)?.words).toBe('meter 2,479,800 at least, readings are missing');
    expect(meterCheck('kwh', 2_479_826, null)).toBeNull();
  });
});

describe('the average price', () => {
  it('stands beside those of the bills around', () => {
    // 196,632.07 / 2,479,826 = 0.0793; 187,858.75 / 2,528,275 = 0.0743; 203,966.94 / 2,559,172 = 0.0797
    const average = priceCheck(typed, 19_663_207, [april, july], 'USD');
    expect(average?.price).toBe('0.0793');
    expect(average?.check).toEqual({ words: 'USD per kWh; 0.0743 in Apr 2026, 0.0797 in Jun 2026', tone: undefined });
  });

  it('wants a look where it is far off both', () => {
    expect(priceCheck(typed, 1_966_320, [april, july], 'USD')?.check.tone).toBe('warn');
    expect(priceCheck({ ...typed, quantities: [] }, 19_663_207, [april], 'USD')).toBeNull();
  });
});
