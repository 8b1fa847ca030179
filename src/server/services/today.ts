import { Op } from 'sequelize';
import { addDays, dayNumber } from '../../core/load';
import { mondayOf, weekNumber } from '../../schemas/hour';
import type { RunningView, TodayView, WaitingView } from '../../schemas/today';
import { dateOfInstant, today as todayHere } from '../clock';
import { notFound } from '../errors';
import { HourEntry } from '../models/HourEntry';
import { Job } from '../models/Job';
import { Letter } from '../models/Letter';
import { Token } from '../models/Token';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canManagePeople } from '../policies/engagement';
import { listedEngagements, type ListedEngagement } from './engagement-list';
import { readJob } from './jobs';
import { waitingAt } from './waiting';

/**
 * What waits for a person of the practice, worked out from the data, with what runs and what is under way.
 *
 * @throws {ServiceError} 404 to clients
 */
export async function todayOf(actor: Actor, today = todayHere()): Promise<TodayView> {
  if (!isStaff(actor)) throw notFound();
  const listed = (await listedEngagements(actor)).filter(({ opened }) => !opened.engagement.closedAt);
  const [atStations, weeks, invitations, letters, licences, running, week] = await Promise.all([
    Promise.all(listed.map((one) => waitingAt(one, today))),
    weeksWithoutHours(actor, listed, today),
    invitationsNotTaken(actor, today),
    lettersNotSent(listed, today),
    licencesEnding(actor, today),
    runningJobs(actor, listed),
    weekOf(actor, listed, today),
  ]);
  const waiting = [...licences, ...weeks, ...letters, ...atStations.flat(), ...invitations].sort(byUrgency);
  return { date: today, waiting, running, engagements: listed.map(({ row }) => row), week };
}

const groupOrder: WaitingView['group'][] = ['overdue', 'yours', 'others'];

/** Overdue first, then the reader's own, then with others; in each, what has a date before what waits longest. */
function byUrgency(a: WaitingView, b: WaitingView): number {
  const group = groupOrder.indexOf(a.group) - groupOrder.indexOf(b.group);
  return group || a.dateIs.localeCompare(b.dateIs) || a.date.localeCompare(b.date) || a.id.localeCompare(b.id);
}

/** The last two full weeks in which somebody with an engagement wrote no hours at all. Due on the Monday after. */
async function weeksWithoutHours(actor: Actor, listed: ListedEngagement[], today: string): Promise<WaitingView[]> {
  const own = listed.filter(({ opened }) => opened.scope.memberIds.includes(actor.id));
  const [first] = own.map(({ opened }) => dateOfInstant(opened.engagement.createdAt)).sort();
  if (!first) return [];
  const monday = mondayOf(today);
  const rows: WaitingView[] = [];
  for (const begins of [addDays(monday, -14), addDays(monday, -7)]) {
    const ends = addDays(begins, 7);
    if (first >= ends) continue;
    const told = await HourEntry.count({ where: { userId: actor.id, day: { [Op.gte]: begins, [Op.lt]: ends } } });
    if (told > 0) continue;
    const week = weekNumber(begins);
    const late = dayNumber(today) - dayNumber(ends);
    rows.push({
      id: `week-${begins}`,
      group: late > 0 ? 'overdue' : 'yours',
      mark: late > 0 ? 'diamond' : 'hollow',
      date: ends,
      dateIs: 'due',
      days: late,
      title: `Write the hours of week ${week}`,
      where: own.map(({ row }) => row.code).join(', '),
      why: 'What is not logged is not billed.',
      stake: { text: 'no hours', note: `in week ${week}` },
      next: 'They join the work in progress of their engagement.',
      href: `/engagements/${own[0]?.row.code}/hours`,
      action: 'Write hours',
    });
  }
  return rows;
}

/** Accounts without a password, for partners: the invitation is out, has run out, or was never sent. */
async function invitationsNotTaken(actor: Actor, today: string): Promise<WaitingView[]> {
  if (!canManagePeople(actor)) return [];
  const users = await User.findAll({ where: { passwordHash: null, disabledAt: null }, order: ['name'] });
  const where = { kind: 'invitation', usedAt: null, userId: users.map((user) => user.id) };
  const tokens = await Token.findAll({ where, order: [['id', 'DESC']] });
  return users.map((user) => {
    const token = tokens.find((one) => one.userId === user.id);
    const out = token !== undefined && dateOfInstant(token.expiresAt) >= today;
    const date = dateOfInstant(token?.createdAt ?? user.createdAt);
    const ends = token ? dateOfInstant(token.expiresAt) : null;
    return {
      id: `invitation-${user.id}`,
      group: out ? 'others' : 'yours',
      mark: out ? 'circle' : 'hollow',
      date,
      dateIs: 'since',
      days: Math.max(0, dayNumber(today) - dayNumber(date)),
      title: out ? `${user.name} has not taken the invitation` : `${user.name} has no invitation that works`,
      where: user.email,
      why: 'They cannot come in before they choose a password.',
      stake: ends ? { text: ends, note: out ? 'the link ends' : 'the link ended' } : null,
      next: out ? 'It waits in their mail; a new letter can be sent.' : 'A new letter brings a link of 14 days.',
      href: user.clientId === null ? '/people' : `/clients/${user.clientId}`,
      action: out ? 'See person' : 'Invite',
    };
  });
}

