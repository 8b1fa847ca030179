import { describe, expect, it } from 'vitest';
import { compilePricing, priceBills, priceQuantities, readSchedule } from '@/core/tariff';
import { amountsOf, buildSeries, valuesOf } from './build';
import { kestrel, millrace, millracePlain, tidewater } from './worked-schedules';

// Every figure of this file was worked by hand in the language's design, before there was any code of ours.

const july = { kwhPeak: 300_000, kwhOffPeak: 500_000, kvarh: 400_000, maxKva: 2100, leadNight: 900 };
const june = { history: { maxKva: [3000] } };

describe('Millrace, the whole language in one file', () => {
  it('prices July 2026 line by line', () => {
    const [bill] = priceQuantities(
      readSchedule(millrace),
      [{ from: '2026-07-01', to: '2026-08-01', quantities: july }],
      june,
    );
    expect(amountsOf(bill)).toEqual({
      service: 420,
      demand: 27_600,
      energyPeak: 42_600,
      energyOffPeak: 44_000,
      fuelRider: 2480,
      reactive: 1440,
      leading: 10.8,
      surcharge: 1142,
      minimum: 0,
      tax: 7181.57,
    });
    expect(bill!.total).toBe(126_874.37);
    expect(valuesOf(bill)).toMatchObject({ billedKva: 2400, excessKvarh: 80_000, pf: 0.89 });
  });

  it('finds what reactive energy costs, tax included', () => {
    const [bill] = priceQuantities(
      readSchedule(millrace),
      [{ from: '2026-07-01', to: '2026-08-01', quantities: july }],
      june,
    );
    expect(bill!.reactiveCost).toBe(2748.37);
    // The lines' parts add up to it: 1,440.00 + 10.80 + 1,142.00 and 6 % of them.
    const parts = Object.fromEntries(bill!.lines.map(({ id, reactivePart }) => [id, reactivePart]));
    expect(parts).toMatchObject({
      reactive: 1440,
      leading: 10.8,
      surcharge: 1142,
      tax: 155.57,
      demand: 0,
      energyPeak: 0,
    });
  });

  it('divides a bill across the new sheet by days', () => {
    const row = { from: '2026-07-16', to: '2026-08-16', quantities: july };
    for (const straddle of ['days', 'intervals']) {
      const schedule = readSchedule(millrace.replace('straddle: intervals', `straddle: ${straddle}`));
      const [bill] = priceQuantities(schedule, [row], june);
      expect(amountsOf(bill)).toMatchObject({ fuelRider: 1280, reactive: 2125.16, levy: 425.81, tax: 7176.23 });
      expect(bill!.total).toBe(126_780);
    }
  });
});

describe('Kestrel, kW adjusted by power factor, tiers by hours of use, minimum', () => {
  const march = { from: '2026-03-01', to: '2026-04-01', quantities: { maxKw: 1250, kwh: 510_000, kvarh: 340_000 } };
  const april = { from: '2026-04-01', to: '2026-05-01', quantities: { maxKw: 60, kwh: 9000, kvarh: 2000 } };
  const options = { contract: { contractKw: 900 } };

  it('prices March 2026, with a true tie in the energy line', () => {
    const [bill] = priceQuantities(readSchedule(kestrel), [march], options);
    expect(valuesOf(bill)).toMatchObject({ pf: 0.83, billedKw: 1385.5 });
    expect(amountsOf(bill)).toEqual({
      service: 95,
      demand: 17_180.2,
      energy: 38_528.38,
      fuelRider: 2101.2,
      minimum: 0,
      tax: 4632.38,
    });
    expect(bill!.total).toBe(62_537.16);
    // At unity 1,250 kW, 15,500.00 and 37,802.50: 59,938.60.
    expect(bill!.reactiveCost).toBe(2598.56);
  });

  it('raises a small April bill to the minimum', () => {
    const [, bill] = priceQuantities(readSchedule(kestrel), [march, april], options);
    expect(amountsOf(bill)).toEqual({
      service: 95,
      demand: 744,
      energy: 729,
      fuelRider: 35.82,
      minimum: 14_596.18,
      tax: 1296,
    });
    expect(bill!.total).toBe(17_496);
  });
});

describe('Tidewater, kvarh settled by day, leading at night, new prices inside the bill', () => {
  const load = buildSeries({
    from: '2026-06-01',
    to: '2026-08-01',
    timeZone: 'Europe/Oslo',
    stepMinutes: 30,
    powers: (local) => {
      const hour = local.getUTCHours();
      if (hour >= 23 || hour < 7) return [400, 0, 50];
      if (local.getUTCDay() === 0) return [100, 20, 0];
      return [500, local.getUTCMonth() === 5 ? 300 : 250, 0];
    },
  });
  const periods = [{ from: '2026-06-16', to: '2026-07-16' }];

  it('shares lines by what fell into each part', () => {
    const [bill] = priceBills(readSchedule(tidewater), load, { periods });
    expect(valuesOf(bill)).toEqual({ kwh: 310_400, excessKvarh: 31_200, leadNight: 12_000 });
    expect(amountsOf(bill)).toEqual({ fixed: 310, energy: 30_108.8, excess: 592.8, lead: 162 });
    expect(bill!.total).toBe(31_173.6);
    expect(bill!.reactiveCost).toBe(754.8);
  });

  it('or by days, where the sheet says so', () => {
    const [bill] = priceBills(readSchedule(tidewater.replace('straddle: intervals', 'straddle: days')), load, {
      periods,
    });
    expect(amountsOf(bill)).toMatchObject({ excess: 608.4 });
    expect(bill!.total).toBe(31_189.2);
  });

  it('gives the same totals without words', () => {
    const grid = { startMs: load.startMs, stepMinutes: 30, count: load.kwh.length };
    expect([...compilePricing(readSchedule(tidewater), grid, { periods }).totals(load)]).toEqual([31_173.6]);
  });
});

describe('Millrace without reactive lines, over the end of summer time', () => {
  it('counts 745 hours and shares by seasons, rider months and intervals', () => {
    const load = buildSeries({
      from: '2026-10-01',
      to: '2026-12-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 15,
      powers: () => [1000, 0, 0],
    });
    const [bill] = priceBills(readSchedule(millracePlain), load, {
      periods: [{ from: '2026-10-15', to: '2026-11-15' }],
      history: { maxKva: [4000] },
    });
    expect(valuesOf(bill)).toMatchObject({ allKwh: 745_000, billedKva: 3200, kwhPeak: 200_000 });
    expect(amountsOf(bill)).toEqual({
      service: 420,
      demand: 32_030.97,
      energyPeak: 27_520,
      energyOffPeak: 48_728,
      fuelRider: 2175.1,
      tax: 6652.44,
    });
    expect(bill!.total).toBe(117_526.51);
  });
});
