import type { BankInput, ReplacementInput } from '../../schemas/plan-input';
import { draftToInput, draftOf, emptyDraft, type MotorDraft } from '../motors/draft';
import { emptyPlate, plateDraftOf, plateToInput, type PlateDraft } from '../motors/plate-draft';
import { typedNumber } from '../ui/typed-number';
import { settingDraftOf, settingToInput, typed, type SettingDraft } from './setting-draft';

/** A bank as it is typed. */
export interface BankDraft {
  name: string;
  steps: string;
  stepKvar: string;
  lossWPerKvar: string;
  detuningPercent: string;
  holdsPowerFactor: string;
  meterId: string;
  cost: string;
}

/** Losses of a detuned bank with its reactors and contactors. Common practice, [W/kvar]. */
const usualLossWPerKvar = '5';

export const emptyBank = (): BankDraft => ({
  name: '',
  steps: '1',
  stepKvar: '',
  lossWPerKvar: usualLossWPerKvar,
  detuningPercent: '',
  holdsPowerFactor: '',
  meterId: '',
  cost: '',
});

export const bankDraftOf = (bank: BankInput): BankDraft => ({
  name: bank.name,
  steps: typed(bank.steps),
  stepKvar: typed(bank.stepKvar),
  lossWPerKvar: typed(bank.lossWPerKvar),
  detuningPercent: typed(bank.detuningPercent),
  holdsPowerFactor: typed(bank.holdsPowerFactor),
  meterId: typed(bank.meterId),
  cost: typed(bank.cost),
});

export const bankToInput = (bank: BankDraft): unknown => ({
  name: bank.name,
  steps: typedNumber(bank.steps),
  stepKvar: typedNumber(bank.stepKvar),
  lossWPerKvar: typedNumber(bank.lossWPerKvar),
  detuningPercent: typedNumber(bank.detuningPercent),
  holdsPowerFactor: typedNumber(bank.holdsPowerFactor),
  meterId: bank.meterId === '' ? undefined : Number(bank.meterId),
  cost: typedNumber(bank.cost),
});

/** A new motor in place of an induction motor, as it is typed. */
export interface ReplacementDraft {
  name: string;
  induction: {
    output: string;
    outputUnit: string;
    points: { loadPercent: string; efficiencyPercent: string; powerFactor: string }[];
  };
  plate: PlateDraft;
  calendar: MotorDraft['calendar'];
  setting: SettingDraft;
  meterId: string;
  cost: string;
}

const emptySetting = (): SettingDraft => ({
  motorId: 0,
  holds: 'leading',
  values: ['0.9'],
  droopPercent: '5',
  fieldC: '',
  equipmentCost: '',
});

export const emptyReplacement = (): ReplacementDraft => ({
  name: '',
  induction: {
    output: '',
    outputUnit: 'hp',
    points: ['50', '75', '100'].map((loadPercent) => ({ loadPercent, efficiencyPercent: '', powerFactor: '' })),
  },
  plate: emptyPlate(),
  calendar: emptyDraft().calendar,
  setting: emptySetting(),
  meterId: '',
  cost: '',
});

export function replacementDraftOf(one: ReplacementInput, spans: number): ReplacementDraft {
  const { calendar } = draftOf({
    name: '',
    plate: one.plate,
    calendar: one.calendar,
    fieldTodayA: 1,
    fieldReadAt: 'field',
  });
  return {
    name: one.name,
    induction: {
      output: typed(one.induction.output),
      outputUnit: one.induction.outputUnit,
      points: one.induction.points.map((point) => ({
        loadPercent: typed(point.loadPercent),
        efficiencyPercent: typed(point.efficiencyPercent),
        powerFactor: typed(point.powerFactor),
      })),
    },
    plate: plateDraftOf(one.plate),
    calendar,
    setting: settingDraftOf({ motorId: 0, controls: one.controls }, spans, undefined),
    meterId: typed(one.meterId),
    cost: typed(one.cost),
  };
}

export function replacementToInput(one: ReplacementDraft, spans: number): unknown {
  const { calendar } = draftToInput({ ...emptyDraft(), calendar: one.calendar }) as { calendar: unknown };
  const setting = settingToInput(one.setting, spans, undefined) as { fieldA?: number; controls?: unknown[] };
  return {
    name: one.name,
    induction: {
      output: typedNumber(one.induction.output),
      outputUnit: one.induction.outputUnit,
      points: one.induction.points.map((point) => ({
        loadPercent: typedNumber(point.loadPercent),
        efficiencyPercent: typedNumber(point.efficiencyPercent),
        powerFactor: typedNumber(point.powerFactor),
      })),
    },
    plate: plateToInput(one.plate),
    calendar,
    controls: setting.controls ?? [{ holds: 'field-current', fieldCurrentA: setting.fieldA }],
    meterId: one.meterId === '' ? undefined : Number(one.meterId),
    cost: typedNumber(one.cost),
  };
}
