import {
  isWanted,
  type ClientItemView,
  type ClientRequestView,
  type RequestSummary,
  type StaffItemView,
  type StaffRequestView,
} from '../../schemas/request';
import { capital, formatCount, formatLongDate, formatSpelled } from '../ui/format';
import type { LedgerColumn, LedgerRow } from '../ui/ledger';
import type { MarkProps } from '../ui/Mark';

const things = (count: number) => `${formatSpelled(count)} ${count === 1 ? 'thing' : 'things'}`;

/** How long there is, or how late it is. */
export function dueWords(daysLeft: number): string {
  if (daysLeft === 0) return 'today';
  return daysLeft > 0 ? `in ${formatCount(daysLeft, 'day')}` : `${formatCount(-daysLeft, 'day')} ago`;
}

/** The finding of the client's page. */
export function clientHeading({ state, items, dueOn, daysLeft, by }: ClientRequestView): {
  title: string;
  lead: string;
} {
  if (state === 'withdrawn')
    return { title: 'Nothing is needed any more.', lead: `${by.name} has withdrawn this request.` };
  if (state === 'closed') return { title: 'This request is done. Thank you.', lead: 'Nothing more is needed for it.' };
  const left = items.filter(isWanted).length;
  if (left === 0) {
    return {
      title: 'You have answered everything. Thank you.',
      lead: `${by.name} looks through it and tells you if something needs another look. Until then you can add files or take them away.`,
    };
  }
  const day = formatLongDate(dueOn);
  const title = `${capital(things(left))} ${left === 1 ? 'is' : 'are'} ${daysLeft < 0 ? `still needed; they were asked for until ${day}` : `needed by ${day}`}.`;
  return {
    title: left === 1 ? title.replace('they were', 'it was') : title,
    lead: `Files or photos, as many as you like, one after the other. What you sent is safe when its name stands in the list.`,
  };
}

/** The finding of the practice's page. */
export function staffHeading({ number, state, items, dueOn, daysLeft }: StaffRequestView): {
  title: string;
  lead: string;
} {
  const answered = items.filter((item) => !isWanted(item)).length;
  const files = items.flatMap(({ files: all }) => all).filter((file) => file.state === 'new').length;
  const came =
    answered === 0
      ? `None of ${things(items.length)} is answered yet`
      : `${capital(formatSpelled(answered))} of ${things(items.length)} ${answered === 1 ? 'is' : 'are'} answered`;
  const due = `due ${formatLongDate(dueOn)}, ${dueWords(daysLeft)}`;
  if (state === 'withdrawn') return { title: `Request ${number} was withdrawn.`, lead: `${came}.` };
  if (state === 'closed') return { title: `Request ${number} is closed.`, lead: `${came}.` };
  const waits = files > 0 ? `; ${formatCount(files, 'file waits', 'files wait')} to be looked at` : '';
  return { title: `${came}${waits}.`, lead: `Request ${number}, ${due}.` };
}

/** What became of an item, for the client. */
export function clientMark({ state, answer }: ClientItemView): MarkProps {
  if (state === 'accepted') return { kind: 'filled', word: 'accepted' };
  if (state === 'sent-back') return { kind: 'diamond', word: 'needs another look', tone: 'fault' };
  if (state === 'answered') return { kind: 'half', word: answer ? 'you do not have it' : 'received' };
  return { kind: 'hollow', word: 'still needed' };
}

/** The same for the practice. */
export function staffMark({ state, answer, files }: StaffItemView): MarkProps {
  if (state === 'accepted') return { kind: 'filled', word: 'accepted' };
  if (state === 'sent-back') return { kind: 'circle', word: 'sent back' };
  if (state === 'asked') return { kind: 'circle', word: 'with the client' };
  if (answer && files.length === 0) return { kind: 'half', word: 'client does not have it' };
  return { kind: 'half', word: 'to look at' };
}

