import type { SpanSet } from '../../schemas/plan-spans';
import { searchInput, type SearchInput } from '../../schemas/search';
import { typedNumber } from '../ui/typed-number';

/** What is searched, as it is typed. */
export interface SearchDraft {
  stepA: string;
  /** Ids of the motors that are searched. */
  motors: number[];
  by: 'year' | 'halves' | 'schedule' | 'shift';
  from: string;
  to: string;
  withBank: boolean;
  stepKvar: string;
  mostSteps: string;
  lossWPerKvar: string;
  holdsPowerFactor: string;
  costPerKvar: string;
  detuningPercent: string;
  motorWork: string;
}

export const emptySearch = (motors: number[]): SearchDraft => ({
  stepA: '2',
  motors,
  by: 'year',
  from: '06:00',
  to: '22:00',
  withBank: false,
  stepKvar: '100',
  mostSteps: '12',
  lossWPerKvar: '2.5',
  holdsPowerFactor: '',
  costPerKvar: '45',
  detuningPercent: '',
  motorWork: '',
});

/** Half-years by months: April to September, and the rest. */
const halves: SpanSet = {
  by: 'months',
  spans: [
    { name: 'Winter half', months: [1, 2, 3, 10, 11, 12] },
    { name: 'Summer half', months: [4, 5, 6, 7, 8, 9] },
  ],
};

function spansOf({ by, from, to }: SearchDraft, seasons: string[]): SpanSet | undefined {
  if (by === 'halves') return halves;
  if (by === 'schedule') return { by, spans: seasons.map((name) => ({ name })) };
  if (by === 'shift')
    return { by: 'clock', spans: [{ name: 'Day shift', days: ['weekday'], from, to }], rest: 'Nights and weekends' };
  return undefined;
}

export type SearchFaults = Partial<Record<string, string>>;

/** What is sent, or what is wrong with it by entry. */
export function searchAsked(
  draft: SearchDraft,
  { allMotors, seasons }: { allMotors: number[]; seasons: string[] },
): { input: SearchInput; faults: null } | { input: null; faults: SearchFaults } {
  const parsed = searchInput.safeParse({
    stepA: typedNumber(draft.stepA),
    motorIds: draft.motors.length === allMotors.length ? undefined : draft.motors,
    spans: spansOf(draft, seasons),
    bank: draft.withBank
      ? {
          stepKvar: typedNumber(draft.stepKvar),
          mostSteps: typedNumber(draft.mostSteps),
          lossWPerKvar: typedNumber(draft.lossWPerKvar),
          holdsPowerFactor: draft.holdsPowerFactor.trim() === '' ? undefined : typedNumber(draft.holdsPowerFactor),
          costPerKvar: typedNumber(draft.costPerKvar),
          detuningPercent: draft.detuningPercent.trim() === '' ? undefined : typedNumber(draft.detuningPercent),
          // Without the cost of the work no comparison is honest: an empty entry is asked for, not taken for nothing.
          motorWork: typedNumber(draft.motorWork),
        }
      : undefined,
  });
  if (parsed.success) return { input: parsed.data, faults: null };
  const faults: SearchFaults = {};
  for (const { path, message } of parsed.error.issues) {
    const [first, second, third, last] = path.map(String);
    const name = first === 'spans' ? (last ?? third ?? 'spans') : (second ?? first ?? '');
    faults[name] ??= message;
  }
  return { input: null, faults };
}
