import { addDays, addMonths, isCalendarDate } from '../../core/load';
import { toDateNumber } from '../../schemas/tariff';
import { tryInput, usualTarget, type TryInput } from '../../schemas/try-out';
import { formatMonth } from '../ui/format';
import { typedNumber } from '../ui/typed-number';

/** The form as typed, by key: `from`, `to`, `kwh`, `kw`, `kvarh`, `pf`, `target`, and `q.`, `c.`, `p.` with a name. */
export type TryDraft = Record<string, string>;

const plainKeys = ['from', 'to', 'kwh', 'kw', 'kvarh', 'pf', 'target'];
const isKey = (key: string) => plainKeys.includes(key) || /^[qcp]\.[A-Za-z][A-Za-z0-9]*$/.test(key);
const longest = 30;

/** The month that ended last before a day, from its first day to the day behind its last. */
export function lastMonth(today: string): { from: string; to: string } {
  const to = `${today.slice(0, 7)}-01`;
  return { from: addMonths(to, -1), to };
}

/** What the page's address says, over the month that ended last. */
export function draftFromQuery(query: URLSearchParams, today: string): TryDraft {
  const told = [...query].filter(([key, text]) => isKey(key) && text.length <= longest);
  return { ...lastMonth(today), ...Object.fromEntries(told) };
}

/** The draft as the page's address keeps it. */
export function queryOf(draft: TryDraft): string {
  const told = Object.entries(draft).filter(([, text]) => text.trim() !== '');
  return new URLSearchParams(told).toString();
}

function numbersOf(draft: TryDraft, group: 'q' | 'c' | 'p'): Record<string, number> {
  const own = Object.entries(draft).filter(([key, text]) => key.startsWith(`${group}.`) && text.trim() !== '');
  return Object.fromEntries(
    own.map(([key, text]) => [key.slice(2), isCalendarDate(text) ? toDateNumber(text) : (typedNumber(text) ?? NaN)]),
  );
}

/** What is sent: what is no number goes as NaN, for the schema to refuse by field. */
export function tryInputOf(draft: TryDraft): TryInput {
  const number = (key: string) => typedNumber(draft[key] ?? '');
  return {
    from: draft.from ?? '',
    to: draft.to ?? '',
    kwh: number('kwh'),
    kw: number('kw'),
    kvarh: number('kvarh'),
    pf: number('pf'),
    target: number('target') ?? usualTarget,
    q: numbersOf(draft, 'q'),
    c: numbersOf(draft, 'c'),
    p: numbersOf(draft, 'p'),
  };
}

/** Messages by key for what the schema refuses. */
export function draftFaults(draft: TryDraft): Record<string, string> {
  const parsed = tryInput.safeParse(tryInputOf(draft));
  return Object.fromEntries((parsed.error?.issues ?? []).map((issue) => [issue.path.join('.'), issue.message]));
}

/** The draft without what the schema refuses: what a page can price before anybody has mended it. */
export function usableDraft(draft: TryDraft, today: string): TryDraft {
  const faults = draftFaults(draft);
  const usable = Object.entries(draft).filter(([key]) => !(key in faults));
  return { ...lastMonth(today), ...Object.fromEntries(usable) };
}

/** Whole months to choose from, the latest first; the chosen one stands among them. */
export function monthOptions(today: string, draft: TryDraft): { value: string; label: string }[] {
  const { from } = lastMonth(today);
  const starts = Array.from({ length: 24 }, (_, back) => addMonths(from, 1 - back));
  const own = isWholeMonth(draft) && !starts.includes(draft.from!) ? [draft.from!] : [];
  return [...own, ...starts].map((start) => ({ value: start, label: formatMonth(start) }));
}

/** Whether a draft is of one calendar month. */
export function isWholeMonth({ from = '', to = '' }: TryDraft): boolean {
  return isCalendarDate(from) && isCalendarDate(to) && from.endsWith('-01') && addMonths(from, 1) === to;
}

/** Last day of a half-open period, and back. */
export const lastDayOf = (to: string) => (isCalendarDate(to) ? addDays(to, -1) : '');
export const dayBehind = (lastDay: string) => (isCalendarDate(lastDay) ? addDays(lastDay, 1) : '');