/** Where letters of a kind are sent from; the others belong to an edition. */
const sentFrom: Record<string, { name: string; path: string }> = {
  utility: { name: 'the station Tariff', path: 'tariff#findings' },
  request: { name: 'the request', path: 'requests' },
  reminder: { name: 'the request', path: 'requests' },
  'sent-back': { name: 'the request', path: 'requests' },
};

/** Letters of the last two weeks that did not go, unless the same went later. */
async function lettersNotSent(listed: ListedEngagement[], today: string): Promise<WaitingView[]> {
  const byId = new Map(listed.map((one) => [one.opened.engagement.id, one]));
  const since = new Date(Date.parse(`${addDays(today, -14)}T00:00:00Z`));
  const letters = await Letter.findAll({
    where: { engagementId: [...byId.keys()], createdAt: { [Op.gte]: since }, kind: { [Op.ne]: 'received' } },
    order: ['id'],
  });
  const same = (a: Letter, b: Letter) =>
    a.recipient === b.recipient && a.kind === b.kind && a.editionId === b.editionId;
  const failed = letters.filter(
    (letter) => letter.state === 'failed' && !letters.some((later) => later.id > letter.id && same(later, letter)),
  );
  return failed.map((letter) => {
    const { row } = byId.get(letter.engagementId as number) as ListedEngagement;
    const date = dateOfInstant(letter.createdAt);
    const from = sentFrom[letter.kind] ?? { name: 'the station Report', path: 'report' };
    return {
      id: `letter-${letter.id}`,
      group: 'overdue',
      mark: 'diamond',
      date,
      dateIs: 'since',
      days: Math.max(0, dayNumber(today) - dayNumber(date)),
      title: `A letter to ${letter.recipient} did not go`,
      where: `${letter.subject}, ${row.code}`,
      why: letter.error ?? 'The mail server did not take it.',
      stake: null,
      next: `Send it again from ${from.name}.`,
      href: `/engagements/${row.code}/${from.path}`,
      action: 'Send again',
    };
  });
}

/** Licences that end within 60 days or have ended, for partners. */
async function licencesEnding(actor: Actor, today: string): Promise<WaitingView[]> {
  if (!canManagePeople(actor)) return [];
  const limit = addDays(today, 60);
  const where = { licenceExpires: { [Op.lte]: limit }, disabledAt: null };
  const users = await User.findAll({ where, order: ['licenceExpires'] });
  return users.map((user) => {
    const date = user.licenceExpires as string;
    const late = dayNumber(today) - dayNumber(date);
    return {
      id: `licence-${user.id}`,
      group: late > 0 ? 'overdue' : 'yours',
      mark: late > 0 ? 'diamond' : 'hollow',
      date,
      dateIs: 'due',
      days: Math.max(0, late),
      title: late > 0 ? `The licence of ${user.name} has ended` : `The licence of ${user.name} ends`,
      where: `${user.licenceJurisdiction} ${user.licenceNumber}`,
      why: 'Only who holds a licence of the site’s jurisdiction may release a setting card.',
      stake: null,
      next: 'Another partner checks the renewal and enters its new last day.',
      href: '/people',
      action: 'Open People',
    };
  });
}

async function runningJobs(actor: Actor, listed: ListedEngagement[]): Promise<RunningView[]> {
  const codes = new Map(listed.map(({ opened }) => [opened.engagement.id, opened.engagement.code]));
  const jobs = await Job.findAll({ where: { engagementId: [...codes.keys()], state: 'running' }, order: ['id'] });
  return Promise.all(
    jobs.map(async (job) => ({ code: codes.get(job.engagementId) as string, job: await readJob(actor, job.id) })),
  );
}

async function weekOf(actor: Actor, listed: ListedEngagement[], today: string): Promise<TodayView['week']> {
  const codes = new Map(listed.map(({ opened }) => [opened.engagement.id, opened.engagement.code]));
  const monday = mondayOf(today);
  const entries = await HourEntry.findAll({
    where: { userId: actor.id, day: { [Op.gte]: monday, [Op.lt]: addDays(monday, 7) } },
    order: ['day', 'id'],
  });
  const rows: TodayView['week']['rows'] = [];
  for (const { day, engagementId, minutes } of entries) {
    const code = codes.get(engagementId) ?? 'closed engagement';
    const row = rows.find((one) => one.day === day && one.code === code);
    if (row) row.minutes += minutes;
    else rows.push({ day, code, minutes });
  }
  return { monday, rows, minutes: rows.reduce((sum, row) => sum + row.minutes, 0) };
}
