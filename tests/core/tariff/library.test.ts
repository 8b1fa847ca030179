import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  checkExamples,
  describeSchedule,
  priceBills,
  priceQuantities,
  readSchedule,
  type Schedule,
} from '@/core/tariff';
import { amountsOf, buildSeries, valuesOf } from './build';

const folder = path.resolve('tariffs');
const read = (id: string): Schedule => readSchedule(readFileSync(path.join(folder, `${id}.yaml`), 'utf8'));

describe('the files of the library', () => {
  const files = readdirSync(folder).filter((name) => name.endsWith('.yaml'));

  it.each(files)('%s is read without notes, named like its file, its source stated', (name) => {
    const schedule = read(name.replace(/\.yaml$/, ''));
    expect(`${schedule.id}.yaml`).toBe(name);
    expect(schedule.notes).toEqual([]);
    expect(schedule.source.status).toBeDefined();
    expect(() => JSON.stringify(describeSchedule(schedule))).not.toThrow();
  });

  it.each(files)('%s carries worked bills and gives them', (name) => {
    const results = checkExamples(read(name.replace(/\.yaml$/, '')));
    expect(results.length).toBeGreaterThan(0);
    for (const { title, problem, figures, fits } of results) {
      expect(problem, title).toBeUndefined();
      expect(
        figures.filter((figure) => !figure.fits),
        title,
      ).toEqual([]);
      expect(fits, title).toBe(true);
    }
  });
});

describe('ostrander-lp4, by hand', () => {
  // July 2026, sheet 15, summer. pf = 1,030,000 / hypot(1,030,000, 520,000) = 0.89269 -> 0.893; 2,400 x 0.95 / 0.893 = 2,553.19 -> 2,553.2 kW,
  // above 0.60 x 3,100 of last August and 0.40 x 2,500. Demand 2,553.2 x 17.70; energy 420,000 x 0.0712 and 610,000 x 0.0415; credit
  // -1.5 % of 100,410.64; fuel 1,030,000 x 0.00793; tax 4.5 % of 107,482.38.
  it('prices July from printed quantities', () => {
    const row = {
      from: '2026-07-01',
      to: '2026-08-01',
      quantities: { kwhOnPeak: 420_000, kwhOffPeak: 610_000, kvarh: 520_000, maxKw: 2400 },
    };
    const history = { adjustedKw: [3100, 2900, 2000, 2000, 2000, 2000, 2000, 2000, 2000, 2000, 2500] };
    const [bill] = priceQuantities(read('ostrander-lp4'), [row], { history });
    expect(valuesOf(bill)).toMatchObject({ powerFactor: 0.893, adjustedKw: 2553.2, summerKw: 3100, billedKw: 2553.2 });
    expect(amountsOf(bill)).toEqual({
      customer: 410,
      demand: 45_191.64,
      energyOnPeak: 29_904,
      energyOffPeak: 25_315,
      primaryCredit: -1506.16,
      fuelRider: 8167.9,
      tax: 4836.71,
    });
    expect(bill!.total).toBe(112_319.09);
    // At unity 2,400 kW: demand 42,480.00, credit -1,465.49, tax 4,716.51, total 109,527.92.
    expect(bill!.reactiveCost).toBe(2791.17);
  });

  // February 2026, 2,000 kW and 1,500 kvar steady: pf 0.8; 2,000 x 0.95 / 0.8 = 2,375 kW. 20 weekdays less Presidents' Day, 8 hours
  // each: 152 hours on peak, 520 off. 2,375 x 12.40; 304,000 x 0.0598; 1,040,000 x 0.0389; -1.5 % of 88,085.20; 1,344,000 x 0.00731;
  // 4.5 % of 96,973.56. At unity 24,800.00, -1,251.53 and 4,157.70: 96,551.01.
  it('prices February from intervals', () => {
    const load = buildSeries({
      from: '2026-02-01',
      to: '2026-03-01',
      timeZone: 'America/Chicago',
      stepMinutes: 15,
      powers: () => [2000, 1500, 0],
    });
    const [bill] = priceBills(read('ostrander-lp4'), load, { periods: [{ from: '2026-02-01', to: '2026-03-01' }] });
    expect(amountsOf(bill)).toEqual({
      customer: 385,
      demand: 29_450,
      energyOnPeak: 18_179.2,
      energyOffPeak: 40_456,
      primaryCredit: -1321.28,
      fuelRider: 9824.64,
      tax: 4363.81,
    });
    expect(bill!.total).toBe(101_337.37);
    expect(bill!.reactiveCost).toBe(4786.36);
    const demand = bill!.lines.find(({ id }) => id === 'demand');
    expect(demand).toMatchObject({
      quantity: 2375,
      unit: 'kW',
      rate: 12.4,
      reactivePart: 4650,
      clause: '6b',
      uses: ['billedKw'],
    });
    expect(demand!.explanation).toBe('Demand: 2,375.0 kW x 12.40 USD per kW = 29,450.00 USD (clause 6b).');
  });
});

