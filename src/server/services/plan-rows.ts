import type { Plan as PlanRow } from '../models/Plan';
import { Plan } from '../models/Plan';

/** One field setting of a plan. */
export interface FieldAction {
  motorId: number;
  fieldA: number;
}

/** The field settings of a stored plan. */
export function fieldActions(plan: PlanRow): FieldAction[] {
  return plan.actions.flatMap(({ kind, motorId, fieldA }) =>
    kind === 'field' && typeof motorId === 'number' && typeof fieldA === 'number' ? { motorId, fieldA } : [],
  );
}

/** The plans of an engagement in the order they were made. */
export const listPlans = (engagementId: number) => Plan.findAll({ where: { engagementId }, order: ['id'] });

/** The chosen plan's fields, else those of the newest: what other pages may show beside today's. */
export async function fieldsOnOffer(engagementId: number): Promise<{ name: string; fields: FieldAction[] } | null> {
  const plans = await listPlans(engagementId);
  const plan = plans.find((one) => one.chosen) ?? plans.at(-1);
  return plan ? { name: plan.name, fields: fieldActions(plan) } : null;
}
