import fc from 'fast-check';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import {
  compilePricing,
  PriceError,
  priceBills,
  priceQuantities,
  readSchedule,
  type PriceOptions,
  type Schedule,
} from '@/core/tariff';
import type { LoadSeries } from '@/core/load';
import { buildSchedule, buildSeries, valuesOf } from './build';

const ids = ['ostrander-lp4', 'millrace-kva', 'tidewater-kvarh'];
const read = (id: string): Schedule => readSchedule(readFileSync(path.resolve('tariffs', `${id}.yaml`), 'utf8'));
const periods = [
  { from: '2025-12-01', to: '2026-01-01' },
  { from: '2026-01-01', to: '2026-01-25' },
  { from: '2026-01-25', to: '2026-02-25' },
  { from: '2026-02-25', to: '2026-04-10' },
];
const gridOf = (load: LoadSeries) => ({ startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length });

function seededLoad(seed: number, timeZone: string): LoadSeries {
  let state = seed;
  const next = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
  const load = buildSeries({
    from: '2025-12-01',
    to: '2026-04-10',
    timeZone,
    stepMinutes: 15,
    powers: () => {
      const kw = 500 + 2500 * next();
      return next() < 0.7 ? [kw, kw * next(), 0] : [kw, 0, 300 * next()];
    },
  });
  for (let i = 0; i < 40; i++) load.quality[Math.floor(next() * load.kwh.length)] = next() < 0.5 ? 1 : 2;
  for (const [i, quality] of load.quality.entries())
    if (quality === 2) load.kwh[i] = load.kvarhLagging[i] = load.kvarhLeading[i] = NaN;
  return load;
}

describe('compilePricing', () => {
  it.each(ids)('%s: totals are those of the bills, call after call', (id) => {
    const schedule = read(id);
    const options: PriceOptions = { periods };
    const first = seededLoad(11, schedule.timeZone);
    const pricing = compilePricing(schedule, gridOf(first), options);
    for (const seed of [11, 23, 11]) {
      const load = seededLoad(seed, schedule.timeZone);
      const bills = priceBills(schedule, load, options);
      expect([...pricing.totals(load)]).toEqual(bills.map(({ total }) => total));
      expect(pricing.bills(load)).toEqual(bills);
    }
  });

  it.each(ids)('%s: keeps what does not depend on kvar where the caller says so', (id) => {
    const schedule = read(id);
    const load = seededLoad(5, schedule.timeZone);
    const pricing = compilePricing(schedule, gridOf(load), { periods });
    pricing.totals(load);
    const changed = {
      ...load,
      kvarhLagging: load.kvarhLagging.map((kvarh) => kvarh / 3),
      kvarhLeading: load.kvarhLeading.map((kvarh) => kvarh + 7),
    };
    const kept = pricing.totals(changed, { isActiveUnchanged: true });
    expect([...kept]).toEqual(priceBills(schedule, changed, { periods }).map(({ total }) => total));
    expect([...kept]).not.toEqual([...pricing.totals(load)]);
  });

  it('refuses a load off its grid', () => {
    const schedule = read('tidewater-kvarh');
    const load = seededLoad(3, schedule.timeZone);
    const pricing = compilePricing(schedule, gridOf(load), { periods });
    expect(() => pricing.totals({ ...load, startMs: load.startMs + 900_000 })).toThrow(PriceError);
  });

  it('prices no periods as no bills', () => {
    const schedule = read('tidewater-kvarh');
    const load = seededLoad(3, schedule.timeZone);
    expect(priceBills(schedule, load, { periods: [] })).toEqual([]);
    expect(priceQuantities(schedule, [])).toEqual([]);
  });
});

