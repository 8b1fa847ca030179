import { toMinorUnits } from '../../core/units';
import { searchFound } from '../../schemas/job';
import type { MotorView } from '../../schemas/motor';
import type { PlanChangeInput, PlanInput } from '../../schemas/plan-input';
import { controlsOf, controlValueKey, type MotorSetting } from '../../schemas/plan-settings';
import type { SpanSet } from '../../schemas/plan-spans';
import type { SearchView } from '../../schemas/search';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound, staleVersion, type FieldErrors } from '../errors';
import { Job } from '../models/Job';
import { Plan } from '../models/Plan';
import type { Actor } from '../policies/actor';
import { actionsOf, presentPlanRow, storedPlan } from '../presenters/plan-row';
import { openEngagementById, type OpenEngagement } from './engagements';
import { motorsWithLoads } from './motors';
import { newMotorFaults } from './new-motors';
import { settingFaults, type LimitYear } from './plan-limits';
import { spanRules } from './plan-spans';
import { pricingInputs } from './pricing';

export { missingForPlans, plansOf } from './plan-year';

/** A plan's row opened by somebody who works on its engagement. */
export interface OpenPlan {
  plan: Plan;
  opened: OpenEngagement;
}

/**
 * A plan's row by its id.
 *
 * @throws {ServiceError} 404 where there is none, or none this person may know of
 */
export async function openPlan(actor: Actor, id: number): Promise<OpenPlan> {
  const plan = await Plan.findByPk(id);
  if (!plan) throw notFound();
  return { plan, opened: await openEngagementById(actor, plan.engagementId) };
}

/**
 * Adds a plan.
 *
 * @throws {ServiceError} 422 where a field current lies beyond a limit, naming motor and limit
 */
export async function createPlan(opened: OpenEngagement, input: PlanInput) {
  const engagementId = opened.engagement.id;
  const values = await checkedValues(opened, input);
  const search = await searchOf(engagementId, input);
  const plan = await inTx(async () => {
    await refuseSameName(engagementId, input.name);
    return Plan.create({ ...values, engagementId, search });
  });
  return presentPlanRow(plan);
}

/**
 * Changes a plan.
 *
 * @throws {ServiceError} 409 with both versions where somebody saved in between; 422 as when it is added
 */
export async function changePlan({ plan, opened }: OpenPlan, input: PlanChangeInput) {
  const values = await checkedValues(opened, input);
  const { version, ...mine } = input;
  await inTx(async () => {
    await refuseSameName(plan.engagementId, input.name, plan.id);
    await refuseStale(plan, opened, version, mine);
    const found = plan.search;
    const search = found && sameFields(found.fields, input.fields) ? found : await searchOf(plan.engagementId, input);
    await plan.update({ ...values, search });
  });
  return presentPlanRow(plan);
}

/** Chooses a plan for the report, or takes the choice back; one plan of an engagement is chosen at most. */
export async function choosePlan({ plan, opened }: OpenPlan, input: { version: number; chosen: boolean }) {
  await inTx(async () => {
    await refuseStale(plan, opened, input.version, input);
    if (input.chosen) {
      const others = await Plan.findAll({ where: { engagementId: plan.engagementId, chosen: true } });
      for (const other of others) if (other.id !== plan.id) await other.update({ chosen: false });
    }
    await plan.update({ chosen: input.chosen });
  });
  return presentPlanRow(plan);
}

/**
 * Removes a plan. Editions made of it keep what they show.
 *
 * @throws {ServiceError} 409 where it was changed in between
 */
export async function removePlan({ plan, opened }: OpenPlan, { version }: { version: number }): Promise<void> {
  await inTx(async () => {
    await refuseStale(plan, opened, version, { version });
    await plan.destroy();
  });
}

/** Refuses a change of a plan that somebody changed in between. Call it inside inTx. */
async function refuseStale(plan: Plan, { engagement }: OpenEngagement, version: number, mine: unknown): Promise<void> {
  await freshen(plan);
  if (plan.version !== version) throw staleVersion(plan.name, mine, storedPlan(plan, engagement.currency));
}

