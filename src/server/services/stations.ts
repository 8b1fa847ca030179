import { formatPeriod } from '../../components/ui/format';
import { addMonths, dayNumber, localDateStartMs } from '../../core/load';
import type { StationView, StripView } from '../../schemas/engagement';
import type { FindingState } from '../../schemas/finding';
import { ServiceError } from '../errors';
import { Edition } from '../models/Edition';
import { HourEntry } from '../models/HourEntry';
import { Intake } from '../models/Intake';
import type { Meter } from '../models/Meter';
import { Motor } from '../models/Motor';
import { Plan } from '../models/Plan';
import { TariffChoice } from '../models/TariffChoice';
import type { Actor } from '../policies/actor';
import { canSeePractice } from '../policies/engagement';
import { listPeriods } from './bills';
import { openEngagement, type OpenEngagement } from './engagements';
import { findingsSummary } from './finding-records';
import { keptSpans, presentFraction } from './readings';

/** An engagement's page around its sheet: title strip and stations. */
export interface EngagementFrame {
  opened: OpenEngagement;
  strip: StripView[];
  stations: StationView[];
}

type State = Pick<StationView, 'state' | 'reason'>;

const closed = (reason: string): State => ({ state: 'closed', reason });
const open = (reason: string): State => ({ state: 'open', reason });
const attention = (reason: string): State => ({ state: 'attention', reason });
const counted = (count: number, one: string, many = `${one}s`) => `${count} ${count === 1 ? one : many}`;

/** Opens an engagement for one of its station pages. `current` puts the sheet's number into the strip. */
export async function engagementFrame(actor: Actor, code: string, current?: string): Promise<EngagementFrame> {
  const opened = await openEngagement(actor, code);
  const [choice, stations] = await Promise.all([
    TariffChoice.findOne({ where: { engagementId: opened.engagement.id } }),
    stationsOf(actor, opened),
  ]);
  return { opened, strip: stripOf(opened, choice, stations, current), stations };
}

