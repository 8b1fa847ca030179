import { dayNames, type DayName, type MotorInput } from '../../schemas/motor';
import { typedNumber } from '../ui/typed-number';

/** A motor as it is typed: every number still text, so that nothing typed is lost. Paths are those of `motorInput`. */
export interface MotorDraft {
  name: string;
  drives: string;
  /** Id of the meter it stands behind; '' where there is but one. */
  meterId: string;
  plate: Record<PlateNumber | PlateChoice, string> & { openCircuitCurve: string; limits: Record<LimitNumber, string> };
  calendar: {
    rules: { days: DayName[]; fromHour: string; toHour: string; load: string; unit: string }[];
    shutdowns: { from: string; lastDay: string }[];
  };
  fieldTodayA: string;
  fieldReadAt: string;
}

const plateNumbers = [
  'output',
  'voltageV',
  'currentA',
  'powerFactor',
  'speedRpm',
  'poles',
  'frequencyHz',
  'efficiencyPercent',
  'fieldCurrentA',
  'fieldVoltageV',
  'fieldResistanceOhm',
  'exciterFieldA',
  'exciterNoLoadA',
  'exciterEfficiencyPercent',
  'xdPu',
  'xqPu',
  'raPu',
  'xlPu',
] as const;
const plateChoices = ['outputUnit', 'exciterKind', 'rotor', 'source'] as const;
const limitNumbers = ['fieldCurrentA', 'armatureCurrentA', 'pullOutMargin', 'reservePercent'] as const;
export type PlateNumber = (typeof plateNumbers)[number];
type PlateChoice = (typeof plateChoices)[number];
type LimitNumber = (typeof limitNumbers)[number];

const shown = (value: unknown) => (value === undefined || value === null ? '' : String(value));

/** Rows of an open-circuit curve: amperes and per-unit volts on a line. */
function typedCurve(text: string): { fieldCurrentA: number; voltagePu: number }[] | undefined {
  const lines = text.split('\n').filter((line) => line.trim() !== '');
  if (lines.length === 0) return undefined;
  return lines.map((line) => {
    const [amperes = '', volts = ''] = line.trim().split(/[\s;,]+/);
    return { fieldCurrentA: Number(amperes || NaN), voltagePu: Number(volts || NaN) };
  });
}

/** What the schema is asked to read. */
export function draftToInput(draft: MotorDraft): unknown {
  const { plate, calendar } = draft;
  const numbers = Object.fromEntries(plateNumbers.map((name) => [name, typedNumber(plate[name])]));
  const choices = Object.fromEntries(plateChoices.map((name) => [name, plate[name] === '' ? undefined : plate[name]]));
  const limits = Object.fromEntries(limitNumbers.map((name) => [name, typedNumber(plate.limits[name])]));
  return {
    name: draft.name,
    drives: draft.drives.trim() === '' ? undefined : draft.drives,
    meterId: draft.meterId === '' ? undefined : Number(draft.meterId),
    plate: { ...numbers, ...choices, limits, openCircuitCurve: typedCurve(plate.openCircuitCurve) },
    calendar: {
      rules: calendar.rules.map((rule) => ({
        days: rule.days,
        fromHour: typedNumber(rule.fromHour),
        toHour: typedNumber(rule.toHour),
        load: typedNumber(rule.load),
        unit: rule.unit,
      })),
      shutdowns: calendar.shutdowns,
    },
    fieldTodayA: typedNumber(draft.fieldTodayA),
    fieldReadAt: draft.fieldReadAt,
  };
}

/** What a stored motor looks like in the form. */
export function draftOf(motor: Omit<MotorInput, 'drives' | 'fieldReadAt'> & { drives?: string | null }): MotorDraft {
  const { plate, calendar } = motor;
  const numbers = Object.fromEntries(plateNumbers.map((name) => [name, shown(plate[name])]));
  const choices = Object.fromEntries(plateChoices.map((name) => [name, shown(plate[name])]));
  const limits = Object.fromEntries(limitNumbers.map((name) => [name, shown(plate.limits[name])]));
  const curve = (plate.openCircuitCurve ?? []).map((point) => `${point.fieldCurrentA} ${point.voltagePu}`).join('\n');
  return {
    name: motor.name,
    drives: motor.drives ?? '',
    meterId: shown(motor.meterId),
    plate: { ...numbers, ...choices, openCircuitCurve: curve, limits } as MotorDraft['plate'],
    calendar: {
      rules: calendar.rules.map((rule) => ({
        days: rule.days,
        fromHour: shown(rule.fromHour),
        toHour: shown(rule.toHour),
        load: shown(rule.load),
        unit: rule.unit,
      })),
      shutdowns: calendar.shutdowns.map((range) => ({ ...range })),
    },
    fieldTodayA: shown(motor.fieldTodayA),
    fieldReadAt: 'field',
  };
}

