import { addDays, isoDate } from '../../core/load';
import type { HourChangeInput, HourInput, HourSums, HourView } from '../../schemas/hour';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { forbidden, invalid, notFound, staleVersion } from '../errors';
import { HourEntry } from '../models/HourEntry';
import { Rate } from '../models/Rate';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { canEditHours, canLogHours, canReadHours } from '../policies/hours';
import { presentHour, sumHours } from '../presenters/hour';
import { openEngagementById, type OpenEngagement } from './engagements';
import { amountMinorOf, rateInForce } from './rates';

/** Hours of an engagement as one person may see them. */
export interface HoursOfEngagement {
  entries: HourView[];
  sums: HourSums;
  currency: string;
  budgetHours: number | null;
}

function present(actor: Actor, entry: HourEntry, rates: Rate[], currency: string, people: Map<number, string>) {
  const { userId, engagementId, day, minutes, billable } = entry;
  const rate = rateInForce(rates, { userId, engagementId, day, currency });
  const perHourMinor = rate?.perHourMinor ?? null;
  const amountMinor = perHourMinor === null || !billable ? null : amountMinorOf(minutes, perHourMinor);
  return presentHour(entry, { person: people.get(userId) ?? '', readerId: actor.id, perHourMinor, amountMinor });
}

/** Names of people by their id. */
export async function namesOf(userIds: number[]): Promise<Map<number, string>> {
  const users = await User.findAll({ where: { id: userIds }, attributes: ['id', 'name'] });
  return new Map(users.map((user) => [user.id, user.name]));
}

/** The hours on an opened engagement: all at each person's rate for partners, a consultant's own at their own rate. */
export async function hoursOf(actor: Actor, { engagement }: OpenEngagement): Promise<HoursOfEngagement> {
  const order: [string, string][] = [
    ['day', 'DESC'],
    ['id', 'DESC'],
  ];
  const all = await HourEntry.findAll({ where: { engagementId: engagement.id }, order });
  const readable = all.filter((entry) => canReadHours(actor, entry));
  const userIds = [...new Set(readable.map((entry) => entry.userId))];
  const [rates, people] = await Promise.all([Rate.findAll({ where: { userId: userIds } }), namesOf(userIds)]);
  const { currency, budgetHours } = engagement;
  const entries = readable.map((entry) => present(actor, entry, rates, currency, people));
  return { entries, sums: sumHours(entries), currency, budgetHours };
}

const dayMinutes = 24 * 60;

/** Refuses days to come and more than 24 hours a day of one person. */
async function checkDay(actor: Actor, input: HourInput, now: number, except?: number): Promise<void> {
  // The furthest zone is 14 hours ahead of UTC: a day that has begun nowhere on earth is refused.
  const furthest = isoDate(Math.floor((now + 14 * 3_600_000) / 86_400_000));
  if (input.day > furthest) throw invalid('This day is still to come.', { day: ['This day is still to come.'] });
  if (input.day < addDays(furthest, -3 * 366)) {
    throw invalid('This day is more than three years ago.', { day: ['More than three years ago. Check the year.'] });
  }
  const others = await HourEntry.findAll({ where: { userId: actor.id, day: input.day } });
  const told = others.filter((entry) => entry.id !== except).reduce((sum, entry) => sum + entry.minutes, 0);
  if (told + input.time > dayMinutes) {
    const hours = (told / 60).toFixed(2);
    throw invalid('A day has 24 hours.', {
      time: [`${hours} h are logged on this day already; with these it has over 24.`],
    });
  }
}

async function viewOf(actor: Actor, entry: HourEntry, opened: OpenEngagement): Promise<HourView> {
  const rates = await Rate.findAll({ where: { userId: entry.userId } });
  return present(actor, entry, rates, opened.engagement.currency, await namesOf([entry.userId]));
}

const valuesOf = ({ day, time, station, note, billable }: HourInput) => ({
  day,
  minutes: time,
  station,
  note,
  billable,
});

/** Writes hours of the actor on an engagement. @throws {ServiceError} 404; 422 by field */
export async function logHours(
  actor: Actor,
  opened: OpenEngagement,
  input: HourInput,
  now = Date.now(),
): Promise<HourView> {
  if (!canLogHours(actor, opened.scope)) throw notFound();
  const entry = await inTx(async () => {
    await checkDay(actor, input, now);
    return HourEntry.create({ ...valuesOf(input), engagementId: opened.engagement.id, userId: actor.id });
  });
  return viewOf(actor, entry, opened);
}

/** An entry opened by who wrote it. */
export interface OpenHours {
  entry: HourEntry;
  opened: OpenEngagement;
}

/** Opens an entry for change. @throws {ServiceError} 404 to who may not read it, 403 to who may only read it */
export async function openHours(actor: Actor, id: number): Promise<OpenHours> {
  const entry = await HourEntry.findByPk(id);
  if (!entry) throw notFound();
  const opened = await openEngagementById(actor, entry.engagementId);
  if (!canReadHours(actor, entry)) throw notFound();
  if (!canEditHours(actor, entry))
    throw forbidden('Hours are changed by who wrote them. Ask them to correct the entry.');
  return { entry, opened };
}

const shown = ({ day, minutes, station, note, billable, version }: HourEntry) => ({
  day,
  minutes,
  station,
  note,
  billable,
  version,
});

/** Changes an entry of the actor's. @throws {ServiceError} 409 with both versions; 422 by field */
export async function changeHours(
  actor: Actor,
  { entry, opened }: OpenHours,
  input: HourChangeInput,
  now = Date.now(),
): Promise<HourView> {
  await inTx(async () => {
    await refuseStale(entry, input.version, valuesOf(input));
    await checkDay(actor, input, now, entry.id);
    await entry.update(valuesOf(input));
  });
  return viewOf(actor, entry, opened);
}

/** Removes an entry of the actor's; the trail keeps it. @throws {ServiceError} 409 where it was changed */
export async function removeHours({ entry }: OpenHours, version: number): Promise<void> {
  await inTx(async () => {
    await refuseStale(entry, version, null);
    await entry.destroy();
  });
}

/** Refuses a change of an entry that was changed in between. Call it inside inTx. */
async function refuseStale(entry: HourEntry, version: number, mine: unknown): Promise<void> {
  await freshen(entry);
  if (entry.version !== version) throw staleVersion('This entry', mine, shown(entry));
}
