import type { FieldSetting } from '../../schemas/plan';
import { Plan } from '../models/Plan';
import { fieldSettings } from '../presenters/plan';

/** The plans of an engagement in the order they were made. */
export const listPlans = (engagementId: number) => Plan.findAll({ where: { engagementId }, order: ['id'] });

/** The chosen plan's fields, else those of the newest: what other pages may show beside today's. */
export async function fieldsOnOffer(engagementId: number): Promise<{ name: string; fields: FieldSetting[] } | null> {
  const plans = await listPlans(engagementId);
  const plan = plans.find((one) => one.chosen) ?? plans.at(-1);
  return plan ? { name: plan.name, fields: fieldSettings(plan) } : null;
}
