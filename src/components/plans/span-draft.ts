import type { SpanSet } from '../../schemas/plan-spans';

/** How the year is parted, as it is typed; what another choice of `by` would show is kept beside. */
export interface SpanDraft {
  by: SpanSet['by'];
  /** Months as their numbers in text, as tick boxes give them. */
  seasons: { name: string; months: string[] }[];
  shifts: { name: string; days: string; from: string; to: string }[];
  rest: string;
}

const summer = ['6', '7', '8', '9'];
export const monthNumbers = Array.from({ length: 12 }, (_, k) => String(k + 1));

/** Number of settings a motor has. */
export function spanCountOf(draft: SpanDraft, ofSchedule: readonly string[]): number {
  return spanNamesOf(draft, ofSchedule).length;
}

/** Names of the spans in their order. */
export function spanNamesOf({ by, seasons, shifts, rest }: SpanDraft, ofSchedule: readonly string[]): string[] {
  switch (by) {
    case 'year':
      return [''];
    case 'months':
      return seasons.map(({ name }) => name);
    case 'schedule':
      return [...ofSchedule];
    case 'clock':
      return [...shifts.map(({ name }) => name), rest];
  }
}

/** Days of a shift that one word names; a list of days stays as it is. */
const daysToInput = (days: string) => days.split(' ').filter(Boolean);

/** What the schema is asked to read. */
export function spansToInput({ by, seasons, shifts, rest }: SpanDraft, ofSchedule: readonly string[]): unknown {
  switch (by) {
    case 'year':
      return { by };
    case 'months':
      return { by, spans: seasons.map(({ name, months }) => ({ name, months: (months || []).map(Number) })) };
    case 'schedule':
      return { by, spans: ofSchedule.map((name) => ({ name })) };
    case 'clock':
      return { by, spans: shifts.map((shift) => ({ ...shift, days: daysToInput(shift.days) })), rest };
  }
}

/** Stored spans in the form. */
export function spanDraftOf(set: SpanSet): SpanDraft {
  return {
    by: set.by,
    seasons:
      set.by === 'months'
        ? set.spans.map(({ name, months }) => ({ name, months: months.map(String) }))
        : [
            { name: 'Summer', months: summer },
            { name: 'Winter', months: monthNumbers.filter((month) => !summer.includes(month)) },
          ],
    shifts:
      set.by === 'clock'
        ? set.spans.map((shift) => ({ ...shift, days: shift.days.join(' ') }))
        : [{ name: 'Day shift', days: 'weekday', from: '06:00', to: '22:00' }],
    rest: set.by === 'clock' ? set.rest : 'Other hours',
  };
}

/** The spans in a line, for comparing two versions. */
export function spansEntry(draft: SpanDraft, ofSchedule: readonly string[]): string {
  if (draft.by === 'year') return 'one setting for the year';
  if (draft.by === 'months') return draft.seasons.map(({ name, months }) => `${name}: ${months.join(' ')}`).join('; ');
  if (draft.by === 'clock')
    return [...draft.shifts.map(({ name, days, from, to }) => `${name}: ${days} ${from} to ${to}`), draft.rest].join(
      '; ',
    );
  return spanNamesOf(draft, ofSchedule).join('; ');
}
