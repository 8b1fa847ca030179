import { fieldCurrentAtPanelA, panelCurrentA, type FieldControl, type SynchronousMotor } from '../../core/machine';
import type { MotorSettingInput } from '../../schemas/plan-input';
import { controlsOf } from '../../schemas/plan-settings';
import { typedNumber } from '../ui/typed-number';

/** What a motor may hold, as the form offers it. */
export type Mode = Exclude<FieldControl['holds'], 'power-factor'> | 'leading' | 'lagging';

export const modes: { value: Mode; label: string; unit: string; hint?: string }[] = [
  { value: 'field-current', label: 'a field current', unit: 'A' },
  { value: 'field-voltage', label: 'a field voltage', unit: 'V', hint: 'The current falls as the winding warms' },
  { value: 'leading', label: 'its own power factor, leading', unit: '' },
  { value: 'lagging', label: 'its own power factor, lagging', unit: '' },
  { value: 'kvar', label: 'kvar', unit: 'kvar', hint: 'Delivered; below 0 where it absorbs' },
  { value: 'voltage', label: 'the bus voltage, with droop', unit: '% of rated' },
  {
    value: 'plant-power-factor',
    label: 'the plant’s power factor',
    unit: '',
    hint: 'Lagging, shared among the motors that hold it',
  },
];

/** One motor's setting as it is typed: what it holds, with a value for each span. */
export interface SettingDraft {
  motorId: number;
  holds: Mode;
  /** Field amperes of a brushless motor as its panel shows them. */
  values: string[];
  droopPercent: string;
  fieldC: string;
  equipmentCost: string;
}

/** Amperes as an operator reads them: a millionth at most, so that a solved value stays within its limit. */
export const typed = (value: number | undefined | null) =>
  value === undefined || value === null ? '' : String(Math.round(value * 1e6) / 1e6);

const modeOf = (control: FieldControl): Mode =>
  control.holds === 'power-factor' ? (control.leading ? 'leading' : 'lagging') : control.holds;

function valueOf(control: FieldControl, machine: SynchronousMotor | undefined): number {
  switch (control.holds) {
    case 'field-current':
      return machine?.exciterField ? panelCurrentA(machine, control.fieldCurrentA) : control.fieldCurrentA;
    case 'field-voltage':
      return control.fieldVoltageV;
    case 'kvar':
      return control.kvarDelivered;
    case 'voltage':
      return 100 * control.setPu;
    default:
      return control.powerFactor;
  }
}

/** A stored setting in the form, with as many values as the year has spans. */
export function settingDraftOf(
  setting: MotorSettingInput,
  spans: number,
  machine: SynchronousMotor | undefined,
): SettingDraft {
  const controls = controlsOf(setting);
  const [first] = controls as [FieldControl];
  return {
    motorId: setting.motorId,
    holds: modeOf(first),
    values: Array.from({ length: spans }, (_, k) => typed(valueOf(controls[k] ?? first, machine))),
    droopPercent: first.holds === 'voltage' ? typed(100 * first.droopPu) : '5',
    fieldC: first.holds === 'field-voltage' ? typed(first.fieldC) : '',
    equipmentCost: typed(setting.equipmentCost),
  };
}

/** What is held at a typed value; figures that cannot be read are left undefined for the schema to refuse. */
export function controlOf(draft: SettingDraft, value: string, machine: SynchronousMotor | undefined) {
  const number = typedNumber(value);
  switch (draft.holds) {
    case 'field-current': {
      const fromPanel = number !== undefined && number > 0 && machine?.exciterField;
      return { holds: 'field-current', fieldCurrentA: fromPanel ? fieldCurrentAtPanelA(machine!, number) : number };
    }
    case 'field-voltage':
      return { holds: 'field-voltage', fieldVoltageV: number, fieldC: typedNumber(draft.fieldC) };
    case 'leading':
    case 'lagging':
      return { holds: 'power-factor', powerFactor: number, leading: draft.holds === 'leading' };
    case 'kvar':
      return { holds: 'kvar', kvarDelivered: number };
    case 'voltage': {
      const droop = typedNumber(draft.droopPercent);
      return {
        holds: 'voltage',
        setPu: number === undefined ? undefined : number / 100,
        droopPu: droop === undefined ? undefined : droop / 100,
      };
    }
    case 'plant-power-factor':
      return { holds: 'plant-power-factor', powerFactor: number };
  }
}

/** The values in force: the first for the whole year, one a span otherwise; one where all are the same. */
export function valuesOf({ values }: Pick<SettingDraft, 'values'>, spans: number): string[] {
  const used = Array.from({ length: spans }, (_, k) => values[k] ?? values[0] ?? '');
  return used.every((value) => value.trim() === used[0]!.trim()) ? used.slice(0, 1) : used;
}

/** What the schema is asked to read: a constant field current in its plain form, all else as controls. */
export function settingToInput(draft: SettingDraft, spans: number, machine: SynchronousMotor | undefined): unknown {
  const controls = valuesOf(draft, spans).map((value) => controlOf(draft, value, machine));
  const [first] = controls;
  const cost = typedNumber(draft.equipmentCost);
  const rest = cost === undefined || cost === 0 ? {} : { equipmentCost: cost };
  return draft.holds === 'field-current' && controls.length === 1
    ? { motorId: draft.motorId, fieldA: (first as { fieldCurrentA?: number }).fieldCurrentA, ...rest }
    : { motorId: draft.motorId, controls, ...rest };
}