describe('pricing is pure', () => {
  const zone = process.env['TZ'];
  afterEach(() => {
    if (zone === undefined) delete process.env['TZ'];
    else process.env['TZ'] = zone;
  });

  it('gives the same under any zone of the machine', () => {
    const results = ['UTC', 'America/Chicago', 'Asia/Kolkata'].map((machine) => {
      process.env['TZ'] = machine;
      const schedule = read('ostrander-lp4');
      return JSON.stringify(priceBills(schedule, seededLoad(7, schedule.timeZone), { periods }));
    });
    expect(results[1]).toBe(results[0]);
    expect(results[2]).toBe(results[0]);
  });

  it('changes no argument', () => {
    const schedule = read('millrace-kva');
    const load = seededLoad(9, schedule.timeZone);
    const copy = structuredClone(load);
    const options: PriceOptions = {
      periods: structuredClone(periods),
      contract: { contractKva: 2000 },
      history: { maxKva: [1, 2] },
    };
    const before = JSON.stringify(options);
    const texts = JSON.stringify(schedule);
    priceBills(schedule, load, options);
    expect(load).toEqual(copy);
    expect(JSON.stringify(options)).toBe(before);
    expect(JSON.stringify(schedule)).toBe(texts);
    const rows = [{ ...periods[0]!, quantities: { kwhPeak: 1, kwhFull: 2, kwhNight: 3, maxKva: 4 } }];
    const rowsBefore = JSON.stringify(rows);
    priceQuantities(schedule, rows, {});
    expect(JSON.stringify(rows)).toBe(rowsBefore);
  });
});

describe('at unity power factor', () => {
  const text = `
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  maxKva: { highest: kva }
  kvarAtPeak: { value: kvarLagging, at: maxKw }
  rescaled: { highest: kw * 0.92 / pf(kw; kvarLagging) }
  hourly: { sum: kwh * excess(0.92 / pf(kwh; kvarhLagging); 1), each: hour }
  pf: { formula: pf(kwh; kvarh) }
  fault: { given: flag, default: 1, unity: 0 }
charges:
  kva: { per: maxKva, rate: 3, group: demand }
  kw: { per: maxKw, rate: 2, group: demand }
  rescaledKw: { per: rescaled, rate: 1, group: reactive }
  hour: { per: hourly, rate: 1, group: reactive }
  factor: { amount: 100 * pf, group: reactive }
  faults: { amount: 5, when: fault = 1, group: reactive }`;
  const head = { zeroKwh: '{ pf: 1 }' };
  const july = { from: '2026-07-01', to: '2026-08-01' };

  it('a load without kvar costs nothing reactive', () => {
    const schedule = buildSchedule(text.replace(/ {2}fault.*\n/g, '').replace(/\n {2}faults.*/, ''), head);
    const load = buildSeries({
      ...july,
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (local) => [500 + local.getUTCDate(), 0, 0],
    });
    const [bill] = priceBills(schedule, load, { periods: [july] });
    expect(bill!.reactiveCost).toBe(0);
    expect(bill!.lines.map(({ reactivePart }) => reactivePart)).toEqual([0, 0, 0, 0, 0]);
  });

  it('the lines add up to the reactive cost', () => {
    const load = buildSeries({
      ...july,
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (local) => [500 + local.getUTCDate(), 400, 30],
    });
    const [bill] = priceBills(buildSchedule(text, head), load, { periods: [july] });
    const parts = bill!.lines.reduce((sum, { reactivePart }) => sum + Math.round(reactivePart * 100), 0);
    expect(Math.round(bill!.reactiveCost * 100)).toBe(parts);
    expect(bill!.lines.find(({ id }) => id === 'faults')!.reactivePart).toBe(5);
  });

  it('from printed figures takes the active measure of the same kind for kVA, and works formulas out anew', () => {
    const quantities = { kwh: 1000, kvarh: 750, maxKw: 80, maxKva: 100, rescaled: 95, hourly: 40, pf: 0.8 };
    const [bill] = priceQuantities(buildSchedule(text, head), [{ ...july, quantities }]);
    // kva 100 -> 80; 0.92 x 80 = 73.6; hours beyond 0.92 none; pf 1.
    const parts = Object.fromEntries(bill!.lines.map(({ id, reactivePart }) => [id, reactivePart]));
    expect(parts['kva']).toBe(60);
    expect(parts['kw']).toBe(0);
    expect(parts['rescaledKw']).toBeCloseTo(95 - 73.6, 9);
    expect(parts['hour']).toBe(40);
    expect(parts['factor']).toBe(-20);
    expect(parts['faults']).toBe(5);
  });

  it('knows pf without knowing kWh, and keeps what cannot be told', () => {
    const schedule = buildSchedule(
      'quantities:\n  kwh: { sum: kwh }\n  kvarh: { sum: kvarhLagging }\n  maxKva: { highest: kva }\n  pf: { formula: pf(kwh; kvarh) }\ncharges:\n  factor: { amount: 100 * pf, group: reactive }\n  kva: { per: maxKva, rate: 1, group: demand }',
      head,
    );
    const [bill] = priceQuantities(schedule, [{ ...july, quantities: { pf: 0.8, maxKva: 50 } }]);
    expect(bill!.reactiveCost).toBe(-20);
    expect(bill!.notes).toContain(
      'At unity power factor "maxKva" cannot be told from the figures printed: it keeps 50 kVA.',
    );
  });

  it('keeps a history of its own', () => {
    const schedule = buildSchedule(
      'quantities:\n  maxKva: { highest: kva }\n  top: { past: maxKva, take: highest, over: last 11 periods }\n  billed: { formula: max(maxKva; top), unit: kVA }\ncharges:\n  demand: { per: billed, rate: 1, group: demand }',
    );
    const load = buildSeries({
      from: '2026-06-01',
      to: '2026-08-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (local) => (local.getUTCMonth() === 5 ? [300, 400, 0] : [100, 0, 0]),
    });
    const bills = priceBills(schedule, load, { periods: [{ from: '2026-06-01', to: '2026-07-01' }, july] });
    // July pays for June's 500 kVA; at unity June would have had 300.
    expect(bills.map(({ total, reactiveCost }) => [total, reactiveCost])).toEqual([
      [500, 200],
      [500, 200],
    ]);
  });
});

