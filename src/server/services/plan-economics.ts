import {
  appraiseInvestment,
  breakEvenCapital,
  investmentMonths,
  investmentYears,
  rankInputs,
  sampleAppraisal,
} from '../../core/economics';
import { investmentOf, spreadsOf, type PlanMoney } from '../../schemas/assumptions';
import type { PricedBillView, PricedLineView } from '../../schemas/plan';
import type { AppraisalView, CashFlowMonth } from '../../schemas/plan-money';
import type { CashFlowParts } from '../workers/tasks';

const samples = 1000;
const seed = 20_260_907;

/** Paybacks, present value and rate of return, after upkeep, tax and incentive. */
export const appraisePlan = (money: PlanMoney): AppraisalView => appraiseInvestment(investmentOf(money));

/** The standing plant has no cash flow. */
export const noCashFlow: CashFlowParts = { cashFlow: [], paybackSpread: null, moneyView: null };

/** Cash flow, its spread and what moves it. The same plan gives the same samples. */
export function planCashFlow(money: PlanMoney): CashFlowParts {
  const investment = investmentOf(money);
  const spreads = spreadsOf(money.economics);
  const years = investmentYears(investment);
  const { band, npv, paybackMonths, paidBackShare } = sampleAppraisal(investment, spreads, { samples, seed });
  const monthly = investmentMonths(years).map(({ month, cumulative }, index): CashFlowMonth => ({
    month,
    cumulative,
    low: band[index]?.p10,
    high: band[index]?.p90,
  }));
  return {
    cashFlow: monthly,
    paybackSpread: { lowMonths: paybackMonths.p10, highMonths: paybackMonths.p90 },
    moneyView: {
      saving: money.saving,
      savingWithHours: money.savingWithHours,
      years,
      npv,
      paybackMonths,
      paidBackShare,
      ranking: rankInputs(investment, spreads),
      breakEvenCapital: breakEvenCapital(investment),
    },
  };
}

/** How a line goes with the operating hours: billed by energy it does, billed by a peak or fixed it does not. */
function withHours({ group, unit = '' }: PricedLineView): boolean | null {
  if (/h$/i.test(unit)) return true;
  return group === 'fixed' || /^[kM]?(W|VA|var)$/i.test(unit) ? false : null;
}

/**
 * First year's saving by group, and the part that goes with the operating hours. Lines that are a share of others
 * (taxes, surcharges in per cent) go with the hours as far as the rest of the saving does.
 */
export function savingOf(
  before: PricedBillView[],
  after: PricedBillView[],
): Pick<PlanMoney, 'saving' | 'savingWithHours'> {
  const changes = [...linesOf(before, 1), ...linesOf(after, -1)];
  const sumOf = (chosen: typeof changes) => {
    const sums: Record<string, number> = {};
    for (const { line, amount } of chosen) sums[line.group] = (sums[line.group] ?? 0) + amount;
    // What is left of equal bills by the order of adding is no saving.
    return Object.fromEntries(Object.entries(sums).map(([group, sum]) => [group, Math.round(sum * 1e6) / 1e6]));
  };
  const size = (sums: Record<string, number>) => Object.values(sums).reduce((sum, one) => sum + Math.abs(one), 0);
  const hourly = sumOf(changes.filter(({ line }) => withHours(line) === true));
  const still = sumOf(changes.filter(({ line }) => withHours(line) === false));
  const shared = sumOf(changes.filter(({ line }) => withHours(line) === null));
  const share = size(hourly) + size(still) === 0 ? 0 : size(hourly) / (size(hourly) + size(still));
  const groups = Object.keys(sumOf(changes));
  return {
    saving: sumOf(changes),
    savingWithHours: Object.fromEntries(
      groups.map((group) => [group, (hourly[group] ?? 0) + share * (shared[group] ?? 0)]),
    ),
  };
}

const linesOf = (bills: PricedBillView[], sign: 1 | -1) =>
  bills.flatMap((bill) => bill.lines.map((line) => ({ line, amount: sign * line.amount })));
