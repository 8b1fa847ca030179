import type { PricedBill } from '../../core/tariff';
import type { AssumedValue } from '../../schemas/motor';
import type {
  BankView,
  ChargeGroup,
  CostPart,
  PlanField,
  PlanMotorView,
  PlanView,
  PricedBillView,
  ReplacementView,
  VoltageView,
} from '../../schemas/plan';
import type { AppraisalView, CashFlowMonth, PlanEconomics } from '../../schemas/plan-money';
import type { SpanSet } from '../../schemas/plan-spans';
import type { SearchView } from '../../schemas/search';
import type { Plan } from '../models/Plan';

/** A priced bill as screens read it. */
export function presentPricedBill(bill: PricedBill): PricedBillView {
  const { period, total, reactiveCost, notes } = bill;
  const lines = bill.lines.map(({ id, label, group, quantity, unit, rate, amount, explanation, clause }) => ({
    id,
    label,
    group,
    quantity,
    unit,
    rate,
    amount,
    explanation,
    clause,
  }));
  return { from: period.from, to: period.to, total, reactiveCost, lines, notes };
}

const chargeGroups = ['demand', 'reactive', 'energy', 'fixed', 'adjustment', 'tax'] as const;

/** Sum of the year's lines by group. */
export function groupTotals(bills: PricedBillView[]): Record<ChargeGroup, number> {
  const totals = Object.fromEntries(chargeGroups.map((group) => [group, 0])) as Record<ChargeGroup, number>;
  for (const bill of bills) for (const line of bill.lines) totals[line.group] += line.amount;
  return totals;
}

/** Parts a plan's view is put together from. */
export interface PlanParts {
  plan: Plan | null;
  currency: string;
  spans: SpanSet;
  fields: PlanField[];
  banks: BankView[];
  replacements: ReplacementView[];
  bills: PricedBillView[];
  standingTotal: number;
  money: { capitalCost: number; costParts: CostPart[]; yearlyUpkeep: number; economics: PlanEconomics };
  appraisal: AppraisalView;
  paybackWords: string;
  paybackSpread: PlanView['paybackSpread'];
  cashFlow: CashFlowMonth[];
  moneyView: PlanView['money'];
  motors: PlanMotorView[];
  extraLossKwh: number;
  hoursLeading: PlanView['hoursLeading'];
  voltage: VoltageView | null;
  nearestLimit: string;
  worstPf: PlanView['worstPf'];
  assumed: AssumedValue[];
  search: SearchView | null;
  stale: string[];
}

const sumOf = (amounts: number[]) => Math.round(amounts.reduce((sum, amount) => sum + amount, 0) * 1000) / 1000;

/** A plan, or standing where there is none, with its prices. */
export function presentPlan(parts: PlanParts): PlanView {
  const { plan, bills, money } = parts;
  const yearTotal = sumOf(bills.map((bill) => bill.total));
  return {
    id: plan?.id ?? null,
    version: plan?.version ?? 0,
    name: plan?.name ?? 'Standing',
    currency: parts.currency,
    spans: parts.spans,
    fields: parts.fields,
    banks: parts.banks,
    replacements: parts.replacements,
    bills,
    yearTotal,
    saving: plan ? sumOf([parts.standingTotal, -yearTotal]) : 0,
    reactiveCost: sumOf(bills.map((bill) => bill.reactiveCost)),
    groupTotals: groupTotals(bills),
    ...money,
    appraisal: parts.appraisal,
    paybackWords: parts.paybackWords,
    paybackSpread: parts.paybackSpread,
    cashFlow: parts.cashFlow,
    money: parts.moneyView,
    motors: parts.motors,
    extraLossKwh: parts.extraLossKwh,
    hoursLeading: parts.hoursLeading,
    voltage: parts.voltage,
    nearestLimit: parts.nearestLimit,
    worstPf: parts.worstPf,
    chosen: plan?.chosen ?? false,
    assumed: parts.assumed,
    search: parts.search,
    stale: parts.stale,
  };
}
