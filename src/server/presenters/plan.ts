import { operatingPoint, panelCurrentA, type SynchronousMotor } from '../../core/machine';
import { resonanceCheck, type MotorPlanResult } from '../../core/plan';
import { wordNumber } from '../../core/units';
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
import type { BankInput } from '../../schemas/plan-input';
import type { AppraisalView, CashFlowMonth, PlanEconomics } from '../../schemas/plan-money';
import { controlsOf, type MotorSetting } from '../../schemas/plan-settings';
import type { SpanSet } from '../../schemas/plan-spans';
import type { SearchView } from '../../schemas/search';
import type { Plan } from '../models/Plan';
import { limitsOf } from './motor';

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

/** Greatest pull-out ratio that is told: beyond it there is nothing to compare. */
const greatestRatio = 99;

/** A motor under a plan beside today. */
export function presentPlanMotor(
  motor: { id: number; name: string; machine: SynchronousMotor; fieldTodayA: number; usualShaftKw: number },
  fieldA: number,
  year: MotorPlanResult,
): PlanMotorView {
  const { machine, usualShaftKw: shaftKw } = motor;
  const today = operatingPoint(machine, { shaftKw, fieldCurrentA: motor.fieldTodayA });
  const plan = operatingPoint(machine, { shaftKw, fieldCurrentA: fieldA });
  const limits = limitsOf(machine);
  return {
    motorId: motor.id,
    name: motor.name,
    usualShaftKw: shaftKw,
    usualLoadPercent: (100 * shaftKw) / machine.ratedOutputKw,
    kvarToday: -today.kvar,
    kvarPlan: -plan.kvar,
    armatureTodayA: today.lineCurrentA,
    armaturePlanA: plan.lineCurrentA,
    extraLossKw: year.hoursRunning > 0 ? year.extraLossKwh / year.hoursRunning : 0,
    extraLossKwh: year.extraLossKwh,
    fieldLimitA: limits.fieldA,
    fieldSharePercent: (100 * fieldA) / limits.fieldA,
    leastPullOut: Math.min(greatestRatio, year.leastPullOutRatio ?? greatestRatio),
    pullOutMargin: limits.pullOutMargin,
    hoursRunning: year.hoursRunning,
    greatestArmatureShare: year.greatestArmatureShare / (1 - limits.reservePercent / 100),
    hoursNearest: {
      field: year.nearestLimitHours.field,
      armature: year.nearestLimitHours.armature,
      pullOut: year.nearestLimitHours['pull-out'],
    },
    hoursLimited: 0,
    hoursBeyond: Math.max(...Object.values(year.beyondHours)),
  };
}

/** A bank with its worst resonance against the usual harmonics, step by step. */
export function presentBank({ cost: _cost, ...bank }: BankInput, shortCircuitKva: number | null): BankView {
  const kvar = bank.steps * bank.stepKvar;
  return { ...bank, kvar, resonance: shortCircuitKva === null ? null : worstResonance(bank, shortCircuitKva) };
}

/** A switched bank passes through every number of steps; a fixed one stands at all of them. */
function worstResonance(bank: Omit<BankInput, 'cost'>, shortCircuitKva: number): NonNullable<BankView['resonance']> {
  const { steps, stepKvar, detuningPercent, holdsPowerFactor } = bank;
  const sizes = holdsPowerFactor === undefined ? [steps] : Array.from({ length: steps }, (_, k) => k + 1);
  const checks = sizes.map((count) => {
    const kvar = count * stepKvar;
    return { kvar, ...resonanceCheck({ kvar, shortCircuitKva, detuningPercent }) };
  });
  return checks.find(({ near }) => near.length > 0) ?? checks.at(-1)!;
}

/** A motor's setting under a plan, with what a brushless machine's panel shows. */
export function presentPlanField(
  motor: { id: number; name: string; machine: SynchronousMotor; fieldTodayA: number },
  setting: MotorSetting | undefined,
): PlanField {
  const { id, name, machine, fieldTodayA } = motor;
  const { fieldA, controls } = setting ?? { fieldA: fieldTodayA };
  const panelA = machine.exciterField
    ? controlsOf({ fieldA, controls }).map((control) =>
        control.holds === 'field-current' ? panelCurrentA(machine, control.fieldCurrentA) : null,
      )
    : undefined;
  return { motorId: id, name, ...(controls ? { controls } : { fieldA }), todayA: fieldTodayA, panelA };
}

/** Which limit of which motor lies nearest over the year, in words: "field, M-1 at 80 %", "pull-out, M-1 1.68". */
export function nearestLimitWords(motors: PlanMotorView[]): string {
  const candidates = motors
    .filter((motor) => motor.hoursRunning > 0)
    .flatMap(({ name, fieldSharePercent, leastPullOut, pullOutMargin, greatestArmatureShare }) => [
      { share: fieldSharePercent / 100, words: `field, ${name} at ${wordNumber(fieldSharePercent, 1)} %` },
      { share: pullOutMargin / leastPullOut, words: `pull-out, ${name} ${wordNumber(leastPullOut, 0.01)}` },
      { share: greatestArmatureShare, words: `stator, ${name} at ${wordNumber(100 * greatestArmatureShare, 1)} %` },
    ])
    .sort((a, b) => b.share - a.share);
  return candidates[0]?.words ?? 'none';
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
    extraLossKwh: parts.motors.reduce((sum, motor) => sum + motor.extraLossKwh, 0),
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
