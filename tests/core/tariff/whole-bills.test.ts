import { describe, expect, it } from 'vitest';
import { priceBills, priceQuantities, readSchedule } from '@/core/tariff';
import { amountsOf, buildSeries, valuesOf } from './build';

// Invented schedules and loads; every bill worked by hand, line by line, from the text of the language.

const month = (from: string, to: string, quantities: Record<string, number>) => ({ from, to, quantities });

describe('a ratchet of the winters before, with tiers by hours of use', () => {
  const schedule = readSchedule(`schedule: fenholt
currency: EUR
timeZone: Europe/Vienna
inForce: 2025-01-01
demandWindow: 15 min
straddle: days
contract: { contractKw: { unit: kW, default: 600 } }
seasons: { winter: 12-01 to 02-28, summer: rest }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  winterKw: { past: maxKw, take: highest, over: last 11 periods, season: wholly winter }
  billedKw: { formula: max(maxKw; 0.80 * winterKw; 0.50 * contractKw), unit: kW, round: 1 }
  excessKvarh: { formula: excess(kvarh; 0.50 * kwh), unit: kvarh }
charges:
  service: { amount: 85.00, group: fixed }
  demand: { per: billedKw, rate: 11.35, group: demand }
  energy:
    per: kwh
    tiers:
      - { to: 200 * billedKw, rate: 0.0915 }
      - { to: 400 * billedKw, rate: 0.0640 }
      - { rate: 0.0485 }
    group: energy
  reactive: { per: excessKvarh, rate: 0.0213, group: reactive }
  tax: { percentOf: all above, rate: 20, group: tax }
`);
  const begins = (i: number): string => `${2026 + Math.floor(i / 12)}-${String((i % 12) + 1).padStart(2, '0')}-01`;
  const rows = Array.from({ length: 13 }, (_, i) =>
    month(begins(i), begins(i + 1), { kwh: 180_000, kvarh: 80_000, maxKw: 500 }),
  );
  rows[0]!.quantities = { kwh: 430_000, kvarh: 240_000, maxKw: 1003.4 };
  rows[1]!.quantities['maxKw'] = 700;
  rows[11]!.quantities = { kwh: 150_000, kvarh: 90_000, maxKw: 600 };
  rows[12]!.quantities = { kwh: 300_000, kvarh: 150_000, maxKw: 401.2 };
  const bills = priceQuantities(schedule, rows);

  // 1,003.4 -> 1,003 kW. Demand 1,003 x 11.35. Tiers end at 200,600 and 401,200 kWh: 200,600 x 0.0915 = 18,354.90, 200,600 x 0.0640 =
  // 12,838.40, 28,800 x 0.0485 = 1,396.80. 240,000 - 215,000 = 25,000 kvarh x 0.0213. 20 % of 44,591.65 = 8,918.33.
  it('bills the winter peak itself in its month, all three tiers reached', () => {
    expect(amountsOf(bills[0])).toEqual({
      service: 85,
      demand: 11_384.05,
      energy: 32_590.1,
      reactive: 532.5,
      tax: 8918.33,
    });
    // At unity without 532.50 and its tax: 532.50 x 1.2.
    expect(bills[0]).toMatchObject({ total: 53_509.98, reactiveCost: 639 });
  });

  // 0.80 x 1,003.4 = 802.72 -> 803 kW: 9,114.05; the first tier ends at 160,600 kWh: 14,694.90 + 19,400 x 0.0640 = 1,241.60. 80,000 kvarh
  // stay below 90,000. 20 % of 25,135.55.
  it('bills four fifths of it in July and widens the dear tier with it', () => {
    expect(valuesOf(bills[6])).toMatchObject({ winterKw: 1003.4, billedKw: 803 });
    expect(amountsOf(bills[6])).toEqual({ service: 85, demand: 9114.05, energy: 15_936.5, reactive: 0, tax: 5027.11 });
    expect(bills[6]).toMatchObject({ total: 30_162.66, reactiveCost: 0 });
  });

  // January is still among the eleven periods before December: 803 kW. 150,000 x 0.0915 = 13,725.00; 90,000 - 75,000 = 15,000 x 0.0213 =
  // 319.50; 20 % of 23,243.55 = 4,648.71; reactive 319.50 x 1.2.
  it('holds in December, the last month that sees it', () => {
    expect(amountsOf(bills[11])).toEqual({
      service: 85,
      demand: 9114.05,
      energy: 13_725,
      reactive: 319.5,
      tax: 4648.71,
    });
    expect(bills[11]).toMatchObject({ total: 27_892.26, reactiveCost: 383.4 });
  });

  // February 2026 (700) to December 2026 (600): 0.80 x 700 = 560 above 401.2 and 300. 560 x 11.35; 112,000 x 0.0915 = 10,248.00, 112,000 x
  // 0.0640 = 7,168.00, 76,000 x 0.0485 = 3,686.00; 150,000 kvarh are just allowed; 20 % of 27,543.00.
  it('is released the January after', () => {
    expect(valuesOf(bills[12])).toMatchObject({ winterKw: 700, billedKw: 560 });
    expect(amountsOf(bills[12])).toEqual({ service: 85, demand: 6356, energy: 21_102, reactive: 0, tax: 5508.6 });
    expect(bills[12]).toMatchObject({ total: 33_051.6, reactiveCost: 0 });
  });
});