/** The columns of a row, after every check that can refuse it. */
async function checkedValues(opened: OpenEngagement, input: PlanInput) {
  await refuseBeyondLimits(opened, input);
  const { currency } = opened.engagement;
  return {
    name: input.name,
    spans: input.spans,
    actions: actionsOf(input, currency),
    workCostMinor: toMinorUnits(input.workCost, currency),
    yearlyUpkeepMinor: toMinorUnits(input.yearlyUpkeep, currency),
    economics: input.economics,
  };
}

/** Refuses settings of unknown motors, twice the same motor, and every setting beyond a limit at a load of its span. */
async function refuseBeyondLimits(opened: OpenEngagement, input: PlanInput): Promise<void> {
  const motors = await motorsWithLoads(opened);
  const year = await limitYear(opened, input.spans);
  const fields: FieldErrors = {};
  const seen = new Set<number>();
  input.fields.forEach((setting, index) => {
    const { motorId } = setting;
    const motor = motors.find(({ view }) => view.id === motorId);
    const refused = refusedMotor(motor?.view, seen.has(motorId));
    if (refused) fields[`fields.${index}.fieldA`] = [refused];
    else if (motor) {
      for (const { span, words } of settingFaults({ ...motor.view, ...motor.source }, controlsOf(setting), year))
        fields[faultPath(index, setting, span)] = [words];
    }
    seen.add(motorId);
  });
  input.replacements.forEach((one, index) => {
    for (const [path, words] of Object.entries(newMotorFaults(one, year)))
      fields[`replacements.${index}.${path}`] = words;
  });
  if (Object.keys(fields).length > 0) {
    throw invalid('A motor cannot be set as asked. Each entry is marked with limit and motor.', fields);
  }
}

/** The parts of the year settings are checked over; the seasons of a schedule need the tariff to be chosen. */
async function limitYear(opened: OpenEngagement, set: SpanSet): Promise<LimitYear> {
  const { yearFrom: from, yearTo: to } = opened.engagement;
  const seasons = set.by === 'schedule' ? (await pricingInputs(opened)).schedule.texts.at(-1)?.seasons : undefined;
  return { from, to, timeZone: opened.site.timeZone, set, rules: spanRules(set, { seasons, from, to }) };
}

function refusedMotor(motor: MotorView | undefined, isTwice: boolean): string | null {
  if (!motor) return 'This motor is not one of the plant’s. Load the page again.';
  return isTwice ? `${motor.name} is set twice. Keep one of the two.` : null;
}

/** Where in the input a setting of a span stands. */
function faultPath(index: number, { controls }: MotorSetting, span: number): string {
  const control = controls?.[span];
  return control ? `fields.${index}.controls.${span}.${controlValueKey[control.holds]}` : `fields.${index}.fieldA`;
}

async function refuseSameName(engagementId: number, name: string, except?: number): Promise<void> {
  const same = await Plan.findOne({ where: { engagementId, name } });
  if (same && same.id !== except) {
    throw invalid('Two plans cannot have the same name.', {
      name: [`There is a plan named ${name} already. Give this one another name.`],
    });
  }
}

type Fields = readonly MotorSetting[];

const sameFields = (found: Fields, set: Fields) =>
  found.every((one) =>
    set.some(
      (other) => other.motorId === one.motorId && JSON.stringify(controlsOf(other)) === JSON.stringify(controlsOf(one)),
    ),
  );

/** The search a plan was made of, as long as the plan sets what it found. */
async function searchOf(engagementId: number, input: PlanInput): Promise<SearchView | null> {
  if (input.searchJobId === undefined) return null;
  const job = await Job.findOne({ where: { id: input.searchJobId, engagementId } });
  const found = searchFound(job);
  if (!found) throw conflict('The search this plan was to be made of is no longer there. Search again.');
  return sameFields(found.fields, input.fields) ? found : null;
}
