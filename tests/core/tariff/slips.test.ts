import { describe, expect, it } from 'vitest';
import { PriceError, priceBills, priceQuantities, readSchedule, ScheduleError } from '@/core/tariff';
import { buildSeries } from './build';
import { kestrel, millrace, tidewater } from './worked-schedules';

// The design's trial: a letter, mark or blank lost, doubled or swapped with its neighbour, digits left alone, in a working schedule. Such
// a slip must be refused with its place or leave every bill as it was.

const load = buildSeries({
  from: '2026-06-01',
  to: '2026-08-15',
  timeZone: 'Europe/Oslo',
  stepMinutes: 60,
  powers: (local, i) => {
    const hour = local.getUTCHours();
    return hour >= 23 || hour < 7
      ? [400 + hour, 0, 50]
      : [500 + (i % 31), local.getUTCMonth() === 5 ? 300 : 250, hour === 12 ? 40 : 0];
  },
});
const march = { from: '2026-03-01', to: '2026-04-01', quantities: { maxKw: 1250, kwh: 510_000, kvarh: 340_000 } };
const april = { from: '2026-04-01', to: '2026-05-01', quantities: { maxKw: 60, kwh: 9000, kvarh: 2000 } };
const july = {
  from: '2026-07-16',
  to: '2026-08-16',
  quantities: { kwhPeak: 300_000, kwhOffPeak: 500_000, kvarh: 400_000, maxKva: 2100, leadNight: 900 },
};

const works: [name: string, text: string, price: (text: string) => { total: number; reactiveCost: number }[]][] = [
  ['millrace', millrace, (text) => priceQuantities(readSchedule(text), [july], { history: { maxKva: [3000] } })],
  [
    'kestrel',
    kestrel,
    (text) => priceQuantities(readSchedule(text), [march, april], { contract: { contractKw: 900 } }),
  ],
  [
    'tidewater',
    tidewater,
    (text) => priceBills(readSchedule(text), load, { periods: [{ from: '2026-06-16', to: '2026-07-16' }] }),
  ],
];

/** Slips at seeded places, none touching a digit. */
function slipsOf(text: string, count: number): string[] {
  let state = 20_260_716;
  const next = (below: number): number => (state = (state * 48_271) % 2_147_483_647) % below;
  const slips: string[] = [];
  while (slips.length < count) {
    const at = next(text.length - 1);
    if (/\d/.test(text.slice(at, at + 2))) continue;
    const [before, here, after] = [text.slice(0, at), text.slice(at, at + 1), text.slice(at + 1)];
    const slip = [before + after, before + here + here + after, before + after.slice(0, 1) + here + after.slice(1)][
      slips.length % 3
    ]!;
    slips.push(slip);
  }
  return slips;
}

describe('one-character slips', () => {
  it.each(works)('in %s are refused or change no bill', (_, text, price) => {
    const figures = (of: string): string =>
      JSON.stringify(price(of).map(({ total, reactiveCost }) => [total, reactiveCost]));
    const right = figures(text);
    let refused = 0;
    for (const slip of slipsOf(text, 150)) {
      try {
        expect(figures(slip), slip).toBe(right);
      } catch (error) {
        if (!(error instanceof ScheduleError) && !(error instanceof PriceError)) throw error;
        refused++;
      }
    }
    expect(refused).toBeGreaterThan(75);
  });
});