describe('leading energy at night is never netted with lagging energy by day', () => {
  const schedule = readSchedule(`schedule: orbec
currency: EUR
timeZone: Europe/Paris
inForce: 2026-01-01
demandWindow: 15 min
straddle: days
windows:
  night: { days: every day, hours: 22:00-06:00 }
  day: { rest: night }
quantities:
  kwh: { sum: kwh, inEach: [day, night] }
  maxKva: { highest: kva }
  lagDay: { sum: excess(kvarhLagging; 0.40 * kwh), each: hour, in: day }
  leadNight: { sum: excess(kvarhLeading; 0.20 * kwh), each: hour, in: night }
charges:
  meter: { amount: 0.35 * hours, group: fixed }
  power: { per: maxKva, rate: 7.42, group: demand }
  energy: { per: kwh, rate: { day: 0.1187, night: 0.0764 }, group: energy }
  lagging: { per: lagDay, rate: 0.0228, group: reactive }
  leading: { per: leadNight, rate: 0.0171, group: reactive }
  tax: { percentOf: all above, rate: 5.5, group: tax }
`);
  const load = buildSeries({
    from: '2026-03-01',
    to: '2026-11-01',
    timeZone: 'Europe/Paris',
    stepMinutes: 15,
    powers: (local) => (local.getUTCHours() >= 22 || local.getUTCHours() < 6 ? [400, 0, 90] : [600, 300, 0]),
  });
  const [march] = priceBills(schedule, load, { periods: [{ from: '2026-03-01', to: '2026-04-01' }] });
  const [october] = priceBills(schedule, load, { periods: [{ from: '2026-10-01', to: '2026-11-01' }] });

  // 743 hours, 31 x 8 - 1 = 247 of night, 496 of day. hypot(600, 300) = 670.8204 x 7.42 = 4,977.487. 297,600 x 0.1187; 98,800 x 0.0764.
  // Each hour of day 300 - 240 = 60 kvarh beyond: 29,760 x 0.0228 = 678.528; each of night 90 - 80 = 10: 2,470 x 0.0171 = 42.237.
  // 5.5 % of 48,831.75 = 2,685.746.
  it('over a month with a day of 23 hours, the night window over midnight', () => {
    expect(valuesOf(march)).toMatchObject({ kwhDay: 297_600, kwhNight: 98_800, lagDay: 29_760, leadNight: 2470 });
    expect(amountsOf(march)).toEqual({
      meter: 260.05,
      power: 4977.49,
      energyDay: 35_325.12,
      energyNight: 7548.32,
      lagging: 678.53,
      leading: 42.24,
      tax: 2685.75,
    });
    // At unity 600 kVA: 4,452.00; 5.5 % of 47,585.49 = 2,617.202; total 50,202.69.
    expect(march).toMatchObject({ total: 51_517.5, reactiveCost: 1314.81 });
  });

  // 745 hours, 249 of night: 260.75; 99,600 x 0.0764 = 7,609.44; 2,490 x 0.0171 = 42.579; 5.5 % of 48,893.91 = 2,689.165.
  it('over a month with a day of 25 hours', () => {
    expect(valuesOf(october)).toMatchObject({ kwhDay: 297_600, kwhNight: 99_600, lagDay: 29_760, leadNight: 2490 });
    expect(amountsOf(october)).toEqual({
      meter: 260.75,
      power: 4977.49,
      energyDay: 35_325.12,
      energyNight: 7609.44,
      lagging: 678.53,
      leading: 42.58,
      tax: 2689.17,
    });
    // At unity 5.5 % of 47,647.31 = 2,620.602; total 50,267.91.
    expect(october).toMatchObject({ total: 51_583.08, reactiveCost: 1315.17 });
  });
});

