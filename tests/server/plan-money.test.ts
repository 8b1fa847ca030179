import * as formulajs from '@formulajs/formulajs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { economicsDraftOf, economicsEntries, economicsToInput, usualRange } from '@/components/plans/money-draft';
import { paybackInFull, riseWords, spreadWords } from '@/components/plans/money-words';
import { investmentOf, spreadsOf, type PlanMoney } from '@/schemas/assumptions';
import type { PricedBillView, PricedLineView } from '@/schemas/plan';
import { planInput, type PlanInput } from '@/schemas/plan-input';
import { economicsInput, type PlanEconomics } from '@/schemas/plan-money';
import { Plan } from '@/server/models/Plan';
import { inTx } from '@/server/db/tx';
import { appraisePlan, noCashFlow, planCashFlow, savingOf } from '@/server/services/plan-economics';
import { planStart } from '@/server/services/plan-start';
import { createPlan, plansOf } from '@/server/services/plans';
import { closePool } from '@/server/workers/pool';
import { buildPlansStation, type PlansStation } from '../setup/plans';

const line = (group: PricedLineView['group'], amount: number, unit?: string): PricedLineView => ({
  id: `${group} ${unit ?? ''}`,
  label: group,
  group,
  amount,
  unit,
  explanation: '',
});
const bill = (lines: PricedLineView[]): PricedBillView => ({
  ...{ from: '2025-11-01', to: '2025-12-01', notes: [], reactiveCost: 0, lines },
  total: lines.reduce((sum, one) => sum + one.amount, 0),
});

const money: PlanMoney = {
  saving: { energy: -1000, demand: 30_000, reactive: 12_000, tax: 2_000 },
  savingWithHours: { energy: -1000, reactive: 12_000 },
  capitalCost: 60_000,
  yearlyUpkeep: 2_000,
  economics: { discountPercent: 8, escalationPercent: 2, horizonYears: 10 },
};
const rich: PlanEconomics = {
  ...money.economics,
  demandRisePercent: 4,
  upkeepGrowthPercent: 3,
  incentive: 10_000,
  taxPercent: 25,
  depreciationYears: 5,
};

describe('savingOf', () => {
  it('sums the saving by group, and what goes with the hours', () => {
    const before = bill([
      line('energy', 100, 'kWh'),
      line('demand', 50, 'kW'),
      line('fixed', 9),
      line('tax', 16, 'USD'),
    ]);
    const after = bill([
      line('energy', 110, 'kWh'),
      line('demand', 20, 'kW'),
      line('fixed', 9),
      line('tax', 14, 'USD'),
    ]);
    // Of -10 by energy and 30 by demand a quarter goes with the hours: of the tax 2 x 10/40.
    expect(savingOf([before], [after])).toEqual({
      saving: { energy: -10, demand: 30, fixed: 0, tax: 2 },
      savingWithHours: { energy: -10, demand: 0, fixed: 0, tax: 0.5 },
    });
  });

  it('counts a reactive charge by its unit: kvarh with the hours, kvar not', () => {
    const saved = savingOf([bill([line('reactive', 40, 'kvarh'), line('reactive', 60, 'kvar')])], [bill([])]);
    expect(saved).toEqual({ saving: { reactive: 100 }, savingWithHours: { reactive: 40 } });
  });
});

