import { formatCount } from '../../components/ui/format';
import type { ItemKind, RequestSummary } from '../../schemas/request';
import type { WaitingView } from '../../schemas/today';
import type { OpenEngagement } from './engagements';
import { listRequests } from './requests';
import { daysBetween, whereOf, type Told } from './waiting-parts';

/** The station that waits for what is asked. */
const stationOf: Record<ItemKind, string[]> = {
  bills: ['bills'],
  intervals: ['intervals'],
  nameplate: ['motors'],
  other: [],
};

const hrefOf = ({ code, number }: RequestSummary) => `/engagements/${code}/requests/${number}`;

function arrived(opened: OpenEngagement, request: RequestSummary, today: string): WaitingView {
  const { number, newFiles, sentOn } = request;
  const files = newFiles > 0 ? formatCount(newFiles, 'file') : 'an answer';
  return {
    id: `request-${opened.engagement.id}-${number}`,
    group: 'yours',
    mark: 'half',
    date: sentOn,
    dateIs: 'since',
    days: daysBetween(sentOn, today),
    title: `Look at ${files} of the client for request ${number}`,
    where: whereOf(opened),
    why: 'Nothing of it is in the audit before it is taken into intake.',
    stake: null,
    next: 'Each file goes into intake, beside a nameplate, or back with a reason.',
    href: hrefOf(request),
    action: 'Look at it',
  };
}

function awaited(opened: OpenEngagement, request: RequestSummary, today: string): WaitingView {
  const { number, dueOn, people, items, answered } = request;
  const isLate = dueOn < today;
  return {
    id: `request-${opened.engagement.id}-${number}`,
    group: isLate ? 'overdue' : 'others',
    mark: isLate ? 'diamond' : 'circle',
    date: dueOn,
    dateIs: 'due',
    days: daysBetween(dueOn, today),
    title: isLate ? `The client has not answered request ${number}` : `Request ${number} is with the client`,
    where: whereOf(opened),
    why: `${formatCount(items - answered, 'thing')} of ${items} still to come, asked of ${people.join(' and ')}.`,
    stake: null,
    next: isLate ? 'A call, or a later day for it.' : 'Reminders go by themselves.',
    href: hrefOf(request),
    action: 'See request',
  };
}

/** What the requests of an engagement wait for: what came first, then what is still to come. */
export async function waitingRequests(opened: OpenEngagement, today: string): Promise<Told> {
  const open = (await listRequests(opened)).filter(({ state }) => state === 'open');
  const rows = open.map((request) => {
    const { newFiles, items, answered, accepted } = request;
    if (newFiles > 0 || answered > accepted) return arrived(opened, request, today);
    return answered < items ? awaited(opened, request, today) : settled(opened, request, today);
  });
  return { rows, stations: open.flatMap(({ wanted }) => wanted).flatMap((kind) => stationOf[kind]) };
}

function settled(opened: OpenEngagement, request: RequestSummary, today: string): WaitingView {
  return {
    ...arrived(opened, request, today),
    mark: 'hollow',
    title: `Close request ${request.number}`,
    why: 'Everything in it came and is accepted.',
    next: 'It stays in the list; the client can send nothing more for it.',
    action: 'Close it',
  };
}
