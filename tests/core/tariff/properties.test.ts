import fc from 'fast-check';
import { execFileSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { compilePricing, priceBills, priceQuantities, readSchedule, type Schedule } from '@/core/tariff';
import type { LoadSeries } from '@/core/load';
import { amountsOf, buildSchedule, buildSeries } from './build';

const files = ['tariffs/ostrander-lp4', 'tariffs/millrace-kva', 'tariffs/tidewater-kvarh', 'tests/bench/heavy'];
const read = (file: string): Schedule => readSchedule(readFileSync(path.resolve(`${file}.yaml`), 'utf8'));
const periods = [
  { from: '2026-02-20', to: '2026-03-20' },
  { from: '2026-03-20', to: '2026-04-12' },
  { from: '2026-04-12', to: '2026-04-20' },
];

/** A load of seeded noise over the periods, in steps of an hour unless told. */
function noise(seed: number, timeZone: string, stepMinutes = 60): LoadSeries {
  let state = seed;
  const next = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
  return buildSeries({
    from: '2026-02-20',
    to: '2026-04-20',
    timeZone,
    stepMinutes,
    powers: () => {
      const kw = Math.round(200 + 1800 * next());
      return next() < 0.75 ? [kw, Math.round(kw * next()), 0] : [kw, 0, Math.round(300 * next())];
    },
  });
}

const seeds = fc.integer({ min: 1, max: 2_000_000_000 });
const cents = (amount: number): number => Math.round(amount * 100);
const gridOf = ({ startMs, stepMinutes, kwh }: LoadSeries) => ({ startMs, stepMinutes, count: kwh.length });

describe.each(files)('bills on %s', (file) => {
  const schedule = read(file);
  // The borders of millrace's windows fall on quarters of an hour.
  const step = file.includes('millrace') ? 15 : 60;
  const load = (seed: number): LoadSeries => noise(seed, schedule.timeZone, step);

  it('total exactly the sum of their lines, and cost what unity saves, line by line', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        for (const bill of priceBills(schedule, load(seed), { periods })) {
          const lines = bill.lines.reduce((sum, { amount }) => sum + cents(amount), 0);
          const parts = bill.lines.reduce((sum, { reactivePart }) => sum + cents(reactivePart), 0);
          expect(bill.total).toBe(lines / 100);
          expect(cents(bill.reactiveCost)).toBe(parts);
        }
      }),
      { numRuns: 10 },
    );
  });

  it('cost nothing reactive at unity power factor', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const zero = new Float64Array(load(seed).kwh.length);
        const unity = { ...load(seed), kvarhLagging: zero, kvarhLeading: zero };
        for (const bill of priceBills(schedule, unity, { periods })) expect(bill.reactiveCost).toBe(0);
      }),
      { numRuns: 5 },
    );
  });

  it('have the totals that come without words, again and again, with changed kvar too', () => {
    const first = load(7);
    const pricing = compilePricing(schedule, gridOf(first), { periods });
    pricing.totals(first);
    fc.assert(
      fc.property(seeds, (seed) => {
        const { kvarhLagging, kvarhLeading } = load(seed);
        const changed = { ...first, kvarhLagging, kvarhLeading };
        const totals = priceBills(schedule, changed, { periods }).map(({ total }) => total);
        expect([...pricing.totals(changed, { isActiveUnchanged: true })]).toEqual(totals);
        expect([...pricing.totals(changed)]).toEqual(totals);
      }),
      { numRuns: 5 },
    );
  });
});