describe('a plan’s money', () => {
  it('is appraised as a spreadsheet would, with growth by group, upkeep, incentive and tax', () => {
    // Tax lines follow by the weights of what the others save: (1000 x 0.02 + 30000 x 0.04 + 12000 x 0.02)/43000.
    const follow = (1000 * 0.02 + 30_000 * 0.04 + 12_000 * 0.02) / 43_000;
    const flows = Array.from({ length: 10 }, (_, k) => {
      const saved = -1000 * 1.02 ** k + 30_000 * 1.04 ** k + 12_000 * 1.02 ** k + 2000 * (1 + follow) ** k;
      const upkeep = 2000 * 1.03 ** k;
      const written = k < 5 ? (formulajs.SLN(50_000, 0, 5) as number) : 0;
      return saved - upkeep - 0.25 * (saved - upkeep - written);
    });
    const found = appraisePlan({ ...money, economics: rich });
    expect(found.npv).toBeCloseTo((formulajs.NPV(0.08, ...flows) as number) - 50_000, 4);
    expect(found.irr).toBeCloseTo(formulajs.IRR([-50_000, ...flows], 0.5) as number, 6);
    const shown = planCashFlow({ ...money, economics: rich }).moneyView!;
    shown.years.slice(1).forEach((year, k) => expect(year.net).toBeCloseTo(flows[k]!, 6));
  });

  it('is sampled as it is appraised: the median lies near the figure, the same each time', () => {
    const shown = planCashFlow({ ...money, economics: rich });
    const { npv, paybackMonths, paidBackShare, ranking, breakEvenCapital } = shown.moneyView!;
    const figure = appraisePlan({ ...money, economics: rich });
    expect(Math.abs(npv.p50 - figure.npv)).toBeLessThan(0.08 * (npv.p90 - npv.p10));
    expect(Math.abs(paybackMonths.p50! - 12 * figure.simplePaybackYears!)).toBeLessThan(1);
    expect(paidBackShare).toBeGreaterThan(0.99);
    expect(ranking.map(({ input }) => input)).toContain('work');
    expect(breakEvenCapital!).toBeGreaterThan(money.capitalCost);
    expect(planCashFlow({ ...money, economics: rich })).toEqual(shown);
    expect(shown.cashFlow).toHaveLength(121);
  });

  it('has assumptions of the old shape: one rise, before tax, the usual spreads', () => {
    const investment = investmentOf(money);
    expect(investment).toMatchObject({ taxRate: 0, incentive: 0, upkeepGrowth: 0, years: 10 });
    expect(investment.growth).toEqual({ energy: 0.02, demand: 0.02, reactive: 0.02, fixed: 0.02 });
    expect(spreadsOf(money.economics)).toMatchObject({ saving: 0.1, work: 0.15 });
    expect(noCashFlow.moneyView).toBeNull();
  });

  it('moves by the assumptions a reader sets, and by nothing else', () => {
    const own = investmentOf(money, { runsPercent: 50, savingPercent: 90, escalationPercent: 0, horizonYears: 5 });
    // Reactive 12000 all by hours: half, times 0.9; demand 30000 not by hours: times 0.9.
    expect(own.saving.reactive).toBeCloseTo(5400, 9);
    expect(own.saving.demand).toBeCloseTo(27_000, 9);
    expect(own).toMatchObject({ years: 5, capitalCost: 60_000, growth: { energy: 0 } });
    expect(investmentOf({ ...money, economics: rich }, { escalationPercent: 0 }).growth).toMatchObject({
      energy: 0,
      demand: 0.04,
    });
  });
});

/** Words of a refusal by the path of the entry. */
function faults(economics: unknown, rest: Partial<PlanInput> = {}): Record<string, string> {
  const asked = { name: 'A', fields: [], workCost: 60_000, yearlyUpkeep: 0, ...rest };
  const parsed = planInput.safeParse({ ...asked, economics });
  return Object.fromEntries((parsed.error?.issues ?? []).map((issue) => [issue.path.join('.'), issue.message]));
}

