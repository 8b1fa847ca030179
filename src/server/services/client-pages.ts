import { formatCount, formatDate } from '../../components/ui/format';
import type { StationView } from '../../schemas/engagement';
import type { EditionSummary } from '../../schemas/edition';
import type { Actor } from '../policies/actor';
import { practiceName } from './account';
import { listShownEditions, readShownEdition, type FrozenEdition } from './editions';
import { listReleased, openReleased, type OpenEngagement } from './engagements';

/** A client's page around its sheet: who it is for, its taps, the edition it speaks of. */
export interface ClientFrame {
  opened: OpenEngagement;
  practice: string;
  taps: StationView[];
  editions: EditionSummary[];
  /** The newest edition shown to the client; null where none was shown yet. */
  edition: FrozenEdition | null;
}

function tapsOf(code: string, edition: FrozenEdition | null, editions: EditionSummary[]): StationView[] {
  const base = `/client/${code}`;
  const tap = (id: string, label: string, ready: boolean, reason: string): StationView => ({
    id,
    label,
    href: `${base}/${id}`,
    state: ready ? 'closed' : 'open',
    reason,
  });
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
  const [practice, editions, edition] = await Promise.all([
    practiceName(),
    listShownEditions(opened),
    readShownEdition(actor, code),
  ]);
  return { opened, practice, taps: tapsOf(code, edition, editions), editions, edition };
}

/** Where a client's person begins: the newest engagement with something to show, else the newest of all. */
export async function clientHome(actor: Actor): Promise<string | null> {
  const released = await listReleased(actor);
  for (const opened of released) {
    if ((await listShownEditions(opened)).length > 0) return `/client/${opened.engagement.code}/overview`;
  }
  return null;
}
