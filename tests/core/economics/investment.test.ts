import * as formulajs from '@formulajs/formulajs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  appraise,
  appraiseInvestment,
  breakEvenCapital,
  investmentMonths,
  investmentYears,
  movedInvestment,
  type Investment,
} from '../../../src/core/economics';
import { afterTaxCase, escalationCase } from '../../published/economics-cases';

const plain: Investment = {
  capitalCost: 1000,
  saving: { energy: 300, demand: 200 },
  growth: { energy: 0, demand: 0 },
  yearlyUpkeep: 100,
  discountRate: 0.1,
  years: 3,
};

const amount = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** Investments of any kind: growth by group, upkeep, incentive, tax. */
const anyInvestment = fc.record({
  capitalCost: amount(0, 1e6),
  incentive: amount(0, 1e5),
  saving: fc.record({ energy: amount(-1e5, 1e5), demand: amount(-1e5, 5e5), tax: amount(-1e4, 1e5) }),
  savingWithHours: fc.record({ energy: amount(-1e5, 1e5) }),
  growth: fc.record({ energy: amount(-0.1, 0.2), demand: amount(-0.1, 0.2) }),
  yearlyUpkeep: amount(0, 1e5),
  upkeepGrowth: amount(-0.05, 0.1),
  taxRate: amount(0, 0.6),
  depreciationYears: fc.integer({ min: 1, max: 40 }),
  discountRate: amount(0, 0.4),
  years: fc.integer({ min: 1, max: 30 }),
});

