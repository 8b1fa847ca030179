import { operatingPoint, panelCurrentA, type SynchronousMotor } from '../../core/machine';
import { fromMinorUnits, wordNumber } from '../../core/units';
import { resonanceCheck, type MotorPlanResult } from '../../core/plan';
import type { PricedBill } from '../../core/tariff';
import type { AssumedValue } from '../../schemas/motor';
import type {
  AppraisalView,
  PricedBillView,
  CapacitorBank,
  CapacitorView,
  CashFlowMonth,
  ChargeGroup,
  FieldSetting,
  PlanEconomics,
  PlanField,
  PlanMotorView,
  PlanView,
  SearchView,
} from '../../schemas/plan';
import type { Plan } from '../models/Plan';
import { limitsOf } from './motor';

/** The field settings of a stored plan. */
export const fieldSettings = (plan: Plan): FieldSetting[] =>
  plan.actions.flatMap((action) => (action.kind === 'field' ? { motorId: action.motorId, fieldA: action.fieldA } : []));

/** The capacitor bank of a stored plan; null where it has none. */
export function capacitorBank(plan: Plan): CapacitorBank | null {
  const [bank] = plan.actions.flatMap((action) => (action.kind === 'capacitor' ? action : []));
  if (!bank) return null;
  const { kvar, lossWPerKvar, detuningPercent, shortCircuitKva } = bank;
  return { kvar, lossWPerKvar, detuningPercent, shortCircuitKva };
}

/** A plan's row as the form that wrote it. Amounts in major units. */
export function storedPlan(plan: Plan, currency: string) {
  return {
    version: plan.version,
    name: plan.name,
    fields: fieldSettings(plan),
    capacitors: capacitorBank(plan) ?? undefined,
    capitalCost: fromMinorUnits(plan.capitalCostMinor, currency),
    yearlyUpkeep: fromMinorUnits(plan.yearlyUpkeepMinor, currency),
    economics: plan.economics,
  };
}

/** What a saved plan answers: its row, not its prices. */
export const presentPlanRow = ({ id, version, name, chosen }: Plan) => ({ id, version, name, chosen });

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
    hoursBeyond: Math.max(...Object.values(year.beyondHours)),
  };
}

/** A capacitor bank with its resonance against the usual harmonics. */
export function presentCapacitors(bank: CapacitorBank | null): CapacitorView | null {
  if (!bank) return null;
  const { kvar, shortCircuitKva, detuningPercent } = bank;
  const resonance = shortCircuitKva ? resonanceCheck({ kvar, shortCircuitKva, detuningPercent }) : null;
  return { ...bank, resonance };
}

/** A motor's field under a plan, with what a brushless machine's panel shows. */
export function presentPlanField(
  motor: { id: number; name: string; machine: SynchronousMotor; fieldTodayA: number },
  fieldA: number,
): PlanField {
  const { id, name, machine, fieldTodayA } = motor;
  const panelA = machine.exciterField ? panelCurrentA(machine, fieldA) : undefined;
  return { motorId: id, name, fieldA, todayA: fieldTodayA, panelA };
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
  fields: PlanField[];
  capacitors: CapacitorView | null;
  bills: PricedBillView[];
  standingTotal: number;
  money: { capitalCost: number; yearlyUpkeep: number; economics: PlanEconomics };
  appraisal: AppraisalView;
  paybackWords: string;
  paybackSpread: PlanView['paybackSpread'];
  cashFlow: CashFlowMonth[];
  moneyView: PlanView['money'];
  motors: PlanMotorView[];
  hoursLeading: PlanView['hoursLeading'];
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
    fields: parts.fields,
    capacitors: parts.capacitors,
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
    nearestLimit: parts.nearestLimit,
    worstPf: parts.worstPf,
    chosen: plan?.chosen ?? false,
    assumed: parts.assumed,
    search: parts.search,
    stale: parts.stale,
  };
}
