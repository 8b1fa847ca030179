import { describe, expect, it } from 'vitest';
import { editionRanking, fixedRows, movableOf, moneyOf, stepOf } from '@/components/client/edition-money';
import { ownSentence } from '@/components/client/own-figures';
import { appraiseInvestment } from '@/core/economics';
import { investmentOf } from '@/schemas/assumptions';
import type { EditionContent } from '@/schemas/edition';
import { planCashFlow } from '@/server/services/plan-economics';
import { buildEditionContent } from '../setup/edition';

const base = buildEditionContent();
const ranges = { runsPercent: { low: 60, high: 120 }, capitalCost: { low: 50_000, high: 150_000 } };

/** An edition frozen with its money and with ranges. */
function withRanges(): EditionContent {
  const economics = { ...base.plan.economics, ranges };
  const plan = { ...base.plan, economics };
  const money = planCashFlow(moneyOf({ ...base, plan })).moneyView;
  return { ...base, plan, money };
}

const plain = (words: unknown) => String(words).replaceAll('\u00a0', ' ');

describe('what the client may move', () => {
  it('is what the consultant gave a range, each with the plan’s own value', () => {
    expect(movableOf(moneyOf(withRanges()))).toEqual([
      { key: 'runsPercent', own: 100, low: 60, high: 120 },
      { key: 'capitalCost', own: 90_000, low: 50_000, high: 150_000 },
    ]);
    expect(stepOf({ key: 'capitalCost', own: 90_000, low: 50_000, high: 150_000 })).toBe(500);
    expect(stepOf({ key: 'runsPercent', own: 100, low: 60, high: 120 })).toBe(1);
  });

  it('is nothing where no range was given, as in every edition made before', () => {
    const old = moneyOf(base);
    expect(movableOf(old)).toEqual([]);
    expect(editionRanking(base)).toBeNull();
    expect(fixedRows(old, 'USD').map(({ label, value }) => [label, plain(value)])).toEqual([
      ['Rise of power prices', '0.0 % a year'],
      ['Work in all', '90,000 USD'],
      ['Upkeep', '0 USD a year'],
      ['Discount rate', '8.0 % a year'],
      ['Tax rate', 'before tax'],
      ['Horizon', '10 years'],
    ]);
  });
});

describe('the money of an edition', () => {
  it('is told from the totals where it was frozen without', () => {
    const cheaper = { ...base.plan, groupTotals: { ...base.plan.groupTotals, demand: 190_000 } };
    const { saving, savingWithHours } = moneyOf({ ...base, plan: cheaper });
    expect(saving).toMatchObject({ demand: 60_000, energy: 0 });
    expect(savingWithHours).toEqual(saving);
  });

  it('comes to the edition’s own figures while nothing is moved', () => {
    const cheaper = { ...base.plan, groupTotals: { ...base.plan.groupTotals, demand: 190_000 } };
    const found = appraiseInvestment(investmentOf(moneyOf({ ...base, plan: cheaper })));
    // 60,000 a year for 90,000: 18 months, as the edition says; 402,604.88 - 90,000 of present value at 8 % over ten years.
    expect(found.simplePaybackYears).toBeCloseTo(base.plan.appraisal.simplePaybackYears!, 9);
    expect(found.npv).toBeCloseTo(base.plan.appraisal.npv, 1);
  });

  it('is ranked in words', () => {
    const cheaper = { ...base.plan, groupTotals: { ...base.plan.groupTotals, demand: 190_000 } };
    const content = { ...base, plan: cheaper };
    const money = planCashFlow(moneyOf(content)).moneyView;
    const [first] = editionRanking({ ...content, money })!.rows;
    expect(first).toMatchObject({ name: 'The calculated saving', unit: 'USD a year' });
  });
});

describe('the sentence of the reader’s own assumptions', () => {
  const said = {
    ...{ moved: true, editionNumber: 2, editionYears: 1.65, horizonYears: 10 },
    ...{ appraisal: { simplePaybackYears: 1.85 }, spread: { lowMonths: 19, highMonths: 27 } },
  };
  it('says what changes and what the report shows', () => {
    expect(plain(ownSentence(said))).toBe(
      'With your own assumptions it is paid back in 22 months, eight of ten samples between 19 and 27 months. Edition 2 shows 20 months.',
    );
    expect(plain(ownSentence({ ...said, moved: false }))).toBe(
      'Edition 2 shows 20 months. Move a figure to see what it changes.',
    );
    expect(plain(ownSentence({ ...said, appraisal: { simplePaybackYears: null } }))).toBe(
      'With your own assumptions it is not paid back within 10 years. Edition 2 shows 20 months.',
    );
    expect(plain(ownSentence({ ...said, spread: { lowMonths: 19, highMonths: null } }))).toContain(
      'eight of ten samples between 19 months and never.',
    );
  });
});