describe('investmentYears', () => {
  it(`has tax, flow and annual worth of ${afterTaxCase.source}`, () => {
    const { capitalCost, revenues, expenses, years, taxRate, discountRate } = afterTaxCase;
    const rows = investmentYears({
      ...plain,
      ...{ capitalCost, years, taxRate, discountRate, depreciationYears: years, yearlyUpkeep: expenses },
      saving: { energy: revenues },
    });
    for (const row of rows.slice(1)) {
      expect(Math.abs(row.tax - afterTaxCase.tax.expected)).toBeLessThanOrEqual(afterTaxCase.tax.tolerance);
      const flow = afterTaxCase.afterTaxFlow;
      expect(Math.abs(row.net - flow.expected)).toBeLessThanOrEqual(flow.tolerance);
    }
    const annual = -(formulajs.PMT(discountRate, years, rows.at(-1)!.cumulativeDiscounted) as number);
    expect(Math.abs(annual - afterTaxCase.annualWorth.expected)).toBeLessThanOrEqual(
      afterTaxCase.annualWorth.tolerance,
    );
  });

  it(`escalates charges as in ${escalationCase.source}`, () => {
    const { firstYear, growth, discountRate, yearly, presentWorth } = escalationCase;
    const rows = investmentYears({
      ...plain,
      ...{ capitalCost: 0, yearlyUpkeep: 0, discountRate, years: yearly.length },
      saving: { energy: firstYear },
      growth: { energy: growth },
    });
    yearly.forEach((printed, k) => expect(Math.abs(rows[k + 1]!.saving - printed)).toBeLessThanOrEqual(0.5));
    expect(Math.abs(rows.at(-1)!.cumulativeDiscounted - presentWorth.expected)).toBeLessThanOrEqual(
      presentWorth.tolerance,
    );
  });

  it('writes off by the straight line of a spreadsheet library', () => {
    // AS = (1 - I) E + I D of [THU]: E the saving less upkeep, I the tax rate, D the depreciation.
    const rows = investmentYears({ ...plain, taxRate: 0.3, depreciationYears: 2, incentive: 200 });
    const written = formulajs.SLN(800, 0, 2) as number;
    expect(rows.map((row) => row.net)).toEqual([-800, 0.7 * 400 + 0.3 * written, 0.7 * 400 + 0.3 * written, 0.7 * 400]);
  });

  it('grows each group at its own rate, what follows by their weights, and upkeep at its own', () => {
    // Riders follow: (300 x 0.02 + 100 x 0.06)/400 = 0.03. Third year: 300 x 1.02^2 + 100 x 1.06^2 + 40 x 1.03^2 = 312.12 + 112.36 + 42.436.
    const rows = investmentYears({
      ...plain,
      saving: { energy: 300, demand: 100, adjustment: 40 },
      growth: { energy: 0.02, demand: 0.06, fixed: 0.5 },
      upkeepGrowth: 0.1,
    });
    expect(rows[1]!.saving).toBe(440);
    expect(rows[3]!.saving).toBeCloseTo(466.916, 9);
    expect(rows[3]!.upkeep).toBeCloseTo(121, 9);
  });

  it('relieves tax where the base is negative, and counts no incentive above the work', () => {
    // First year: 500 - 100 - 1000 = -600 taxed at 0.25: -150, so 400 + 150 = 550.
    const rows = investmentYears({ ...plain, taxRate: 0.25, depreciationYears: 1 });
    expect(rows[1]).toMatchObject({ tax: -150, net: 550 });
    expect(investmentYears({ ...plain, incentive: 5000 })[0]).toMatchObject({ work: 1000, incentive: 1000, net: 0 });
  });

  it('adds up, and is before tax where the tax is nought', () => {
    fc.assert(
      fc.property(anyInvestment, (investment) => {
        const rows = investmentYears(investment);
        const size = 1 + rows.reduce((sum, row) => sum + Math.abs(row.net) + Math.abs(row.saving), 0);
        for (const row of rows) {
          const sum = row.incentive - row.work + row.saving - row.upkeep - row.tax;
          expect(Math.abs(row.net - sum) / size).toBeLessThan(1e-12);
        }
        const total = rows.reduce((sum, row) => sum + row.net, 0);
        expect(Math.abs(rows.at(-1)!.cumulative - total) / size).toBeLessThan(1e-12);
        const untaxed = investmentYears({ ...investment, taxRate: 0 });
        const without = investmentYears({ ...investment, taxRate: undefined, depreciationYears: undefined });
        expect(untaxed.map((row) => row.net)).toEqual(without.map((row) => row.net));
      }),
      { numRuns: 500 },
    );
  });

  it('has months that add up to its years and end where they end', () => {
    fc.assert(
      fc.property(anyInvestment, (investment) => {
        const years = investmentYears(investment);
        const months = investmentMonths(years);
        expect(months).toHaveLength(12 * investment.years + 1);
        const size = 1 + years.reduce((sum, row) => sum + Math.abs(row.saving) + Math.abs(row.net), 0);
        for (const row of years.slice(1)) {
          const ofYear = months.slice(12 * row.year - 11, 12 * row.year + 1);
          for (const key of ['saving', 'upkeep', 'tax', 'net', 'discounted'] as const) {
            const sum = ofYear.reduce((total, month) => total + month[key], 0);
            expect(Math.abs(sum - row[key]) / size).toBeLessThan(1e-12);
          }
          expect(Math.abs(ofYear.at(-1)!.cumulative - row.cumulative) / size).toBeLessThan(1e-12);
        }
      }),
      { numRuns: 300 },
    );
  });

  it('crosses nought in the month of the simple payback', () => {
    // 400 a year: 1000 after 2.5 years, month 30.
    const months = investmentMonths(investmentYears(plain));
    expect(months[30]!.cumulative).toBeCloseTo(0, 9);
    expect(months[29]!.cumulative).toBeLessThan(0);
    expect(appraiseInvestment(plain).simplePaybackYears).toBe(2.5);
  });

  it('leaves what it is given alone', () => {
    const given = structuredClone(plain);
    investmentYears(given);
    movedInvestment(given, { saving: 2, hours: 0.5 });
    expect(given).toEqual(plain);
  });

  it.each([
    [{ years: 0 }, /years must be a whole number from 1 to 100, got 0/],
    [{ capitalCost: -1 }, /capitalCost must be >= 0, got -1/],
    [{ incentive: -1 }, /incentive must be >= 0, got -1/],
    [{ taxRate: 1, depreciationYears: 5 }, /taxRate must be in \[0, 1\), got 1/],
    [{ taxRate: 0.2 }, /depreciationYears must be a whole number >= 1, got undefined/],
    [{ taxRate: 0.2, depreciationYears: 1.5 }, /depreciationYears .* got 1.5/],
    [{ growth: { energy: -1 } }, /growth of energy must be above -1, got -1/],
    [{ upkeepGrowth: NaN }, /growth of upkeep must be above -1, got NaN/],
    [{ discountRate: -1 }, /growth of discount/],
    [{ saving: { energy: NaN } }, /finite, got NaN for energy/],
    [{ yearlyUpkeep: Infinity }, /finite, got Infinity for yearlyUpkeep/],
  ])('refuses %o', (wrong, message) => {
    expect(() => investmentYears({ ...plain, ...wrong })).toThrow(RangeError);
    expect(() => investmentYears({ ...plain, ...wrong })).toThrow(message);
  });
});

