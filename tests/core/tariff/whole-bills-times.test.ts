import { describe, expect, it } from 'vitest';
import { priceBills, priceQuantities, readSchedule } from '@/core/tariff';
import { amountsOf, buildSeries, valuesOf } from './build';

// Invented schedules and loads; every bill worked by hand, line by line, from the text of the language.

const month = (from: string, to: string, quantities: Record<string, number>) => ({ from, to, quantities });

describe('a grace period after the day of connection', () => {
  const schedule = readSchedule(`schedule: northfork
currency: CAD
timeZone: America/Vancouver
inForce: 2026-01-01
straddle: days
zeroKwh: { pf: 1 }
contract: { connectedOn: { unit: date } }
rates: { graceDays: 135 }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw, each: hour }
  pf: { formula: pf(kwh; kvarh), round: 0.01 }
  points: { formula: 100 * excess(0.90; pf), unit: points }
charges:
  service: { amount: 62.50, group: fixed }
  demand: { per: maxKw, rate: 13.10, group: demand }
  energy: { per: kwh, rate: 0.0677, group: energy }
  surcharge:
    { percentOf: [demand, energy], per: points, rate: 1, when: daysSince(connectedOn) >= graceDays, group: reactive }
  tax: { percentOf: all above, rate: 5, group: tax }
`);
  const quantities = { kwh: 200_000, kvarh: 150_000, maxKw: 800 };
  const price = (from: string, to: string) =>
    priceQuantities(schedule, [month(from, to, quantities)], { contract: { connectedOn: 20_260_115 } })[0]!;

  // 15 January to 29 May: 16 + 28 + 31 + 30 + 29 = 134 days. 800 x 13.10; 200,000 x 0.0677; 5 % of 24,082.50 = 1,204.125, a true tie.
  it('leaves out the surcharge on day 134', () => {
    const bill = price('2026-05-29', '2026-06-28');
    expect(amountsOf(bill)).toEqual({ service: 62.5, demand: 10_480, energy: 13_540, surcharge: 0, tax: 1204.13 });
    expect(bill).toMatchObject({ total: 25_286.63, reactiveCost: 0 });
  });

  // pf 0.80: ten points, 10 % of 24,020.00; 5 % of 26,484.50 = 1,324.225, a true tie.
  it('charges it from day 135 on', () => {
    const bill = price('2026-05-30', '2026-06-29');
    expect(amountsOf(bill)).toEqual({ service: 62.5, demand: 10_480, energy: 13_540, surcharge: 2402, tax: 1324.23 });
    expect(bill).toMatchObject({ total: 27_808.73, reactiveCost: 2522.1 });
  });
});

describe('a surcharge phased in by versions, capped', () => {
  const schedule = readSchedule(`schedule: riachuelo
currency: ARS
timeZone: America/Argentina/Buenos_Aires
inForce: 2024-10-01
straddle: days
zeroKwh: { ratio: 0 }
rates: { phase: 0.30 }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw, each: hour }
  points: { formula: 100 * excess(ratio(kvarh; kwh); 0.33), unit: points, round: 1 half down }
charges:
  demand: { per: maxKw, rate: 8250.50, group: demand }
  energy: { per: kwh, rate: 61.37, group: energy }
  surcharge: { percentOf: [demand, energy], rate: phase * min(40; 1.5 * points), group: reactive }
  tax: { percentOf: all above, rate: 21, group: tax }
versions:
  2025-05-01: { rates: { phase: 0.60 } }
  2025-12-01: { rates: { phase: 1 } }
`);
  const price = (from: string, to: string, kvarh: number) =>
    priceQuantities(schedule, [month(from, to, { kwh: 300_000, kvarh, maxKw: 1000 })])[0]!;
  // 1,000 x 8,250.50 + 300,000 x 61.37 = 26,661,500.00; at unity with 21 %: 32,260,415.00.
  const plain = { demand: 8_250_500, energy: 18_411_000 };

  // tan 0.495: 16.5 hundredths beyond 0.33, the half dropped: 16 x 1.5 % x 0.30 = 7.2 %. 21 % of 28,581,128.00.
  it('takes three tenths of it first', () => {
    const bill = price('2025-04-01', '2025-05-01', 148_500);
    expect(amountsOf(bill)).toEqual({ ...plain, surcharge: 1_919_628, tax: 6_002_036.88 });
    expect(bill).toMatchObject({ total: 34_583_164.88, reactiveCost: 2_322_749.88 });
  });

  // tan 0.4951: 16.51 -> 17; 25.5 % x 0.30 on 15 days and x 0.60 on 15: 11.475 % = 3,059,407.125, a true tie. 21 % of 29,720,907.13.
  it('takes both shares by days in the bill across the step', () => {
    const bill = price('2025-04-16', '2025-05-16', 148_530);
    expect(amountsOf(bill)).toEqual({ ...plain, surcharge: 3_059_407.13, tax: 6_241_390.5 });
    expect(bill).toMatchObject({ total: 35_962_297.63, reactiveCost: 3_701_882.63 });
  });

  // tan 0.70: 37 x 1.5 = 55.5 %, capped at 40 %. 21 % of 37,326,100.00.
  it('takes all of it in the end, up to the cap', () => {
    const bill = price('2025-12-01', '2026-01-01', 210_000);
    expect(amountsOf(bill)).toEqual({ ...plain, surcharge: 10_664_600, tax: 7_838_481 });
    expect(bill).toMatchObject({ total: 45_164_581, reactiveCost: 12_904_166 });
  });
});

