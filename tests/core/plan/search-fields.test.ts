import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '../../../src/core/load';
import { operatingPoint } from '../../../src/core/machine';
import { searchFields, simulatePlan } from '../../../src/core/plan';
import type { SearchMotor } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor } from './build-plant';

const load = buildLoad(4);
const one = buildPlanMotor(load);
const two = buildPlanMotor(load, {
  motor: buildMotor({ ratedOutputKw: 900, ratedFieldCurrentA: 90, fieldResistanceOhm: 0.9 }),
  shaftKw: new Float64Array(load.kwh.length).fill(650),
  standingFieldA: 60,
});

const total = (series: Float64Array) => series.reduce((sum, value) => sum + value, 0);
const bill = (...amounts: number[]) => Float64Array.from(amounts);
const highestKva = (series: LoadSeries) => {
  let highest = 0;
  series.kwh.forEach((kwh, i) => {
    highest = Math.max(highest, 4 * Math.hypot(kwh, series.kvarhLagging[i]! - series.kvarhLeading[i]!));
  });
  return highest;
};
const kvarDelivered = (motor: SearchMotor, fieldCurrentA: number) =>
  -operatingPoint(motor.motor, { shaftKw: Math.max(...motor.shaftKw), fieldCurrentA }).kvar;

describe('searchFields on bills with a known best', () => {
  it('finds the field whose kvar brings a convex charge to nought', () => {
    // The charge is the square of what is missing to the kvarh that 127 A would deliver in the 64 running hours.
    const target = (kvarDelivered(one, 127) - kvarDelivered(one, 105)) * 64;
    const before = total(load.kvarhLagging);
    const result = searchFields({
      plant: { load, motors: [one] },
      totals: (series) => bill((before - total(series.kvarhLagging) + total(series.kvarhLeading) - target) ** 2),
    });
    expect(result.fieldsA).toEqual([127]);
    expect(result.cost).toBeLessThan(1e-6);
    expect(result.leaveAlone).toBe(false);
    expect(result.exhaustive).toBe(true);
    expect(result.cancelled).toBe(false);
  });

  it('stops a kVA charge where its own losses outweigh it', () => {
    const energyPrice = 1.2;
    const totals = (series: LoadSeries) => bill(highestKva(series) * 3, total(series.kwh) * energyPrice);
    const result = searchFields({ plant: { load, motors: [{ ...one, stepA: 0.5 }] }, totals });
    // Brute force over the same half amperes, each simulated on its own.
    let best = { field: 0, cost: Infinity };
    for (let field = 75; field <= 150; field += 0.5) {
      const cost = total(totals(simulatePlan({ load, motors: [{ ...one, planFieldA: field }] }).load));
      if (cost < best.cost) best = { field, cost };
    }
    expect(result.fieldsA).toEqual([best.field]);
    expect(result.cost).toBeCloseTo(best.cost, 8);
    expect(best.field).toBeGreaterThan(105);
    expect(best.field).toBeLessThan(150);
  });

  it('steps just over a cliff and no further', () => {
    // 5000 as soon as lagging energy passes 0.86 of active energy, and energy at 0.1: the least field that clears the cliff.
    const totals = (series: LoadSeries) =>
      bill((total(series.kvarhLagging) > 0.83 * total(series.kwh) ? 5000 : 0) + 0.1 * total(series.kwh));
    const result = searchFields({ plant: { load, motors: [one] }, totals });
    const clears = (field: number) => {
      const series = simulatePlan({ load, motors: [{ ...one, planFieldA: field }] }).load;
      return total(series.kvarhLagging) <= 0.83 * total(series.kwh);
    };
    const [field] = result.fieldsA as [number];
    expect(clears(field)).toBe(true);
    expect(clears(field - 1)).toBe(false);
    expect(result.standingCost - result.cost).toBeGreaterThan(4000);
  });

  it('leaves the fields alone where a ratchet makes a better power factor worthless', () => {
    // Billed demand is held up by last year's 12 MVA whatever the plan does; what is left is the motors' loss. Fields stand at least loss.
    const atLeast = { ...one, standingFieldA: leastLossStep(one) };
    const totals = (series: LoadSeries) => bill(Math.max(highestKva(series), 12000) * 9, total(series.kwh) * 0.1);
    const result = searchFields({ plant: { load, motors: [atLeast] }, totals });
    expect(result.leaveAlone).toBe(true);
    expect(result.fieldsA).toEqual([atLeast.standingFieldA]);
    expect(result.cost).toBe(result.standingCost);
  });

  it('leaves the fields alone where nothing is charged for them at all', () => {
    const result = searchFields({ plant: { load, motors: [one, two] }, totals: () => bill(1000) });
    expect(result.leaveAlone).toBe(true);
    expect(result.fieldsA).toEqual([105, 60]);
  });

  it('moves no other motor where one must leave a field of nothing', () => {
    // Nothing is charged: the motor that stands at 0 A must take the least step within its limits, the other stays.
    const motor = buildMotor({ limits: { pullOutMargin: 1, armatureCurrentA: 1000 } });
    const idle = { ...one, motor, shaftKw: new Float64Array(load.kwh.length).fill(1), standingFieldA: 0 };
    const result = searchFields({ plant: { load, motors: [idle, { ...two, stepA: 5 }] }, totals: () => bill(1000) });
    expect(result.fieldsA).toEqual([1, 60]);
  });

  it('goes no further than a leading charge allows', () => {
    // Lagging 1, leading 10 per kvarh; 150 kvarh lagging per quarter-hour by day, motor running by day only.
    const light = buildLoad(4, { kvarhLagging: new Float64Array(load.kwh.length).fill(60) });
    const motor = buildPlanMotor(light);
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging) + 10 * total(series.kvarhLeading));
    const result = searchFields({ plant: { load: light, motors: [motor] }, totals });
    const delivered = kvarDelivered(motor, result.fieldsA[0]!) - kvarDelivered(motor, 105);
    const oneMore = kvarDelivered(motor, result.fieldsA[0]! + 1) - kvarDelivered(motor, 105);
    // 60 kvarh a quarter-hour is 240 kvar.
    expect(delivered).toBeLessThanOrEqual(240);
    expect(oneMore).toBeGreaterThan(240);
  });

  it('weighs a leading charge at night against lagging energy by day, at the field where they balance', () => {
    // The motor runs day and night at 1200 kW. By night 80 kvarh a quarter-hour are metered: each kvar delivered beyond 320 more
    // than standing is billed at 3 per kvarh for 8 h; by day each saves 1 per kvarh for 16 h. 24 > 16: the optimum stops at 320 kvar.
    const steady = buildLoad(2, {
      kvarhLagging: Float64Array.from({ length: 192 }, (_, i) => (i % 96 >= 24 && i % 96 < 88 ? 800 : 80)),
    });
    const motor = buildPlanMotor(steady, { shaftKw: new Float64Array(192).fill(1200) });
    const night = (i: number) => !(i % 96 >= 24 && i % 96 < 88);
    const charge = (price: number) => (series: LoadSeries) =>
      bill(
        series.kvarhLagging.reduce((sum, kvarh, i) => sum + (night(i) ? 0 : kvarh), 0),
        price * series.kvarhLeading.reduce((sum, kvarh, i) => sum + (night(i) ? kvarh : 0), 0),
      );
    const more = (field: number) => kvarDelivered(motor, field) - kvarDelivered(motor, 105);
    const dear = searchFields({ plant: { load: steady, motors: [motor] }, totals: charge(3) });
    expect(more(dear.fieldsA[0]!)).toBeLessThanOrEqual(321);
    expect(more(dear.fieldsA[0]! + 1)).toBeGreaterThan(320);
    // At 1 per kvarh (8 < 16) the night charge never outweighs the day: the field goes to its limit of 150 A.
    const cheap = searchFields({ plant: { load: steady, motors: [motor] }, totals: charge(1) });
    expect(cheap.fieldsA).toEqual([150]);
  });

  it('finds the best of two motors on a jagged bill, as brute force does', () => {
    const coarse = [one, two].map((motor) => ({ ...motor, stepA: motor === one ? 3 : 2 }));
    const totals = (series: LoadSeries) => {
      const kva = highestKva(series);
      return bill(Math.ceil(kva / 40) * 400 + (total(series.kvarhLeading) > 500 ? 700 : 0), total(series.kwh) * 0.2);
    };
    const result = searchFields({ plant: { load, motors: coarse }, totals, exhaustiveUpTo: 0 });
    const whole = searchFields({ plant: { load, motors: coarse }, totals });
    expect(whole.exhaustive).toBe(true);
    expect(result.exhaustive).toBe(false);
    expect(result.priced).toBeLessThan(whole.priced);
    expect(result.cost).toBeCloseTo(whole.cost, 6);
    let least = Infinity;
    for (let a = 75; a <= 150; a += 3) {
      for (let b = 40; b <= 90; b += 2) {
        try {
          const plan = simulatePlan({
            load,
            motors: [
              { ...one, planFieldA: a },
              { ...two, planFieldA: b },
            ],
          });
          if (plan.motors.every((m) => Object.values(m.beyondHours).every((hours) => hours === 0))) {
            least = Math.min(least, total(totals(plan.load)));
          }
        } catch {
          continue;
        }
      }
    }
    expect(least).toBeLessThan(Infinity);
    expect(whole.cost).toBeLessThanOrEqual(least + 1e-6);
  });
});

