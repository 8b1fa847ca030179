import type { SynchronousMotor } from '../../core/machine';
import type { PlanInput } from '../../schemas/plan-input';
import { typedNumber } from '../ui/typed-number';
import { economicsDraftOf, economicsEntries, economicsToInput, type EconomicsDraft } from './money-draft';
import {
  bankDraftOf,
  bankToInput,
  replacementDraftOf,
  replacementToInput,
  type BankDraft,
  type ReplacementDraft,
} from './part-draft';
import { modes, settingDraftOf, settingToInput, typed, valuesOf, type SettingDraft } from './setting-draft';
import { spanCountOf, spanDraftOf, spansEntry, spansToInput, type SpanDraft } from './span-draft';

/** A plan as it is typed. Faults stand at the paths of `planInput`. */
export interface PlanDraft {
  name: string;
  spans: SpanDraft;
  /** In the order of the motors. */
  settings: SettingDraft[];
  banks: BankDraft[];
  replacements: ReplacementDraft[];
  workCost: string;
  yearlyUpkeep: string;
  economics: EconomicsDraft;
}

/** What the form knows of the plant and its schedule. */
export interface PlanPlant {
  motors: { motorId: number; name: string; machine: SynchronousMotor }[];
  /** Names of the schedule's seasons, in its order. */
  seasons: string[];
}

const machineOf = ({ motors }: PlanPlant, motorId: number) =>
  motors.find((motor) => motor.motorId === motorId)?.machine;

/** What the schema is asked to read. */
export function planDraftToInput(draft: PlanDraft, plant: PlanPlant, searchJobId?: number): unknown {
  const count = spanCountOf(draft.spans, plant.seasons);
  return {
    name: draft.name,
    spans: spansToInput(draft.spans, plant.seasons),
    fields: draft.settings.map((setting) => settingToInput(setting, count, machineOf(plant, setting.motorId))),
    banks: draft.banks.map(bankToInput),
    replacements: draft.replacements.map((one) => replacementToInput(one, count)),
    workCost: typedNumber(draft.workCost),
    yearlyUpkeep: typedNumber(draft.yearlyUpkeep),
    economics: economicsToInput(draft.economics),
    searchJobId,
  };
}

/** A stored plan, or the start of a new one, in the form. */
export function planDraftOf(plan: Omit<PlanInput, 'searchJobId'>, plant: PlanPlant): PlanDraft {
  const spans = spanDraftOf(plan.spans);
  const count = spanCountOf(spans, plant.seasons);
  return {
    name: plan.name,
    spans,
    settings: plan.fields.map((setting) => settingDraftOf(setting, count, machineOf(plant, setting.motorId))),
    banks: plan.banks.map(bankDraftOf),
    replacements: plan.replacements.map((one) => replacementDraftOf(one, count)),
    workCost: typed(plan.workCost),
    yearlyUpkeep: typed(plan.yearlyUpkeep),
    economics: economicsDraftOf(plan.economics),
  };
}

const bankEntry = ({ steps, stepKvar, lossWPerKvar, detuningPercent, holdsPowerFactor, cost }: BankDraft) =>
  `${steps} x ${stepKvar} kvar, ${lossWPerKvar} W/kvar, detuning ${detuningPercent || 'none'}, holds ${holdsPowerFactor || 'fixed'}, cost ${cost || '0'}`;

/** All that is paid once, as it stands typed; undefined while the work is missing. */
export function capitalTyped({ workCost, settings, banks, replacements }: PlanDraft): number | undefined {
  const work = typedNumber(workCost);
  const costs = [
    ...settings.map((setting) => setting.equipmentCost),
    ...[...banks, ...replacements].map((part) => part.cost),
  ];
  return work === undefined ? undefined : costs.reduce((sum, cost) => sum + (typedNumber(cost) ?? 0), work);
}

/** Entries of a draft as text, with names, for comparing two versions. */
export function planEntries(draft: PlanDraft, plant: PlanPlant): Record<string, string> {
  const nameOf = (motorId: number) =>
    plant.motors.find((motor) => motor.motorId === motorId)?.name ?? `motor ${motorId}`;
  const count = spanCountOf(draft.spans, plant.seasons);
  const settings = draft.settings.map((setting) => {
    const mode = modes.find(({ value }) => value === setting.holds);
    const cost = setting.equipmentCost.trim() === '' ? '' : `, regulator ${setting.equipmentCost}`;
    return [`${nameOf(setting.motorId)} holds`, `${mode?.label}: ${valuesOf(setting, count).join(', ')}${cost}`];
  });
  return {
    Name: draft.name,
    'Parts of the year': spansEntry(draft.spans, plant.seasons),
    ...Object.fromEntries(settings),
    Capacitors: draft.banks.map(bankEntry).join('; ') || 'none',
    'New motors': draft.replacements.map(({ name, cost }) => `${name}, cost ${cost || '0'}`).join('; ') || 'none',
    'Work, once': draft.workCost,
    'Upkeep a year': draft.yearlyUpkeep,
    ...economicsEntries(draft.economics),
  };
}