function summaryMark({ state, items, answered, newFiles, daysLeft }: RequestSummary): MarkProps {
  if (state === 'closed') return { kind: 'filled', word: 'closed' };
  if (state === 'withdrawn') return { kind: 'hollow', word: 'withdrawn', tone: 'quiet' };
  if (newFiles > 0) return { kind: 'half', word: `${formatCount(newFiles, 'file')} to look at` };
  if (answered === items) return { kind: 'half', word: 'answered' };
  return daysLeft < 0
    ? { kind: 'diamond', word: 'overdue', tone: 'fault' }
    : { kind: 'circle', word: 'with the client' };
}

/** Columns of a list of requests for the practice. */
export const summaryColumns: LedgerColumn[] = [
  { key: 'number', head: 'Request' },
  { key: 'state', head: 'State' },
  { key: 'answered', head: 'Answered', align: 'right' },
  { key: 'due', head: 'Due' },
  { key: 'people', head: 'Asked', wrap: true },
  { key: 'sent', head: 'Sent', quiet: true },
];

/** Requests as rows of a list for the practice. */
export const summaryRow = (request: RequestSummary): LedgerRow => ({
  id: String(request.number),
  cells: {
    number: { value: `Request ${request.number}`, href: `/engagements/${request.code}/requests/${request.number}` },
    state: { value: null, mark: summaryMark(request) },
    answered: `${request.answered} of ${request.items}`,
    due: formatLongDate(request.dueOn),
    people: request.people.join(', '),
    sent: formatLongDate(request.sentOn),
  },
});

/** Columns of the client's list. */
export const clientColumns: LedgerColumn[] = [
  { key: 'request', head: 'Request' },
  { key: 'state', head: 'State' },
  { key: 'answered', head: 'Answered', align: 'right' },
  { key: 'due', head: 'Needed by' },
  { key: 'sent', head: 'Asked on', quiet: true },
];

function clientSummaryMark({ state, items, answered, daysLeft }: RequestSummary): MarkProps {
  if (state === 'closed') return { kind: 'filled', word: 'done' };
  if (state === 'withdrawn') return { kind: 'hollow', word: 'needed no more', tone: 'quiet' };
  if (answered === items) return { kind: 'half', word: 'all answered' };
  return daysLeft < 0 ? { kind: 'diamond', word: 'overdue', tone: 'fault' } : { kind: 'hollow', word: 'waits for you' };
}

/** Requests as rows of the client's list. */
export const clientRow = (request: RequestSummary): LedgerRow => ({
  id: String(request.number),
  cells: {
    request: { value: `Request ${request.number}`, href: `/client/${request.code}/requests/${request.number}` },
    state: { value: null, mark: clientSummaryMark(request) },
    answered: `${request.answered} of ${request.items}`,
    due: formatLongDate(request.dueOn),
    sent: formatLongDate(request.sentOn),
  },
});

/** The finding of the client's list. */
export function clientListHeading(requests: RequestSummary[]): string {
  const waiting = requests.filter(({ state, items, answered }) => state === 'open' && answered < items);
  const left = waiting.reduce((sum, { items, answered }) => sum + items - answered, 0);
  const [due] = waiting.map(({ dueOn }) => dueOn).sort();
  if (requests.length === 0) return 'Nothing has been asked of you.';
  if (!due) return 'Nothing waits for you.';
  const by = waiting.length > 1 ? ', the first by' : ' by';
  return `${capital(things(left))} ${left === 1 ? 'is' : 'are'} needed${by} ${formatLongDate(due)}.`;
}

/** The finding of the practice's list. */
export function listHeading(requests: RequestSummary[]): { title: string; lead?: string } {
  const open = requests.filter(({ state }) => state === 'open');
  if (requests.length === 0) return { title: 'The client has not been asked for anything yet.' };
  if (open.length === 0) return { title: 'No request is open.' };
  const files = open.reduce((sum, { newFiles }) => sum + newFiles, 0);
  const left = open.reduce((sum, { items, answered }) => sum + items - answered, 0);
  const parts = [
    left > 0 ? `${things(left)} ${left === 1 ? 'is' : 'are'} with the client` : 'everything asked for is answered',
    files > 0 && `${formatCount(files, 'file waits', 'files wait')} to be looked at`,
  ].filter(Boolean);
  return { title: `${capital(parts.join('; '))}.` };
}