describe('searchFields', () => {
  it('keeps every limit with its reserve and every range given', () => {
    const motor = { ...one, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging));
    const result = searchFields({ plant: { load, motors: [motor] }, totals });
    // 95 % of 150 A is 142.5: 142 is the highest whole ampere.
    expect(result.fieldsA).toEqual([142]);
    expect(result.bounds[0]!.highBinding.limit).toBe('field');
    const narrow = searchFields({ plant: { load, motors: [{ ...motor, panelHighA: 130.5, panelLowA: 100 }] }, totals });
    expect(narrow.fieldsA).toEqual([130]);
    expect(Math.min(...narrow.curves[0]!.map((p) => p.panelA))).toBe(100);
  });

  it('steps in amperes of the panel for a brushless motor', () => {
    const motor = { ...one, motor: buildMotor({ exciterField: { ratedA: 5 } }), stepA: 0.1 };
    const result = searchFields({
      plant: { load, motors: [motor] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    expect(result.panelsA[0]).toBeCloseTo(5, 9);
    expect(result.fieldsA[0]).toBeCloseTo(150, 6);
  });

  it('draws the cost along each field with the others at their best', () => {
    const totals = (series: LoadSeries) => bill(highestKva(series) * 9 + total(series.kwh) * 0.3);
    const result = searchFields({ plant: { load, motors: [one, two] }, totals });
    expect(result.curves).toHaveLength(2);
    result.curves.forEach((curve, m) => {
      const own = curve.find((point) => point.fieldCurrentA === result.fieldsA[m])!;
      expect(own.cost).toBeCloseTo(result.cost, 6);
      for (const point of curve) expect(point.cost).toBeGreaterThanOrEqual(result.cost - 0.006);
    });
    const [a, b] = result.fieldsA as [number, number];
    const direct = simulatePlan({
      load,
      motors: [
        { ...one, planFieldA: a },
        { ...two, planFieldA: b },
      ],
    });
    expect(total(totals(direct.load))).toBeCloseTo(result.cost, 6);
  });

  it('does not offer standing where it breaks a limit, and says so', () => {
    const motor = { ...one, standingFieldA: 148, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const result = searchFields({
      plant: { load, motors: [motor] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    expect(result.fieldsA).toEqual([142]);
    expect(result.cost).toBeGreaterThan(result.standingCost);
    expect(result.notes.join(' ')).toMatch(/Motor 1 stands at 148 A, outside its limits of .* to 142.5 A/);
  });

  it('leaves a motor without an admissible field alone, naming load and limit', () => {
    const heavy = { ...one, shaftKw: new Float64Array(load.kwh.length).fill(2000) };
    const result = searchFields({
      plant: { load, motors: [heavy] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    expect(result.leaveAlone).toBe(true);
    expect(result.bounds).toEqual([null]);
    expect(result.notes.join(' ')).toMatch(/no admissible field at 2000\.0 kW \(armature\)/);
  });

  it('prices candidates with the capacitors connected, and standing without', () => {
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging) + 20 * total(series.kvarhLeading));
    const result = searchFields({
      plant: { load, motors: [one] },
      capacitors: [{ kvar: 200, lossWPerKvar: 0 }],
      totals,
    });
    expect(result.standingCost).toBeCloseTo(total(load.kvarhLagging), 6);
    const planned = simulatePlan({
      load,
      motors: [{ ...one, planFieldA: result.fieldsA[0]! }],
      capacitors: [{ kvar: 200, lossWPerKvar: 0 }],
    });
    expect(result.cost).toBeCloseTo(total(totals(planned.load)), 6);
  });

  it('tells its progress honestly and can be cancelled, with the best so far', () => {
    const totals = (series: LoadSeries) => bill(highestKva(series) * 9);
    const seen: { priced: number; planned: number }[] = [];
    const whole = searchFields({
      plant: { load, motors: [one, two] },
      totals,
      exhaustiveUpTo: 0,
      onProgress: (progress) => void seen.push(progress),
    });
    expect(seen.map((p) => p.priced)).toEqual(seen.map((_, i) => i + 1));
    expect(seen.every((p) => p.planned >= p.priced)).toBe(true);
    expect(seen.at(-1)!.priced).toBe(whole.priced);
    const cut = searchFields({
      plant: { load, motors: [one, two] },
      totals,
      exhaustiveUpTo: 0,
      onProgress: ({ priced }) => priced < 10,
    });
    expect(cut.cancelled).toBe(true);
    expect(cut.priced).toBe(10);
    expect(Number.isFinite(cut.cost)).toBe(true);
    expect(cut.exhaustive).toBe(false);
  });

  it('is never dearer than leaving the fields alone, even when cancelled at once', () => {
    // Every field but the standing ones costs 1000 more: the very first candidate must be to leave them alone.
    const standing = total(load.kwh);
    const totals = (series: LoadSeries) => bill(Math.abs(total(series.kwh) - standing) < 1e-9 ? 500 : 1500);
    for (const exhaustiveUpTo of [0, 1e6]) {
      const result = searchFields({
        plant: { load, motors: [one, two] },
        totals,
        exhaustiveUpTo,
        onProgress: () => false,
      });
      expect(result).toMatchObject({ cancelled: true, leaveAlone: true, cost: 500, standingCost: 500, priced: 1 });
    }
  });

  it('answers with numbers when cancelled before any setting keeps the limits', () => {
    const wrong = { ...one, standingFieldA: 148, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging));
    const result = searchFields({ plant: { load, motors: [wrong, two] }, totals, onProgress: () => false });
    expect(result.fieldsA).toEqual([148, 60]);
    expect(result.cost).toBe(result.standingCost);
  });

  it('says so where a motor stands beyond a limit and no step lies within', () => {
    const wrong = { ...one, standingFieldA: 148, stepA: 400, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const result = searchFields({ plant: { load, motors: [wrong] }, totals: () => bill(1) });
    expect(result.fieldsA).toEqual([148]);
    expect(result.notes.join(' ')).toMatch(/stands at 148 A, outside its limits.*no step lies within them/);
  });

  it('gives the same result twice', () => {
    const totals = (series: LoadSeries) => bill(Math.ceil(highestKva(series) / 25) * 100);
    const run = () => searchFields({ plant: { load, motors: [one, two] }, totals, exhaustiveUpTo: 0 });
    expect(run()).toEqual(run());
  });

  it('refuses a step that is none and totals that are not numbers', () => {
    const totals = () => bill(NaN);
    expect(() => searchFields({ plant: { load, motors: [{ ...one, stepA: 0 }] }, totals: () => bill(1) })).toThrow(
      /stepA/,
    );
    expect(() => searchFields({ plant: { load, motors: [one] }, totals })).toThrow(/NaN/);
  });
});

/** Whole ampere at which a motor takes least at its running load, by trying all. */
function leastLossStep(motor: SearchMotor): number {
  let best = { field: 0, kw: Infinity };
  for (let field = 75; field <= 150; field++) {
    const { inputKw } = operatingPoint(motor.motor, { shaftKw: 1200, fieldCurrentA: field });
    if (inputKw < best.kw) best = { field, kw: inputKw };
  }
  return best.field;
}
