import { describe, expect, it } from 'vitest';
import { appraise, sampleAppraisal } from '../../../src/core/economics';
import type { UncertainProject } from '../../../src/core/economics';
import { normalStream, uniformStream, xoshiro128 } from '../../../src/core/economics/random';
import { quantilesOf } from '../../../src/core/economics/uncertainty';

const project: UncertainProject = {
  capitalCost: 30000,
  firstYearSaving: 12000,
  yearlyUpkeep: 500,
  escalationRate: 0.02,
  discountRate: 0.08,
  years: 10,
  uncertainty: { saving: 0.15, cost: 0.1, escalation: 0.01 },
  samples: 4000,
  seed: 7,
};

describe('xoshiro128', () => {
  it('has the outputs of the published algorithm from the state 1, 2, 3, 4 (computed apart from this code in exact integers)', () => {
    const next = xoshiro128([1, 2, 3, 4]);
    expect([next(), next(), next(), next(), next()]).toEqual([11520, 0, 5927040, 70819200, 2031721883]);
  });
});

describe('uniformStream and normalStream', () => {
  it('have the moments of their distributions', () => {
    const uniform = uniformStream(1);
    const normal = normalStream(uniformStream(2));
    const n = 200000;
    let [mean, square, zMean, zSquare, beyond] = [0, 0, 0, 0, 0];
    for (let i = 0; i < n; i++) {
      const u = uniform();
      const z = normal();
      mean += u / n;
      square += (u * u) / n;
      zMean += z / n;
      zSquare += (z * z) / n;
      beyond += z > 1.2815515655446004 ? 1 / n : 0;
    }
    expect(mean).toBeCloseTo(0.5, 2);
    expect(square).toBeCloseTo(1 / 3, 2);
    expect(Math.abs(zMean)).toBeLessThan(0.01);
    expect(zSquare).toBeCloseTo(1, 1);
    expect(beyond).toBeCloseTo(0.1, 2);
  });
});

describe('quantilesOf', () => {
  it('interpolates between order statistics', () => {
    // 0..10: place 0.1 x 10 = 1, 5, 9.
    expect(quantilesOf(Float64Array.from({ length: 11 }, (_, i) => i))).toEqual({ p10: 1, p50: 5, p90: 9 });
    expect(quantilesOf(Float64Array.from([1, 2]))).toEqual({ p10: 1.1, p50: 1.5, p90: 1.9 });
  });
});

describe('sampleAppraisal', () => {
  it('repeats itself with the same seed and differs with another', () => {
    expect(sampleAppraisal(project)).toEqual(sampleAppraisal({ ...project }));
    expect(sampleAppraisal({ ...project, seed: 8 }).npv.p50).not.toBe(sampleAppraisal(project).npv.p50);
  });

  it('is the plain appraisal when nothing is uncertain', () => {
    const certain = sampleAppraisal({ ...project, uncertainty: { saving: 0, cost: 0, escalation: 0 }, samples: 10 });
    const yearlySaving = Array.from({ length: 10 }, (_, k) => 12000 * 1.02 ** k);
    const plain = appraise({
      capitalCost: 30000,
      yearlySaving,
      yearlyUpkeep: yearlySaving.map(() => 500),
      discountRate: 0.08,
    });
    expect(certain.npv.p10).toBeCloseTo(plain.npv, 8);
    expect(certain.npv.p90).toBeCloseTo(plain.npv, 8);
    expect(certain.paybackMonths.p50).toBeCloseTo(12 * plain.simplePaybackYears!, 9);
    expect(certain.paidBackShare).toBe(1);
    expect(certain.band).toHaveLength(121);
    expect(certain.band[0]).toEqual({ month: 0, p10: -30000, p50: -30000, p90: -30000 });
  });

  it('has the quantiles of a lognormal saving when only the saving is uncertain', () => {
    // One year, no upkeep or discount: NPV = 12000 exp(z ln 1.2) - 30000; at 10 % z = -1.28155: 12000 x 0.79163 = 9499.6.
    const one = sampleAppraisal({
      ...project,
      yearlyUpkeep: 0,
      discountRate: 0,
      years: 1,
      uncertainty: { saving: 0.2, cost: 0, escalation: 0 },
      samples: 100000,
    });
    expect(Math.abs(one.npv.p10 - (9499.6 - 30000))).toBeLessThan(40);
    expect(Math.abs(one.npv.p50 - (12000 - 30000))).toBeLessThan(40);
    expect(one.paidBackShare).toBe(0);
    expect(one.paybackMonths).toEqual({ p10: null, p50: null, p90: null });
  });

  it('orders quantiles, and ranks the inputs by what they move', () => {
    const found = sampleAppraisal({ ...project, uncertainty: { saving: 0.3, cost: 0.2, escalation: 0.002 } });
    for (const { p10, p50, p90 } of [found.npv, ...found.band]) {
      expect(p10).toBeLessThanOrEqual(p50);
      expect(p50).toBeLessThanOrEqual(p90);
    }
    expect(found.ranking.map((r) => r.input)).toEqual(['saving', 'cost', 'escalation']);
    expect(found.ranking[1]!.npvLow).toBeGreaterThan(found.ranking[1]!.npvHigh);
  });

  it.each([
    [{ samples: 1 }, /samples/],
    [{ years: 0 }, /years/],
    [{ seed: 0.5 }, /seed/],
    [{ uncertainty: { saving: -1, cost: 0, escalation: 0 } }, /uncertainty.saving/],
    [{ capitalCost: -1 }, /capitalCost/],
    [{ yearlyUpkeep: NaN }, /yearlyUpkeep must be finite, got NaN/],
  ])('refuses %o', (wrong, message) => {
    expect(() => sampleAppraisal({ ...project, ...wrong })).toThrow(message);
  });
});
