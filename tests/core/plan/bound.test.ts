import fc from 'fast-check';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { addDays, localDateStartMs, type LoadSeries } from '@/core/load';
import { ratedKva, reactiveRange, type FieldControl } from '@/core/machine';
import { boundOf, createSimulator, type CapacitorBank, type PlanBound, type PlanMotor, type Plant } from '@/core/plan';
import { plantBox } from '@/core/plan/bound-box';
import { boundTotals, priceBills, readSchedule, type PriceOptions, type Schedule } from '@/core/tariff';
import { buildMotor, buildLosslessMotor, randomMotor } from '../machine/build-motor';
import { buildSchedule } from '../tariff/build';
import { buildLoad, buildPlanMotor } from './build-plant';

const totalOf = (schedule: Schedule, load: LoadSeries, options: PriceOptions): number =>
  priceBills(schedule, load, options).reduce((sum, bill) => sum + bill.total, 0);

function bounded(ask: Parameters<typeof boundOf>[0]): PlanBound {
  const bound = boundOf(ask);
  if (bound.refused !== undefined) throw new Error(bound.refused);
  return bound;
}

const kvar = (kvarDelivered: number): FieldControl => ({ holds: 'kvar', kvarDelivered });

describe('the box of a plant', () => {
  it('holds the load of every control in every interval, of capacitors and of what lies upstream', () => {
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    let seen = 0;
    fc.assert(
      fc.property(
        randomMotor(),
        fc.array(share, { minLength: 96, maxLength: 96 }),
        fc.boolean(),
        fc.boolean(),
        (motor, shares, hasUpstream, hasBank) => {
          const scale = ratedKva(motor) / 1500;
          const base = buildLoad(1);
          const load = {
            ...base,
            kwh: base.kwh.map((kwh) => kwh * scale),
            kvarhLagging: base.kvarhLagging.map((e) => e * scale),
          };
          const shaftKw = Float64Array.from(shares, (one, i) =>
            i % 7 === 0 ? 0 : [0.5, 0.8, 1][Math.floor(3 * one) % 3]! * motor.ratedOutputKw,
          );
          const planMotor = { motor, shaftKw, standingFieldA: 0.9 * motor.ratedFieldCurrentA };
          const upstream = hasUpstream ? { ratedKva: 6000 * scale, resistancePu: 0.01, reactancePu: 0.06 } : undefined;
          const bank: CapacitorBank = {
            steps: 3,
            stepKvar: 200 * scale,
            lossWPerKvar: 2,
            ...(shares[0]! < 0.5 && { holdsPowerFactor: 0.95 }),
          };
          const plant: Plant = { load, motors: [planMotor], ...(upstream && { upstream }) };
          const made = plantBox({ plant, banks: [bank] });
          const spans = { index: Uint8Array.from(shares, (_, i) => i), count: 96 };
          const simulator = createSimulator(plant, { spans, ...(hasBank && { banks: [bank] }) });
          const top = 1.5 * ratedKva(motor);
          const controls = shares.map((one) => kvar(-0.5 * top + 1.5 * one * top));
          const simulated = simulator.apply([controls]);
          const { low, high } = made!.box;
          for (const register of ['kwh', 'kvarhLagging', 'kvarhLeading'] as const) {
            simulated[register].forEach((energy, i) => {
              expect(energy, `${register} ${i}`).toBeGreaterThanOrEqual(low[register][i]!);
              expect(energy, `${register} ${i}`).toBeLessThanOrEqual(high[register][i]!);
              seen++;
            });
          }
        },
      ),
      { numRuns: 60 },
    );
    expect(seen).toBeGreaterThan(10_000);
  });

  it('is the load itself, to its last digits, where there is nothing to set', () => {
    const load = buildLoad(1);
    const { box } = plantBox({ plant: { load, motors: [] } })!;
    load.kwh.forEach((kwh, i) => {
      expect(box.high.kwh[i]! - box.low.kwh[i]!).toBeLessThan(1e-6);
      expect(box.low.kwh[i]!).toBeLessThanOrEqual(kwh);
    });
  });

  it('keeps missing intervals missing', () => {
    const load = buildLoad(1);
    load.quality[5] = 2;
    load.kwh[5] = load.kvarhLagging[5] = load.kvarhLeading[5] = NaN;
    const { box } = plantBox({ plant: { load, motors: [buildPlanMotor(load)] } })!;
    expect([box.quality[5], box.low.kwh[5], box.high.kvarhLagging[5]]).toEqual([2, NaN, NaN]);
  });
});