describe('ostrander-hv3, by hand', () => {
  // February 2026, 2,000 kW and 1,500 kvar steady: 2,500 kVA, above 0.50 x 3,000; 152 hours on peak, 520 off. 2,500 x 11.10; 304,000 x
  // 0.0617; 1,040,000 x 0.0399; 1,344,000 x 0.00731; 4.5 % of 98,467.44. At unity 2,000 kVA: 22,200.00, tax 4,181.28, 97,098.72.
  it('prices February from intervals', () => {
    const period = { from: '2026-02-01', to: '2026-03-01' };
    const powers = () => [2000, 1500, 0] as const;
    const load = buildSeries({ ...period, timeZone: 'America/Chicago', stepMinutes: 15, powers });
    const [bill] = priceBills(read('ostrander-hv3'), load, { periods: [period] });
    expect(amountsOf(bill)).toEqual({
      customer: 640,
      power: 27_750,
      energyOnPeak: 18_756.8,
      energyOffPeak: 41_496,
      fuelRider: 9824.64,
      tax: 4431.03,
    });
    expect(bill!.total).toBe(102_898.47);
    expect(bill!.reactiveCost).toBe(5799.75);
  });
});

describe('millrace-kva, by hand', () => {
  // January 2026, winter. max(1,950; 0.75 x 2,700 = 2,025; 0.60 x 1,800) = 2,025 kVA; beyond the contract 150 kVA. 4.60 x 31; 2,025 x
  // 6.90; 150 x 9.80; 90,000 x 0.1685; 260,000 x 0.1290; 150,000 x 0.0865; 500,000 x 0.0126; no top-up above 9,000; 23 % of 83,565.10.
  it('prices January from printed quantities', () => {
    const row = {
      from: '2026-01-01',
      to: '2026-02-01',
      quantities: { kwhPeak: 90_000, kwhFull: 260_000, kwhNight: 150_000, maxKva: 1950 },
    };
    const [bill] = priceQuantities(read('millrace-kva'), [row], { history: { maxKva: [2700, 1800] } });
    expect(amountsOf(bill)).toEqual({
      service: 142.6,
      power: 13_972.5,
      overrun: 1470,
      energyPeak: 15_165,
      energyFull: 33_540,
      energyNight: 12_975,
      networkRider: 6300,
      minimum: 0,
      tax: 19_219.97,
    });
    expect(bill!.total).toBe(102_785.07);
  });

  // Steady 900 kW with 1,200 kvar drawn: 1,500 kVA, at unity 900, billed 0.60 x 1,800 = 1,080. April 2026, summer: power falls from
  // 1,500 x 5.35 = 8,025.00 to 5,778.00; with 23 %: 2,247.00 x 1.23 = 2,763.81.
  it('shows the reactive part of a kVA demand, down to the contract minimum', () => {
    const load = buildSeries({
      from: '2026-04-01',
      to: '2026-05-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 15,
      powers: () => [900, 1200, 0],
    });
    const [bill] = priceBills(read('millrace-kva'), load, { periods: [{ from: '2026-04-01', to: '2026-05-01' }] });
    expect(bill!.lines.find(({ id }) => id === 'power')).toMatchObject({ amount: 8025, reactivePart: 2247 });
    expect(bill!.reactiveCost).toBe(2763.81);
  });
});

describe('tidewater-kvarh, by hand', () => {
  // January 2026: 1,416.5 x 62; 720,000 x 0.612; 38,500 x 0.330; 6,200 x 0.205; 720,000 x 0.0744; 25 % of 597,657.00.
  it('prices January from printed quantities', () => {
    const row = {
      from: '2026-01-01',
      to: '2026-02-01',
      quantities: { kwh: 720_000, maxKw: 1416.5, excessKvarh: 38_500, leadNight: 6200 },
    };
    const [bill] = priceQuantities(read('tidewater-kvarh'), [row]);
    expect(amountsOf(bill)).toEqual({
      fixed: 1650,
      power: 87_823,
      energy: 440_640,
      reactive: 12_705,
      leading: 1271,
      levy: 53_568,
      tax: 149_414.25,
    });
    expect(bill!.total).toBe(747_071.25);
    // 12,705.00 + 1,271.00 and a quarter of them.
    expect(bill!.reactiveCost).toBe(17_470);
  });

  // Two hours over: 1,000 kWh with 450 kvarh (100 beyond 350), 400 kWh with 150 (10 beyond 140), never netted with hours below; the
  // night hour with 900 kvarh drawn is outside the day. 25 kvarh delivered in a night hour count, those at noon do not. Steady else.
  it('settles hour by hour from intervals', () => {
    const load = buildSeries({
      from: '2026-01-01',
      to: '2026-02-01',
      timeZone: 'Europe/Oslo',
      stepMinutes: 15,
      powers: (local) => {
        const hour = local.getUTCHours();
        if (local.getUTCDate() !== 14) return [400, 0, 0];
        if (hour === 9) return [1000, 450, 0];
        if (hour === 10) return [400, 150, 0];
        if (hour === 12) return [400, 0, 60];
        if (hour === 23) return [400, 900, 0];
        return hour === 3 ? [400, 0, 25] : [400, 0, 0];
      },
    });
    const [bill] = priceBills(read('tidewater-kvarh'), load, { periods: [{ from: '2026-01-01', to: '2026-02-01' }] });
    const { kwh, maxKw, excessKvarh, leadNight } = valuesOf(bill);
    expect(excessKvarh).toBeCloseTo(110, 9);
    expect([kwh, maxKw, leadNight]).toEqual([744 * 400 + 600, 600, 25]);
    expect(bill!.quantities['excessKvarh']!.explanation).toContain(
      '2 of them have a part; the most, 100 kvarh, on Wednesday 14 January 2026 09:00 to 10:00.',
    );
  });
});
