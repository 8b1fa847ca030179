import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  appraiseInvestment,
  investmentMonths,
  investmentYears,
  rankInputs,
  sampleAppraisal,
  type Investment,
  type Spreads,
} from '../../../src/core/economics';
import { quantilesOf } from '../../../src/core/economics/sampling';

const investment: Investment = {
  capitalCost: 30_000,
  incentive: 2_000,
  saving: { energy: -1_000, demand: 9_000, reactive: 4_000, tax: 500 },
  savingWithHours: { energy: -1_000, reactive: 4_000 },
  growth: { energy: 0.02, demand: 0.03, reactive: 0.03, fixed: 0 },
  yearlyUpkeep: 500,
  upkeepGrowth: 0.02,
  taxRate: 0.25,
  depreciationYears: 8,
  discountRate: 0.08,
  years: 10,
};
const none: Spreads = { saving: 0, hours: 0, work: 0, upkeep: 0, energyGrowth: 0, demandGrowth: 0 };
const usual: Spreads = { saving: 0.1, hours: 0.05, work: 0.15, upkeep: 0.2, energyGrowth: 0.01, demandGrowth: 0.01 };
const options = { samples: 1000, seed: 7 };

describe('quantilesOf', () => {
  it('interpolates between order statistics', () => {
    // 0..10: place 0.1 x 10 = 1, 5, 9.
    expect(quantilesOf(Float64Array.from({ length: 11 }, (_, i) => i))).toEqual({ p10: 1, p50: 5, p90: 9 });
    expect(quantilesOf(Float64Array.from([1, 2]))).toEqual({ p10: 1.1, p50: 1.5, p90: 1.9 });
  });
});

describe('sampleAppraisal', () => {
  it('repeats itself with the same seed and differs with another', () => {
    expect(sampleAppraisal(investment, usual, options)).toEqual(sampleAppraisal(investment, usual, { ...options }));
    const other = sampleAppraisal(investment, usual, { ...options, seed: 8 });
    expect(other.npv.p10).not.toBe(sampleAppraisal(investment, usual, options).npv.p10);
  });

  it('is the plain appraisal, month by month, when nothing is uncertain', () => {
    const certain = sampleAppraisal(investment, none, { samples: 10, seed: 1 });
    const plain = appraiseInvestment(investment);
    expect(certain.npv.p10).toBeCloseTo(plain.npv, 8);
    expect(certain.npv.p90).toBeCloseTo(plain.npv, 8);
    expect(certain.paybackMonths.p50).toBeCloseTo(12 * plain.simplePaybackYears!, 9);
    expect(certain.paidBackShare).toBe(1);
    const months = investmentMonths(investmentYears(investment));
    expect(certain.band).toHaveLength(months.length);
    certain.band.forEach((point, m) => expect(point.p50).toBeCloseTo(months[m]!.cumulative, 8));
  });

  it('has medians near the figures without spread: it samples what is appraised', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 2 ** 31 }),
        fc.double({ min: 0, max: 0.5, noNaN: true }),
        fc.double({ min: 0, max: 15_000, noNaN: true }),
        (seed, taxRate, incentive) => {
          const one = { ...investment, taxRate, incentive };
          const sampled = sampleAppraisal(one, usual, { samples: 1000, seed });
          const plain = appraiseInvestment(one);
          const spread = sampled.npv.p90 - sampled.npv.p10;
          expect(Math.abs(sampled.npv.p50 - plain.npv)).toBeLessThan(0.08 * spread);
          const months = sampled.paybackMonths;
          const range = months.p90! - months.p10!;
          expect(Math.abs(months.p50! - 12 * plain.simplePaybackYears!)).toBeLessThan(0.1 * range);
        },
      ),
      { numRuns: 15 },
    );
  });

  it('has the quantiles of a lognormal saving when only the saving is uncertain', () => {
    // One year, no upkeep, tax or discount: NPV = 12000 exp(z ln 1.2) - 30000; at 10 % z = -1.28155: 12000 x 0.79163 = 9499.6.
    const one: Investment = {
      ...{ capitalCost: 30_000, saving: { demand: 12_000 }, growth: { demand: 0 } },
      ...{ yearlyUpkeep: 0, discountRate: 0, years: 1 },
    };
    const sampled = sampleAppraisal(one, { ...none, saving: 0.2 }, { samples: 50_000, seed: 7 });
    expect(Math.abs(sampled.npv.p10 - (9499.6 - 30_000))).toBeLessThan(40);
    expect(Math.abs(sampled.npv.p50 - (12_000 - 30_000))).toBeLessThan(40);
    expect(sampled.paidBackShare).toBe(0);
    expect(sampled.paybackMonths).toEqual({ p10: null, p50: null, p90: null });
  });

  it('orders its quantiles', () => {
    const wide = { saving: 0.3, hours: 0.2, work: 0.3, upkeep: 0.5, energyGrowth: 0.03, demandGrowth: 0.03 };
    const found = sampleAppraisal(investment, wide, options);
    for (const { p10, p50, p90 } of [found.npv, ...found.band]) {
      expect(p10).toBeLessThanOrEqual(p50);
      expect(p50).toBeLessThanOrEqual(p90);
    }
  });

  it.each([
    [{}, {}, { samples: 1 }, /samples must be a whole number from 2 to 1000000, got 1/],
    [{}, {}, { seed: 0.5 }, /seed must be a whole number, got 0.5/],
    [{}, { saving: -1 }, {}, /spread of saving must be in \[0, 10\], got -1/],
    [{ years: 0 }, {}, {}, /years/],
    [{ capitalCost: -1 }, {}, {}, /capitalCost/],
    [{ yearlyUpkeep: NaN }, {}, {}, /finite, got NaN for yearlyUpkeep/],
  ])('refuses %o %o %o', (wrong, spread, asked, message) => {
    const act = () => sampleAppraisal({ ...investment, ...wrong }, { ...usual, ...spread }, { ...options, ...asked });
    expect(act).toThrow(RangeError);
    expect(act).toThrow(message);
  });
});