describe('appraiseInvestment', () => {
  it('is the appraisal of the flows, whose present value a spreadsheet library finds too', () => {
    fc.assert(
      fc.property(anyInvestment, (investment) => {
        const [start, ...rows] = investmentYears(investment);
        const flows = rows.map((row) => row.net);
        const found = appraiseInvestment(investment);
        const theirs = (formulajs.NPV(investment.discountRate, ...flows) as number) + start!.net;
        const size = 1 + Math.abs(start!.net) + flows.reduce((sum, flow) => sum + Math.abs(flow), 0);
        expect(Math.abs(found.npv - theirs) / size).toBeLessThan(1e-11);
        const plainly = appraise({
          capitalCost: -start!.net,
          yearlySaving: flows,
          discountRate: investment.discountRate,
        });
        if (start!.net < 0) expect(found).toEqual(plainly);
      }),
      { numRuns: 500 },
    );
  });

  it('never pays back what costs nothing and brings nothing', () => {
    const free = { ...plain, capitalCost: 0 };
    expect(appraiseInvestment(free)).toMatchObject({ simplePaybackYears: 0, discountedPaybackYears: 0 });
    expect(appraiseInvestment({ ...free, yearlyUpkeep: 500 })).toMatchObject({
      simplePaybackYears: null,
      discountedPaybackYears: null,
    });
    const paidFor = { ...plain, incentive: 1000, yearlyUpkeep: 600 };
    expect(appraiseInvestment(paidFor).simplePaybackYears).toBeNull();
  });
});

describe('breakEvenCapital', () => {
  it('is the work at which the present value is nought', () => {
    // Before tax: 400 (1/1.1 + 1/1.21 + 1/1.331) = 994.741, and the incentive on top.
    expect(breakEvenCapital(plain)).toBeCloseTo(994.741, 3);
    expect(breakEvenCapital({ ...plain, incentive: 200 })).toBeCloseTo(1194.741, 3);
    fc.assert(
      fc.property(anyInvestment, (investment) => {
        const capitalCost = breakEvenCapital(investment);
        if (capitalCost === null) return;
        const size = 1 + capitalCost + Math.abs(investment.saving.demand) + investment.yearlyUpkeep;
        expect(Math.abs(appraiseInvestment({ ...investment, capitalCost }).npv) / size).toBeLessThan(1e-8);
      }),
    );
  });

  it('is nothing where even free work would lose money', () => {
    expect(breakEvenCapital({ ...plain, yearlyUpkeep: 600 })).toBeNull();
  });
});

describe('movedInvestment', () => {
  it('moves the part of the saving that goes with the hours, and each growth by its own', () => {
    // Energy 300 all by hours, demand 200 none: at 0.9 of the hours 270 and 200; times 1.1: 297 and 220.
    const moved = movedInvestment(
      { ...plain, savingWithHours: { energy: 300 } },
      { saving: 1.1, hours: 0.9, work: 2, upkeep: 0.5, energyGrowth: 0.01, demandGrowth: -0.02 },
    );
    expect(moved.saving.energy).toBeCloseTo(297, 9);
    expect(moved.saving.demand).toBeCloseTo(220, 9);
    expect(moved.savingWithHours?.energy).toBeCloseTo(297, 9);
    expect(moved).toMatchObject({ capitalCost: 2000, yearlyUpkeep: 50, growth: { energy: 0.01, demand: -0.02 } });
  });

  it('keeps growth above -100 %', () => {
    expect(movedInvestment(plain, { energyGrowth: -5 }).growth.energy).toBe(-0.99);
  });
});