/** The name a schedule gives itself; its id where it gives none. */
function scheduleTitle(choice: TariffChoice | null): string {
  if (!choice) return 'not chosen yet';
  const title = /^title:[ \t]*(.+)$/m.exec(choice.scheduleText)?.[1]?.trim();
  return title?.replace(/^(['"])(.*)\1$/, '$2') || choice.scheduleId;
}

function meterField(meter: OpenEngagement['meter'], meters: OpenEngagement['meters']): StripView {
  if (meters.length > 1) return { label: 'Meters, summed', value: meters.map(({ label }) => label).join(' + ') };
  return {
    label: 'Meter',
    value: meter.serviceVoltageKv ? `${meter.label}, ${meter.serviceVoltageKv} kV` : meter.label,
  };
}

function stripOf(
  { engagement, client, site, meter, meters, members }: OpenEngagement,
  choice: TariffChoice | null,
  stations: StationView[],
  current?: string,
): StripView[] {
  const sheet = stations.findIndex((station) => station.id === current) + 1;
  const strip = [
    { label: 'Client', value: client.name },
    { label: 'Site', value: [site.name, site.place].filter(Boolean).join(', ') },
    meterField(meter, meters),
    { label: 'Schedule', value: scheduleTitle(choice) },
    { label: 'Year', value: formatPeriod(engagement.yearFrom, engagement.yearTo, { year: true }) },
    { label: 'Engagement', value: engagement.code },
    { label: 'By', value: members.map((member) => member.name).join(', ') || 'nobody yet' },
  ];
  if (sheet > 0) strip.splice(6, 0, { label: 'Sheet', value: `${sheet} of ${stations.length}` });
  return strip;
}

/** The stations of an engagement, each with its state and the short reason for it, from light queries. */
export async function stationsOf(actor: Actor, opened: OpenEngagement): Promise<StationView[]> {
  const [bills, intervals, tariff, motors, plans, report, proof, hours] = await Promise.all([
    billsState(opened),
    intervalsState(opened),
    tariffState(opened),
    motorsState(opened),
    plansState(opened),
    reportState(opened),
    proofState(opened),
    hoursState(actor, opened),
  ]);
  const named: [string, State][] = [
    ['Bills', bills],
    ['Intervals', intervals],
    ['Tariff', tariff],
    ['Motors', motors],
    ['Plans', plans],
    ['Report', report],
    ['Proof', proof],
    ['Hours', hours],
  ];
  return named.map(([label, state]) => {
    const id = label.toLowerCase();
    return { id, label, href: `/engagements/${opened.engagement.code}/${id}`, ...state };
  });
}

/** Where the work stands: the first station that is not complete, or the last. */
export function standsAt(stations: StationView[]): StationView {
  return stations.find((station) => station.state !== 'closed') ?? (stations.at(-1) as StationView);
}

const waitingFiles = (opened: OpenEngagement, kind: 'bills' | 'intervals') =>
  Intake.count({ where: { engagementId: opened.engagement.id, kind, state: 'read' } });

type Period = Awaited<ReturnType<typeof listPeriods>>[number];

const middleOf = (bill: Period) => (dayNumber(bill.from) + dayNumber(bill.to)) / 2;

/** Bills whose middle day lies in [from, to), in order: the rule by which the year is priced. */
async function billsBetween(opened: OpenEngagement, from: string, to: string): Promise<Period[]> {
  const bills = await listPeriods(opened.engagement.id);
  return bills.filter((bill) => middleOf(bill) >= dayNumber(from) && middleOf(bill) < dayNumber(to));
}

/** Days between the first and the last bill that none covers, and days covered, each once. */
function coverage(bills: Period[]): { covered: number; gaps: number } {
  let covered = 0;
  let gaps = 0;
  let reached = dayNumber(bills[0]?.from ?? '1970-01-01');
  for (const bill of bills) {
    const from = dayNumber(bill.from);
    const to = dayNumber(bill.to);
    gaps += Math.max(0, from - reached);
    covered += Math.max(0, to - Math.max(from, reached));
    reached = Math.max(reached, to);
  }
  return { covered, gaps };
}

async function billsState(opened: OpenEngagement): Promise<State> {
  const { yearFrom, yearTo } = opened.engagement;
  const bills = await billsBetween(opened, yearFrom, yearTo);
  if (bills.length === 0) {
    const waiting = await waitingFiles(opened, 'bills');
    return open(waiting > 0 ? `${counted(waiting, 'file')} to check` : 'bring in the bills');
  }
  const { covered, gaps } = coverage(bills);
  const yearDays = dayNumber(yearTo) - dayNumber(yearFrom);
  if (gaps > 0) return open(`${counted(gaps, 'day')} without a bill`);
  // Bills read on other days than the year's own may fall short of it by some days at either end.
  if (covered >= yearDays - 15) return closed(`${bills.length} of ${bills.length} kept`);
  return open(`${bills.length} of ${Math.max(bills.length + 1, Math.round(yearDays / 30.4375))} kept`);
}

/** Of several meters the one of which least is there. */
async function intervalsState(opened: OpenEngagement): Promise<State> {
  const states = await Promise.all(opened.meters.map((meter) => meterState(opened, meter)));
  const [first] = states.sort((a, b) => a.present - b.present);
  return first!.state;
}

async function meterState(opened: OpenEngagement, meter: Meter): Promise<{ present: number; state: State }> {
  const { engagement, site } = opened;
  const fromMs = localDateStartMs(engagement.yearFrom, site.timeZone);
  const toMs = localDateStartMs(engagement.yearTo, site.timeZone);
  const spans = await keptSpans(meter.id, fromMs, toMs);
  if (spans.length === 0) {
    const waiting = await waitingFiles(opened, 'intervals');
    const state = open(waiting > 0 ? `${counted(waiting, 'file')} to check` : 'bring in intervals');
    return { present: 0, state };
  }
  let coveredMs = 0;
  let reached = fromMs;
  for (const span of spans) {
    const begins = Math.max(span.startMs, reached);
    const ends = Math.min(span.endMs, toMs);
    if (ends <= begins) continue;
    coveredMs += ends - begins;
    reached = ends;
  }
  const present = await presentFraction(meter.id, fromMs, toMs);
  // Rounded down, so that 100 % is only said where nothing at all is missing.
  const reason = `${(Math.floor(present * 10_000) / 100).toFixed(2).replace(/\.00$/, '')} % present`;
  return { present, state: coveredMs >= toMs - fromMs ? closed(reason) : open(reason) };
}

/** What the year shows; null where it cannot be priced yet (no bills or intervals, or a gap in them). */
async function findingsOf(opened: OpenEngagement): Promise<Awaited<ReturnType<typeof findingsSummary>> | null> {
  try {
    return await findingsSummary(opened);
  } catch (error) {
    if (error instanceof ServiceError) return null;
    throw error;
  }
}

async function tariffState(opened: OpenEngagement): Promise<State> {
  const choice = await TariffChoice.findOne({ where: { engagementId: opened.engagement.id }, attributes: ['id'] });
  if (!choice) return open('no schedule yet');
  const year = await findingsOf(opened);
  if (year === null) return open('schedule chosen');
  const counts = (state: FindingState) => year.findings.filter((finding) => finding.state === state).length;
  if (counts('open') > 0) return open(`${counted(counts('open'), 'finding')} open`);
  if (year.incomplete > 0) return open(`${counted(year.incomplete, 'bill')} without all readings`);
  if (counts('raised') > 0) return closed(`${counts('raised')} with the utility`);
  return closed(year.findings.length > 0 ? 'findings settled' : 'bills agree');
}

async function motorsState(opened: OpenEngagement): Promise<State> {
  const count = await Motor.count({ where: { engagementId: opened.engagement.id } });
  return count === 0 ? open('no motor yet') : closed(counted(count, 'motor'));
}

async function plansState(opened: OpenEngagement): Promise<State> {
  const plans = await Plan.findAll({ where: { engagementId: opened.engagement.id }, attributes: ['name', 'chosen'] });
  if (plans.length === 0) return open('no plan yet');
  const chosen = plans.find((plan) => plan.chosen);
  return chosen ? closed(`${chosen.name.length > 16 ? 'a plan' : chosen.name} chosen`) : open('choose a plan');
}

async function reportState(opened: OpenEngagement): Promise<State> {
  const edition = await Edition.findOne({
    where: { engagementId: opened.engagement.id },
    attributes: ['number', 'shownAt'],
    order: [['number', 'DESC']],
  });
  if (!edition) return open('no edition yet');
  return edition.shownAt ? closed(`edition ${edition.number} shown`) : open(`edition ${edition.number} not mailed`);
}

async function proofState(opened: OpenEngagement): Promise<State> {
  const { yearTo } = opened.engagement;
  const later = await billsBetween(opened, yearTo, addMonths(yearTo, 120));
  if (later.length === 0) return open('after the first bill');
  const words = counted(later.length, 'later bill');
  return coverage(later).covered >= 350 ? closed(words) : open(words);
}

async function hoursState(actor: Actor, opened: OpenEngagement): Promise<State> {
  const { id, budgetHours } = opened.engagement;
  const whose = canSeePractice(actor) ? {} : { userId: actor.id };
  const minutes = (await HourEntry.sum('minutes', { where: { engagementId: id, ...whose } })) || 0;
  if (minutes === 0) return open('no hours yet');
  const hours = `${(minutes / 60).toFixed(1).replace(/\.0$/, '')} h`;
  if (!canSeePractice(actor)) return open(`${hours} of yours`);
  return budgetHours && minutes > budgetHours * 60 ? attention(`${hours}, over budget`) : open(`${hours}, not billed`);
}
