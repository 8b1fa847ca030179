import { describe, expect, it } from 'vitest';
import { priceBills, priceQuantities, readSchedule } from '@/core/tariff';
import { amountsOf, buildSeries, valuesOf } from './build';

// Invented schedules and loads; every bill worked by hand, line by line, from the text of the language.

const month = (from: string, to: string, quantities: Record<string, number>) => ({ from, to, quantities });

describe('a cliff on the whole leading energy, the first fault of a year waived', () => {
  const schedule = readSchedule(`schedule: karasu
currency: TRY
timeZone: Europe/Istanbul
inForce: 2026-01-01
straddle: days
quantities:
  kwh: { sum: kwh }
  lag: { sum: kvarhLagging }
  lead: { sum: kvarhLeading }
  fault: { given: flag, default: 0 }
  waivers: { past: fault, take: sum, over: earlier periods of this year }
  lagBilled: { formula: if(lag > 0.20 * kwh; lag; 0), unit: kvarh }
  leadBilled: { formula: if(lead > 0.15 * kwh; lead; 0), unit: kvarh }
charges:
  energy: { per: kwh, rate: 2.18345, group: energy }
  lagging: { per: lagBilled, rate: 0.75120, when: not (fault = 1 and waivers = 0), group: reactive }
  leading: { per: leadBilled, rate: 0.75120, when: not (fault = 1 and waivers = 0), group: reactive }
  fund: { percentOf: [energy], rate: 5, group: adjustment }
  tax: { percentOf: all above, rate: 20, group: tax }
`);
  // 0.15 x 67,483.38 = 10,122.507 kvarh are free.
  const kwh = 67_483.38;
  const bills = priceQuantities(schedule, [
    month('2026-01-01', '2026-02-01', { kwh, lag: 300.84, lead: 10_122.5 }),
    month('2026-02-01', '2026-03-01', { kwh, lag: 300.84, lead: 10_122.51 }),
    month('2026-03-01', '2026-04-01', { kwh, lag: 300.84, lead: 14_363.04, fault: 1 }),
    month('2026-04-01', '2026-05-01', { kwh, lag: 300.84, lead: 14_363.04, fault: 1 }),
  ]);
  // 67,483.38 x 2.18345 = 147,346.586; 5 % = 7,367.330; 20 % of 154,713.92 = 30,942.784.
  const plain = { energy: 147_346.59, lagging: 0, leading: 0, fund: 7367.33, tax: 30_942.78 };

  it('charges nothing just under the limit', () => {
    expect(amountsOf(bills[0])).toEqual(plain);
    expect(bills[0]).toMatchObject({ total: 185_656.7, reactiveCost: 0 });
  });

  // 10,122.51 x 0.75120 = 7,604.0295; 20 % of 162,317.95.
  it('charges every kvarh just over it', () => {
    expect(amountsOf(bills[1])).toEqual({ ...plain, leading: 7604.03, tax: 32_463.59 });
    expect(bills[1]).toMatchObject({ total: 194_781.54, reactiveCost: 9124.84 });
  });

  it('waives the first fault', () => {
    expect(amountsOf(bills[2])).toEqual(plain);
    expect(bills[2]).toMatchObject({ total: 185_656.7, reactiveCost: 0 });
  });

  // 14,363.04 x 0.75120 = 10,789.516; 20 % of 165,503.44 = 33,100.688. At unity 185,656.70.
  it('charges the second', () => {
    expect(amountsOf(bills[3])).toEqual({ ...plain, leading: 10_789.52, tax: 33_100.69 });
    expect(bills[3]).toMatchObject({ total: 198_604.13, reactiveCost: 12_947.43 });
  });
});

