import { formatBillName } from '../../components/ui/format';
import { dayNumber } from '../../core/load';
import { wordNumber } from '../../core/units';
import type { Missing, UnpricedPlan, YearView } from '../../schemas/plan';
import { ServiceError } from '../errors';
import type { Plan } from '../models/Plan';
import { limitsOf } from '../presenters/motor';
import { motorSettings, replacementsOf } from '../presenters/plan-row';
import type { TaskSetting } from '../workers/tasks';
import { notesOfBills } from './bill-notes';
import type { OpenEngagement } from './engagements';
import { loadOf } from './motors';
import { actOf, standingAct } from './plan-acts';
import { newMotorFaults } from './new-motors';
import { planBasis, priceSettings, type PlanBasis } from './plan-basis';
import { storedFault, type LimitYear } from './plan-limits';
import { listPlans } from './plan-rows';
import { spanRules, type SpanYear } from './plan-spans';
import type { PricingBasis } from './pricing';
import { cashFlowsOf } from './plan-cash';
import { noCashFlow } from './plan-economics';
import { moneyOf, unpricedOf, viewOf, type LoadedMotor, type YearParts } from './plan-view';

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

/**
 * The year of an engagement: standing, its plans, the chosen one, every bill priced.
 *
 * @throws {ServiceError} 409 naming the station to visit, where readings, bills, tariff or motors are missing
 */
export async function plansOf(opened: OpenEngagement): Promise<YearView> {
  const [basis, rows] = await Promise.all([planBasis(opened), listPlans(opened.engagement.id)]);
  const motors = basis.motors.map((motor) => ({
    ...motor,
    load: loadOf(motor.row, motor.machine, opened, motor.source),
  }));
  const faults = rows.map((row) => faultOf(row, motors, basis, opened));
  const priceable = rows.filter((_, index) => faults[index] === null);
  const [standing, ...settings] = (await priceSettings(basis, [
    standingAct,
    ...priceable.map((row) => actOf(row, opened, spanYearOf(basis))),
  ])) as [TaskSetting, ...TaskSetting[]];
  const year: YearParts = { opened, basis, motors, standing };
  const cash = await cashFlowsOf(priceable.map((row, index) => moneyOf(year, row, settings[index]!)));
  const plans = priceable.map((row, index) => viewOf(year, row, settings[index]!, cash[index]!));
  return {
    currency: basis.pricing.schedule.currency,
    from: basis.task.periods[0]!.from,
    to: basis.task.periods.at(-1)!.to,
    route: 'intervals',
    scheduleTitle: basis.pricing.schedule.title,
    seasons: basis.pricing.schedule.texts.at(-1)?.seasons?.names ?? [],
    readings: standing.readings,
    standing: viewOf(year, null, standing, noCashFlow),
    plans,
    unpriced: rows.flatMap((row, index): UnpricedPlan[] => {
      const reason = faults[index];
      return reason ? [unpricedOf(row, reason, motors)] : [];
    }),
    chosen: plans.find((plan) => plan.chosen) ?? null,
    gaps: [...gapsOf(basis, standing), ...motors.flatMap(loadGapOf)],
    notes: notesOfBills(standing.bills.map(({ period, notes }) => ({ name: formatBillName(period), notes }))),
    fingerprint: basis.fingerprint,
  };
}

/** What the spans of plans are laid over. */
export const spanYearOf = ({ pricing }: { pricing: Pick<PricingBasis, 'schedule' | 'periods'> }): SpanYear => ({
  seasons: pricing.schedule.texts.at(-1)?.seasons,
  from: pricing.periods[0]!.from,
  to: pricing.periods.at(-1)!.to,
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

/** What a motor's submeter does not tell. */
function loadGapOf({ row, source, load }: LoadedMotor): string[] {
  if (!source.metered || load.hoursMissing + load.hoursBeyond === 0) return [];
  const stand =
    source.metered.whenMissing === 'calendar' ? 'its shift calendar stands in' : 'it is taken to stand still';
  return [
    ...(load.hoursMissing > 0
      ? [
          `The submeter of ${row.name} has no reading for ${wordNumber(load.hoursMissing, 1)} hours of the year: there ${stand}.`,
        ]
      : []),
    ...(load.hoursBeyond > 0
      ? [
          `In ${wordNumber(load.hoursBeyond, 1)} hours the submeter of ${row.name} reads more than its field of today can hold: there the most it holds is taken.`,
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
  for (const one of replacementsOf(row, opened.engagement.currency)) {
    const [words] = Object.values(newMotorFaults(one, year));
    if (words) return words.join(' ');
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