const year2026 = (days: number): PriceOptions => ({
  periods: [{ from: '2026-01-05', to: `2026-01-${String(5 + days).padStart(2, '0')}` }],
});
const utc = { timeZone: 'UTC', demandWindow: '15 min', zeroKwh: '{ pf: 1 }' };

describe('boundOf on a convex kVA demand', () => {
  // One motor without losses runs at one load. The charge is 10 a kVA of the highest quarter-hour: the optimum delivers in the highest
  // quarter-hours as much as the motor can, or brings the reactive power there to 0. Both can be written down.
  const schedule = buildSchedule(
    `quantities:
  maxKva: { highest: kva }
charges:
  demand: { per: maxKva, rate: 10, group: demand }`,
    utc,
  );
  const motor = buildLosslessMotor({ ratedPowerFactor: 0.8 });
  const load = buildLoad(2);
  const planMotor: PlanMotor = { motor, shaftKw: new Float64Array(192).fill(600), standingFieldA: 100 };

  it('is the known optimum where there are no losses', () => {
    const range = reactiveRange(motor, { shaftKw: 600 })!;
    const standing = createSimulator({ load, motors: [planMotor] }).placed[0]!.standing.kvar[1]!;
    // By hand: the most delivered beyond standing, in every quarter-hour; reactive power lower still would lead.
    const deliveredKvar = range.most + standing;
    const best = Math.max(
      ...load.kwh.map((kwh, i) => Math.hypot(4 * kwh, Math.max(0, 4 * load.kvarhLagging[i]! - deliveredKvar))),
    );
    const { total, freeLossKwh } = bounded({ plant: { load, motors: [planMotor] }, schedule, options: year2026(2) });
    expect(total).toBeCloseTo(10 * best, 0);
    expect(total).toBeLessThanOrEqual(10 * best);
    // Room for the tables' error: 4e-6 of 1000 kVA over 48 hours.
    expect(Math.abs(freeLossKwh)).toBeLessThan(0.2);
  });

  it('says with losses how much of them it does not charge, and stays below every constant field', () => {
    const withEnergy = buildSchedule(
      `quantities:
  maxKva: { highest: kva }
  kwh: { sum: kwh }
charges:
  demand: { per: maxKva, rate: 10, group: demand }
  energy: { per: kwh, rate: 0.1, group: energy }`,
      utc,
    );
    const lossy = { ...planMotor, motor: buildMotor(), shaftKw: new Float64Array(192).fill(1200) };
    const plant = { load, motors: [lossy] };
    const bound = bounded({ plant, schedule: withEnergy, options: year2026(2) });
    const simulator = createSimulator(plant);
    let best = Infinity;
    for (let fieldCurrentA = 90; fieldCurrentA <= 150; fieldCurrentA += 0.5) {
      const series = simulator.apply([[{ holds: 'field-current', fieldCurrentA }]]);
      best = Math.min(best, totalOf(withEnergy, series, year2026(2)));
    }
    expect(bound.total).toBeLessThan(best);
    // The best field delivers most, to a half ampere: what the bound lies lower are the losses of that beyond the least, and crumbs.
    expect(best - bound.total).toBeLessThan(bound.freeLossCost! + 0.5);
    expect(bound.freeLossKwh).toBeGreaterThan(0);
    expect(bound.freeLossCost).toBeCloseTo(0.1 * bound.freeLossKwh + demandPart(bound), 0);
  });

  /** What the losses add to the highest kVA: at most their power, in the quarter-hour that sets it. */
  function demandPart({ freeLossKwh, freeLossCost }: PlanBound): number {
    const part = freeLossCost! - 0.1 * freeLossKwh;
    expect(part).toBeGreaterThanOrEqual(0);
    expect(part).toBeLessThan((10 * freeLossKwh) / 48 + 0.05);
    return part;
  }
});

