import type { EngagementRowView } from '../../schemas/engagement';
import { notFound } from '../errors';
import { HourEntry } from '../models/HourEntry';
import { isStaff, type Actor } from '../policies/actor';
import { canSeePractice } from '../policies/engagement';
import { listEngagements, type OpenEngagement } from './engagements';
import { standsAt, stationsOf } from './stations';

async function rowOf(actor: Actor, opened: OpenEngagement): Promise<EngagementRowView> {
  const { engagement, client, site, members } = opened;
  const whose = canSeePractice(actor) ? {} : { userId: actor.id };
  const [stations, minutes] = await Promise.all([
    stationsOf(actor, opened),
    HourEntry.sum('minutes', { where: { engagementId: engagement.id, ...whose } }),
  ]);
  const { code, title, yearFrom, yearTo } = engagement;
  return {
    code,
    title,
    yearFrom,
    yearTo,
    client: client.name,
    site: site.name,
    members: members.map((member) => member.name),
    stations,
    standsAt: standsAt(stations),
    minutes: minutes || 0,
  };
}

/** An engagement with its row in lists. */
export interface ListedEngagement {
  opened: OpenEngagement;
  row: EngagementRowView;
}

/** The engagements a person works on, newest first, each with its stations. */
export async function listedEngagements(actor: Actor): Promise<ListedEngagement[]> {
  const all = await listEngagements(actor);
  return Promise.all(all.map(async (opened) => ({ opened, row: await rowOf(actor, opened) })));
}

/** The same as rows of a list. @throws {ServiceError} 404 to clients */
export async function engagementRows(actor: Actor): Promise<EngagementRowView[]> {
  if (!isStaff(actor)) throw notFound();
  return (await listedEngagements(actor)).map(({ row }) => row);
}