describe('a tariff on lagging energy alone', () => {
  const schedule = buildSchedule(
    `windows:
  night: { days: every day, hours: 23:00-07:00 }
  day: { rest: night }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  hourly: { sum: excess(kvarhLagging; 0.35 * kwh), each: hour, in: day }
  rescaled: { sum: kwh * excess(0.92 / pf(kwh; kvarhLagging); 1), each: hour, in: night }
  peakKw: { highest: kw * 0.92 / pf(kw; kvarLagging) }
  pf: { formula: pf(kwh; kvarh), round: 0.01 }
  points: { formula: 100 * excess(0.90; pf), unit: points }
charges:
  demand: { per: peakKw, rate: 4.10, group: demand }
  energy: { per: kwh, rate: 0.11, group: energy }
  bands:
    per: kvarh
    tiers:
      - { to: 0.33 * kwh, rate: 0 }
      - { to: 0.75 * kwh, rate: 0.02 }
      - { rate: 0.03 }
    group: reactive
  beyond: { per: hourly, rate: 0.02, group: reactive }
  scale: { per: rescaled, rate: 0.11, group: reactive }
  slope: { percentOf: [demand, energy], per: points, rate: 1, group: reactive }
  tax: { percentOf: all above, rate: 20, group: tax }`,
    { demandWindow: '60 min', zeroKwh: '{ pf: 1 }' },
  );

  it('never falls where more is drawn', () => {
    fc.assert(
      fc.property(
        seeds,
        fc.array(fc.tuple(fc.nat(1400), fc.nat(900)), { minLength: 1, maxLength: 30 }),
        (seed, more) => {
          const load = noise(seed, 'Europe/Lisbon');
          const kvarhLagging = load.kvarhLagging.slice();
          for (const [at, kvarh] of more) kvarhLagging[at]! += kvarh;
          const before = priceBills(schedule, load, { periods });
          const after = priceBills(schedule, { ...load, kvarhLagging }, { periods });
          for (const [i, bill] of after.entries()) {
            expect(cents(bill.total)).toBeGreaterThanOrEqual(cents(before[i]!.total));
            for (const [j, { amount }] of bill.lines.entries())
              expect(cents(amount)).toBeGreaterThanOrEqual(cents(before[i]!.lines[j]!.amount));
          }
        },
      ),
      { numRuns: 20 },
    );
  });

  it('prices printed quantities that are what was measured the same, from plain measures', () => {
    const plain = buildSchedule(
      `windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  low: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  kvarh: { sum: kvarhLagging }
  lead: { sum: kvarhLeading, in: low }
  maxKw: { highest: kw, in: peak }
  maxKva: { highest: kva }
  yearKva: { past: maxKva, take: highest, over: last 2 periods }
  over: { formula: excess(kvarh; 0.4 * total(kwh)), unit: kvarh }
charges:
  demand: { per: maxKw, rate: 4.10, group: demand }
  apparent: { amount: 2 * max(maxKva; 0.8 * yearKva), group: demand }
  energy: { per: kwh, rate: { peak: 0.12, low: 0.08 }, group: energy }
  reactive: { per: over, rate: 0.02, group: reactive }
  leading: { per: lead, rate: 0.01, group: reactive }
  tax: { percentOf: all above, rate: 20, group: tax }`,
      { demandWindow: '60 min' },
    );
    const measures = ['kwhPeak', 'kwhLow', 'kvarh', 'lead', 'maxKw', 'maxKva'];
    fc.assert(
      fc.property(seeds, (seed) => {
        const measured = priceBills(plain, noise(seed, 'Europe/Lisbon'), { periods });
        const rows = measured.map((bill, i) => ({
          ...periods[i]!,
          quantities: Object.fromEntries(measures.map((name) => [name, bill.quantities[name]!.value])),
        }));
        expect(priceQuantities(plain, rows).map(amountsOf)).toEqual(measured.map(amountsOf));
      }),
      { numRuns: 10 },
    );
  });
});

