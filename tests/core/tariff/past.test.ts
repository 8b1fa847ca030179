import { describe, expect, it } from 'vitest';
import { priceQuantities, type PricedBill, type PriceOptions } from '@/core/tariff';
import { buildSchedule, valuesOf } from './build';

/** Calendar months from one on. */
function months(first: string, count: number): { from: string; to: string }[] {
  const [year = 0, month = 0] = first.split('-').map(Number);
  const begin = (n: number): string =>
    `${year + Math.floor((month - 1 + n) / 12)}-${String(((month - 1 + n) % 12) + 1).padStart(2, '0')}-01`;
  return Array.from({ length: count }, (_, n) => ({ from: begin(n), to: begin(n + 1) }));
}

function price(
  quantities: string,
  first: string,
  values: number[],
  options: Omit<PriceOptions, 'periods'> = {},
  above = '',
): PricedBill[] {
  const schedule = buildSchedule(
    `${above}\nquantities:\n  maxKw: { highest: kw }\n${quantities}\ncharges:\n  demand: { per: maxKw, rate: 2, group: demand }`,
  );
  return priceQuantities(
    schedule,
    months(first, values.length).map((period, i) => ({ ...period, quantities: { maxKw: values[i]! } })),
    options,
  );
}

const last = (bills: PricedBill[]): Record<string, number> => valuesOf(bills[bills.length - 1]);

describe('looking back', () => {
  it('takes the highest, lowest, mean, sum and count over periods', () => {
    const bills = price(
      `  a: { past: maxKw, take: highest, over: last 3 periods }
  b: { past: maxKw, take: lowest, over: last 3 periods }
  c: { past: maxKw, take: mean, over: this and last 3 periods }
  d: { past: maxKw, take: mean of 2 highest, over: this and last 3 periods }
  e: { past: maxKw, take: sum, over: last 2 periods }
  f: { past: maxKw > 250, take: count, over: this and last 3 periods }
  g: { past: demand, take: highest, over: last 3 periods }
  h: { past: 2 * maxKw + 1, take: highest, over: last 1 period }`,
      '2026-01',
      [900, 200, 400, 300, 100],
    );
    expect(last(bills)).toEqual({ maxKw: 100, a: 400, b: 200, c: 250, d: 350, e: 700, f: 2, g: 800, h: 601 });
  });

  it('keeps to the periods of the year', () => {
    const bills = price(
      '  earlier: { past: maxKw, take: sum, over: earlier periods of this year }\n  all: { past: maxKw, take: sum, over: this and earlier periods of this year }',
      '2025-11',
      [1, 2, 4, 8, 16],
    );
    expect(last(bills)).toMatchObject({ earlier: 4 + 8, all: 28 });
    expect(valuesOf(bills[2])).toMatchObject({ earlier: 0, all: 4 });
  });

  it('counts in a row, ending with this period', () => {
    const run = '  run: { past: maxKw > 150, take: streak, unit: months }';
    const runs = price(run, '2026-01', [200, 100, 200, 300, 150]).map((bill) => valuesOf(bill)['run']);
    expect(runs).toEqual([1, 0, 1, 2, 0]);
  });

  it('reads history back through calendar months, unequal lengths aligned at the end', () => {
    // Before March 2026: January 700, February 500; the other name reaches back one month only.
    const bills = price(
      '  two: { past: maxKw, take: highest, over: last 2 periods }\n  other: { past: limit, take: sum, over: last 2 periods }\n  limit: { given: kW, default: 0 }',
      '2026-03',
      [100],
      { history: { maxKw: [900, 700, 500], limit: [7] } },
    );
    expect(last(bills)).toMatchObject({ two: 700, other: 7 });
    expect(bills[0]!.notes).toContain('"other": 1 of 2 earlier periods known.');
    expect(bills[0]!.notes.some((note) => note.includes('"two"'))).toBe(false);
  });

  it('works out a formula of earlier months from what history gives', () => {
    const bills = price(
      '  maxKva: { highest: kva }\n  demandKw: { formula: max(maxKw; 0.9 * maxKva), unit: kW, round: 1 }\n  top: { past: demandKw, take: highest, over: last 11 periods }'.replace(
        '  maxKva: { highest: kva }',
        '  maxKva: { given: kVA, default: 0 }',
      ),
      '2026-03',
      [100],
      { history: { maxKw: [300, 400], maxKva: [500, 400] } },
    );
    expect(last(bills)).toMatchObject({ top: 450 });
  });

  it('gives 0 where nothing is known, noted', () => {
    const [bill] = price('  top: { past: maxKw, take: highest, over: last 11 periods }', '2026-03', [100]);
    expect(valuesOf(bill)).toMatchObject({ top: 0 });
    expect(bill!.notes).toContain('"top": 0 of 11 earlier periods known; it is 0.');
  });

  it('keeps periods wholly or mostly in a season', () => {
    const above = 'seasons:\n  winter: 12-01 to 03-31\n  summer: rest';
    const schedule = buildSchedule(
      `${above}\nquantities:\n  maxKw: { highest: kw }\n  wholly: { past: maxKw, take: highest, over: last 11 periods, season: wholly winter }\n  mostly: { past: maxKw, take: highest, over: last 11 periods, season: mostly winter }\ncharges:\n  demand: { per: maxKw, rate: 2, group: demand }`,
    );
    // 16 February to 16 March wholly; 16 March to 16 April just over half (16 of 31 days); 16 April on not at all.
    const rows = ['2026-02-16', '2026-03-16', '2026-04-16', '2026-05-16'].map((from, i, all) => ({
      from,
      to: all[i + 1] ?? '2026-06-16',
      quantities: { maxKw: [500, 600, 700, 100][i]! },
    }));
    const bills = priceQuantities(schedule, rows);
    expect(valuesOf(bills[3])).toMatchObject({ wholly: 500, mostly: 600 });
  });

  it('notes periods that do not follow each other and history nobody knows', () => {
    const schedule = buildSchedule(
      'quantities:\n  maxKw: { highest: kw }\n  top: { past: maxKw, take: highest, over: last 2 periods }\ncharges:\n  demand: { per: top, rate: 2, group: demand }',
    );
    const rows = ['2026-01', '2026-03'].map((month) => ({
      from: `${month}-01`,
      to: `${month}-28`,
      quantities: { maxKw: 5 },
    }));
    const [first, second] = priceQuantities(schedule, rows, { history: { maxkW: [9] } });
    expect(first!.notes).toContain(
      'The history tells "maxkW", which the schedule does not have; it is not used. Did you mean "maxKw"?',
    );
    expect(second!.notes).toContain(
      'The period above this one ends on 2026-01-28: what lies between is not known, and looking back passes over it.',
    );
  });

  it('at unity keeps a printed look back whose periods are not known', () => {
    const schedule = buildSchedule(
      'quantities:\n  maxKw: { highest: kw }\n  top: { past: maxKw, take: highest, over: last 2 periods }\ncharges:\n  demand: { per: top, rate: 2, group: demand }',
    );
    const [bill] = priceQuantities(schedule, [
      { from: '2026-03-01', to: '2026-04-01', quantities: { maxKw: 5, top: 40 } },
    ]);
    expect(bill).toMatchObject({ total: 80, reactiveCost: 0 });
  });

  it('explains itself', () => {
    const bills = price('  top: { past: maxKw, take: highest, over: last 2 periods }', '2026-06', [300, 200, 100]);
    expect(bills[2]!.quantities['top']!.explanation).toBe(
      'top = 300 kW, the highest maxKw of the last 2 periods, June 2026.',
    );
  });
});