describe('rankInputs', () => {
  it('puts the input that moves the present value most first, with its paybacks', () => {
    const ranking = rankInputs(investment, usual);
    const swings = ranking.map((row) => row.swing);
    expect(swings).toEqual([...swings].sort((a, b) => b - a));
    expect(ranking[0]!.input).toBe('saving');
    const work = ranking.find((row) => row.input === 'work')!;
    // Dearer work is worth less and takes longer.
    expect(work.high.npv).toBeLessThan(work.low.npv);
    expect(work.high.paybackYears!).toBeGreaterThan(work.low.paybackYears!);
  });

  it('has the present values of a hand calculation', () => {
    // Saving 12000 over one year without discount, cost 30000; work spread 0.15: exp(1.2815516 ln 1.15) = 1.1962, so 12000 - 35886 = -23886.
    const one: Investment = {
      ...{ capitalCost: 30_000, saving: { demand: 12_000 }, growth: { demand: 0 } },
      ...{ yearlyUpkeep: 0, discountRate: 0, years: 1 },
    };
    const [row, ...others] = rankInputs(one, { ...none, work: 0.15 });
    expect(row!.input).toBe('work');
    expect(row!.high.move).toBeCloseTo(1.1962, 4);
    expect(Math.abs(row!.high.npv - -23_886)).toBeLessThan(1.5);
    expect(row!.high.paybackYears).toBeNull();
    expect(others).toEqual([]);
  });

  it('leaves out what moves nothing', () => {
    expect(rankInputs({ ...investment, yearlyUpkeep: 0 }, usual).map((row) => row.input)).not.toContain('upkeep');
    expect(rankInputs(investment, none)).toEqual([]);
  });
});
