import { dayNames, type DayName, type MotorInput } from '../../schemas/motor';
import { typedNumber } from '../ui/typed-number';
import {
  emptyPlate,
  plateDraftOf,
  plateEntries,
  plateLabels,
  plateToInput,
  shown,
  type PlateDraft,
} from './plate-draft';

/** A motor as it is typed: every number still text, so that nothing typed is lost. Paths are those of `motorInput`. */
export interface MotorDraft {
  name: string;
  drives: string;
  /** Id of the meter it stands behind; '' where there is but one. */
  meterId: string;
  plate: PlateDraft;
  calendar: {
    rules: { days: DayName[]; fromHour: string; toHour: string; load: string; unit: string }[];
    shutdowns: { from: string; lastDay: string }[];
  };
  fieldTodayA: string;
  fieldReadAt: string;
}

/** What the schema is asked to read. */
export function draftToInput(draft: MotorDraft): unknown {
  const { calendar } = draft;
  return {
    name: draft.name,
    drives: draft.drives.trim() === '' ? undefined : draft.drives,
    meterId: draft.meterId === '' ? undefined : Number(draft.meterId),
    plate: plateToInput(draft.plate),
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
    fieldReadAt: draft.plate.exciterKind === 'brushless' ? draft.fieldReadAt : 'field',
  };
}

/** What a stored motor looks like in the form. */
export function draftOf(motor: Omit<MotorInput, 'drives'> & { drives?: string | null }): MotorDraft {
  const { calendar } = motor;
  return {
    name: motor.name,
    drives: motor.drives ?? '',
    meterId: shown(motor.meterId),
    plate: plateDraftOf(motor.plate),
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
    fieldReadAt: motor.fieldReadAt,
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
  return {
    name: '',
    drives: '',
    meterId: '',
    plate: emptyPlate(),
    calendar: { rules: [emptyRule()], shutdowns: [] },
    fieldTodayA: '',
    fieldReadAt: 'panel',
  };
}

/** Names of the entries, for the form and for comparing two versions. */
export const entryLabels: Record<string, string> = {
  name: 'Name',
  drives: 'Drives',
  meterId: 'Behind meter',
  ...plateLabels,
  'calendar.rules': 'Shaft load',
  'calendar.shutdowns': 'Shutdowns',
  fieldTodayA: 'Field current today',
};

/** Entries of a draft by path, as text. */
export function draftEntries(draft: MotorDraft): Record<string, string> {
  const { calendar } = draft;
  const { name, drives, fieldTodayA } = draft;
  const entries: Record<string, string> = { name, drives, fieldTodayA, ...plateEntries(draft.plate) };
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
