import { addDays } from '../../core/load';
import { formatList } from '../../components/ui/format';
import type { FindingView } from '../../schemas/finding';
import type { WaitingView } from '../../schemas/today';
import { ServiceError } from '../errors';
import { isUnhandled } from '../policies/finding';
import type { OpenEngagement } from './engagements';
import { findingsSummary } from './finding-records';
import { daysBetween, whereOf, type Told } from './waiting-parts';

/** Days after which a finding put to the utility is asked for again. */
const patienceDays = 30;

const hrefOf = ({ engagement }: OpenEngagement) => `/engagements/${engagement.code}/tariff#findings`;

const lettersOf = (findings: FindingView[]) => formatList(findings.map(({ letter, billName }) => letter ?? billName));

function stakeOf(findings: FindingView[], currency: string, note: string): WaitingView['stake'] {
  const amountMinor = findings.reduce((sum, finding) => sum + Math.max(0, finding.amountMinor), 0);
  return { amountMinor, currency, note };
}

/** Findings nobody has decided about. */
function toDecide(opened: OpenEngagement, findings: FindingView[], currency: string, today: string): WaitingView {
  const [first, ...more] = findings;
  const date = findings.map(({ since }) => since).sort()[0] as string;
  return {
    id: `findings-${opened.engagement.id}`,
    group: 'yours',
    mark: 'hollow',
    date,
    dateIs: 'since',
    days: daysBetween(date, today),
    title:
      more.length === 0 ? `Finding ${first?.letter}: ${first?.title}` : `Findings ${lettersOf(findings)} in the bills`,
    where: whereOf(opened),
    why:
      more.length === 0
        ? (first?.sentence ?? '')
        : 'Billed and scheduled amounts differ; each finding says by which cause.',
    stake: stakeOf(findings, currency, 'billed above the schedule'),
    next: 'What the schedule bears out is put to the utility; what it does not is dropped with its reason.',
    href: hrefOf(opened),
    action: 'Look into them',
  };
}

/** Findings put to the utility that it has not answered. */
function unanswered(opened: OpenEngagement, findings: FindingView[], currency: string, today: string): WaitingView {
  const since = findings.map((finding) => finding.since).sort()[0] as string;
  const due = addDays(since, patienceDays);
  const one = findings.length === 1;
  return {
    id: `unanswered-${opened.engagement.id}`,
    group: 'overdue',
    mark: 'diamond',
    date: due,
    dateIs: 'due',
    days: daysBetween(due, today),
    title: `The utility has not answered on ${one ? 'finding' : 'findings'} ${lettersOf(findings)}`,
    where: whereOf(opened),
    why: `Put to it ${daysBetween(since, today)} days ago, and nothing is entered since.`,
    stake: stakeOf(findings, currency, 'claimed'),
    next: 'Ask again, or enter what it said.',
    href: hrefOf(opened),
    action: 'Open them',
  };
}

/** What the findings of an engagement wait for; nothing where its year cannot be priced yet. */
export async function waitingFindings(opened: OpenEngagement, today: string): Promise<Told> {
  const summary = await findingsSummary(opened).catch((error: unknown) => {
    if (error instanceof ServiceError) return null;
    throw error;
  });
  if (!summary) return { rows: [], stations: [] };
  const { findings, year } = summary;
  const open = findings.filter(({ state }) => isUnhandled(state));
  const late = findings.filter(({ state, since }) => state === 'raised' && addDays(since, patienceDays) < today);
  return {
    rows: [
      ...(late.length > 0 ? [unanswered(opened, late, year.currency, today)] : []),
      ...(open.length > 0 ? [toDecide(opened, open, year.currency, today)] : []),
    ],
    stations: open.length > 0 ? ['tariff'] : [],
  };
}