describe('a bill across two rider months in a currency of three decimals', () => {
  const schedule = readSchedule(`schedule: failaka
currency: KWD
timeZone: Asia/Kuwait
inForce: 2026-01-01
straddle: days
rates:
  fuel: { months: { 2026-01: 0.00412, 2026-02: 0.00398 } }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  excessKvarh: { formula: excess(kvarh; 0.60 * kwh), unit: kvarh }
charges:
  service: { amount: 12.500, group: fixed }
  energy: { per: kwh, rate: 0.0185, group: energy }
  fuelRider: { per: kwh, rate: fuel, group: adjustment }
  reactive: { per: excessKvarh, rate: 0.0021, group: reactive }
  rebate: { percentOf: [energy], rate: -2.5, group: adjustment }
`);

  // 17 of 30 days in January, 13 in February: 123,456 x (0.00412 x 17 + 0.00398 x 13) / 30 = 501.14906. 123,456 x 0.0185 = 2,283.936.
  // 90,000 - 74,073.6 = 15,926.4 x 0.0021 = 33.44544. -2.5 % of 2,283.936 = -57.0984.
  it('weighs the riders by days and rounds to the fils', () => {
    const [bill] = priceQuantities(schedule, [month('2026-01-15', '2026-02-14', { kwh: 123_456, kvarh: 90_000 })]);
    expect(amountsOf(bill)).toEqual({
      service: 12.5,
      energy: 2283.936,
      fuelRider: 501.149,
      reactive: 33.445,
      rebate: -57.098,
    });
    expect(bill).toMatchObject({ total: 2773.932, reactiveCost: 33.445 });
  });
});

describe('a rolling demand window and the mean of the two highest days', () => {
  const schedule = readSchedule(`schedule: delmar
currency: USD
timeZone: America/New_York
inForce: 2026-01-01
straddle: days
demandWindow: 30 min rolling every 5 min
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
  twoDays: { highest: kw, count: 2, days: distinct }
  kvarAtPeak: { value: kvarLagging, at: maxKw }
  overKvar: { formula: excess(kvarAtPeak; 0.30 * maxKw), unit: kvar }
charges:
  service: { amount: 40, group: fixed }
  demand: { per: twoDays, rate: 14.20, group: demand }
  energy: { per: kwh, rate: 0.0925, group: energy }
  reactive: { per: overKvar, rate: 1.85, group: reactive }
  tax: { percentOf: all above, rate: 6.25, group: tax }
`);
  // 300 kW; on 4 May 900 kW from 10:10 to 10:35; on 5 May 850 kW from 14:50 to 15:20, with 400 kvar and then 200.
  const load = buildSeries({
    from: '2026-05-04',
    to: '2026-05-07',
    timeZone: 'America/New_York',
    stepMinutes: 5,
    powers: (local) => {
      const minute = local.getUTCHours() * 60 + local.getUTCMinutes();
      if (local.getUTCDate() === 4 && minute >= 610 && minute < 635) return [900, 0, 0];
      if (local.getUTCDate() === 5 && minute >= 890 && minute < 920) return [850, minute < 905 ? 400 : 200, 0];
      return [300, 0, 0];
    },
  });

  // 4 May: five of six intervals, (5 x 900 + 300) / 6 = 800. 5 May: the half hour of 14:50 whole, 850, with 300 kvar; 300 - 255 = 45 beyond.
  // Mean 825 x 14.20. 21,600 + 25 min x 600 kW + 30 min x 550 kW = 22,125 kWh x 0.0925 = 2,046.5625. 45 x 1.85. 6.25 % of 13,884.81 = 867.80.
  it('bills a peak that blocks from the full half hour would halve', () => {
    const [bill] = priceBills(schedule, load, { periods: [{ from: '2026-05-04', to: '2026-05-07' }] });
    const values = valuesOf(bill);
    expect(values['maxKw']).toBeCloseTo(850, 9);
    expect(bill!.quantities['maxKw']!.at).toBe('2026-05-05T18:50:00.000Z');
    expect(values['twoDays']).toBeCloseTo(825, 9);
    expect(values['kvarAtPeak']).toBeCloseTo(300, 9);
    expect(amountsOf(bill)).toEqual({ service: 40, demand: 11_715, energy: 2046.56, reactive: 83.25, tax: 867.8 });
    // At unity without 83.25: 6.25 % of 13,801.56 = 862.5975; total 14,664.16.
    expect(bill).toMatchObject({ total: 14_752.61, reactiveCost: 88.45 });
  });
});

