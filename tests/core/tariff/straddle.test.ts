import { describe, expect, it } from 'vitest';
import {
  describeSchedule,
  priceBills,
  priceQuantities,
  wordProblem,
  type PricedBill,
  type Schedule,
} from '@/core/tariff';
import { amountsOf, buildSchedule, buildSeries, problemsOf } from './build';

const body = `
seasons: { summer: 05-01 to 10-31, winter: rest }
rates:
  fuel: { months: { 2026-10: 0.01, 2026-11: 0.02 } }
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
charges:
  demand: { per: maxKw, rate: { summer: 3, winter: 2 }, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }
  rider: { per: kwh, rate: fuel, group: adjustment }
versions:
  2026-11-01:
    charges:
      energy: { rate: 0.20 }
`;
const schedule = (straddle: string): Schedule => buildSchedule(body, { straddle });
// 16 days of October, 15 of November.
const period = { from: '2026-10-16', to: '2026-11-16' };
const bill = (straddle: string): PricedBill =>
  priceQuantities(schedule(straddle), [{ ...period, quantities: { kwh: 1000, maxKw: 10 } }])[0]!;

// Shared by days: demand (16 x 30 + 15 x 20) / 31 = 25.16; energy (16 x 100 + 15 x 200) / 31 = 148.39; rider (16 x 10 + 15 x 20) / 31 = 14.84.
describe('straddle', () => {
  it.each<[string, demand: number, energy: number, rider: number]>([
    ['days', 25.16, 148.39, 14.84],
    ['end', 25.16, 200, 20],
    ['start', 25.16, 100, 10],
    ['{ text: days, season: end }', 20, 148.39, 14.84],
    ['{ text: days, season: start }', 30, 148.39, 14.84],
    ['{ season: end }', 20, 148.39, 14.84],
    ['{ text: end, season: end }', 20, 200, 20],
    ['{ text: start, season: end, month: days }', 20, 100, 14.84],
    ['{ text: days, month: end }', 25.16, 148.39, 20],
    ['{ text: start }', 25.16, 100, 10],
  ])('%s', (straddle, demand, energy, rider) => {
    expect(amountsOf(bill(straddle))).toEqual({ demand, energy, rider });
  });

  it('notes the season that holds for the whole bill', () => {
    expect(bill('{ text: days, season: end }').notes).toContain(
      'The period lies in two seasons: that of its last day, winter, holds for the whole bill.',
    );
    expect(bill('days').notes.join()).not.toContain('holds for the whole bill');
  });

  // 16 days of 24 kWh and the hour the clock goes back, 15 of 72: 385 and 1,080 kWh of 1,465.
  it('by intervals shares what is not ruled by a day', () => {
    const load = buildSeries({
      ...period,
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (local) => (local.getUTCMonth() === 9 ? [1, 0, 0] : [3, 0, 0]),
    });
    const [priced] = priceBills(schedule('{ text: intervals, season: end }'), load, { periods: [period] });
    // 385 x 0.10 + 1,080 x 0.20; 385 x 0.01 + 1,080 x 0.02; 3 kW of winter.
    expect(amountsOf(priced)).toEqual({ demand: 6, energy: 254.5, rider: 25.45 });
  });

  it.each([
    [
      '{ text: intervals, month: days }',
      'straddle: says both intervals and days. What is shared is shared in one way;',
    ],
    ['{ text: dyas }', 'straddle.text: "dyas" is no way to divide a bill. Did you mean "days"?'],
    ['{ seasn: end }', 'straddle.seasn: is not a part of straddle. Did you mean "season"?'],
    ['[days, end]', 'straddle: is not a single value. Write intervals, days, start, end.'],
  ])('%s is refused', (straddle, read) => {
    expect(
      problemsOf(() => schedule(straddle))
        .map(wordProblem)
        .join('\n'),
    ).toContain(read);
  });

  it('is described', () => {
    expect(describeSchedule(schedule('{ text: days, season: end }'))).toMatchObject({
      straddle: 'days',
      ruledBy: { text: null, season: 'end', month: null },
    });
  });
});
