import { formatBillName } from '../../components/ui/format';
import { dayNumber } from '../../core/load';
import { wordNumber } from '../../core/units';
import { formatPayback } from '../../components/ui/format';
import {
  planDefaults,
  type FieldSetting,
  type Missing,
  type PlanEconomics,
  type PlanView,
  type UnpricedPlan,
  type YearView,
} from '../../schemas/plan';
import { ServiceError } from '../errors';
import type { Plan } from '../models/Plan';
import { limitsOf, presentAssumed } from '../presenters/motor';
import {
  capacitorBank,
  chargeGroups,
  fieldSettings,
  groupTotals,
  nearestLimitWords,
  presentCapacitors,
  presentPlan,
  presentPlanField,
  presentPlanMotor,
  presentPricedBill,
  storedPlan,
} from '../presenters/plan';
import type { TaskAct, TaskSetting } from '../workers/tasks';
import { notesOfBills } from './bill-notes';
import type { OpenEngagement } from './engagements';
import { loadOf } from './motors';
import { planBasis, priceSettings, type PlanBasis, type PlanMotor } from './plan-basis';
import { appraisePlan, planCashFlow, type PlanMoney } from './plan-economics';
import { fieldFault } from './plan-limits';
import { listPlans } from './plan-rows';

/** What stands between an engagement and priced plans; nothing where all is there. */
export async function missingForPlans(opened: OpenEngagement): Promise<Missing | null> {
  try {
    await planBasis(opened);
    return null;
  } catch (error) {
    if (!(error instanceof ServiceError) || error.status !== 409) throw error;
    const station = (error.details?.station ?? 'tariff') as Missing['station'];
    return { station, what: error.message, remedy: `Open the station ${station}.` };
  }
}

/** A motor with its load, as the views need it. */
type LoadedMotor = PlanMotor & { load: ReturnType<typeof loadOf> };

interface Year {
  opened: OpenEngagement;
  basis: PlanBasis;
  motors: LoadedMotor[];
  standing: TaskSetting;
}

/**
 * The year of an engagement: standing, its plans, the chosen one, every bill priced.
 *
 * @throws {ServiceError} 409 naming the station to visit, where readings, bills, tariff or motors are missing
 */
export async function plansOf(opened: OpenEngagement): Promise<YearView> {
  const [basis, rows] = await Promise.all([planBasis(opened), listPlans(opened.engagement.id)]);
  const motors = basis.motors.map((motor) => ({ ...motor, load: loadOf(motor.row, motor.machine, opened) }));
  const faults = rows.map((row) => faultOf(fieldSettings(row), motors));
  const priceable = rows.filter((_, index) => faults[index] === null);
  const [standing, ...settings] = (await priceSettings(basis, [{}, ...priceable.map(actOf)])) as [
    TaskSetting,
    ...TaskSetting[],
  ];
  const year: Year = { opened, basis, motors, standing };
  const plans = priceable.map((row, index) => viewOf(year, row, settings[index] as TaskSetting));
  return {
    currency: basis.pricing.schedule.currency,
    from: basis.task.periods[0]!.from,
    to: basis.task.periods.at(-1)!.to,
    route: 'intervals',
    scheduleTitle: basis.pricing.schedule.title,
    readings: standing.readings,
    standing: viewOf(year, null, standing),
    plans,
    unpriced: rows.flatMap((row, index): UnpricedPlan[] => {
      const reason = faults[index];
      return reason ? [unpricedOf(row, reason, motors)] : [];
    }),
    chosen: plans.find((plan) => plan.chosen) ?? null,
    gaps: gapsOf(basis, standing),
    notes: notesOfBills(standing.bills.map(({ period, notes }) => ({ name: formatBillName(period), notes }))),
    fingerprint: basis.fingerprint,
  };
}

const wholeYearDays = 350;

/** What makes the figures stand for less than a year. */
function gapsOf({ task }: PlanBasis, { readings }: TaskSetting): string[] {
  const days = task.periods.reduce((sum, { from, to }) => sum + dayNumber(to) - dayNumber(from), 0);
  const { missing, intervals } = readings;
  return [
    ...(days < wholeYearDays
      ? [`The bills cover ${days} days, not a year: every yearly figure stands for these days alone.`]
      : []),
    ...(missing > 0
      ? [
          `${wordNumber(missing, 1)} of ${wordNumber(intervals, 1)} readings are missing. Nothing is priced in their place: amounts and savings are those of the readings there are.`,
        ]
      : []),
  ];
}

