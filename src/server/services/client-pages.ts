import { formatCount, formatDate, formatDay } from '../../components/ui/format';
import type { StationView } from '../../schemas/engagement';
import type { EditionSummary } from '../../schemas/edition';
import type { RequestSummary } from '../../schemas/request';
import type { Actor } from '../policies/actor';
import { canReadReleased } from '../policies/engagement';
import { practiceName } from './account';
import { listShownEditions, readShownEdition, type FrozenEdition } from './editions';
import { listOfOwnClient, openReleased, type OpenEngagement } from './engagements';
import { listReadableRequests, openWithRequests } from './requests';

/** A client's page around its sheet: who it is for, its taps, the edition it speaks of. */
export interface ClientFrame {
  opened: OpenEngagement;
  practice: string;
  taps: StationView[];
  editions: EditionSummary[];
  /** The newest edition shown to the client; null where none was shown yet. */
  edition: FrozenEdition | null;
  /** The requests this person may read, the newest first. */
  requests: RequestSummary[];
}

const tapIn =
  (code: string) =>
  (id: string, label: string, ready: boolean, reason: string): StationView => ({
    id,
    label,
    href: `/client/${code}/${id}`,
    state: ready ? 'closed' : 'open',
    reason,
  });

/** Requests that wait for the client. */
export const openRequests = (requests: RequestSummary[]) =>
  requests.filter(({ state, items, answered }) => state === 'open' && answered < items);

/** The tap of what is asked for; none before anything was. */
function requestTap(code: string, requests: RequestSummary[]): StationView[] {
  if (requests.length === 0) return [];
  const waiting = openRequests(requests);
  const left = waiting.reduce((sum, { items, answered }) => sum + items - answered, 0);
  const [due] = waiting.map(({ dueOn }) => dueOn).sort();
  const reason = due ? `${formatCount(left, 'thing')} by ${formatDay(due)}` : 'all answered';
  const tap = tapIn(code)('requests', 'Asked of you', !due, reason);
  return [waiting.some(({ daysLeft }) => daysLeft < 0) ? { ...tap, state: 'attention' } : tap];
}

function tapsOf(code: string, edition: FrozenEdition | null, editions: EditionSummary[]): StationView[] {
  const tap = tapIn(code);
  const bills = edition?.content.bills.length ?? 0;
  const newest = editions[0];
  return [
    tap('overview', 'Overview', edition !== null, edition ? `edition ${edition.content.number}` : 'nothing shown yet'),
    tap(
      'bills',
      'Bills before and after',
      edition !== null,
      edition ? formatCount(bills, 'bill') : 'nothing shown yet',
    ),
    tap(
      'reports',
      'Reports',
      editions.length > 0,
      newest ? `edition ${newest.number}, ${formatDate(newest.madeOn)}` : 'nothing shown yet',
    ),
  ];
}

/**
 * Opens an engagement for a page of the client.
 *
 * @throws {ServiceError} 404 for everybody it is not for
 */
export async function clientFrame(actor: Actor, code: string): Promise<ClientFrame> {
  const opened = await openReleased(actor, code);
  const [practice, editions, edition, requests] = await Promise.all([
    practiceName(),
    listShownEditions(opened),
    readShownEdition(actor, code),
    listReadableRequests(actor, opened),
  ]);
  const taps = [...tapsOf(code, edition, editions), ...requestTap(code, requests)];
  return { opened, practice, taps, editions, edition, requests };
}

/**
 * The same for the pages of what is asked for: who may not read editions sees these pages alone.
 *
 * @throws {ServiceError} 404 for everybody they are not for
 */
export async function requestFrame(
  actor: Actor,
  code: string,
): Promise<Pick<ClientFrame, 'opened' | 'practice' | 'taps' | 'requests'>> {
  const { opened, requests } = await openWithRequests(actor, code);
  if (canReadReleased(actor, opened.scope)) return clientFrame(actor, code);
  return { opened, practice: await practiceName(), taps: requestTap(code, requests), requests };
}

/**
 * Where a client's person begins: the newest engagement with something to show, else the newest of which something is
 * asked; null where there is neither.
 */
export async function clientHome(actor: Actor): Promise<string | null> {
  const own = await listOfOwnClient(actor);
  for (const opened of own) {
    if (!canReadReleased(actor, opened.scope)) continue;
    if ((await listShownEditions(opened)).length > 0) return `/client/${opened.engagement.code}/overview`;
  }
  for (const opened of own) {
    if ((await listReadableRequests(actor, opened)).length > 0) return `/client/${opened.engagement.code}/requests`;
  }
  return null;
}
