import type { CapacitorBank } from '../../schemas/plan';
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

const optional = (value: unknown) => (typeof value === 'number' ? value : undefined);

/** The capacitor bank of a stored plan; null where it has none. */
export function capacitorAction(plan: PlanRow): CapacitorBank | null {
  const action = plan.actions.find(({ kind }) => kind === 'capacitor');
  if (!action) return null;
  return {
    kvar: Number(action.kvar),
    lossWPerKvar: Number(action.lossWPerKvar),
    detuningPercent: optional(action.detuningPercent),
    shortCircuitKva: optional(action.shortCircuitKva),
  };
}

/** The plans of an engagement in the order they were made. */
export const listPlans = (engagementId: number) => Plan.findAll({ where: { engagementId }, order: ['id'] });

/** The chosen plan's fields, else those of the newest: what other pages may show beside today's. */
export async function fieldsOnOffer(engagementId: number): Promise<{ name: string; fields: FieldAction[] } | null> {
  const plans = await listPlans(engagementId);
  const plan = plans.find((one) => one.chosen) ?? plans.at(-1);
  return plan ? { name: plan.name, fields: fieldActions(plan) } : null;
}
