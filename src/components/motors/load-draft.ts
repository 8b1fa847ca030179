import { profileDays, type LoadTestRowInput, type ProfileDay, type ShaftLoadView } from '../../schemas/shaft-load';
import { typedNumber } from '../ui/typed-number';

/** Where a load comes from as it is typed: every number still text. Paths are those of `shaftLoadInput`. */
export interface LoadDraft {
  source: string;
  whenMissing: string;
  profile: Record<ProfileDay | 'unit', string>;
  loadTest: Record<keyof LoadTestRowInput, string>[];
}

const shown = (value: number | undefined) => (value === undefined ? '' : String(value));

export const emptyTestRow = (): LoadDraft['loadTest'][number] => ({
  fieldA: '',
  inputKw: '',
  kvar: '',
  powerFactor: '',
  sense: 'leading',
  lineA: '',
  voltageV: '',
});

/** What is stored, as the form shows it. */
export function loadDraftOf({ source, whenMissing, profile, loadTest }: ShaftLoadView): LoadDraft {
  const day = (name: ProfileDay) => profile?.[name].join(' ') ?? '';
  return {
    source,
    whenMissing,
    profile: {
      unit: profile?.unit ?? 'percent',
      weekday: day('weekday'),
      saturday: day('saturday'),
      sunday: day('sunday'),
    },
    loadTest: loadTest.map((row) => ({
      fieldA: shown(row.fieldA),
      inputKw: shown(row.inputKw),
      kvar: shown(row.kvar),
      powerFactor: shown(row.powerFactor),
      sense: row.sense,
      lineA: shown(row.lineA),
      voltageV: shown(row.voltageV),
    })),
  };
}

/** Figures of a day as typed or pasted: in a row or a column, parted by blanks, tabs or semicolons. */
const typedDay = (text: string) =>
  text
    .split(/[\s;]+/)
    .filter((figure) => figure !== '')
    .map((figure) => typedNumber(figure) ?? NaN);

/** What the schema is asked to read. */
export function loadDraftToInput({ source, whenMissing, profile, loadTest }: LoadDraft, version: number): unknown {
  const isWritten = source === 'profile' || profileDays.some((day) => profile[day].trim() !== '');
  const days = Object.fromEntries(profileDays.map((day) => [day, typedDay(profile[day])]));
  return {
    version,
    source,
    whenMissing,
    profile: isWritten ? { unit: profile.unit, ...days } : null,
    loadTest: loadTest.map(({ sense, ...figures }) => ({
      sense,
      ...Object.fromEntries(Object.entries(figures).map(([name, text]) => [name, typedNumber(text)])),
    })),
  };
}
