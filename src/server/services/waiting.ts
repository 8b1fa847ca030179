import type { StationView } from '../../schemas/engagement';
import type { WaitingView } from '../../schemas/today';
import { formatMajor } from '../../components/ui/format';
import { dateOfInstant } from '../clock';
import { Edition } from '../models/Edition';
import { Intake } from '../models/Intake';
import type { ListedEngagement } from './engagement-list';
import type { OpenEngagement } from './engagements';
import { waitingFindings } from './waiting-findings';
import { daysBetween, whereOf, type Told } from './waiting-parts';
import { waitingRequests } from './waiting-requests';

/** What an engagement's stations wait for. A station that something more particular waits at is not told twice. */
export async function waitingAt({ opened, row }: ListedEngagement, today: string): Promise<WaitingView[]> {
  if (opened.engagement.closedAt) return [];
  const files = await halfBroughtIn(opened, today);
  const findings = await waitingFindings(opened, today);
  const editions = await editionsMade(opened, today);
  const requests = await waitingRequests(opened, today);
  const told = new Set([files, findings, editions, requests].flatMap(({ stations }) => stations));
  const { standsAt } = row;
  const next = told.has(standsAt.id) ? [] : nextStation(opened, standsAt, today);
  return [...files.rows, ...requests.rows, ...findings.rows, ...editions.rows, ...next];
}

async function halfBroughtIn(opened: OpenEngagement, today: string): Promise<Told> {
  const { code, id } = opened.engagement;
  const intakes = await Intake.findAll({
    where: { engagementId: id, state: 'read' },
    attributes: ['id', 'kind', 'fileName', 'createdAt'],
    order: ['createdAt'],
  });
  const rows = intakes.map((intake): WaitingView => {
    const date = dateOfInstant(intake.createdAt);
    return {
      id: `intake-${intake.id}`,
      group: 'yours',
      mark: 'half',
      date,
      dateIs: 'since',
      days: daysBetween(date, today),
      title: `Bring in ${intake.fileName} to the end`,
      where: whereOf(opened),
      why:
        intake.kind === 'bills'
          ? 'Nothing of it is kept yet; without its bills the year has a gap.'
          : 'Nothing of it is kept yet; no bill can be priced from readings that are not kept.',
      stake: null,
      next: 'Match and Check take a minute; Keep lays it into the year and can be undone.',
      href: `/engagements/${code}/intake/${intake.id}`,
      action: 'Go on',
    };
  });
  return { rows, stations: intakes.map((intake) => intake.kind) };
}

function savingOf(edition: Edition): WaitingView['stake'] {
  const { plan, currency } = edition.content;
  return { text: formatMajor(plan.saving, currency, { whole: true }), note: 'saving a year in it' };
}

async function editionsMade(opened: OpenEngagement, today: string): Promise<Told> {
  const { id, code } = opened.engagement;
  const edition = await Edition.findOne({ where: { engagementId: id }, order: [['number', 'DESC']] });
  if (!edition) return { rows: [], stations: [] };
  const shown = edition.shownAt !== null;
  const date = dateOfInstant(edition.shownAt ?? edition.createdAt);
  const row: WaitingView = {
    id: `edition-${edition.id}`,
    group: shown ? 'others' : 'yours',
    mark: shown ? 'circle' : 'hollow',
    date,
    dateIs: 'since',
    days: daysBetween(date, today),
    title: shown ? `Edition ${edition.number} is with the client` : `Mail edition ${edition.number}`,
    where: whereOf(opened),
    why: shown
      ? 'The client reads it and decides on its plan.'
      : 'It is made but not shown: the client sees nothing of it yet.',
    stake: savingOf(edition),
    next: shown
      ? 'The first bill after the change begins the proof.'
      : 'The letter goes out; the edition stands in their pages.',
    href: `/engagements/${code}/report`,
    action: shown ? 'See edition' : 'Mail it',
  };
  return { rows: [row], stations: ['report', ...(shown ? ['proof', 'hours'] : [])] };
}

const stationWords: Record<string, { title: string; why: string; next: string; action: string }> = {
  bills: {
    title: 'Bring in the bills of the year',
    why: 'Every finding and every saving is measured against what was billed.',
    next: 'Typed or from a file; twelve bills close the station.',
    action: 'Open Bills',
  },
  intervals: {
    title: 'Bring in the meter intervals',
    why: 'Demand and reactive energy of each bill are worked out from them.',
    next: 'The year is drawn day by day, gaps marked.',
    action: 'Open Intervals',
  },
  tariff: {
    title: 'Choose the tariff schedule',
    why: 'Without it no bill can be priced again.',
    next: 'Each line is priced beside what was billed; differences become findings.',
    action: 'Open Tariff',
  },
  motors: {
    title: 'Enter the synchronous motors',
    why: 'How far each may be over-excited follows from its nameplate.',
    next: 'V-curves and limits are drawn; assumed values are marked.',
    action: 'Open Motors',
  },
  plans: {
    title: 'Choose a plan',
    why: 'An edition is made of the plan that was chosen.',
    next: 'The chosen plan stands beside the standing plant and the capacitors.',
    action: 'Open Plans',
  },
  report: {
    title: 'Make the first edition',
    why: 'The client sees nothing before an edition is made and mailed.',
    next: 'Pages and charts are drawn and frozen under a number.',
    action: 'Open Report',
  },
};

/** Stations whose material the client may have. */
const askable = new Set(['bills', 'intervals', 'motors']);

function nextStation(opened: OpenEngagement, station: StationView, today: string): WaitingView[] {
  const words = stationWords[station.id];
  if (!words) return [];
  const date = dateOfInstant(opened.engagement.createdAt);
  return [
    {
      id: `station-${opened.engagement.id}`,
      group: 'yours',
      mark: /to check|kept|present|choose|without/.test(station.reason) ? 'half' : 'hollow',
      date,
      dateIs: 'since',
      days: daysBetween(date, today),
      title: words.title,
      where: whereOf(opened),
      why: words.why,
      stake: null,
      next: words.next,
      href: station.href,
      action: words.action,
      other: askable.has(station.id)
        ? { href: `/engagements/${opened.engagement.code}/requests/new?about=${station.id}`, action: 'Ask the client' }
        : undefined,
    },
  ];
}
