import { Plan } from '../models/Plan';
import { constantFieldA } from '../../schemas/plan-settings';
import { motorSettings } from '../presenters/plan-row';

/** The plans of an engagement in the order they were made. */
export const listPlans = (engagementId: number) => Plan.findAll({ where: { engagementId }, order: ['id'] });

/** The chosen plan, else the newest: what other pages may show beside today. */
export async function planOnOffer(engagementId: number): Promise<Plan | null> {
  const plans = await listPlans(engagementId);
  return plans.find((one) => one.chosen) ?? plans.at(-1) ?? null;
}

/** Constant fields of the plan on offer. */
export async function fieldsOnOffer(
  engagementId: number,
): Promise<{ name: string; fields: { motorId: number; fieldA: number }[] } | null> {
  const plan = await planOnOffer(engagementId);
  if (!plan) return null;
  const fields = motorSettings(plan).flatMap((setting) => {
    const fieldA = constantFieldA(setting);
    return fieldA === null ? [] : [{ motorId: setting.motorId, fieldA }];
  });
  return { name: plan.name, fields };
}
