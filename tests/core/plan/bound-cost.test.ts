import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '../../../src/core/load';
import { capability, leastLossWithin, operatingPoint } from '../../../src/core/machine';
import { boundCost, searchFields, simulatePlan } from '../../../src/core/plan';
import { buildLoad, buildPlanMotor } from './build-plant';

const load = buildLoad(3);
const motor = buildPlanMotor(load);
const total = (series: Float64Array) => series.reduce((sum, value) => sum + value, 0);
const kvaBill = (series: LoadSeries) => {
  let highest = 0;
  series.kwh.forEach((kwh, i) => {
    highest = Math.max(highest, 4 * Math.hypot(kwh, series.kvarhLagging[i]! - series.kvarhLeading[i]!));
  });
  return Float64Array.of(highest * 9, 0.1 * total(series.kwh), 0.4 * total(series.kvarhLeading));
};

describe('boundCost', () => {
  it('is reached exactly where one price per lagging kvarh leaves the motor one best kvar', () => {
    // Only lagging energy is charged: every running interval at the kvar of capability.
    const bound = boundCost({
      plant: { load, motors: [motor] },
      totals: (series) => Float64Array.of(total(series.kvarhLagging)),
    });
    const more =
      capability(motor.motor, { shaftKw: 1200 }).kvarDelivered! +
      operatingPoint(motor.motor, { shaftKw: 1200, fieldCurrentA: 105 }).kvar;
    const running = motor.shaftKw.filter((kw) => kw > 0).length;
    expect(bound.cost).toBeCloseTo(total(load.kvarhLagging) - (more * running) / 4, 6);
    expect(bound.trials).toBe(90);
    expect(bound.words).toMatch(/90 trials/);
  });

  it('has the least active energy of any admissible field', () => {
    const bound = boundCost({
      plant: { load, motors: [motor] },
      totals: (series) => Float64Array.of(total(series.kwh)),
    });
    const standing = operatingPoint(motor.motor, { shaftKw: 1200, fieldCurrentA: 105 });
    const { kvarDelivered } = capability(motor.motor, { shaftKw: 1200 });
    const least = leastLossWithin(motor.motor, { shaftKw: 1200, fromKvar: -kvarDelivered!, toKvar: 400 });
    const running = motor.shaftKw.filter((kw) => kw > 0).length;
    expect(bound.cost).toBeCloseTo(total(load.kwh) + ((least.inputKw - standing.inputKw) * running) / 4, 6);
  });

  it('is never above any setting, nor above the best found', () => {
    const plant = { load, motors: [motor] };
    const bound = boundCost({ plant, totals: kvaBill }).cost!;
    expect(bound).toBeLessThanOrEqual(searchFields({ plant, totals: kvaBill }).cost);
    for (let planFieldA = 80; planFieldA <= 150; planFieldA += 5) {
      expect(total(kvaBill(simulatePlan({ load, motors: [{ ...motor, planFieldA }] }).load))).toBeGreaterThanOrEqual(
        bound,
      );
    }
  });

  it('holds for a submeter series of many loads', () => {
    const shaftKw = Float64Array.from(load.kwh, (_, i) => 500 + 900 * Math.abs(Math.sin(i * 0.77 + i * i * 0.001)));
    const series = { ...load };
    const many = { ...motor, shaftKw };
    const plant = { load: series, motors: [many, { ...many, shaftKw: shaftKw.map((kw) => kw * 0.9 + 17) }] };
    const totals = (s: LoadSeries) =>
      Float64Array.of(total(s.kvarhLagging) + 5 * total(s.kvarhLeading) + 0.1 * total(s.kwh));
    expect(boundCost({ plant, totals }).cost!).toBeLessThanOrEqual(searchFields({ plant, totals }).cost);
  });

  it('gives none where a bill falls as a register rises', () => {
    const credit = (series: LoadSeries) => Float64Array.of(1000 - 0.05 * total(series.kvarhLeading));
    const light = buildLoad(3, { kvarhLagging: new Float64Array(load.kwh.length).fill(60) });
    const bound = boundCost({ plant: { load: light, motors: [motor] }, totals: credit });
    expect(bound.cost).toBeNull();
    expect(bound.words).toMatch(/leading energy falls/);
  });

  it('takes off twice the most a bill rises as active energy falls, and says so', () => {
    // A power factor of the whole series rounded down to 0.0005 puts steps of 20 on the bill; lagging energy costs 1.
    const totals = (series: LoadSeries) => {
      const pf = total(series.kwh) / Math.hypot(total(series.kwh), total(series.kvarhLagging));
      return Float64Array.of(total(series.kvarhLagging) + 0.01 * total(series.kwh) - 20 * Math.floor(2000 * pf));
    };
    const plant = { load, motors: [motor] };
    const bound = boundCost({ plant, totals });
    expect(bound.words).toMatch(/; (3\d|40)\.\d\d, twice the most seen in 90 trials/);
    expect(bound.cost!).toBeLessThanOrEqual(searchFields({ plant, totals }).cost);
  });

  it('gives none for a meter upstream of a transformer', () => {
    const upstream = { ratedKva: 7500, resistancePu: 0.01, reactancePu: 0.06 };
    expect(boundCost({ plant: { load, motors: [motor], upstream }, totals: kvaBill }).cost).toBeNull();
  });
});
