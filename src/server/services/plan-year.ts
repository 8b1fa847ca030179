import { formatBillName } from '../../components/ui/format';
import { dayNumber } from '../../core/load';
import { wordNumber } from '../../core/units';
import { formatPayback } from '../../components/ui/format';
import type { CostPart, Missing, PlanView, UnpricedPlan, YearView } from '../../schemas/plan';
import { planDefaults, type PlanEconomics } from '../../schemas/plan-money';
import { constantFieldA } from '../../schemas/plan-settings';
import { wholeYear } from '../../schemas/plan-spans';
import { ServiceError } from '../errors';
import type { Plan } from '../models/Plan';
import { limitsOf, presentAssumed } from '../presenters/motor';
import {
  nearestLimitWords,
  presentBank,
  presentPlan,
  presentPlanField,
  presentPlanMotor,
  presentPricedBill,
} from '../presenters/plan';
import { banksOf, costPartsOf, motorSettings, storedPlan } from '../presenters/plan-row';
import type { TaskSetting } from '../workers/tasks';
import { notesOfBills } from './bill-notes';
import type { OpenEngagement } from './engagements';
import { loadOf } from './motors';
import { actOf, standingAct } from './plan-acts';
import { planBasis, priceSettings, type PlanBasis, type PlanMotor } from './plan-basis';
import { appraisePlan, noCashFlow, planCashFlow, savingOf } from './plan-economics';
import { storedFault, type LimitYear } from './plan-limits';
import { listPlans } from './plan-rows';
import { spanRules, type SpanYear } from './plan-spans';

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
  const motors = basis.motors.map((motor) => ({ ...motor, load: loadOf(motor.row, motor.machine, opened, motor.source) }));
  const faults = rows.map((row) => faultOf(row, motors, basis, opened));
  const priceable = rows.filter((_, index) => faults[index] === null);
  const [standing, ...settings] = (await priceSettings(basis, [
    standingAct,
    ...priceable.map((row) => actOf(row, opened, spanYearOf(basis))),
  ])) as [TaskSetting, ...TaskSetting[]];
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

/** What the spans of plans are laid over. */
export const spanYearOf = ({ pricing, task }: PlanBasis): SpanYear => ({
  seasons: pricing.schedule.texts.at(-1)?.seasons,
  from: task.periods[0]!.from,
  to: task.periods.at(-1)!.to,
});

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

/** Why a stored plan cannot be offered any more; null where it can. */
function faultOf(row: Plan, motors: LoadedMotor[], basis: PlanBasis, opened: OpenEngagement): string | null {
  const { result: rules, fault } = attemptSync(() => spanRules(row.spans, spanYearOf(basis)));
  if (fault !== null) return fault;
  const { yearFrom: from, yearTo: to } = opened.engagement;
  const year: LimitYear = { from, to, timeZone: basis.task.timeZone, set: row.spans, rules };
  for (const setting of motorSettings(row)) {
    const motor = motors.find((one) => one.row.id === setting.motorId);
    if (!motor) return 'It sets a motor that is no longer there.';
    const { name, fieldTodayA } = motor.row;
    const limits = limitsOf(motor.machine, motor.completed);
    const words = storedFault({ name, machine: motor.machine, limits, fieldTodayA, ...motor.source }, setting, year);
    if (words) return words;
  }
  return null;
}

/** What is refused, in words; anything else is thrown on. */
function attemptSync<Result>(work: () => Result): { result: Result; fault: null } | { result: null; fault: string } {
  try {
    return { result: work(), fault: null };
  } catch (error) {
    if (!(error instanceof ServiceError)) throw error;
    return { result: null, fault: error.message };
  }
}

const motorFacts = ({ row, machine, load }: LoadedMotor) => ({
  id: row.id,
  name: row.name,
  machine,
  fieldTodayA: row.fieldTodayA,
  usualShaftKw: load.usualShaftKw,
});

function unpricedOf(row: Plan, reason: string, motors: LoadedMotor[]): UnpricedPlan {
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

function viewOf(year: Year, row: Plan | null, setting: TaskSetting): PlanView {
  const { basis, motors, standing } = year;
  const { currency } = basis.pricing.schedule;
  const settings = row ? motorSettings(row) : [];
  const settingOf = (motor: LoadedMotor) => settings.find((one) => one.motorId === motor.row.id);
  const bills = setting.bills.map(presentPricedBill);
  const before = standing.bills.map(presentPricedBill);
  const { costParts, yearlyUpkeep, economics } = row
    ? { ...storedPlan(row, currency), costParts: costPartsOf(row, currency) }
    : atRest;
  const capitalCost = costParts.reduce((sum, { amount }) => sum + amount, 0);
  const money = { ...savingOf(before, bills), capitalCost, yearlyUpkeep, economics };
  const appraisal = appraisePlan(money);
  const views = motors.map((motor) => {
    const figures = setting.motors.find((one) => one.motorId === motor.row.id)!;
    const own = settingOf(motor);
    const fieldA = own && constantFieldA(own);
    return presentPlanMotor(motorFacts(motor), fieldA ?? motor.row.fieldTodayA, figures);
  });
  const search = row?.search ?? null;
  return presentPlan({
    plan: row,
    currency,
    spans: row?.spans ?? wholeYear,
    fields: motors.map((motor) => presentPlanField(motorFacts(motor), settingOf(motor))),
    banks: row ? banksOf(row, currency).map((bank) => presentBank(bank, null)) : [],
    replacements: [],
    bills,
    standingTotal: before.reduce((sum, bill) => sum + bill.total, 0),
    money: { capitalCost, costParts, yearlyUpkeep, economics },
    appraisal,
    paybackWords: formatPayback(appraisal.simplePaybackYears),
    ...(row ? planCashFlow(money) : noCashFlow),
    motors: views,
    hoursLeading: { before: standing.hoursLeading, after: setting.hoursLeading },
    voltage: null,
    nearestLimit: nearestLimitWords(views),
    worstPf: setting.worstPf && { ...setting.worstPf, bill: bills[setting.worstPf.bill]?.to ?? '' },
    assumed: motors.flatMap(({ row: motor, completed, load }) => presentAssumed(motor, completed, load.usualShaftKw)),
    search,
    stale: search && search.fingerprint !== basis.fingerprint ? [staleWords] : [],
  });
}

const staleWords =
  'Motors, bills, readings or tariff were changed after the search. The plan is priced afresh, but its settings may no longer be the best: search again.';