describe('symmetries', () => {
  it('scale with the load: twice the energy costs twice where nothing is fixed', () => {
    const schedule = buildSchedule(
      'quantities:\n  kwh: { sum: kwh }\n  maxKva: { highest: kva }\n  over: { sum: excess(kvarhLagging; 0.4 * kwh), each: hour }\ncharges:\n  energy: { per: kwh, rate: 0.1, group: energy }\n  demand: { per: maxKva, rate: 3, group: demand }\n  reactive: { per: over, rate: 0.02, group: reactive }',
    );
    const period = { from: '2026-07-01', to: '2026-07-08' };
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1000 }), fc.integer({ min: 0, max: 1000 }), (kw, kvar) => {
        const price = (factor: number): Record<string, number> =>
          valuesOf(
            priceBills(
              schedule,
              buildSeries({
                ...period,
                timeZone: 'Europe/Lisbon',
                stepMinutes: 60,
                powers: (local) => [factor * (kw + local.getUTCHours()), factor * kvar, 0],
              }),
              { periods: [period] },
            )[0],
          );
        const [once, twice] = [price(1), price(2)];
        for (const [name, value] of Object.entries(once)) expect(twice[name]).toBeCloseTo(2 * value, 6);
      }),
      { numRuns: 15 },
    );
  });

  it('a period cut in two sums to the whole where lines are per unit', () => {
    const schedule = buildSchedule(
      'quantities:\n  kwh: { sum: kwh }\n  over: { sum: excess(kvarhLagging; 0.4 * kwh), each: day }\ncharges:\n  energy: { per: kwh, rate: 1, group: energy }',
    );
    const load = buildSeries({
      from: '2026-07-01',
      to: '2026-08-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 15,
      powers: (local, i) => [100 + (i % 17), local.getUTCHours() * 9, 0],
    });
    const price = (from: string, to: string): Record<string, number> =>
      valuesOf(priceBills(schedule, load, { periods: [{ from, to }] })[0]);
    const [a, b, whole] = [
      price('2026-07-01', '2026-07-12'),
      price('2026-07-12', '2026-08-01'),
      price('2026-07-01', '2026-08-01'),
    ];
    for (const name of ['kwh', 'over']) expect(a[name]! + b[name]!).toBeCloseTo(whole[name]!, 6);
  });
});