export const emptyRule = (): MotorDraft['calendar']['rules'][number] => ({
  days: [...dayNames],
  fromHour: '0',
  toHour: '24',
  load: '',
  unit: 'percent',
});

/** An empty form: a 60 Hz machine with a static exciter, running all week. */
export function emptyDraft(): MotorDraft {
  const blank = (names: readonly string[]) => Object.fromEntries(names.map((name) => [name, '']));
  return {
    name: '',
    drives: '',
    meterId: '',
    plate: {
      ...blank(plateNumbers),
      source: '',
      outputUnit: 'hp',
      frequencyHz: '60',
      exciterKind: 'static',
      rotor: 'salient',
      openCircuitCurve: '',
      limits: blank(limitNumbers),
    } as MotorDraft['plate'],
    calendar: { rules: [emptyRule()], shutdowns: [] },
    fieldTodayA: '',
    fieldReadAt: 'field',
  };
}

/** Names of the entries, for the form and for comparing two versions. */
export const entryLabels: Record<string, string> = {
  name: 'Name',
  drives: 'Drives',
  meterId: 'Behind meter',
  'plate.output': 'Rated output',
  'plate.outputUnit': 'Unit of output',
  'plate.voltageV': 'Rated voltage',
  'plate.currentA': 'Rated armature current',
  'plate.powerFactor': 'Rated power factor, leading',
  'plate.speedRpm': 'Speed',
  'plate.poles': 'Poles',
  'plate.frequencyHz': 'Frequency',
  'plate.efficiencyPercent': 'Efficiency',
  'plate.fieldCurrentA': 'Rated field current',
  'plate.fieldVoltageV': 'Rated field voltage',
  'plate.fieldResistanceOhm': 'Field resistance, hot',
  'plate.exciterKind': 'Exciter',
  'plate.exciterFieldA': 'Exciter field at rated field',
  'plate.exciterNoLoadA': 'Exciter field at no load',
  'plate.exciterEfficiencyPercent': 'Exciter efficiency',
  'plate.rotor': 'Rotor',
  'plate.xdPu': 'Xd',
  'plate.xqPu': 'Xq',
  'plate.raPu': 'Ra',
  'plate.xlPu': 'Leakage reactance',
  'plate.openCircuitCurve': 'Open-circuit curve',
  'plate.source': 'Source of the figures',
  'plate.limits.fieldCurrentA': 'Field limit',
  'plate.limits.armatureCurrentA': 'Stator limit',
  'plate.limits.pullOutMargin': 'Least pull-out over load',
  'plate.limits.reservePercent': 'Reserve',
  'calendar.rules': 'Shaft load',
  'calendar.shutdowns': 'Shutdowns',
  fieldTodayA: 'Field current today',
};

/** Entries of a draft by path, as text. */
export function draftEntries(draft: MotorDraft): Record<string, string> {
  const { plate, calendar } = draft;
  const entries: Record<string, string> = { name: draft.name, drives: draft.drives, fieldTodayA: draft.fieldTodayA };
  for (const [name, value] of Object.entries(plate)) if (typeof value === 'string') entries[`plate.${name}`] = value;
  for (const [name, value] of Object.entries(plate.limits)) entries[`plate.limits.${name}`] = value;
  entries['calendar.rules'] = calendar.rules
    .map((rule) => `${daysInWords(rule.days)} ${rule.fromHour}–${rule.toHour} h ${rule.load} ${unitWord(rule.unit)}`)
    .join('; ');
  entries['calendar.shutdowns'] = calendar.shutdowns.map((range) => `${range.from} to ${range.lastDay}`).join('; ');
  return entries;
}

export const unitWord = (unit: string) => (unit === 'percent' ? '%' : unit);

/** `Mon–Fri`, `every day`, `Sat, Sun`. */
export function daysInWords(days: readonly DayName[]): string {
  const chosen = dayNames.filter((day) => days.includes(day));
  if (chosen.length === 7) return 'every day';
  const first = chosen[0];
  const last = chosen.at(-1);
  if (!first || !last) return 'no day';
  const run = dayNames.indexOf(last) - dayNames.indexOf(first) + 1 === chosen.length;
  return run && chosen.length > 2 ? `${first}–${last}` : chosen.join(', ');
}