describe('boundOf where delivering costs energy', () => {
  const windows = `windows:
  peak: { days: every day, hours: 08:00-20:00 }
  low: { rest: peak }
`;
  const linear = buildSchedule(
    `${windows}quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  kvarh: { sum: kvarhLagging }
charges:
  energy: { per: kwh, rate: { peak: 0.2, low: 0.2 }, group: energy }
  reactive: { per: kvarh, rate: 0.004, group: reactive }`,
    utc,
  );
  const mixed = buildSchedule(
    `${windows}quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  all: { formula: total(kwh), unit: kWh }
  kvarh: { sum: kvarhLagging }
  lead: { sum: kvarhLeading, in: low }
  maxKva: { highest: kva }
  pf: { formula: pf(all; kvarh) }
  points: { formula: 100 * excess(0.95; pf), unit: points }
  over: { formula: excess(kvarh; 0.3 * all), unit: kvarh }
charges:
  energy: { per: kwh, rate: { peak: 0.25, low: 0.1 }, group: energy }
  demand: { per: maxKva, rate: 0.4, group: demand }
  reactive: { per: over, rate: 0.006, group: reactive }
  leading: { per: lead, rate: 0.02, group: reactive }
  slope: { percentOf: [demand, energy], per: points, rate: 0.3, group: reactive }
  tax: { percentOf: all above, rate: 10, group: tax }`,
    utc,
  );

  it('comes near a known optimum: with one price of energy and of kvarh each interval is best by itself, all alike', () => {
    const load = buildLoad(4);
    const motor = buildMotor();
    const plant: Plant = { load, motors: [{ motor, shaftKw: new Float64Array(384).fill(1200), standingFieldA: 100 }] };
    const options = year2026(4);
    const simulator = createSimulator(plant);
    const range = reactiveRange(motor, { shaftKw: 1200 })!;
    let best = Infinity;
    for (let k = 0; k <= 200; k++) {
      const at = range.least + (k / 200) * (range.most - range.least);
      best = Math.min(best, totalOf(linear, simulator.apply([[kvar(at)]]), options));
    }
    const bound = bounded({ plant, schedule: linear, options });
    // By the box alone, losses and reactive energy each at their least.
    const { box } = plantBox({ plant })!;
    const apart = boundTotals(linear, box, options);
    const withoutLosses = apart.refused === undefined ? apart.totals.low[0]! : NaN;
    expect(bound.total).toBeLessThanOrEqual(best);
    expect(best - withoutLosses).toBeGreaterThan(100);
    expect(best - bound.total).toBeLessThan(0.15 * (best - withoutLosses));
  });

  it.each([
    ['linear', linear],
    ['mixed', mixed],
  ])('lies below every bill of random reactive power in every interval on the %s tariff', (_, schedule) => {
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    const levels = fc.array(share, { minLength: 192, maxLength: 192 });
    fc.assert(
      fc.property(levels, share, share, fc.boolean(), (shares, common, mixture, hasBank) => {
        const load = buildLoad(2);
        const motors = [
          buildMotor(),
          buildMotor({ ratedOutputKw: 900, ratedFieldCurrentA: 90, fieldResistanceOhm: 0.9 }),
        ];
        const shaftKw = (kw: number): Float64Array =>
          Float64Array.from(load.kwh, (__, i) => (i % 96 < 24 ? 0 : kw * (i % 3 === 0 ? 0.7 : 1)));
        const plant: Plant = {
          load,
          motors: [
            { motor: motors[0]!, shaftKw: shaftKw(1300), standingFieldA: 110 },
            { motor: motors[1]!, shaftKw: shaftKw(800), standingFieldA: 60 },
          ],
        };
        const banks: CapacitorBank[] = [{ steps: 4, stepKvar: 150, lossWPerKvar: 3 }];
        const spans = { index: Uint8Array.from(load.kwh, (__, i) => i), count: 192 };
        const simulator = createSimulator(plant, { spans, ...(hasBank ? { banks } : {}) });
        const controls = motors.map((motor) => {
          const range = reactiveRange(motor, { shaftKw: 0.7 * motor.ratedOutputKw })!;
          return shares.map((own) =>
            kvar(range.least + (mixture * own + (1 - mixture) * common) * (range.most - range.least)),
          );
        });
        const simulated = simulator.apply(controls);
        const bound = bounded({ plant, schedule, options: year2026(2), banks });
        expect(totalOf(schedule, simulated, year2026(2))).toBeGreaterThanOrEqual(bound.total);
      }),
      { numRuns: 40 },
    );
  });
});

