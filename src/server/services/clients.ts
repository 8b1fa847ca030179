import type { ClientRowView, ClientView } from '../../schemas/client';
import { notFound } from '../errors';
import { Client } from '../models/Client';
import { Meter } from '../models/Meter';
import { Site } from '../models/Site';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { canManagePeople } from '../policies/engagement';
import { presentPerson } from '../presenters/user';
import { listEngagements } from './engagements';

/** Ids of the clients a person may know of: all for partners, those they work for, for consultants. */
export async function clientIdsOf(actor: Actor): Promise<Set<number>> {
  if (actor.role === 'client') return new Set();
  if (actor.role === 'partner') return new Set((await Client.findAll({ attributes: ['id'] })).map(({ id }) => id));
  return new Set((await listEngagements(actor)).map((opened) => opened.client.id));
}

/** The clients a person may know of, by name. @throws {ServiceError} 404 to clients */
export async function listClients(actor: Actor): Promise<ClientRowView[]> {
  if (actor.role === 'client') throw notFound();
  const ids = [...(await clientIdsOf(actor))];
  const [clients, sites, users, engagements] = await Promise.all([
    Client.findAll({ where: { id: ids }, order: ['name'] }),
    Site.findAll({ where: { clientId: ids } }),
    User.findAll({ where: { clientId: ids, disabledAt: null } }),
    listEngagements(actor),
  ]);
  return clients.map(({ id, name, city }) => ({
    id,
    name,
    city,
    sites: sites.filter((site) => site.clientId === id).length,
    people: users.filter((user) => user.clientId === id).length,
    engagements: engagements
      .filter((opened) => opened.client.id === id)
      .map(({ engagement: { code, title } }) => ({ code, title })),
  }));
}

/** One client with sites, meters, engagements and people. @throws {ServiceError} 404 */
export async function readClient(actor: Actor, id: number): Promise<ClientView> {
  if (!(await clientIdsOf(actor)).has(id)) throw notFound();
  const [client, sites, users, engagements] = await Promise.all([
    Client.findByPk(id, { rejectOnEmpty: true }),
    Site.findAll({ where: { clientId: id }, order: ['name'] }),
    User.findAll({ where: { clientId: id }, order: ['name'] }),
    listEngagements(actor),
  ]);
  const meters = await Meter.findAll({ where: { siteId: sites.map((site) => site.id) }, order: ['label'] });
  const { name, city, contact, currency } = client;
  return {
    id,
    name,
    city,
    contact,
    currency,
    sites: sites.map((site) => ({
      id: site.id,
      name: site.name,
      place: site.place,
      timeZone: site.timeZone,
      jurisdiction: site.jurisdiction,
      meters: meters
        .filter((meter) => meter.siteId === site.id)
        .map(({ id: meterId, label, serviceVoltageKv }) => ({ id: meterId, label, serviceVoltageKv })),
    })),
    engagements: engagements
      .filter((opened) => opened.client.id === id)
      .map(({ engagement }) => {
        const { code, title, yearFrom, yearTo, siteId, meterId } = engagement;
        return { code, title, yearFrom, yearTo, siteId, meterId };
      }),
    people: users.map(presentPerson),
    mayManage: canManagePeople(actor),
  };
}