describe('a bill in whole yen: base charge by power factor, a negative rider, a minimum', () => {
  const schedule = readSchedule(`schedule: hinode
currency: JPY
timeZone: Asia/Tokyo
inForce: 2026-01-01
straddle: days
zeroKwh: { pf: 1 }
contract: { contractKw: { unit: kW } }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  pfPercent: { formula: 100 * pf(kwh; kvarh), unit: points, round: 1 }
charges:
  base: { amount: 1630.80 * contractKw * (185 - pfPercent) / 100, group: demand }
  energy: { per: kwh, rate: 16.54, group: energy }
  rider: { per: kwh, rate: -0.37, group: adjustment }
  levy: { per: kwh, rate: 3.49, group: tax }
  minimum: { topUp: all above, to: 5000000, group: adjustment }
  tax: { percentOf: all above, rate: 10, round: 1 down, group: tax }
`);
  const bills = priceQuantities(
    schedule,
    [
      month('2026-04-01', '2026-05-01', { kwh: 512_345.6, kvarh: 301_200 }),
      month('2026-05-01', '2026-06-01', { kwh: 1000, kvarh: 0 }),
    ],
    { contract: { contractKw: 3000 } },
  );

  // 512,345.6 / hypot(512,345.6, 301,200) = 0.86207 -> 86 %. 1,630.80 x 3,000 x 0.99; 8,474,196.2; -189,567.9; 1,788,086.1; 10 % of 14,916,190.
  it('needs no minimum in a month of work', () => {
    expect(amountsOf(bills[0])).toEqual({
      base: 4_843_476,
      energy: 8_474_196,
      rider: -189_568,
      levy: 1_788_086,
      minimum: 0,
      tax: 1_491_619,
    });
    // At unity x 0.85: 4,158,540; 10 % of 14,231,254 is 1,423,125.4, down; 15,654,379.
    expect(bills[0]).toMatchObject({ total: 16_407_809, reactiveCost: 753_430 });
  });

  // 4,158,540 + 16,540 - 370 + 3,490 = 4,178,200.
  it('is raised to it in a month at rest', () => {
    expect(amountsOf(bills[1])).toEqual({
      base: 4_158_540,
      energy: 16_540,
      rider: -370,
      levy: 3490,
      minimum: 821_800,
      tax: 500_000,
    });
    expect(bills[1]).toMatchObject({ total: 5_500_000, reactiveCost: 0 });
  });
});

describe('taxes on sums whose rates change inside the bill', () => {
  const schedule = readSchedule(`schedule: warta
currency: PLN
timeZone: Europe/Warsaw
inForce: 2026-01-01
straddle: days
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  excessKvarh: { formula: excess(kvarh; 0.40 * kwh), unit: kvarh }
charges:
  service: { amount: 210, group: fixed }
  energy: { per: kwh, rate: 0.5200, group: energy }
  reactive: { per: excessKvarh, rate: 0.031, group: reactive }
  tax: { percentOf: all above, rate: 22, group: tax }
versions:
  2026-07-01:
    charges:
      energy: { rate: 0.5500 }
      reactive: { rate: 0.040 }
      excise: { amount: 0.005 * kwh, group: tax, before: tax }
      tax: { rate: 23 }
`);

  // 20 June to 20 July: 11 and 19 of 30 days. Energy 240,000 x 0.5200 x 11/30 = 45,760.00 and 240,000 x 0.5500 x 19/30 = 83,600.00. 116,000 -
  // 96,000 = 20,000 kvarh: x 0.031 x 11/30 = 227.33 and x 0.040 x 19/30 = 506.67. Excise only after: 1,200 x 19/30 = 760.00. Tax 22 % of 77.00 +
  // 45,760.00 + 227.33 = 10,134.15 and 23 % of 133.00 + 83,600.00 + 506.67 + 760.00 = 19,549.92: 29,684.08.
  it('tax each part of the days by its own rate', () => {
    const [bill] = priceQuantities(schedule, [month('2026-06-20', '2026-07-20', { kwh: 240_000, kvarh: 116_000 })]);
    expect(amountsOf(bill)).toEqual({ service: 210, energy: 129_360, reactive: 734, excise: 760, tax: 29_684.08 });
    // At unity without 734.00; tax 10,084.14 + 19,433.39 = 29,517.53; total 159,847.53.
    expect(bill).toMatchObject({ total: 160_748.08, reactiveCost: 900.55 });
  });
});

