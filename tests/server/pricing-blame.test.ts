import { describe, expect, it } from 'vitest';
import type { PricedLine } from '@/core/tariff';
import type { LinePair } from '@/schemas/pricing';
import { faultsOf } from '@/server/services/blame';

const pair = (id: string, pricedMinor: number, billedMinor: number): LinePair => {
  const line: PricedLine = {
    id,
    label: id,
    group: 'demand',
    amount: pricedMinor / 100,
    explanation: '',
    reactivePart: 0,
    uses: [],
  };
  const billed = [{ id: 1, label: id, amountMinor: billedMinor }];
  return { line, billed, pricedMinor, billedMinor, differenceMinor: billedMinor - pricedMinor, matchedBy: 'label' };
};
const bases: Record<string, string[]> = { surcharge: ['demand'], tax: ['demand', 'energy', 'surcharge'] };
const baseOf = (id: string) => bases[id] ?? [];

describe('faultsOf', () => {
  it('finds none where every line agrees within tolerance', () => {
    expect(faultsOf([pair('demand', 10_000, 10_005), pair('energy', 500, 495)], baseOf)).toEqual([]);
  });

  it('lays the tax on an over-billed demand to the demand: 1,000.00 at 5 % gives 1,050.00', () => {
    const faults = faultsOf(
      [pair('demand', 200_000, 300_000), pair('energy', 100_000, 100_000), pair('tax', 15_000, 20_000)],
      baseOf,
    );
    expect(faults.map(({ pair: { line }, ownMinor, wholeMinor }) => [line?.id, ownMinor, wholeMinor])).toEqual([
      ['demand', 100_000, 105_000],
    ]);
  });

  it('follows a percentage of a percentage: 10 % surcharge, then 5 % tax on both', () => {
    const faults = faultsOf(
      [pair('demand', 200_000, 300_000), pair('surcharge', 20_000, 30_000), pair('tax', 11_000, 16_500)],
      baseOf,
    );
    expect(faults).toHaveLength(1);
    expect(faults[0]?.wholeMinor).toBe(100_000 + 10_000 + 5_500);
  });

  it('keeps an error of the tax itself apart from what follows', () => {
    const faults = faultsOf([pair('demand', 200_000, 300_000), pair('tax', 10_000, 25_000)], baseOf);
    expect(faults.map(({ pair: { line }, wholeMinor }) => [line?.id, wholeMinor])).toEqual([
      ['demand', 105_000],
      ['tax', 10_000],
    ]);
  });

  it('shares a tax between two faults, and adds up to the whole difference', () => {
    const pairs = [pair('demand', 200_000, 203_333), pair('energy', 100_000, 101_111), pair('tax', 15_000, 15_222)];
    const faults = faultsOf(pairs, baseOf);
    expect(faults).toHaveLength(2);
    const whole = faults.reduce((sum, fault) => sum + fault.wholeMinor, 0);
    expect(Math.abs(whole - (3_333 + 1_111 + 222))).toBeLessThanOrEqual(1);
  });

  it('takes a printed line the schedule does not know into the base of a tax on everything, where that explains it', () => {
    const rental: LinePair = { ...pair('rental', 0, 5_000), line: null, pricedMinor: null, differenceMinor: 5_000 };
    const onAll = (id: string) => (id === 'tax' ? ['demand', '*'] : []);
    const taxed = faultsOf([pair('demand', 200_000, 200_000), pair('tax', 10_000, 10_250), rental], onAll);
    expect(taxed.map(({ pair: { line }, wholeMinor }) => [line, wholeMinor])).toEqual([[null, 5_250]]);
    const untaxed = faultsOf([pair('demand', 200_000, 200_000), pair('tax', 10_000, 10_000), rental], onAll);
    expect(untaxed.map(({ wholeMinor }) => wholeMinor)).toEqual([5_000]);
  });

  it('does not change what it is given', () => {
    const pairs = [pair('demand', 200_000, 300_000), pair('tax', 10_000, 15_000)];
    const before = structuredClone(pairs);
    faultsOf(pairs, baseOf);
    expect(pairs).toEqual(before);
  });
});