const bench = readSchedule(readFileSync(path.resolve('tests', 'bench', 'heavy.yaml'), 'utf8'));
const library = ['ostrander-lp4', 'millrace-kva', 'tidewater-kvarh'].map((name) =>
  readSchedule(readFileSync(path.resolve('tariffs', `${name}.yaml`), 'utf8')),
);
const forms = ['kvarh-cliff', 'percent-bonus-and-two-slopes', 'kva-demand', 'hourly-rescaled-to-reference'].map(
  (name) => readSchedule(readFileSync(path.resolve('tariffs', 'forms', `${name}.yaml`), 'utf8')),
);

describe('boundOf against brute force', () => {
  // Four stretches of a day, each with its own reactive power from a grid of five: all 625 combinations, priced one by one.
  const grid = [0, 0.25, 0.5, 0.75, 1];

  it.each([bench, ...library, ...forms].map((schedule) => [schedule.id, schedule] as const))(
    'lies below every combination on %s',
    (_, schedule) => {
      const stepMinutes = 15;
      const base = buildLoad(2);
      const from = schedule.inForce && schedule.inForce > '2026-01-01' ? schedule.inForce : '2026-01-05';
      const to = addDays(from, 2);
      const load: LoadSeries = { ...base, startMs: localDateStartMs(from, schedule.timeZone), stepMinutes };
      const options: PriceOptions = { periods: [{ from, to }], contract: contractOf(schedule) };
      const motor = buildMotor();
      const shaftKw = new Float64Array(192).fill(1200);
      const plant: Plant = { load, motors: [{ motor, shaftKw, standingFieldA: 110 }] };
      const index = Uint8Array.from({ length: 192 }, (_value, i) => Math.floor((i % 96) / 24));
      const simulator = createSimulator(plant, { spans: { index, count: 4 } });
      const range = reactiveRange(motor, { shaftKw: 1200 })!;
      const levels = grid.map((share) => kvar(range.least + share * (range.most - range.least)));
      const bound = bounded({ plant, schedule, options });
      let best = Infinity;
      for (const a of levels)
        for (const b of levels)
          for (const c of levels)
            for (const d of levels) best = Math.min(best, totalOf(schedule, simulator.apply([[a, b, c, d]]), options));
      expect(Number.isFinite(best)).toBe(true);
      expect(bound.total).toBeLessThanOrEqual(best);
    },
    60_000,
  );

  function contractOf(schedule: Schedule): Record<string, number> {
    return Object.fromEntries(
      schedule.texts.flatMap(({ contract }) =>
        contract.map(({ name, default: standard, range }) => [name, standard ?? range?.[0] ?? 1] as const),
      ),
    );
  }
});

describe('boundOf', () => {
  it('refuses a year that cannot be priced, with the reason', () => {
    const load = buildLoad(1);
    const schedule = buildSchedule(
      `contract:
  size: { unit: kW }
quantities:
  kwh: { sum: kwh }
charges:
  energy: { per: kwh, rate: 0.1, group: energy }
  fixed: { amount: size, group: fixed }`,
      utc,
    );
    const bound = boundOf({ plant: { load, motors: [] }, schedule, options: year2026(1) });
    expect(bound.refused).toMatch(/does not give "size"/);
  });

  it('refuses where a bill has no lower end instead of naming a number', () => {
    const load = buildLoad(1);
    const schedule = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  net: { sum: kvarhNet }
charges:
  odd: { amount: 100 / (net - 5), group: reactive }
  energy: { per: kwh, rate: 0.1, group: energy }`,
      utc,
    );
    const motors = [buildPlanMotor(load, { shaftKw: new Float64Array(96).fill(1200) })];
    load.kvarhLagging.fill(0);
    const bound = boundOf({ plant: { load, motors }, schedule, options: year2026(1) });
    expect(bound.refused).toMatch(/line "odd" has no lower end/);
  });
});