describe('energy lines', () => {
  const text = (lines: string[]): string => `windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  low: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  allKwh: { formula: total(kwh), unit: kWh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
charges:
${lines.join('\n')}`;
  const lines = [
    '  energy: { per: kwh, rate: { peak: 0.12, low: 0.08 }, group: energy }',
    '  rider: { per: allKwh, rate: -0.0031, group: adjustment }',
    '  demand: { per: maxKw, rate: 3.3, group: demand }',
    '  reactive: { per: kvarh, rate: 0.004, group: reactive }',
    '  service: { amount: 41.5, group: fixed }',
  ];
  const head = { demandWindow: '60 min' };

  it('do not change where intervals are split finer', () => {
    const schedule = buildSchedule(text(lines), head);
    fc.assert(
      fc.property(seeds, fc.constantFrom(30, 20, 15, 10, 5), (seed, stepMinutes) => {
        const hourly = noise(seed, 'Europe/Lisbon');
        const parts = 60 / stepMinutes;
        const split = (hours: Float64Array): Float64Array =>
          Float64Array.from({ length: hours.length * parts }, (_, i) => hours[Math.floor(i / parts)]! / parts);
        const fine: LoadSeries = {
          startMs: hourly.startMs,
          stepMinutes,
          kwh: split(hourly.kwh),
          kvarhLagging: split(hourly.kvarhLagging),
          kvarhLeading: split(hourly.kvarhLeading),
          quality: new Uint8Array(hourly.quality.length * parts),
        };
        expect(priceBills(schedule, fine, { periods }).map(amountsOf)).toEqual(
          priceBills(schedule, hourly, { periods }).map(amountsOf),
        );
      }),
      { numRuns: 15 },
    );
  });

  it('scale with the energy', () => {
    const schedule = buildSchedule(text(lines), { ...head, rounding: '0.000000001' });
    fc.assert(
      fc.property(seeds, fc.integer({ min: 1, max: 9 }), (seed, factor) => {
        const load = noise(seed, 'Europe/Lisbon');
        const scaled = { ...load, kwh: load.kwh.map((kwh) => kwh * factor) };
        const [once] = priceBills(schedule, load, { periods });
        const [more] = priceBills(schedule, scaled, { periods });
        for (const line of ['energyPeak', 'energyLow', 'rider', 'demand'])
          expect(amountsOf(more)[line]).toBeCloseTo(factor * amountsOf(once)[line]!, 6);
        expect(amountsOf(more)['reactive']).toBe(amountsOf(once)['reactive']);
      }),
      { numRuns: 10 },
    );
  });

  it('do not depend on the order of lines that do not name each other', () => {
    const load = noise(99, 'Europe/Lisbon');
    const expected = priceBills(buildSchedule(text(lines), head), load, { periods });
    fc.assert(
      fc.property(fc.shuffledSubarray(lines, { minLength: lines.length }), (shuffled) => {
        const bills = priceBills(buildSchedule(text(shuffled), head), load, { periods });
        for (const [i, bill] of bills.entries()) {
          expect(amountsOf(bill)).toEqual(amountsOf(expected[i]));
          expect(bill.total).toBe(expected[i]!.total);
        }
      }),
      { numRuns: 30 },
    );
  });

  it('of a bill priced alone are those it has among others, where nothing looks back', () => {
    const schedule = read('tariffs/tidewater-kvarh');
    fc.assert(
      fc.property(seeds, (seed) => {
        const load = noise(seed, schedule.timeZone);
        const together = priceBills(schedule, load, { periods });
        for (const [i, period] of periods.entries())
          expect(priceBills(schedule, load, { periods: [period] })).toEqual([together[i]]);
      }),
      { numRuns: 5 },
    );
  });
});

describe('the zone of the machine', () => {
  // Each machine is a process of its own that begins in its zone, and says in which it believes to be.
  const script = `
    import { readFileSync } from 'node:fs';
    import { priceBills, readSchedule } from './src/core/tariff/index.ts';
    const schedule = readSchedule(readFileSync('tariffs/ostrander-lp4.yaml', 'utf8'));
    const count = 59 * 24;
    const series = (of) => Float64Array.from({ length: count }, (_, i) => of(i));
    const load = { startMs: Date.UTC(2026, 1, 20, 6), stepMinutes: 60, quality: new Uint8Array(count),
      kwh: series((i) => 500 + (i * 37) % 911), kvarhLagging: series((i) => (i * 53) % 401), kvarhLeading: series(() => 0) };
    const bills = priceBills(schedule, load, { periods: ${JSON.stringify(periods.slice(0, 2))} });
    console.log(JSON.stringify([new Date(2026, 0, 15, 12).toISOString(), bills]));
  `;

  it('changes no bill', () => {
    const zones = ['UTC', 'America/Chicago', 'Asia/Kolkata', 'Pacific/Auckland'];
    const results = zones.map((TZ) => {
      const written = execFileSync(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', script], {
        env: { ...process.env, TZ },
        encoding: 'utf8',
      });
      return JSON.parse(written) as [noon: string, bills: { total: number }[]];
    });
    // Noon in each zone: 0, 6 hours behind, 5:30 and 13 hours ahead of UTC.
    expect(results.map(([noon]) => noon.slice(8, 16))).toEqual(['15T12:00', '15T18:00', '15T06:30', '14T23:00']);
    expect(results[0]![1].every(({ total }) => total > 10_000)).toBe(true);
    for (const [, bills] of results) expect(bills).toEqual(results[0]![1]);
  }, 240_000);
});
