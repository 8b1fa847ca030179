import { addDays } from '../../core/load';
import { usualReminders, type ItemKind, type RequestDraft, type RequestInput } from '../../schemas/request';
import { typedNumber } from '../ui/typed-number';
import type { RequestLetterContent } from './letter-words';

/** One row of the form; days are typed with the last one included. */
export interface AskRow {
  chosen: boolean;
  kind: ItemKind;
  words: string;
  from: string;
  lastDay: string;
  motorId: string;
  why: string;
}

/** The form as it is typed. */
export interface AskDraft {
  rows: AskRow[];
  userIds: string[];
  dueOn: string;
  note: string;
  internalNote: string;
  daysBefore: string;
  onDue: boolean;
  everyDaysAfter: string;
}

/** A row for something no list knew of. */
export const emptyRow = (): AskRow => ({
  chosen: true,
  kind: 'other',
  words: '',
  from: '',
  lastDay: '',
  motorId: '',
  why: '',
});

/** What the form begins with: everything that is missing, chosen where the page was opened for its kind. */
export function startDraft(draft: RequestDraft, about: ItemKind | null): AskDraft {
  const rows = draft.items.map(({ kind, words, from, to, motorId, why, askedIn }) => ({
    chosen: askedIn === null && (about === null || kind === about),
    kind,
    words,
    from: from ?? '',
    lastDay: to ? addDays(to, -1) : '',
    motorId: motorId === null ? '' : String(motorId),
    why: askedIn === null ? why : `Asked already in request ${askedIn}, not answered yet. ${why}`,
  }));
  const { daysBefore, onDue, everyDaysAfter } = usualReminders;
  return {
    rows: rows.length > 0 ? rows : [{ ...emptyRow(), kind: about ?? 'other' }],
    userIds: draft.people.length === 1 ? draft.people.map(({ id }) => String(id)) : [],
    dueOn: draft.dueOn,
    note: '',
    internalNote: '',
    daysBefore: String(daysBefore ?? ''),
    onDue,
    everyDaysAfter: String(everyDaysAfter ?? ''),
  };
}

const isDay = (text: string) => /^\d{4}-\d{2}-\d{2}$/.test(text);
const dayAfter = (text: string) => (isDay(text) ? addDays(text, 1) : null);
const whole = (text: string) => typedNumber(text) ?? null;

/** Positions in the form of the rows that go. */
export const chosenRows = ({ rows }: AskDraft) => rows.flatMap((row, index) => (row.chosen ? [index] : []));

/** What is sent. */
export function toRequestInput(draft: AskDraft, requestId: string): RequestInput {
  const items = draft.rows.filter(({ chosen }) => chosen);
  return {
    requestId,
    dueOn: draft.dueOn,
    note: draft.note,
    internalNote: draft.internalNote,
    reminders: {
      daysBefore: whole(draft.daysBefore),
      onDue: draft.onDue,
      everyDaysAfter: whole(draft.everyDaysAfter),
    },
    userIds: draft.userIds.map(Number),
    items: items.map(({ kind, words, from, lastDay, motorId }) => ({
      kind,
      words,
      from: from || null,
      to: dayAfter(lastDay),
      motorId: motorId === '' ? null : Number(motorId),
    })),
  };
}

/** The mail as it would go to the first of the people. */
export function previewContent(draft: AskDraft, start: RequestDraft): RequestLetterContent {
  const { items, dueOn, note } = toRequestInput(draft, '');
  const first = start.people.find(({ id }) => draft.userIds.includes(String(id)));
  return {
    practice: start.practice,
    by: start.by,
    recipientName: first?.name ?? 'The person you choose',
    client: start.client,
    site: start.site,
    dueOn: isDay(dueOn) ? dueOn : start.dueOn,
    note: note.trim(),
    items: items.map(({ kind, words, from, to, motorId }) => ({
      kind,
      words,
      period: from && to && from < to ? { from, to } : null,
      motor: start.motors.find(({ id }) => id === motorId)?.name ?? null,
    })),
  };
}

/** A path of the server's or the schema's fault as the form names it: rows that do not go have no place in what is sent. */
export function formPath(path: string, rows: number[]): string {
  const found = /^items\.(\d+)\.(.+)$/.exec(path);
  if (!found) return path === 'items' ? 'rows' : path.replace(/^reminders\./, '');
  const field = found[2] === 'to' ? 'lastDay' : found[2];
  return `rows.${rows[Number(found[1])] ?? 0}.${field}`;
}
