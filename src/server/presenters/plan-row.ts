import { fromMinorUnits, toMinorUnits } from '../../core/units';
import type { CostPart } from '../../schemas/plan';
import type { BankInput, PlanInput, ReplacementInput } from '../../schemas/plan-input';
import type { MotorSetting, PlanAction } from '../../schemas/plan-settings';
import type { Plan } from '../models/Plan';

type Kept = Pick<Plan, 'actions'>;

/** Motor settings of a stored plan. */
export const motorSettings = ({ actions }: Kept): MotorSetting[] =>
  actions.flatMap((action) => {
    if (action.kind !== 'field') return [];
    const { motorId, fieldA, controls } = action;
    return [fieldA === undefined ? { motorId, controls } : { motorId, fieldA }];
  });

/** Capacitors of a stored plan. Costs in major units. */
export const banksOf = ({ actions }: Kept, currency: string): BankInput[] =>
  actions.flatMap((action) => {
    if (action.kind !== 'bank') return [];
    const { kind: _kind, costMinor, ...bank } = action;
    return [{ ...bank, cost: fromMinorUnits(costMinor, currency) }];
  });

/** New motors of a stored plan. Costs in major units. */
export const replacementsOf = ({ actions }: Kept, currency: string): ReplacementInput[] =>
  actions.flatMap((action) => {
    if (action.kind !== 'replacement') return [];
    const { kind: _kind, costMinor, ...replacement } = action;
    return [{ ...replacement, cost: fromMinorUnits(costMinor, currency) }];
  });

/** What a plan's form says as the actions of its row. */
export function actionsOf({ fields, banks, replacements }: PlanInput, currency: string): PlanAction[] {
  const minor = (amount: number) => toMinorUnits(amount, currency);
  return [
    ...fields.map(({ equipmentCost, ...setting }): PlanAction => ({
      kind: 'field',
      ...setting,
      ...(equipmentCost ? { equipmentCostMinor: minor(equipmentCost) } : {}),
    })),
    ...banks.map(({ cost, ...bank }): PlanAction => ({ kind: 'bank', ...bank, costMinor: minor(cost) })),
    ...replacements.map(({ cost, ...replacement }): PlanAction => ({
      kind: 'replacement',
      ...replacement,
      costMinor: minor(cost),
    })),
  ];
}

/** What a plan costs once, part by part; parts that cost nothing are left out. */
export function costPartsOf(plan: Plan, currency: string): CostPart[] {
  const sums = { regulators: 0, banks: 0, motors: 0 };
  for (const action of plan.actions) {
    if (action.kind === 'field') sums.regulators += action.equipmentCostMinor ?? 0;
    else if (action.kind === 'bank') sums.banks += action.costMinor;
    else sums.motors += action.costMinor;
  }
  const parts: [string, number][] = [
    ['Work at the motors', plan.workCostMinor],
    ['Regulators', sums.regulators],
    ['Capacitors', sums.banks],
    ['New motors', sums.motors],
  ];
  return parts.flatMap(([label, minor]) => (minor > 0 ? [{ label, amount: fromMinorUnits(minor, currency) }] : []));
}

/** A plan's row as the form that wrote it. Amounts in major units. */
export function storedPlan(plan: Plan, currency: string): Omit<PlanInput, 'searchJobId'> & { version: number } {
  const costOf = (motorId: number) =>
    plan.actions.find((action) => action.kind === 'field' && action.motorId === motorId) as
      Extract<PlanAction, { kind: 'field' }> | undefined;
  return {
    version: plan.version,
    name: plan.name,
    spans: plan.spans,
    fields: motorSettings(plan).map((setting) => {
      const minor = costOf(setting.motorId)?.equipmentCostMinor;
      return minor ? { ...setting, equipmentCost: fromMinorUnits(minor, currency) } : setting;
    }),
    banks: banksOf(plan, currency),
    replacements: replacementsOf(plan, currency),
    workCost: fromMinorUnits(plan.workCostMinor, currency),
    yearlyUpkeep: fromMinorUnits(plan.yearlyUpkeepMinor, currency),
    economics: plan.economics,
  };
}

/** What a saved plan answers: its row, not its prices. */
export const presentPlanRow = ({ id, version, name, chosen }: Plan) => ({ id, version, name, chosen });