describe('the entries of a plan’s money', () => {
  it('say what is wrong and where', () => {
    const usual = money.economics;
    expect(faults(usual)).toEqual({});
    expect(faults({ ...usual, discountPercent: 41 })).toEqual({
      'economics.discountPercent': 'The discount rate lies between 0 and 40 %.',
    });
    expect(faults({ ...usual, escalationPercent: NaN })).toEqual({
      'economics.escalationPercent': 'Write the yearly rise as a number.',
    });
    expect(faults({ ...usual, horizonYears: 2.5 })).toEqual({ 'economics.horizonYears': 'Write whole years.' });
    expect(faults({ ...usual, taxPercent: 90 })).toHaveProperty(['economics.taxPercent']);
    expect(faults({ ...usual, incentive: 60_001 })).toEqual({
      'economics.incentive': 'An incentive is at most what the work costs.',
    });
    // With a bank that costs 5,000 the work is 65,000 in all.
    const banks = [{ name: '', steps: 1, stepKvar: 300, lossWPerKvar: 5, cost: 5_000 }];
    expect(faults({ ...usual, incentive: 60_001 }, { banks })).toEqual({});
    expect(faults({ ...usual, spread: { savingPercent: -1 } })).toHaveProperty(['economics.spread.savingPercent']);
  });

  it('hold a range to its own limits and to the plan’s value', () => {
    const ranged = (ranges: unknown) => faults({ ...money.economics, ranges });
    expect(ranged({ escalationPercent: { low: -2, high: 6 }, runsPercent: { low: 60, high: 120 } })).toEqual({});
    expect(ranged({ escalationPercent: { low: 3, high: 6 } })).toEqual({
      'economics.ranges.escalationPercent.low': 'The range holds the plan’s own 2.',
    });
    expect(ranged({ capitalCost: { low: 0, high: 50_000 } })).toHaveProperty(['economics.ranges.capitalCost.high']);
    expect(ranged({ discountPercent: { low: 9, high: 3 } })['economics.ranges.discountPercent.high']).toMatch(/above/);
    expect(ranged({ runsPercent: { low: 60 } })).toEqual({
      'economics.ranges.runsPercent.high': 'Write how much the plant runs as a number.',
    });
    expect(ranged({ demandRisePercent: { low: 0, high: 5 } })).toEqual({
      'economics.ranges.demandRisePercent.low': 'Give these charges a rise of their own first.',
    });
  });

  it('go into the form and back unchanged', () => {
    const ranges = { taxPercent: { low: 0, high: 40 } };
    const stored = { ...rich, spread: { savingPercent: 12 }, ranges };
    const again = economicsInput.parse(economicsToInput(economicsDraftOf(stored)));
    expect(again).toMatchObject({ ...rich, ranges });
    expect(again.spread).toMatchObject({ savingPercent: 12, workPercent: 15 });
    expect(economicsEntries(economicsDraftOf(stored))).toMatchObject({
      'Tax rate': '25',
      'Tax rate, range of the client': '0 to 40',
      'Horizon, range of the client': 'fixed',
    });
    expect(usualRange('capitalCost', 60_000)).toEqual({ low: '42000', high: '90000' });
    expect(usualRange('taxPercent', 25)).toBeNull();
  });

  it('are worded', () => {
    const plain = (words: string) => words.replaceAll('\u00a0', ' ');
    expect(plain(riseWords(rich))).toBe('Prices rise by 2 % a year, demand charges by 4 %');
    expect(plain(spreadWords(rich))).toMatch(/^Band: saving within 10 %, hours 5 %, work 15 %/);
    expect([20 / 12, 1, 3, null].map((years) => plain(paybackInFull(years)))).toEqual([
      '20 months, that is 1 year and 8 months',
      '12 months',
      '36 months',
      'never',
    ]);
  });
});

describe('a stored plan', () => {
  let station: PlansStation;
  beforeAll(async () => {
    station = await buildPlansStation();
  });
  afterAll(closePool);

  it('keeps its assumptions and ranges, and shows what they come to', async () => {
    const ranges = { escalationPercent: { low: -2, high: 6 } };
    const asked = planInput.parse({
      name: 'Taxed',
      fields: [{ motorId: station.millId, fieldA: 150 }],
      workCost: 20_000,
      yearlyUpkeep: 500,
      economics: { ...rich, ranges },
    });
    const { id } = await createPlan(station.opened, asked);
    const year = await plansOf(station.opened);
    const view = year.plans.find((plan) => plan.id === id)!;
    expect(view.economics).toMatchObject({ taxPercent: 25, ranges });
    expect(view.money!.years[0]).toMatchObject({ work: 20_000, incentive: 10_000, net: -10_000 });
    const saved = Object.values(view.money!.saving).reduce((sum, amount) => sum + amount, 0);
    expect(saved).toBeCloseTo(view.saving, 2);
    expect(view.money!.years.at(-1)!.cumulativeDiscounted).toBeCloseTo(view.appraisal.npv, 6);
    expect(year.standing.money).toBeNull();
    const form = await planStart(station.actor, year, { plan: String(id), search: null });
    expect(form?.start.economics).toMatchObject({ incentive: 10_000, ranges });
  });

  it('of the old shape loads with what was usual then', async () => {
    const old = { discountPercent: 8, escalationPercent: 0, horizonYears: 10 };
    const row = { engagementId: station.opened.engagement.id, name: 'Old', actions: [], search: null };
    await inTx(() => Plan.create({ ...row, workCostMinor: 0, yearlyUpkeepMinor: 0, economics: old }));
    const year = await plansOf(station.opened);
    const view = year.plans.find((plan) => plan.name === 'Old')!;
    expect(view.economics).toEqual(old);
    expect(view.paybackWords).toBe('never');
    const form = await planStart(station.actor, year, { plan: String(view.id), search: null });
    expect(economicsDraftOf(form!.start.economics).taxPercent).toBe('');
  });
});