/** What a stored plan does. */
function actOf(row: Plan): TaskAct {
  const bank = capacitorBank(row);
  return {
    controls: fieldSettings(row).map(({ motorId, fieldA }) => ({
      motorId,
      controls: [{ holds: 'field-current', fieldCurrentA: fieldA }],
    })),
    banks: bank ? [{ steps: 1, stepKvar: bank.kvar, lossWPerKvar: bank.lossWPerKvar }] : [],
  };
}

/** Why a stored plan cannot be offered any more; null where it can. */
function faultOf(fields: FieldSetting[], motors: LoadedMotor[]): string | null {
  for (const { motorId, fieldA } of fields) {
    const motor = motors.find(({ row }) => row.id === motorId);
    if (!motor) return 'It sets a motor that is no longer there.';
    const limited = { name: motor.row.name, machine: motor.machine, limits: limitsOf(motor.machine) };
    const fault = fieldFault(limited, fieldA, motor.load.hours);
    if (fault) return fault;
  }
  return null;
}

const motorFacts = ({ row, machine, load }: LoadedMotor) => ({
  id: row.id,
  name: row.name,
  machine,
  fieldTodayA: row.fieldTodayA,
  usualShaftKw: load.usualShaftKw,
});

function unpricedOf(row: Plan, reason: string, motors: LoadedMotor[]): UnpricedPlan {
  const fields = fieldSettings(row).flatMap(({ motorId, fieldA }) => {
    const motor = motors.find((one) => one.row.id === motorId);
    return motor ? presentPlanField(motorFacts(motor), fieldA) : [];
  });
  return { id: row.id, version: row.version, name: row.name, chosen: row.chosen, fields, reason };
}

/** First year's saving by group of charges. */
function savingByGroup(standing: ReturnType<typeof groupTotals>, plan: ReturnType<typeof groupTotals>) {
  return Object.fromEntries(chargeGroups.map((group) => [group, standing[group] - plan[group]]));
}

const atRest: { capitalCost: number; yearlyUpkeep: number; economics: PlanEconomics } = {
  capitalCost: 0,
  yearlyUpkeep: 0,
  economics: { ...planDefaults },
};

function viewOf(year: Year, row: Plan | null, setting: TaskSetting): PlanView {
  const { basis, motors, standing } = year;
  const { currency } = basis.pricing.schedule;
  const actions = row ? fieldSettings(row) : [];
  const fieldOf = (motor: LoadedMotor) =>
    actions.find((action) => action.motorId === motor.row.id)?.fieldA ?? motor.row.fieldTodayA;
  const bills = setting.bills.map(presentPricedBill);
  const before = standing.bills.map(presentPricedBill);
  const { capitalCost, yearlyUpkeep, economics } = row ? storedPlan(row, currency) : atRest;
  const money: PlanMoney = {
    savingByGroup: savingByGroup(groupTotals(before), groupTotals(bills)),
    capitalCost,
    yearlyUpkeep,
    economics,
  };
  const appraisal = appraisePlan(money);
  const views = motors.map((motor) => {
    const figures = setting.motors.find((one) => one.motorId === motor.row.id)!;
    return presentPlanMotor(motorFacts(motor), fieldOf(motor), figures);
  });
  const search = row?.search ?? null;
  return presentPlan({
    plan: row,
    currency,
    fields: motors.map((motor) => presentPlanField(motorFacts(motor), fieldOf(motor))),
    capacitors: presentCapacitors(row && capacitorBank(row)),
    bills,
    standingTotal: before.reduce((sum, bill) => sum + bill.total, 0),
    money: { capitalCost, yearlyUpkeep, economics },
    appraisal,
    paybackWords: formatPayback(appraisal.simplePaybackYears),
    ...(row ? planCashFlow(money) : { cashFlow: [], paybackSpread: null }),
    motors: views,
    hoursLeading: { before: standing.hoursLeading, after: setting.hoursLeading },
    nearestLimit: nearestLimitWords(views),
    worstPf: setting.worstPf && { ...setting.worstPf, bill: bills[setting.worstPf.bill]?.to ?? '' },
    assumed: motors.flatMap(({ row: motor, completed, load }) => presentAssumed(motor, completed, load.usualShaftKw)),
    search,
    stale: search && search.fingerprint !== basis.fingerprint ? [staleWords] : [],
  });
}

const staleWords =
  'Motors, bills, readings or tariff were changed after the search. The plan is priced afresh, but its settings may no longer be the best: search again.';
