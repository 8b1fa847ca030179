import * as formulajs from '@formulajs/formulajs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { appraise, ratesOfReturn } from '../../../src/core/economics';
import { irrCases, npvAndIrrCases, npvCases, paybackCases, pumpCase } from '../../published/economics-cases';

const amount = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const project = (yearlySaving: number[], capitalCost = 1000, discountRate = 0.1) => ({
  capitalCost,
  yearlySaving,
  discountRate,
});

describe('appraise', () => {
  it.each(npvCases)('has the present value of $source', (row) => {
    expect(Math.abs(appraise(row).npv - row.expected)).toBeLessThanOrEqual(row.tolerance);
  });

  it.each(irrCases)('has the rate of return of $source', (row) => {
    const { irr } = appraise({ ...row, discountRate: 0 });
    expect(Math.abs(irr! - row.expected)).toBeLessThanOrEqual(row.tolerance);
  });

  it.each(npvAndIrrCases)('has both of $source', (row) => {
    const { npv, irr } = appraise(row);
    expect(Math.abs(npv - row.npv.expected)).toBeLessThanOrEqual(row.npv.tolerance);
    expect(Math.abs(irr! - row.irr.expected)).toBeLessThanOrEqual(row.irr.tolerance);
  });

  it.each(paybackCases)('has the paybacks of $source', (row) => {
    const { simplePaybackYears, discountedPaybackYears, npv } = appraise(row);
    expect(Math.abs(simplePaybackYears! - row.simpleYears.expected)).toBeLessThanOrEqual(row.simpleYears.tolerance);
    expect(Math.abs(discountedPaybackYears! - row.discountedYears.expected)).toBeLessThanOrEqual(
      row.discountedYears.tolerance,
    );
    expect(Math.abs(npv - row.npv.expected)).toBeLessThanOrEqual(row.npv.tolerance);
  });

  it('agrees with the number of periods of a spreadsheet library on the paybacks of an even saving', () => {
    fc.assert(
      fc.property(amount(1000, 1e6), amount(0.06, 0.9), amount(0.001, 0.05), (cost, share, rate) => {
        const saving = cost * share;
        const found = appraise(project(new Array<number>(60).fill(saving), cost, rate));
        const simple = formulajs.NPER(0, saving, -cost) as number;
        expect(found.simplePaybackYears!).toBeCloseTo(simple, 9);
        // Within the year the library goes along a power, here a straight line is drawn: the whole years agree.
        const discounted = formulajs.NPER(rate, saving, -cost) as number;
        expect(Math.abs(found.discountedPaybackYears! - discounted)).toBeLessThan(rate);
        if (Math.abs(discounted - Math.round(discounted)) > 1e-6)
          expect(Math.floor(found.discountedPaybackYears!)).toBe(Math.floor(discounted));
      }),
      { numRuns: 500 },
    );
  });

  it('has no present value at its own rate of return', () => {
    fc.assert(
      fc.property(amount(100, 1e6), fc.array(amount(1, 1e6), { minLength: 1, maxLength: 30 }), (cost, saving) => {
        const { irr } = appraise(project(saving, cost));
        expect(Math.abs(appraise(project(saving, cost, irr!)).npv) / cost).toBeLessThan(1e-9);
      }),
    );
  });

  it('agrees with a general-purpose library on NPV and IRR of random projects', () => {
    fc.assert(
      fc.property(
        amount(100, 1e6),
        fc.array(amount(1, 1e6), { minLength: 1, maxLength: 30 }),
        amount(-0.2, 0.5),
        (cost, saving, rate) => {
          const found = appraise(project(saving, cost, rate));
          const theirs = formulajs.NPV(rate, ...saving) as number;
          expect(Math.abs(found.npv - (theirs - cost)) / (cost + Math.abs(theirs))).toBeLessThan(1e-11);
          const guess = found.irr!;
          const rateOf = formulajs.IRR([-cost, ...saving], guess) as number;
          // Towards -100 % the library stops at its own tolerance.
          if (guess > -0.9) expect(Math.abs(rateOf - guess) / (1 + Math.abs(guess))).toBeLessThan(1e-6);
          const residual = saving.reduce((sum, flow, k) => sum + flow / (1 + guess) ** (k + 1), -cost);
          expect(Math.abs(residual) / cost).toBeLessThan(1e-9);
        },
      ),
      { numRuns: 1000 },
    );
  });

  it('interpolates both paybacks within the year, the discounted one at the year-end factor', () => {
    // Simple: 400 + 400 = 800 after 2 years, 200 of 400 in the third: 2.5. Discounted at 10 %: 363.636 + 330.579 = 694.215,
    // third year 300.526, sum 994.741; fourth 273.205: 3 + 5.259/273.205 = 3.01925.
    const found = appraise(project([400, 400, 400, 400]));
    expect(found.simplePaybackYears).toBeCloseTo(2.5, 12);
    expect(found.discountedPaybackYears).toBeCloseTo(3.01925, 5);
  });

  it('counts the first crossing and ignores a later relapse', () => {
    expect(appraise(project([600, 600, -900, 100])).simplePaybackYears).toBeCloseTo(1 + 400 / 600, 12);
  });

  it('reaches the capital exactly at the end of a year in spite of rounding', () => {
    expect(appraise(project([0.7, 0.1], 0.8, 0)).simplePaybackYears).toBe(2);
  });

  it('takes upkeep off, a missing year being none', () => {
    const found = appraise({ ...project([600, 600, 600]), yearlyUpkeep: [100] });
    // 500 in the first year, 500 of 600 in the second.
    expect(found.simplePaybackYears).toBeCloseTo(1 + 500 / 600, 12);
    expect(found.npv).toBeCloseTo(-1000 + 500 / 1.1 + 600 / 1.21 + 600 / 1.331, 10);
  });

  it('says when a project is never paid back', () => {
    const found = appraise(project([100, 100]));
    expect(found.simplePaybackYears).toBeNull();
    expect(found.discountedPaybackYears).toBeNull();
    expect(found.irr).toBeLessThan(0);
    expect(found.notes.join(' ')).toMatch(/not recovered within 2 years/);
    expect(appraise(project([600, 500])).notes.join(' ')).toMatch(/Discounted, the capital is not recovered/);
  });

  it('pays back at once without capital, and has then no rate of return', () => {
    const found = appraise(project([100], 0));
    expect(found).toMatchObject({ simplePaybackYears: 0, discountedPaybackYears: 0, irr: null });
    expect(found.notes.join(' ')).toMatch(/No rate of return/);
    expect(appraise(project([0, 0], 0)).notes.join(' ')).toMatch(/all flows are zero/);
  });

  it('gives no rate of return where there is more than one, and lists them', () => {
    const found = appraise({
      capitalCost: -pumpCase.flows[0]!,
      yearlySaving: pumpCase.flows.slice(1),
      discountRate: 0.1,
    });
    expect(found.irr).toBeNull();
    expect(found.notes.join(' ')).toMatch(/25\.00 %, 400\.00 %/);
  });

  it.each([
    [{ ...project([1]), capitalCost: -1 }, /capitalCost must be >= 0, got -1/],
    [{ ...project([1]), discountRate: -1 }, /discountRate must be above -1, got -1/],
    [project([NaN]), /finite, got NaN in year 1/],
    [{ ...project([1]), yearlyUpkeep: [1, 2] }, /yearlyUpkeep must have at most 1/],
  ])('refuses %o', (wrong, message) => {
    expect(() => appraise(wrong)).toThrow(RangeError);
    expect(() => appraise(wrong)).toThrow(message);
  });
});

