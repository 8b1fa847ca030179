import { formatPayback } from '../../components/ui/format';
import type { PlanMoney } from '../../schemas/assumptions';
import type { CostPart, PlanView, UnpricedPlan } from '../../schemas/plan';
import { planDefaults, type PlanEconomics } from '../../schemas/plan-money';
import { wholeYear } from '../../schemas/plan-spans';
import type { Plan } from '../models/Plan';
import { presentAssumed } from '../presenters/motor';
import { presentPlan, presentPricedBill } from '../presenters/plan';
import { banksOf, costPartsOf, motorSettings, replacementsOf, storedPlan } from '../presenters/plan-row';
import {
  nearestLimitWords,
  presentBank,
  presentPlanField,
  presentPlanMotor,
  presentReplacement,
  presentVoltage,
} from '../presenters/plan-parts';
import type { CashFlowParts, TaskSetting } from '../workers/tasks';
import type { OpenEngagement } from './engagements';
import type { loadOf } from './motors';
import { inductionKw, replacementMachine } from './plan-acts';
import type { PlanBasis, PlanMotor } from './plan-basis';
import { appraisePlan, savingOf } from './plan-economics';

/** A motor with its load, as the views need it. */
export type LoadedMotor = PlanMotor & { load: ReturnType<typeof loadOf> };

/** What the views of a year are made of. */
export interface YearParts {
  opened: OpenEngagement;
  basis: PlanBasis;
  motors: LoadedMotor[];
  standing: TaskSetting;
}

const motorFacts = ({ row, machine, load }: LoadedMotor) => ({
  id: row.id,
  name: row.name,
  machine,
  fieldTodayA: row.fieldTodayA,
  usualShaftKw: load.usualShaftKw,
});

/** A stored plan that is not on offer, with why. */
export function unpricedOf(row: Plan, reason: string, motors: LoadedMotor[]): UnpricedPlan {
  const fields = motorSettings(row).flatMap((setting) => {
    const motor = motors.find((one) => one.row.id === setting.motorId);
    return motor ? presentPlanField(motorFacts(motor), setting) : [];
  });
  const { id, version, name, chosen, spans } = row;
  return { id, version, name, chosen, spans, fields, reason };
}

const atRest: { costParts: CostPart[]; yearlyUpkeep: number; economics: PlanEconomics } = {
  costParts: [],
  yearlyUpkeep: 0,
  economics: { ...planDefaults },
};

/** What a plan's money hangs on, and what its work is made of. */
export function moneyOf(
  { basis, standing }: YearParts,
  row: Plan | null,
  setting: TaskSetting,
): PlanMoney & { costParts: CostPart[] } {
  const { currency } = basis.pricing.schedule;
  const { costParts, yearlyUpkeep, economics } = row
    ? { ...storedPlan(row, currency), costParts: costPartsOf(row, currency) }
    : atRest;
  const capitalCost = costParts.reduce((sum, { amount }) => sum + amount, 0);
  const saving = savingOf(standing.bills.map(presentPricedBill), setting.bills.map(presentPricedBill));
  return { ...saving, capitalCost, yearlyUpkeep, economics, costParts };
}

/** A plan, or standing where there is none, priced. */
export function viewOf(year: YearParts, row: Plan | null, setting: TaskSetting, cash: CashFlowParts): PlanView {
  const { basis, motors, standing } = year;
  const { currency } = basis.pricing.schedule;
  const settings = row ? motorSettings(row) : [];
  const settingOf = (motor: LoadedMotor) => settings.find((one) => one.motorId === motor.row.id);
  const bills = setting.bills.map(presentPricedBill);
  const { costParts, ...money } = moneyOf(year, row, setting);
  const { capitalCost, yearlyUpkeep, economics } = money;
  const appraisal = appraisePlan(money);
  const views = motors.map((motor) => {
    const figures = setting.motors.find((one) => one.motorId === motor.row.id)!;
    return presentPlanMotor(motorFacts(motor), figures);
  });
  const { supply } = basis;
  const banks = row
    ? banksOf(row, currency).map((bank, index) => presentBank(bank, supply.shortCircuitKva, setting.banks[index]!))
    : [];
  const search = row?.search ?? null;
  return presentPlan({
    plan: row,
    currency,
    spans: row?.spans ?? wholeYear,
    fields: motors.map((motor) => presentPlanField(motorFacts(motor), settingOf(motor))),
    banks,
    replacements: row
      ? replacementsOf(row, currency).map((one, index) =>
          presentReplacement(
            { ...one, inductionKw: inductionKw(one.induction), ratedKw: replacementMachine(one).ratedOutputKw },
            setting.replacements[index]!,
          ),
        )
      : [],
    bills,
    standingTotal: standing.bills.reduce((sum, bill) => sum + bill.total, 0),
    money: { capitalCost, costParts, yearlyUpkeep, economics },
    appraisal,
    paybackWords: formatPayback(appraisal.simplePaybackYears),
    ...cash,
    motors: views,
    extraLossKwh: setting.extraKwh,
    hoursLeading: { before: standing.hoursLeading, after: setting.hoursLeading },
    voltage: presentVoltage(setting.bus?.plan ?? null, supply.allowedLowPercent !== null),
    nearestLimit: nearestLimitWords(views, banks),
    worstPf: setting.worstPf && { ...setting.worstPf, bill: bills[setting.worstPf.bill]?.to ?? '' },
    assumed: motors.flatMap(({ row: motor, completed, load }) => presentAssumed(motor, completed, load.usualShaftKw)),
    search,
    stale: search && search.fingerprint !== basis.fingerprint ? [staleWords] : [],
  });
}

const staleWords =
  'Motors, bills, readings or tariff were changed after the search. The plan is priced afresh, but its settings may no longer be the best: search again.';
