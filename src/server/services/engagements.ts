import { notFound } from '../errors';
import { Client } from '../models/Client';
import { Engagement } from '../models/Engagement';
import { EngagementMeter } from '../models/EngagementMeter';
import { Membership } from '../models/Membership';
import { Meter } from '../models/Meter';
import { Site } from '../models/Site';
import { User } from '../models/User';
import type { Actor, EngagementScope } from '../policies/actor';
import { canReadReleased, canWorkOn } from '../policies/engagement';

/** An engagement with what stands in its title strip. */
export interface OpenEngagement {
  engagement: Engagement;
  client: Client;
  site: Site;
  /** The meter the engagement is named by. */
  meter: Meter;
  /** All meters billed together, that one first. */
  meters: Meter[];
  members: User[];
  scope: EngagementScope;
}

async function open(engagement: Engagement): Promise<OpenEngagement> {
  const [client, site, meter, further, memberships] = await Promise.all([
    Client.findByPk(engagement.clientId, { rejectOnEmpty: true }),
    Site.findByPk(engagement.siteId, { rejectOnEmpty: true }),
    Meter.findByPk(engagement.meterId, { rejectOnEmpty: true }),
    furtherMeters(engagement.id),
    Membership.findAll({ where: { engagementId: engagement.id } }),
  ]);
  const memberIds = memberships.map((membership) => membership.userId);
  const members = await User.findAll({ where: { id: memberIds }, order: ['name'] });
  const scope = { clientId: engagement.clientId, memberIds };
  return { engagement, client, site, meter, meters: [meter, ...further], members, scope };
}

async function furtherMeters(engagementId: number): Promise<Meter[]> {
  const rows = await EngagementMeter.findAll({ where: { engagementId }, attributes: ['meterId'], order: ['id'] });
  if (rows.length === 0) return [];
  const meters = await Meter.findAll({ where: { id: rows.map((row) => row.meterId) } });
  return rows.flatMap((row) => meters.find((meter) => meter.id === row.meterId) ?? []);
}

/**
 * Opens an engagement for whomever a policy lets in.
 *
 * @throws {ServiceError} 404 where there is none, or none this person may know of
 */
export async function openWhere(code: string, may: (scope: EngagementScope) => boolean): Promise<OpenEngagement> {
  const engagement = await Engagement.findOne({ where: { code } });
  if (!engagement) throw notFound();
  const opened = await open(engagement);
  if (!may(opened.scope)) throw notFound();
  return opened;
}

/** Opens an engagement for somebody who works on it. */
export const openEngagement = (actor: Actor, code: string): Promise<OpenEngagement> =>
  openWhere(code, (scope) => canWorkOn(actor, scope));

/** The same by its id, for rows that hang off an engagement (a motor, a plan, an intake, a job). */
export async function openEngagementById(actor: Actor, id: number): Promise<OpenEngagement> {
  const engagement = await Engagement.findByPk(id);
  if (!engagement) throw notFound();
  return openEngagement(actor, engagement.code);
}

/** Opens an engagement for reading what was released: its client's people, and those who work on it. */
export const openReleased = (actor: Actor, code: string): Promise<OpenEngagement> =>
  openWhere(code, (scope) => canReadReleased(actor, scope));

/** The engagements a person works on, newest first: all for partners, those they are a member of for consultants. */
export async function listEngagements(actor: Actor): Promise<OpenEngagement[]> {
  if (actor.role === 'client') return [];
  const all = await Engagement.findAll({ order: [['id', 'DESC']] });
  const opened = await Promise.all(all.map(open));
  return opened.filter((one) => canWorkOn(actor, one.scope));
}

/** The engagements under way, for work no person asks for. */
export async function listRunning(): Promise<OpenEngagement[]> {
  return Promise.all((await Engagement.findAll({ where: { closedAt: null } })).map(open));
}

/** The engagements for the organisation of a client's person, newest first, whatever they may read of each. */
export async function listOfOwnClient(actor: Actor): Promise<OpenEngagement[]> {
  if (actor.clientId === null) return [];
  const all = await Engagement.findAll({ where: { clientId: actor.clientId }, order: [['id', 'DESC']] });
  return Promise.all(all.map(open));
}
