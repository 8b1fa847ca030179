import { searchFound } from '../../schemas/job';
import type { YearView } from '../../schemas/plan';
import type { MotorSettingInput, PlanInput } from '../../schemas/plan-input';
import { planDefaults } from '../../schemas/plan-money';
import { notFound } from '../errors';
import { Plan } from '../models/Plan';
import type { Actor } from '../policies/actor';
import { storedPlan } from '../presenters/plan-row';
import { readJob } from './jobs';

/** What the form of a plan begins with. */
export interface PlanStart {
  start: Omit<PlanInput, 'searchJobId'>;
  plan?: { id: number; version: number };
  searchJobId?: number;
}

/** First free name of a new plan: A, B, ... */
function freeName(taken: string[]): string {
  const letters = [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'].map((letter) => `Plan ${letter}`);
  return letters.find((name) => !taken.includes(name)) ?? `Plan ${taken.length + 1}`;
}

/**
 * Where the form of a plan begins: a stored plan, a copy of one, the settings a search found, or the fields of today.
 *
 * @param asked.plan  `new`, or the id of a plan; `from`: the plan a new one begins as
 * @returns null where no form was asked for
 */
export async function planStart(
  actor: Actor,
  year: YearView,
  asked: { plan: string | null; search: string | null; from?: string | null },
): Promise<PlanStart | null> {
  const stored = [...year.plans, ...year.unpriced].find((one) => String(one.id) === asked.plan);
  const fieldsOf = (fields: readonly MotorSettingInput[]) =>
    year.standing.fields.map(
      ({ motorId, todayA }) => fields.find((field) => field.motorId === motorId) ?? { motorId, fieldA: todayA },
    );
  if (stored && stored.id !== null) {
    const row = await Plan.findByPk(stored.id);
    if (!row) throw notFound();
    // Also a plan that cannot be priced any more keeps its costs and its capacitors: saving the form must lose nothing.
    const { version, ...entries } = storedPlan(row, year.currency);
    return { start: { ...entries, fields: fieldsOf(entries.fields) }, plan: { id: row.id, version } };
  }
  if (asked.plan !== 'new') return null;
  const name = freeName([...year.plans, ...year.unpriced].map((one) => one.name));
  const twin = [...year.plans, ...year.unpriced].find((one) => String(one.id) === asked.from);
  if (twin?.id) {
    const row = await Plan.findByPk(twin.id);
    if (!row) throw notFound();
    const { version: _version, ...entries } = storedPlan(row, year.currency);
    return { start: { ...entries, name, fields: fieldsOf(entries.fields) } };
  }
  const searchJobId = asked.search && /^\d+$/.test(asked.search) ? Number(asked.search) : undefined;
  const job = searchJobId === undefined ? null : await readJob(actor, searchJobId);
  const found = searchFound(job);
  return {
    start: {
      name,
      spans: found?.spans ?? { by: 'year' },
      fields: fieldsOf(
        (found?.fields ?? []).map(({ motorId, fieldA, controls }) =>
          controls ? { motorId, controls } : { motorId, fieldA },
        ),
      ),
      banks: [],
      replacements: [],
      workCost: 0,
      yearlyUpkeep: 0,
      economics: { ...planDefaults },
    },
    searchJobId: found ? searchJobId : undefined,
  };
}