describe('an hourly excess whose price grows with every month it lasts', () => {
  const schedule = readSchedule(`schedule: quindio
currency: COP
timeZone: America/Bogota
inForce: 2026-01-01
rounding: 0.01
straddle: days
quantities:
  kwh: { sum: kwh }
  over: { sum: excess(kvarhLagging; 0.50 * kwh), each: hour }
  lead: { sum: kvarhLeading }
  penalKvarh: { formula: over + lead, unit: kvarh }
  fault: { given: flag, default: 0 }
  run: { past: penalKvarh > 0, take: streak, unit: months }
  multiplier: { formula: max(1; min(12; run)) }
charges:
  energy: { per: kwh, rate: 512.75, group: energy }
  contribution: { percentOf: [energy], rate: 20, group: adjustment }
  penalty: { per: penalKvarh, rate: 45.20 * multiplier, when: fault = 0, group: reactive }
`);
  // 100 kW always; kvar by month, January first. In February 20 kvar lead in the even hours and 90 lag in the odd ones: never netted.
  const kvar = [60, 0, 60, 60, 50, 60];
  const load = buildSeries({
    from: '2026-01-01',
    to: '2026-07-01',
    timeZone: 'America/Bogota',
    stepMinutes: 60,
    powers: (local) => {
      if (local.getUTCMonth() === 1) return local.getUTCHours() % 2 === 0 ? [100, 0, 20] : [100, 90, 0];
      return [100, kvar[local.getUTCMonth()]!, 0];
    },
  });
  const begins = (i: number): string => `2026-${String(i + 1).padStart(2, '0')}-01`;
  const periods = kvar.map((_, i) => ({ from: begins(i), to: begins(i + 1) }));
  const given = kvar.map((_, i) => ({ fault: i === 2 ? 1 : 0 }));
  const bills = priceBills(schedule, load, { periods, given });

  // January 744 h x 10 = 7,440 kvarh x 45.20 x 1. February 336 h x (90 - 50) + 336 h x 20 = 20,160 x 45.20 x 2. March waived, but it counts.
  // April 720 h x 10 = 7,200 x 45.20 x 4. May 50 of 50: none. June begins again: 7,200 x 45.20 x 1.
  it('multiplies by the months in a row, waived ones too, and begins again after a clean month', () => {
    expect(bills.map((bill) => valuesOf(bill)['run'])).toEqual([1, 2, 3, 4, 0, 1]);
    expect(bills.map((bill) => amountsOf(bill)['penalty'])).toEqual([336_288, 1_822_464, 0, 1_301_760, 0, 325_440]);
  });

  // January 74,400 x 512.75 = 38,148,600; 20 %; February 67,200 x 512.75 = 34,456,800; April 72,000 x 512.75 = 36,918,000.
  it('stands beside energy and contribution, to the cent', () => {
    expect(amountsOf(bills[0])).toEqual({ energy: 38_148_600, contribution: 7_629_720, penalty: 336_288 });
    expect(bills[0]).toMatchObject({ total: 46_114_608, reactiveCost: 336_288 });
    expect(amountsOf(bills[1])).toEqual({ energy: 34_456_800, contribution: 6_891_360, penalty: 1_822_464 });
    expect(bills[1]).toMatchObject({ total: 43_170_624, reactiveCost: 1_822_464 });
    expect(bills.map(({ total }) => total).slice(2)).toEqual([45_778_320, 45_603_360, 45_778_320, 44_627_040]);
    expect(bills.map(({ reactiveCost }) => reactiveCost).slice(2)).toEqual([0, 1_301_760, 0, 325_440]);
  });
});
