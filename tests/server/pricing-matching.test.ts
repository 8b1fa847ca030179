import { describe, expect, it } from 'vitest';
import type { PricedLine } from '@/core/tariff';
import { groupOfLabel, labelSimilarity, matchLines } from '@/server/services/line-matching';

const line = (id: string, label: string, group: PricedLine['group'], amount: number): PricedLine => ({
  id,
  label,
  group,
  amount,
  explanation: '',
  reactivePart: 0,
  uses: [],
});
const billed = (id: number, label: string, amountMinor: number) => ({ id, label, amountMinor });
const minorOf = (one: PricedLine) => Math.round(one.amount * 100);

const lines = [
  line('service', 'Service', 'fixed', 415),
  line('energyPeak', 'Energy, peak', 'energy', 58_547.97),
  line('energyOffPeak', 'Energy, off-peak', 'energy', 80_573.64),
  line('demand', 'Demand', 'demand', 47_712.45),
  line('reactive', 'Excess reactive', 'reactive', 2_028.35),
  line('tax', 'Tax', 'tax', 4_683.17),
];
const placeOf = (matches: ReturnType<typeof matchLines>) =>
  Object.fromEntries(matches.flatMap((match) => match.billed.map((one) => [one.label, match.line?.id ?? null])));

describe('matchLines', () => {
  it('finds lines by similar labels, whatever their order and case', () => {
    const matches = matchLines(
      lines,
      [
        billed(1, 'TAX 2.35%', 1),
        billed(2, 'Off-Peak Energy', 2),
        billed(3, 'Peak energy', 3),
        billed(4, 'Demand charge', 4),
      ],
      {},
      minorOf,
    );
    expect(placeOf(matches)).toEqual({
      'TAX 2.35%': 'tax',
      'Off-Peak Energy': 'energyOffPeak',
      'Peak energy': 'energyPeak',
      'Demand charge': 'demand',
    });
  });

  it('finds a line of a foreign name by its amount, else by its group', () => {
    const matches = matchLines(lines, [billed(1, 'Item 7', 202_835), billed(2, 'Billed kW', 5)], {}, minorOf);
    expect(placeOf(matches)).toEqual({ 'Item 7': 'reactive', 'Billed kW': 'demand' });
  });

  it('puts what a person told before everything else', () => {
    const told = { 'Demand charge': 'service', Tax: '-' };
    const matches = matchLines(lines, [billed(1, 'Demand charge', 4), billed(2, 'Tax', 9)], told, minorOf);
    expect(placeOf(matches)).toEqual({ 'Demand charge': 'service', Tax: null });
    expect(matches.find((match) => match.billed[0]?.label === 'Tax')?.matchedBy).toBe('person');
  });

  it('adds several printed lines to one line where a person says so', () => {
    const told = { 'Demand A': 'demand', 'Demand B': 'demand' };
    const matches = matchLines(lines, [billed(1, 'Demand A', 1), billed(2, 'Demand B', 2)], told, minorOf);
    expect(matches.find((match) => match.line?.id === 'demand')?.billed).toHaveLength(2);
  });

  it('keeps every printed line exactly once and every priced line exactly once', () => {
    const printed = Array.from({ length: 9 }, (_, index) => billed(index, `Charge ${index}`, index));
    const matches = matchLines(lines, printed, {}, minorOf);
    expect(matches.flatMap((match) => match.billed.map((one) => one.id)).sort()).toEqual(printed.map((one) => one.id));
    expect(matches.flatMap((match) => (match.line ? [match.line.id] : []))).toEqual(lines.map((one) => one.id));
  });

  it('ignores inherited names among the remembered', () => {
    const matches = matchLines(lines, [billed(1, 'constructor', 7)], {}, minorOf);
    expect(placeOf(matches)).toEqual({ constructor: null });
  });
});

describe('labelSimilarity', () => {
  it('is one for the same words, nought for none in common', () => {
    expect(labelSimilarity('Energy, peak', 'energy PEAK')).toBe(1);
    expect(labelSimilarity('abc', 'xyz')).toBe(0);
  });
});

describe('groupOfLabel', () => {
  it('reads the group from the words of a label', () => {
    expect(groupOfLabel('State tax')).toBe('tax');
    expect(groupOfLabel('Power factor adjustment')).toBe('reactive');
    expect(groupOfLabel('Miscellaneous')).toBeNull();
  });
});