describe('a new price sheet inside a bill with holidays and a day of 25 hours', () => {
  const schedule = readSchedule(`schedule: wattle
currency: AUD
timeZone: Australia/Sydney
inForce: 2025-07-01
demandWindow: 30 min
holidays: { calendar: AU-NSW }
straddle: intervals
windows:
  peak: { days: weekdays, hours: 14:00-20:00 }
  night: { days: every day, hours: 23:00-07:00 }
  shoulder: { rest: [peak, night] }
quantities:
  kwh: { sum: kwh, inEach: [peak, shoulder, night] }
  allKwh: { formula: total(kwh), unit: kWh }
  kvarh: { sum: kvarhLagging, in: peak }
  over: { formula: excess(kvarh; 0.33 * kwhPeak), unit: kvarh }
  maxKva: { highest: kva, in: peak }
charges:
  access: { amount: 9.80 * days, group: fixed }
  demand: { per: maxKva, rate: 8.15, group: demand }
  energy: { per: kwh, rate: { peak: 0.3010, shoulder: 0.2140, night: 0.1320 }, group: energy }
  reactive: { per: over, rate: 0.0525, group: reactive }
  levy: { per: allKwh, rate: 0.0081, group: tax }
  tax: { percentOf: all above, rate: 10, group: tax }
versions:
  2026-04-01:
    note: New sheet
    charges:
      access: { amount: 10.20 * days }
      energy: { rate: { peak: 0.3240 } }
      reactive: { rate: 0.0600 }
`);
  // Weekdays from 20 March to 19 April 2026: 8 in March; 13 in April less Good Friday (3 April) and Easter Monday (6 April): 11.
  const holidays = ['2026-04-03', '2026-04-06'];
  const load = buildSeries({
    from: '2026-03-01',
    to: '2026-05-01',
    timeZone: 'Australia/Sydney',
    stepMinutes: 30,
    powers: (local) => {
      const hour = local.getUTCHours();
      if (hour >= 23 || hour < 7) return [200, 0, 60];
      const isWorkday = local.getUTCDay() % 6 !== 0 && !holidays.includes(local.toISOString().slice(0, 10));
      return isWorkday && hour >= 14 && hour < 20 ? [500, 240, 0] : [350, 100, 0];
    },
  });

  // Peak 19 x 6 = 114 h, 48 in March and 66 in April; night 31 x 8 + 1 = 249 h (5 April has 25 hours); shoulder 745 - 114 - 249 = 382 h.
  // Access 9.80 x 12 days + 10.20 x 19 days. Demand hypot(500, 240) = 554.61699 x 8.15 = 4,520.128. Energy 24,000 x 0.3010 + 33,000 x 0.3240;
  // 133,700 x 0.2140; 49,800 x 0.1320. 27,360 - 0.33 x 57,000 = 8,550 kvarh, of which 48/114 at 0.0525 and 66/114 at 0.0600: 189.00 + 297.00.
  // Levy 240,500 x 0.0081; 10 % of 60,366.98.
  it('is shared by what was used before and after', () => {
    const [bill] = priceBills(schedule, load, { periods: [{ from: '2026-03-20', to: '2026-04-20' }] });
    expect(valuesOf(bill)).toMatchObject({ kwhPeak: 57_000, kwhShoulder: 133_700, kwhNight: 49_800, over: 8550 });
    expect(amountsOf(bill)).toEqual({
      access: 311.4,
      demand: 4520.13,
      energyPeak: 17_916,
      energyShoulder: 28_611.8,
      energyNight: 6573.6,
      reactive: 486,
      levy: 1948.05,
      tax: 6036.7,
    });
    // At unity 500 kVA: 4,075.00; without 486.00: 59,435.85 and 5,943.59 (10 % is 5,943.585): 65,379.44.
    expect(bill).toMatchObject({ total: 66_403.68, reactiveCost: 1024.24 });
  });
});
