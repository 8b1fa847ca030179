import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '../../../src/core/load';
import { operatingPoint } from '../../../src/core/machine';
import { searchSettings, simulatePlan } from '../../../src/core/plan';
import type { SearchResult } from '../../../src/core/plan';
import type { SearchMotor } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor, field } from './build-plant';

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
/** Field current of every motor in its first span. */
const fieldsOf = (result: SearchResult) =>
  result.controls.map(([first]) => (first?.holds === 'field-current' ? first.fieldCurrentA : NaN));
const inSteps = (stepA: number, more: { panelLowA?: number; panelHighA?: number } = {}) => ({
  searched: { holds: 'field-current' as const, stepA, ...more },
});
const kvarDelivered = (motor: SearchMotor, fieldCurrentA: number) =>
  -operatingPoint(motor.motor, { shaftKw: Math.max(...motor.shaftKw), fieldCurrentA }).kvar;

describe('searchSettings on bills with a known best', () => {
  it('finds the field whose kvar brings a convex charge to nought', () => {
    // The charge is the square of what is missing to the kvarh that 127 A would deliver in the 64 running hours.
    const target = (kvarDelivered(one, 127) - kvarDelivered(one, 105)) * 64;
    const before = total(load.kvarhLagging);
    const result = searchSettings({
      plant: { load, motors: [one] },
      totals: (series) => bill((before - total(series.kvarhLagging) + total(series.kvarhLeading) - target) ** 2),
    });
    expect(fieldsOf(result)).toEqual([127]);
    expect(result.cost).toBeLessThan(1e-6);
    expect(result.leaveAlone).toBe(false);
    expect(result.exhaustive).toBe(true);
    expect(result.cancelled).toBe(false);
  });

  it('stops a kVA charge where its own losses outweigh it', () => {
    const energyPrice = 1.2;
    const totals = (series: LoadSeries) => bill(highestKva(series) * 3, total(series.kwh) * energyPrice);
    const result = searchSettings({ plant: { load, motors: [{ ...one, ...inSteps(0.5) }] }, totals });
    // Brute force over the same half amperes, each simulated on its own.
    let best = { amperes: 0, cost: Infinity };
    for (let amperes = 75; amperes <= 150; amperes += 0.5) {
      const cost = total(totals(simulatePlan({ load, motors: [one] }, { controls: [field(amperes)] }).load));
      if (cost < best.cost) best = { amperes, cost };
    }
    expect(fieldsOf(result)).toEqual([best.amperes]);
    expect(result.cost).toBeCloseTo(best.cost, 8);
    expect(best.amperes).toBeGreaterThan(105);
    expect(best.amperes).toBeLessThan(150);
  });

  it('steps just over a cliff and no further', () => {
    // 5000 as soon as lagging energy passes 0.86 of active energy, and energy at 0.1: the least field that clears the cliff.
    const totals = (series: LoadSeries) =>
      bill((total(series.kvarhLagging) > 0.83 * total(series.kwh) ? 5000 : 0) + 0.1 * total(series.kwh));
    const result = searchSettings({ plant: { load, motors: [one] }, totals });
    const clears = (amperes: number) => {
      const series = simulatePlan({ load, motors: [one] }, { controls: [field(amperes)] }).load;
      return total(series.kvarhLagging) <= 0.83 * total(series.kwh);
    };
    const [amperes] = fieldsOf(result) as [number];
    expect(clears(amperes)).toBe(true);
    expect(clears(amperes - 1)).toBe(false);
    expect(result.standingCost - result.cost).toBeGreaterThan(4000);
  });

  it('leaves the fields alone where a ratchet makes a better power factor worthless', () => {
    // Billed demand is held up by last year's 12 MVA whatever the plan does; what is left is the motors' loss. Fields stand at least loss.
    const atLeast = { ...one, standingFieldA: leastLossStep(one) };
    const totals = (series: LoadSeries) => bill(Math.max(highestKva(series), 12000) * 9, total(series.kwh) * 0.1);
    const result = searchSettings({ plant: { load, motors: [atLeast] }, totals });
    expect(result.leaveAlone).toBe(true);
    expect(fieldsOf(result)).toEqual([atLeast.standingFieldA]);
    expect(result.cost).toBe(result.standingCost);
  });

  it('leaves the fields alone where nothing is charged for them at all', () => {
    const result = searchSettings({ plant: { load, motors: [one, two] }, totals: () => bill(1000) });
    expect(result.leaveAlone).toBe(true);
    expect(fieldsOf(result)).toEqual([105, 60]);
  });

  it('moves no other motor where one must leave a field of nothing', () => {
    // Nothing is charged: the motor that stands at 0 A must be moved, to the step it loses least at; the other stays.
    const motor = buildMotor({ limits: { pullOutMargin: 1, armatureCurrentA: 1000 } });
    const idle = { ...one, motor, shaftKw: new Float64Array(load.kwh.length).fill(1), standingFieldA: 0 };
    const result = searchSettings({
      plant: { load, motors: [idle, { ...two, ...inSteps(5) }] },
      totals: () => bill(1000),
    });
    expect(fieldsOf(result)).toEqual([leastLossStep(idle, { from: 1, shaftKw: 1 }), 60]);
  });

  it('goes no further than a leading charge allows', () => {
    // Lagging 1, leading 10 per kvarh; 150 kvarh lagging per quarter-hour by day, motor running by day only.
    const light = buildLoad(4, { kvarhLagging: new Float64Array(load.kwh.length).fill(60) });
    const motor = buildPlanMotor(light);
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging) + 10 * total(series.kvarhLeading));
    const result = searchSettings({ plant: { load: light, motors: [motor] }, totals });
    const delivered = kvarDelivered(motor, fieldsOf(result)[0]!) - kvarDelivered(motor, 105);
    const oneMore = kvarDelivered(motor, fieldsOf(result)[0]! + 1) - kvarDelivered(motor, 105);
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
    const more = (amperes: number) => kvarDelivered(motor, amperes) - kvarDelivered(motor, 105);
    const dear = searchSettings({ plant: { load: steady, motors: [motor] }, totals: charge(3) });
    expect(more(fieldsOf(dear)[0]!)).toBeLessThanOrEqual(321);
    expect(more(fieldsOf(dear)[0]! + 1)).toBeGreaterThan(320);
    // At 1 per kvarh (8 < 16) the night charge never outweighs the day: the field goes to its limit of 150 A.
    const cheap = searchSettings({ plant: { load: steady, motors: [motor] }, totals: charge(1) });
    expect(fieldsOf(cheap)).toEqual([150]);
  });

  it('finds the best of two motors on a jagged bill, as brute force does', () => {
    const coarse = [one, two].map((motor) => ({ ...motor, ...inSteps(motor === one ? 3 : 2) }));
    const totals = (series: LoadSeries) => {
      const kva = highestKva(series);
      return bill(Math.ceil(kva / 40) * 400 + (total(series.kvarhLeading) > 500 ? 700 : 0), total(series.kwh) * 0.2);
    };
    const result = searchSettings({ plant: { load, motors: coarse }, totals, exhaustiveUpTo: 0 });
    const whole = searchSettings({ plant: { load, motors: coarse }, totals });
    expect(whole.exhaustive).toBe(true);
    expect(result.exhaustive).toBe(false);
    expect(result.priced).toBeLessThan(whole.priced);
    expect(result.cost).toBeCloseTo(whole.cost, 6);
    let least = Infinity;
    for (let a = 75; a <= 150; a += 3) {
      for (let b = 40; b <= 90; b += 2) {
        try {
          const plan = simulatePlan({ load, motors: [one, two] }, { controls: [field(a), field(b)] });
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

describe('searchSettings', () => {
  it('keeps every limit with its reserve and every range given', () => {
    const motor = { ...one, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging));
    const result = searchSettings({ plant: { load, motors: [motor] }, totals });
    // 95 % of 150 A is 142.5: 142 is the highest whole ampere.
    expect(fieldsOf(result)).toEqual([142]);
    expect(result.axes[0]!.bounds!.highBinding.limit).toBe('field');
    const narrow = searchSettings({
      plant: { load, motors: [{ ...motor, ...inSteps(1, { panelHighA: 130.5, panelLowA: 100 }) }] },
      totals,
    });
    expect(fieldsOf(narrow)).toEqual([130]);
    expect(narrow.axes[0]!.curve[0]!.control).toEqual({ holds: 'field-current', fieldCurrentA: 100 });
  });

  it('steps in amperes of the panel for a brushless motor', () => {
    const motor = { ...one, motor: buildMotor({ exciterField: { ratedA: 5 } }), ...inSteps(0.1) };
    const result = searchSettings({
      plant: { load, motors: [motor] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    // 5 A of the exciter's field are 150 A of the motor's.
    expect(fieldsOf(result)[0]).toBeCloseTo(150, 6);
  });

  it('draws the cost along each field with the others at their best', () => {
    const totals = (series: LoadSeries) => bill(highestKva(series) * 9 + total(series.kwh) * 0.3);
    const result = searchSettings({ plant: { load, motors: [one, two] }, totals });
    expect(result.axes).toHaveLength(2);
    for (const { curve, chosen } of result.axes) {
      expect(curve.find(({ control }) => control === chosen)!.cost).toBeCloseTo(result.cost, 6);
      for (const point of curve) expect(point.cost).toBeGreaterThanOrEqual(result.cost - 0.006);
    }
    const [a, b] = fieldsOf(result) as [number, number];
    const direct = simulatePlan({ load, motors: [one, two] }, { controls: [field(a), field(b)] });
    expect(total(totals(direct.load))).toBeCloseTo(result.cost, 6);
  });

  it('does not offer standing where it breaks a limit, and says so', () => {
    const motor = { ...one, standingFieldA: 148, motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const result = searchSettings({
      plant: { load, motors: [motor] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    expect(fieldsOf(result)).toEqual([142]);
    expect(result.cost).toBeGreaterThan(result.standingCost);
    expect(result.notes.join(' ')).toMatch(/Motor 1 stands at 148 A, outside its limits of .* to 142.5 A/);
  });

  it('leaves a motor without an admissible field alone, naming load and limit', () => {
    const heavy = { ...one, shaftKw: new Float64Array(load.kwh.length).fill(2000) };
    const result = searchSettings({
      plant: { load, motors: [heavy] },
      totals: (series) => bill(total(series.kvarhLagging)),
    });
    expect(result.leaveAlone).toBe(true);
    expect(result.axes).toEqual([]);
    expect(result.notes.join(' ')).toMatch(/no admissible field at 2000\.0 kW \(armature\)/);
  });

  it('prices candidates with the capacitors connected, and standing without', () => {
    const totals = (series: LoadSeries) => bill(total(series.kvarhLagging) + 20 * total(series.kvarhLeading));
    const banks = [{ steps: 1, stepKvar: 200, lossWPerKvar: 0 }];
    const result = searchSettings({
      plant: { load, motors: [one] },
      fixed: { banks },
      totals,
    });
    expect(result.standingCost).toBeCloseTo(total(load.kvarhLagging), 6);
    const planned = simulatePlan({ load, motors: [one] }, { controls: [field(fieldsOf(result)[0]!)], banks });
    expect(result.cost).toBeCloseTo(total(totals(planned.load)), 6);
  });

  it('tells its progress honestly and can be cancelled, with the best so far', () => {
    const totals = (series: LoadSeries) => bill(highestKva(series) * 9);
    const seen: { priced: number; planned: number }[] = [];
    const whole = searchSettings({
      plant: { load, motors: [one, two] },
      totals,
      exhaustiveUpTo: 0,
      onProgress: (progress) => void seen.push(progress),
    });
    expect(seen.map((p) => p.priced)).toEqual(seen.map((_, i) => i + 1));
    expect(seen.every((p) => p.planned >= p.priced)).toBe(true);
    expect(seen.at(-1)!.priced).toBe(whole.priced);
    const cut = searchSettings({
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
      const result = searchSettings({
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
    const result = searchSettings({ plant: { load, motors: [wrong, two] }, totals, onProgress: () => false });
    expect(fieldsOf(result)).toEqual([148, 60]);
    expect(result.cost).toBe(result.standingCost);
  });

  it('says so where a motor stands beyond a limit and no step lies within', () => {
    const wrong = { ...one, standingFieldA: 148, ...inSteps(400), motor: buildMotor({ limits: { reserve: 0.05 } }) };
    const result = searchSettings({ plant: { load, motors: [wrong] }, totals: () => bill(1) });
    expect(fieldsOf(result)).toEqual([148]);
    expect(result.notes.join(' ')).toMatch(/stands at 148 A, outside its limits.*no step lies within them/);
  });

  it('gives the same result twice', () => {
    const totals = (series: LoadSeries) => bill(Math.ceil(highestKva(series) / 25) * 100);
    const run = () => searchSettings({ plant: { load, motors: [one, two] }, totals, exhaustiveUpTo: 0 });
    expect(run()).toEqual(run());
  });

  it('refuses a step that is none and totals that are not numbers', () => {
    const totals = () => bill(NaN);
    expect(() =>
      searchSettings({ plant: { load, motors: [{ ...one, ...inSteps(0) }] }, totals: () => bill(1) }),
    ).toThrow(/stepA/);
    expect(() => searchSettings({ plant: { load, motors: [one] }, totals })).toThrow(/NaN/);
  });
});

/** Whole ampere at which a motor takes least at a load, by trying all. */
function leastLossStep(motor: SearchMotor, { from, shaftKw } = { from: 75, shaftKw: 1200 }): number {
  let best = { amperes: 0, kw: Infinity };
  for (let amperes = from; amperes <= 150; amperes++) {
    const { inputKw } = operatingPoint(motor.motor, { shaftKw, fieldCurrentA: amperes });
    if (inputKw < best.kw) best = { amperes, kw: inputKw };
  }
  return best.amperes;
}
