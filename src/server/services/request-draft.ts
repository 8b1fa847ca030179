import { addDays, dayNumber, weekdayOf } from '../../core/load';
import type { DraftItem, RequestDraft } from '../../schemas/request';
import { today } from '../clock';
import { ServiceError } from '../errors';
import { DataRequest } from '../models/DataRequest';
import { Practice } from '../models/Practice';
import { RequestItem } from '../models/RequestItem';
import type { Actor } from '../policies/actor';
import { billsStation } from './bills-station';
import type { OpenEngagement } from './engagements';
import { intervalsStation } from './intervals';
import { motorsOf } from './motors';
import { missingBills, missingIntervals, missingPlates, type Missing } from './request-missing';
import { clientPeople } from './request-sending';

const usualDays = 14;
const saturday = 6;

/** Two weeks from a day, moved on to a Monday where that is a weekend. */
export function usualDueDay(from: string): string {
  const day = addDays(from, usualDays);
  const weekday = weekdayOf(dayNumber(day));
  if (weekday === saturday) return addDays(day, 2);
  return weekday === 0 ? addDays(day, 1) : day;
}

/** Everything the data of an engagement show to be missing. What cannot be looked at (readings of two lengths) proposes nothing. */
async function missingOf(opened: OpenEngagement): Promise<Missing[]> {
  const { engagement, meter } = opened;
  const year = { from: engagement.yearFrom, to: engagement.yearTo };
  const intervals = await intervalsStation(opened).catch((error: unknown) => {
    if (error instanceof ServiceError) return null;
    throw error;
  });
  const [bills, motors] = await Promise.all([billsStation(opened), motorsOf(opened)]);
  return [
    ...missingBills([...bills.bills, ...bills.laterBills], year),
    ...(intervals ? missingIntervals(intervals, meter.label, year) : []),
    ...missingPlates(motors),
  ];
}

/** What is missing, with the open request that asks for it already: of the same kind for the same motor, or for days it shares. */
async function withAsked(engagementId: number, missing: Missing[]): Promise<DraftItem[]> {
  const open = await DataRequest.findAll({ where: { engagementId, state: 'open' }, order: ['number'] });
  const waiting = await RequestItem.findAll({
    where: { requestId: open.map(({ id }) => id), state: ['asked', 'sent-back'] },
  });
  const asksFor = (item: RequestItem, { kind, motorId, from, to }: Missing) => {
    if (item.kind !== kind || item.motorId !== motorId) return false;
    const { periodFrom, periodTo } = item;
    return !from || !to || !periodFrom || !periodTo || (periodFrom < to && from < periodTo);
  };
  return missing.map((one) => {
    const asked = waiting.find((item) => asksFor(item, one));
    return { ...one, askedIn: open.find(({ id }) => id === asked?.requestId)?.number ?? null };
  });
}

/** A new request as it could be sent now. */
export async function requestDraft(actor: Actor, opened: OpenEngagement): Promise<RequestDraft> {
  const [items, people, motors, practice] = await Promise.all([
    missingOf(opened).then((missing) => withAsked(opened.engagement.id, missing)),
    clientPeople(opened),
    motorsOf(opened),
    Practice.findOne(),
  ]);
  const now = today();
  return {
    code: opened.engagement.code,
    today: now,
    dueOn: usualDueDay(now),
    client: opened.client.name,
    site: opened.site.name,
    practice: { name: practice?.name ?? '', phone: practice?.phone ?? '' },
    by: { name: actor.name, email: actor.email },
    people: people.map(({ id, name, email, passwordHash }) => ({
      id,
      name,
      email,
      hasPassword: passwordHash !== null,
    })),
    motors: motors.map(({ id, name }) => ({ id, name })),
    items,
  };
}
