import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { priceQuantities, type PricedBill, type PriceOptions } from '@/core/tariff';
import { amountsOf, buildSchedule } from './build';

const july = { from: '2026-07-01', to: '2026-08-01' };

function bill(
  charges: string,
  quantities: Record<string, number>,
  input: {
    above?: string;
    head?: Record<string, string>;
    options?: Omit<PriceOptions, 'periods'>;
    period?: { from: string; to: string };
    more?: string;
  } = {},
): PricedBill {
  const body = `${input.above ?? ''}\nquantities:\n  kwh: { sum: kwh }\n  maxKw: { highest: kw }\n${input.more ?? ''}\ncharges:\n${charges}`;
  const schedule = buildSchedule(body, { zeroKwh: '{ pf: 1, ratio: 0 }', ...input.head });
  return priceQuantities(schedule, [{ ...(input.period ?? july), quantities }], input.options)[0]!;
}

describe('charges', () => {
  it('are amounts, also by days and hours', () => {
    const lines = '  a: { amount: 2.30 * days, group: fixed }\n  b: { amount: hours / 100, group: fixed }';
    expect(amountsOf(bill(lines, {}))).toEqual({ a: 71.3, b: 7.44 });
    // Lisbon's March has 743 hours, its October 745.
    expect(amountsOf(bill(lines, {}, { period: { from: '2026-03-01', to: '2026-04-01' } }))).toEqual({
      a: 71.3,
      b: 7.43,
    });
  });

  it('price marginal tiers with limits that are formulas', () => {
    const lines =
      '  energy: { per: kwh, tiers: [ { to: 250 * maxKw, rate: 0.08 }, { to: 400 * maxKw, rate: 0.06 }, { rate: 0.05 } ], group: energy }';
    expect(amountsOf(bill(lines, { kwh: 10_000, maxKw: 100 }))).toEqual({ energy: 800 });
    expect(amountsOf(bill(lines, { kwh: 30_000, maxKw: 100 }))).toEqual({ energy: 2000 + 300 });
    expect(amountsOf(bill(lines, { kwh: 50_000, maxKw: 100 }))).toEqual({ energy: 2000 + 900 + 500 });
    expect(amountsOf(bill(lines, { kwh: 50_000, maxKw: 0 }))).toEqual({ energy: 2500 });
    expect(bill(lines, { kwh: 30_000, maxKw: 100 }).lines[0]!.explanation).toBe(
      'Energy: 25,000 kWh x 0.08 + 5,000 kWh x 0.06 = 2,300.00 EUR; the first tier ends at 250 x maxKw = 25,000 kWh, the second tier ends at 400 x maxKw = 40,000 kWh.',
    );
  });

  it('take percentages of lines, of what they print', () => {
    const lines =
      '  energy: { per: kwh, rate: 0.3333, group: energy }\n  credit: { percentOf: energy, rate: -1.5, group: adjustment }\n  tax: { percentOf: all above, rate: 10, group: tax }';
    // 33.33; -0.49995 -> -0.50; 10 % of 32.83 = 3.283.
    expect(amountsOf(bill(lines, { kwh: 100 }))).toEqual({ energy: 33.33, credit: -0.5, tax: 3.28 });
  });

  it('raise or lower lines together', () => {
    const lines = (to: number): string =>
      `  energy: { per: kwh, rate: 1, group: energy }\n  demand: { per: maxKw, rate: 1, group: demand }\n  minimum: { topUp: [energy, demand], to: ${to}, group: adjustment }\n  limit: { cap: [energy, demand], to: ${to}, group: adjustment }`;
    expect(amountsOf(bill(lines(500), { kwh: 100, maxKw: 200 }))).toMatchObject({ minimum: 200, limit: 0 });
    expect(amountsOf(bill(lines(250), { kwh: 100, maxKw: 200 }))).toMatchObject({ minimum: 0, limit: -50 });
    expect(amountsOf(bill(lines(300), { kwh: 100, maxKw: 200 }))).toMatchObject({ minimum: 0, limit: 0 });
  });

  it('cap lines to a part of another', () => {
    const lines =
      '  service: { amount: 80, group: fixed }\n  lagging: { per: kwh, rate: 1, group: reactive }\n  limit: { cap: [lagging], to: 0.50 * service, group: adjustment }';
    expect(amountsOf(bill(lines, { kwh: 100 }))).toEqual({ service: 80, lagging: 100, limit: -60 });
  });

  it('stay on the bill with 0 where their condition fails, saying why', () => {
    const lines = '  late: { amount: 12, when: paidLate = 1, group: adjustment }';
    const more = '  paidLate: { given: flag, default: 0 }';
    const paid = bill(lines, {}, { more });
    expect(amountsOf(paid)).toEqual({ late: 0 });
    expect(paid.lines[0]!.explanation).toBe('Late: not charged, "paidLate = 1" does not hold: paidLate is 0.');
    expect(amountsOf(bill(lines, {}, { more, options: { given: [{ paidLate: 1 }] } }))).toEqual({ late: 12 });
  });

  it('need nothing more where their condition fails', () => {
    const lines = '  late: { per: maxKw, rate: 1, when: kwh > 5, group: demand }';
    expect(amountsOf(bill(lines, { kwh: 5 }))).toEqual({ late: 0 });
    expect(() => bill(lines, { kwh: 6 })).toThrow('the bill does not give "maxKw" (kW), which line "Late" needs.');
  });

  it('let a printed figure win over a given one, that over the default', () => {
    const lines = '  fee: { per: trips, rate: 1, group: fixed }';
    const more = '  trips: { given: trips, default: 3 }';
    expect(bill(lines, {}, { more }).total).toBe(3);
    expect(bill(lines, {}, { more, options: { given: [{ trips: 5 }] } }).total).toBe(5);
    expect(bill(lines, { trips: 7 }, { more, options: { given: [{ trips: 5 }] } }).total).toBe(7);
  });

  it('round by their own step, the schedule, or the currency', () => {
    const lines =
      '  a: { amount: 10.005, group: fixed }\n  b: { amount: 10.005, round: 0.05, group: fixed }\n  c: { amount: 10.005, round: 1 up, group: fixed }\n  d: { amount: 10.005, round: 0.01 half down, group: fixed }';
    expect(amountsOf(bill(lines, {}))).toEqual({ a: 10.01, b: 10, c: 11, d: 10 });
    expect(amountsOf(bill(lines, {}, { head: { rounding: '0.1' } }))).toMatchObject({ a: 10, c: 11 });
    expect(amountsOf(bill(lines, {}, { head: { currency: 'JPY' } }))).toMatchObject({ a: 10 });
    expect(amountsOf(bill(lines, {}, { head: { currency: 'KWD' } }))).toMatchObject({ a: 10.005 });
  });

  it('take contract inputs: default, one set for all, or one per period', () => {
    const above =
      'contract:\n  contractKw: { unit: kW, default: 100, range: [10, 900] }\n  since: { unit: date, default: 20260115 }';
    const lines =
      '  fixed: { amount: 2 * contractKw, group: fixed }\n  grace: { amount: daysSince(since), group: fixed }';
    const schedule = buildSchedule(`${above}\nquantities:\n  kwh: { sum: kwh }\ncharges:\n${lines}`);
    const rows = [
      { ...july, quantities: {} },
      { from: '2026-08-01', to: '2026-09-01', quantities: {} },
    ];
    const fixed = (contract?: PriceOptions['contract']): (number | undefined)[] =>
      priceQuantities(schedule, rows, { contract }).map((priced) => amountsOf(priced)['fixed']);
    expect(fixed()).toEqual([200, 200]);
    expect(fixed({ contractKw: 300 })).toEqual([600, 600]);
    expect(fixed([{ contractKw: 300 }, {}])).toEqual([600, 200]);
    // 15 January to 1 July: 167 days.
    expect(amountsOf(priceQuantities(schedule, rows)[0])['grace']).toBe(167);
  });

  it('follow the season and the month of the period', () => {
    const above =
      'rates:\n  fuel: { months: { 2026-07: 0.5, 2026-08: 0.25 } }\nseasons:\n  summer: 05-01 to 10-31\n  winter: rest';
    const lines =
      '  fuelRider: { per: kwh, rate: fuel, group: adjustment }\n  demand: { per: maxKw, rate: { summer: 3, winter: 2 }, group: demand }';
    expect(amountsOf(bill(lines, { kwh: 100, maxKw: 10 }, { above }))).toEqual({ fuelRider: 50, demand: 30 });
    expect(
      amountsOf(bill(lines, { kwh: 100, maxKw: 10 }, { above, period: { from: '2026-08-01', to: '2026-09-01' } })),
    ).toEqual({ fuelRider: 25, demand: 30 });
  });

  it('note a printed figure that its printed parts do not give', () => {
    const more = '  kvarh: { sum: kvarhLagging }\n  pf: { formula: pf(kwh; kvarh), round: 0.01 }';
    const lines = '  fee: { per: kwh, rate: pf, group: reactive }';
    const agreed = bill(lines, { kwh: 800, kvarh: 600, pf: 0.8 }, { more });
    expect(agreed.notes.some((note) => note.includes('"pf"'))).toBe(false);
    const differs = bill(lines, { kwh: 800, kvarh: 600, pf: 0.83 }, { more });
    expect(differs.total).toBe(664);
    expect(differs.notes).toContain('"pf": the bill prints 0.83, worked out from its parts it is 0.80.');
  });

  it('leave out a quantity nobody needs that the bill does not print, and note one nobody knows', () => {
    const priced = bill('  fee: { per: kwh, rate: 1, group: energy }', { kwh: 5, kwhh: 6 });
    expect(Object.keys(priced.quantities)).toEqual(['kwh']);
    expect(priced.notes).toContain('The schedule has no quantity called "kwhh"; it is not used. Did you mean "kwh"?');
  });

  it('apply the rule for no kWh', () => {
    const more =
      '  kvarh: { sum: kvarhLagging }\n  pf: { formula: pf(kwh; kvarh) }\n  tan: { formula: ratio(kvarh; kwh) }\n  over: { formula: excess(kvarh; 0.3 * kwh), unit: kvarh }';
    const priced = bill(
      '  fee: { per: over, rate: if(kwh = 0; 2; 1), group: reactive }',
      { kwh: 0, kvarh: 50 },
      { more },
    );
    expect(priced.quantities).toMatchObject({ pf: { value: 1 }, tan: { value: 0 } });
    expect(priced.total).toBe(100);
  });

  it('name bill and formula where arithmetic fails', () => {
    const more = '  share: { formula: maxKw / kwh, unit: kW }';
    expect(() => bill('  fee: { per: share, rate: 1, group: fixed }', { kwh: 0, maxKw: 1 }, { more })).toThrow(
      'July 2026: quantities.share.formula: the formula divides by zero (characters 1 to 11).',
    );
  });

  it('add up to the total, whatever the figures', () => {
    const lines =
      '  energy: { per: kwh, tiers: [ { to: 300 * maxKw, rate: 0.0813 }, { rate: 0.0577 } ], group: energy }\n  demand: { per: maxKw, rate: 11.37, group: demand }\n  minimum: { topUp: all above, to: 900, group: adjustment }\n  tax: { percentOf: all above, rate: 7.25, group: tax }';
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 9_000_000 }), fc.integer({ min: 0, max: 90_000 }), (kwh, tenths) => {
        const priced = bill(lines, { kwh, maxKw: tenths / 10 });
        const cents = priced.lines.reduce((sum, line) => sum + Math.round(line.amount * 100), 0);
        expect(Math.round(priced.total * 100)).toBe(cents);
        expect(priced.total).toBe(cents / 100);
      }),
      { numRuns: 60 },
    );
  });
});