describe('ratesOfReturn', () => {
  it('finds every root of polynomials built from chosen rates', () => {
    const rates = fc.uniqueArray(fc.integer({ min: -60, max: 300 }), { minLength: 1, maxLength: 5 });
    fc.assert(
      fc.property(rates, (percents) => {
        const chosen = percents.map((p) => p / 100).sort((a, b) => a - b);
        fc.pre(chosen.every((rate, i) => i === 0 || rate - chosen[i - 1]! >= 0.05));
        // Flows of the product of (1 - (1 + r) x) over the chosen rates, lowest power first.
        const flows = chosen.reduce(
          (poly, rate) => {
            const next = [...poly, 0];
            poly.forEach((c, k) => (next[k + 1]! -= (1 + rate) * c));
            return next;
          },
          [1],
        );
        const found = ratesOfReturn(flows);
        expect(found).toHaveLength(chosen.length);
        chosen.forEach((rate, i) => expect((found as number[])[i]).toBeCloseTo(rate, 6));
      }),
      { numRuns: 500 },
    );
  });

  it('counts a root the present value only touches once', () => {
    // (1 - 1.25 x)^2 = 1 - 2.5 x + 1.5625 x^2.
    expect(ratesOfReturn([1, -2.5, 1.5625])).toEqual([0.25]);
  });

  it('finds none where the present value keeps its sign', () => {
    expect(ratesOfReturn([1, -1, 1])).toEqual([]);
    expect(ratesOfReturn([0, 5, 5])).toEqual([]);
  });
});
