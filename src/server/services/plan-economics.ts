import { appraise, cashFlow, escalatedSavings, sampleAppraisal, type Project } from '../../core/economics';
import type { PlanView } from '../../schemas/plan';
import { cashFlowSpread, type AppraisalView, type CashFlowMonth, type PlanEconomics } from '../../schemas/plan-money';

/** What a plan's money hangs on. Amounts in major units. */
export interface PlanMoney {
  /** First year's saving by group of charges; negative where the group costs more. */
  savingByGroup: Record<string, number>;
  capitalCost: number;
  yearlyUpkeep: number;
  economics: PlanEconomics;
}

const samples = 400;
const seed = 20_260_907;

function projectOf({ savingByGroup, capitalCost, yearlyUpkeep, economics }: PlanMoney): Project {
  const years = economics.horizonYears;
  return {
    capitalCost,
    yearlySaving: escalatedSavings({
      firstYear: savingByGroup,
      otherEscalation: economics.escalationPercent / 100,
      years,
    }),
    yearlyUpkeep: new Array<number>(years).fill(yearlyUpkeep),
    discountRate: economics.discountPercent / 100,
  };
}

const firstYearSavingOf = ({ savingByGroup }: PlanMoney) =>
  Object.values(savingByGroup).reduce((sum, amount) => sum + amount, 0);

/** Paybacks, present value and rate of return. A plan that saves nothing never pays back, however little it costs. */
export function appraisePlan(money: PlanMoney): AppraisalView {
  const appraisal = appraise(projectOf(money));
  if (firstYearSavingOf(money) > money.yearlyUpkeep) return appraisal;
  return { ...appraisal, simplePaybackYears: null, discountedPaybackYears: null };
}

/** Cumulative cash flow by month and payback, with the band of eight of ten samples. The same plan gives the same band. */
export function planCashFlow(money: PlanMoney): Pick<PlanView, 'cashFlow' | 'paybackSpread'> {
  const { months } = cashFlow(projectOf(money));
  const { band, paybackMonths } = sampleAppraisal({
    capitalCost: money.capitalCost,
    firstYearSaving: firstYearSavingOf(money),
    yearlyUpkeep: money.yearlyUpkeep,
    escalationRate: money.economics.escalationPercent / 100,
    discountRate: money.economics.discountPercent / 100,
    years: money.economics.horizonYears,
    uncertainty: {
      saving: cashFlowSpread.savingPercent / 100,
      cost: cashFlowSpread.costPercent / 100,
      escalation: cashFlowSpread.escalationPercentPoints / 100,
    },
    samples,
    seed,
  });
  const monthly = months.map(({ month, cumulative }, index): CashFlowMonth => ({
    month,
    cumulative,
    low: band[index]?.p10,
    high: band[index]?.p90,
  }));
  return { cashFlow: monthly, paybackSpread: { lowMonths: paybackMonths.p10, highMonths: paybackMonths.p90 } };
}