describe('a ratchet told by history hides what power factor does', () => {
  const schedule = readSchedule(`schedule: haugland
currency: NOK
timeZone: Europe/Oslo
inForce: 2026-01-01
straddle: days
demandWindow: 60 min
seasons: { winter: 11-01 to 03-31, summer: rest }
quantities:
  kwh: { sum: kwh }
  maxKva: { highest: kva }
  winterKva: { past: maxKva, take: mean of 2 highest, over: last 11 periods, season: mostly winter }
  billedKva: { formula: max(maxKva; 0.70 * winterKva), unit: kVA }
charges:
  demand: { per: billedKva, rate: { winter: 61.00, summer: 38.50 }, group: demand }
  energy:
    per: kwh
    tiers:
      - { to: 300 * billedKva, rate: 0.44 }
      - { rate: 0.39 }
    group: energy
  tax: { percentOf: all above, rate: 25, group: tax }
`);
  const load = buildSeries({
    from: '2026-06-01',
    to: '2026-08-01',
    timeZone: 'Europe/Oslo',
    stepMinutes: 30,
    powers: (local) => (local.getUTCMonth() === 5 ? [800, 600, 0] : [1000, 750, 0]),
  });
  const periods = [
    { from: '2026-06-01', to: '2026-07-01' },
    { from: '2026-07-01', to: '2026-08-01' },
  ];
  // Of the months before, December to May, 1,600 and 1,400 kVA are the highest of winter; the 2,000 of May are of summer.
  const bills = priceBills(schedule, load, { periods, history: { maxKva: [1600, 1200, 900, 1400, 800, 2000] } });

  // hypot(800, 600) = 1,000 kVA, below 0.70 x 1,500 = 1,050, and 800 at unity too. 1,050 x 38.50; 720 h x 800 = 576,000 kWh: 315,000 x 0.44 +
  // 261,000 x 0.39; 25 % of 280,815.00.
  it('so that unity brings nothing in June', () => {
    expect(valuesOf(bills[0])).toMatchObject({ maxKva: 1000, winterKva: 1500, billedKva: 1050, kwh: 576_000 });
    expect(amountsOf(bills[0])).toEqual({ demand: 40_425, energy: 240_390, tax: 70_203.75 });
    expect(bills[0]).toMatchObject({ total: 351_018.75, reactiveCost: 0 });
  });

  // hypot(1,000, 750) = 1,250 kVA, at unity 1,050. 1,250 x 38.50; 744,000 kWh: 375,000 x 0.44 + 369,000 x 0.39 = 308,910.00; 25 % of 357,035.00
  // = 89,258.75. At unity 40,425.00; 315,000 x 0.44 + 429,000 x 0.39 = 305,910.00; 25 % of 346,335.00 = 86,583.75; total 432,918.75.
  it('and July only down to it, in demand and in the dear tier', () => {
    expect(amountsOf(bills[1])).toEqual({ demand: 48_125, energy: 308_910, tax: 89_258.75 });
    expect(bills[1]).toMatchObject({ total: 446_293.75, reactiveCost: 13_375 });
  });
});
