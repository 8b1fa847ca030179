import { constantFieldA } from '../../schemas/plan-settings';
import type { PlanInput } from '../../schemas/plan-input';
import { typedNumber } from '../ui/typed-number';

/** A plan as it is typed; paths are those of `planInput`. Fields stay in the order of the motors. */
export interface PlanDraft {
  name: string;
  fields: { motorId: number; fieldA: string }[];
  /** An empty size is no bank. */
  capacitors: { kvar: string; lossWPerKvar: string; detuningPercent: string };
  workCost: string;
  yearlyUpkeep: string;
  economics: { discountPercent: string; escalationPercent: string; horizonYears: string };
}

/** What the schema is asked to read. */
export function planDraftToInput(draft: PlanDraft, searchJobId?: number): unknown {
  const { economics } = draft;
  return {
    name: draft.name,
    fields: draft.fields.map(({ motorId, fieldA }) => ({ motorId, fieldA: typedNumber(fieldA) })),
    banks: bankToInput(draft.capacitors),
    workCost: typedNumber(draft.workCost),
    yearlyUpkeep: typedNumber(draft.yearlyUpkeep),
    economics: {
      discountPercent: typedNumber(economics.discountPercent),
      escalationPercent: typedNumber(economics.escalationPercent),
      horizonYears: typedNumber(economics.horizonYears),
    },
    searchJobId,
  };
}

/** A bank of 0 or no kvar is none. */
function bankToInput(bank: PlanDraft['capacitors']): unknown {
  const kvar = typedNumber(bank.kvar);
  if (kvar === undefined || kvar === 0) return [];
  return [
    {
      steps: 1,
      stepKvar: kvar,
      lossWPerKvar: typedNumber(bank.lossWPerKvar),
      detuningPercent: typedNumber(bank.detuningPercent),
    },
  ];
}

/** Amperes as an operator reads them: a tenth at most, so that a solved value stays within its limit. */
const typed = (value: number | undefined) => (value === undefined ? '' : String(Math.round(value * 1e6) / 1e6));

/** Losses of a detuned bank with its reactors and contactors. Common practice, [W/kvar]. */
const usualLossWPerKvar = 5;

/** A stored plan, or the start of a new one, in the form. */
export function planDraftOf(plan: Omit<PlanInput, 'searchJobId'>): PlanDraft {
  const { economics } = plan;
  return {
    name: plan.name,
    fields: plan.fields.map((field) => ({ motorId: field.motorId, fieldA: typed(constantFieldA(field) ?? undefined) })),
    capacitors: {
      kvar: typed(plan.banks[0] && plan.banks[0].steps * plan.banks[0].stepKvar),
      lossWPerKvar: typed(plan.banks[0]?.lossWPerKvar ?? usualLossWPerKvar),
      detuningPercent: typed(plan.banks[0]?.detuningPercent),
    },
    workCost: typed(plan.workCost),
    yearlyUpkeep: typed(plan.yearlyUpkeep),
    economics: {
      discountPercent: typed(economics.discountPercent),
      escalationPercent: typed(economics.escalationPercent),
      horizonYears: typed(economics.horizonYears),
    },
  };
}

/** Entries of a draft as text, with names, for comparing two versions. */
export function planEntries(draft: PlanDraft, motorName: (motorId: number) => string): Record<string, string> {
  return {
    Name: draft.name,
    ...Object.fromEntries(draft.fields.map(({ motorId, fieldA }) => [`${motorName(motorId)} field, A`, fieldA])),
    'Capacitors, kvar': draft.capacitors.kvar,
    'Capacitor losses, W/kvar': draft.capacitors.lossWPerKvar,
    'Detuning, %': draft.capacitors.detuningPercent,
    'Work, once': draft.workCost,
    'Upkeep a year': draft.yearlyUpkeep,
    'Discount rate, %': draft.economics.discountPercent,
    'Rise of prices, %': draft.economics.escalationPercent,
    'Horizon, years': draft.economics.horizonYears,
  };
}
