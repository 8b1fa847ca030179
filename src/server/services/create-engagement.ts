import { UniqueConstraintError } from 'sequelize';
import { addMonths } from '../../core/load';
import { nextCode, type EngagementChoices, type EngagementInput } from '../../schemas/engagement';
import { inTx } from '../db/tx';
import { invalid, notFound } from '../errors';
import { Client } from '../models/Client';
import { Engagement } from '../models/Engagement';
import { Membership } from '../models/Membership';
import { Meter } from '../models/Meter';
import { Site } from '../models/Site';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { canCreateEngagement } from '../policies/engagement';
import { clientIdsOf } from './clients';
import { practiceCurrency } from './rates';

/** @throws {ServiceError} 404 to clients */
export function authorizeCreation(actor: Actor): void {
  if (!canCreateEngagement(actor)) throw notFound();
}

const staffMembers = () =>
  User.findAll({ where: { role: ['partner', 'consultant'], disabledAt: null }, order: ['name'] });

const codesInUse = async () => (await Engagement.findAll({ attributes: ['code'] })).map(({ code }) => code);

/** The code an engagement of a client would get: initials and the next number. @throws {ServiceError} 404 to clients */
export async function proposeCode(actor: Actor, clientName: string): Promise<string> {
  authorizeCreation(actor);
  return nextCode(clientName, await codesInUse());
}

/** What the form may choose from. @throws {ServiceError} 404 to clients */
export async function engagementChoices(actor: Actor): Promise<EngagementChoices> {
  authorizeCreation(actor);
  const ids = [...(await clientIdsOf(actor))];
  const [clients, sites, staff, usedCodes] = await Promise.all([
    Client.findAll({ where: { id: ids }, order: ['name'] }),
    Site.findAll({ where: { clientId: ids }, order: ['name'] }),
    staffMembers(),
    codesInUse(),
  ]);
  const meters = await Meter.findAll({ where: { siteId: sites.map((site) => site.id) }, order: ['label'] });
  return {
    clients: clients.map((client) => ({
      id: client.id,
      name: client.name,
      code: nextCode(client.name, usedCodes),
      sites: sites
        .filter((site) => site.clientId === client.id)
        .map((site) => ({
          id: site.id,
          name: site.name,
          meters: meters.filter((meter) => meter.siteId === site.id).map(({ id, label }) => ({ id, label })),
        })),
    })),
    staff: staff.map(({ id, name, role }) => ({ id, name, role })),
    timeZones: Intl.supportedValuesOf('timeZone'),
    currency: await practiceCurrency(),
    me: actor.id,
  };
}

const recentMs = 10 * 60 * 1000;
const shared = globalThis as typeof globalThis & { counterlagCreations?: Map<string, Promise<string>> };
const recent = (shared.counterlagCreations ??= new Map());

/**
 * Makes an engagement, and the client, site and meter it needs, at once or not at all. A request that comes twice
 * (a double click, a second try) makes one.
 *
 * @returns its code
 * @throws {ServiceError} 404 to clients; 422 by field
 */
export function createEngagement(actor: Actor, input: EngagementInput): Promise<string> {
  authorizeCreation(actor);
  const key = `${actor.id} ${input.requestId}`;
  const known = recent.get(key);
  if (known) return known;
  const made = make(actor, input);
  recent.set(key, made);
  made.then(
    () => setTimeout(() => recent.delete(key), recentMs).unref(),
    () => recent.delete(key),
  );
  return made;
}

async function make(actor: Actor, input: EngagementInput): Promise<string> {
  const memberIds = await checkMembers(actor, input.memberIds);
  try {
    return await inTx(async () => {
      const client = await clientFor(actor, input.client);
      const site = await siteFor(client, input.site);
      const meter = await meterFor(site, input.meter);
      const engagement = await Engagement.create({
        code: input.code,
        title: input.title,
        clientId: client.id,
        siteId: site.id,
        meterId: meter.id,
        yearFrom: input.yearFrom,
        yearTo: addMonths(input.yearFrom, 12),
        currency: client.currency,
        budgetHours: input.budgetHours,
        closedAt: null,
      });
      for (const userId of memberIds) await Membership.create({ engagementId: engagement.id, userId });
      return engagement.code;
    });
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    throw invalid('This code is taken.', { code: [`${input.code} is taken. Take the next number.`] });
  }
}

/** Members are people of the practice; a consultant is always one of their own engagement, or could not open it. */
async function checkMembers(actor: Actor, memberIds: number[]): Promise<number[]> {
  const wanted = new Set(actor.role === 'consultant' ? [...memberIds, actor.id] : memberIds);
  const staff = new Set((await staffMembers()).map((user) => user.id));
  if ([...wanted].some((id) => !staff.has(id))) {
    throw invalid('Choose people of the practice.', {
      memberIds: ['Somebody chosen is not of the practice any more.'],
    });
  }
  return [...wanted];
}

async function clientFor(actor: Actor, input: EngagementInput['client']): Promise<Client> {
  if (input.kind === 'new') {
    const { name, city, currency } = input;
    return Client.create({ name, city, currency, contact: null });
  }
  const client = (await clientIdsOf(actor)).has(input.id) ? await Client.findByPk(input.id) : null;
  if (!client) throw invalid('Choose the client.', { 'client.id': ['There is no such client.'] });
  return client;
}

async function siteFor(client: Client, input: EngagementInput['site']): Promise<Site> {
  if (input.kind === 'new') {
    const { name, place, timeZone, jurisdiction } = input;
    return Site.create({ name, place, timeZone, jurisdiction, clientId: client.id });
  }
  const site = await Site.findOne({ where: { id: input.id, clientId: client.id } });
  if (!site) throw invalid('Choose the site.', { 'site.id': [`There is no such site of ${client.name}.`] });
  return site;
}

async function meterFor(site: Site, input: EngagementInput['meter']): Promise<Meter> {
  if (input.kind === 'new') {
    const { label, serviceVoltageKv } = input;
    return Meter.create({ label, serviceVoltageKv, siteId: site.id });
  }
  const meter = await Meter.findOne({ where: { id: input.id, siteId: site.id } });
  if (!meter) throw invalid('Choose the meter.', { 'meter.id': [`There is no such meter at ${site.name}.`] });
  return meter;
}
