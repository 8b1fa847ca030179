import { randomUUID } from 'node:crypto';
import { beforeEach, describe, expect, it } from 'vitest';
import { engagementInput, initialsOf, nextCode, type EngagementInput } from '@/schemas/engagement';
import { Client } from '@/server/models/Client';
import { Engagement } from '@/server/models/Engagement';
import { Membership } from '@/server/models/Membership';
import { Site } from '@/server/models/Site';
import type { Actor } from '@/server/policies/actor';
import { createEngagement, engagementChoices, proposeCode } from '@/server/services/create-engagement';
import { listEngagements, openEngagement } from '@/server/services/engagements';
import { addMember, removeMember } from '@/server/services/members';
import { buildActor, buildEngagement } from '../setup/build';

let ilse: Actor;
let tom: Actor;
let serial = 10;

beforeEach(async () => {
  ilse = await buildActor({ role: 'partner' });
  tom = await buildActor();
});

const input = (given: Partial<EngagementInput> = {}): EngagementInput => ({
  requestId: randomUUID(),
  code: `KG-${++serial}`,
  title: 'Power-bill audit of Works 2',
  client: { kind: 'new', name: 'Kestrel Gap Lime & Stone', city: 'Kestrel Gap', currency: 'USD' },
  site: { kind: 'new', name: 'Works 2', place: null, timeZone: 'America/Chicago', jurisdiction: 'IL' },
  meter: { kind: 'new', label: 'OV 5510-274', serviceVoltageKv: 12.47 },
  yearFrom: '2025-11-01',
  budgetHours: 80,
  memberIds: [],
  ...given,
});

describe('createEngagement', () => {
  it('is nothing to clients', async () => {
    const mira = await buildActor({ role: 'client' });
    expect(() => createEngagement(mira, input())).toThrow(expect.objectContaining({ status: 404 }));
    await expect(engagementChoices(mira)).rejects.toMatchObject({ status: 404 });
    await expect(proposeCode(mira, 'Kestrel Gap')).rejects.toMatchObject({ status: 404 });
  });

  it('says by field what cannot be used', () => {
    const parsed = engagementInput.safeParse({
      ...input(),
      code: 'kestrel',
      title: ' ',
      client: { kind: 'new', name: '', city: '', currency: 'GOLD' },
      site: { kind: 'new', name: 'W', place: '', timeZone: 'Kestrel/Gap', jurisdiction: 'Illinois' },
      meter: { kind: 'known' },
      yearFrom: '2025-02-30',
      budgetHours: -1,
    });
    expect(parsed.error?.issues.map((issue) => issue.path.join('.')).sort()).toEqual([
      'budgetHours',
      'client.currency',
      'client.name',
      'code',
      'meter.id',
      'site.jurisdiction',
      'site.timeZone',
      'title',
      'yearFrom',
    ]);
  });

  it('makes client, site, meter and members at once, for a year from its first day', async () => {
    const code = await createEngagement(ilse, input({ memberIds: [tom.id] }));
    const opened = await openEngagement(tom, code);
    expect(opened.client.name).toBe('Kestrel Gap Lime & Stone');
    expect(opened.site).toMatchObject({ name: 'Works 2', timeZone: 'America/Chicago', jurisdiction: 'IL' });
    expect(opened.meter).toMatchObject({ label: 'OV 5510-274', serviceVoltageKv: 12.47 });
    expect(opened.engagement).toMatchObject({ yearFrom: '2025-11-01', yearTo: '2026-11-01', currency: 'USD' });
    expect(opened.members.map((member) => member.id)).toEqual([tom.id]);
  });

  it('makes a consultant a member of what they begin', async () => {
    const code = await createEngagement(tom, input());
    expect((await listEngagements(tom)).map((one) => one.engagement.code)).toEqual([code]);
  });

  it('makes one of a request sent twice, and another of a new one', async () => {
    const twice = input();
    const codes = await Promise.all([createEngagement(ilse, twice), createEngagement(ilse, twice)]);
    expect(codes).toEqual([twice.code, twice.code]);
    expect(await createEngagement(ilse, twice)).toBe(twice.code);
    expect(await Engagement.count({ where: { code: twice.code } })).toBe(1);
    const again = { ...twice, requestId: randomUUID() };
    await expect(createEngagement(ilse, again)).rejects.toMatchObject({
      status: 422,
      fields: { code: [expect.any(String)] },
    });
  });

  it('leaves nothing half made where the code is taken', async () => {
    const { code } = await buildEngagement();
    const [clients, sites] = await Promise.all([Client.count(), Site.count()]);
    const attempt = createEngagement(ilse, input({ code }));
    await expect(attempt).rejects.toMatchObject({ fields: { code: [`${code} is taken. Take the next number.`] } });
    expect(await Client.count()).toBe(clients);
    expect(await Site.count()).toBe(sites);
  });

  it('takes known clients, sites and meters only where they belong together and may be known', async () => {
    const mine = await buildEngagement({ memberIds: [tom.id] });
    const other = await buildEngagement();
    const known = {
      client: { kind: 'known', id: mine.clientId },
      site: { kind: 'known', id: mine.siteId },
      meter: { kind: 'known', id: mine.meterId },
    } as const;
    const tries: [Partial<EngagementInput>, string][] = [
      [{ ...known, client: { kind: 'known', id: other.clientId } }, 'client.id'],
      [{ ...known, site: { kind: 'known', id: other.siteId } }, 'site.id'],
      [{ ...known, meter: { kind: 'known', id: other.meterId } }, 'meter.id'],
    ];
    for (const [given, field] of tries) {
      await expect(createEngagement(tom, input(given))).rejects.toMatchObject({
        status: 422,
        fields: { [field]: [expect.any(String)] },
      });
    }
    const opened = await openEngagement(tom, await createEngagement(tom, input(known)));
    expect(opened.meter.id).toBe(mine.meterId);
  });

  it('refuses members who are not of the practice', async () => {
    const mira = await buildActor({ role: 'client' });
    const gone = await buildActor({ disabledAt: new Date() });
    for (const id of [mira.id, gone.id, 987_654]) {
      await expect(createEngagement(ilse, input({ memberIds: [id] }))).rejects.toMatchObject({
        fields: { memberIds: [expect.any(String)] },
      });
    }
  });

  it('offers a consultant the clients they work for only', async () => {
    await buildEngagement();
    const mine = await buildEngagement({ memberIds: [tom.id] });
    const choices = await engagementChoices(tom);
    expect(choices.clients.map((client) => client.id)).toEqual([mine.clientId]);
    expect(choices.clients[0]?.sites[0]).toMatchObject({ id: mine.siteId, meters: [{ id: mine.meterId }] });
    expect(choices.timeZones).toContain('America/Chicago');
  });
});

describe('codes', () => {
  it.each([
    ['Kestrel Gap Lime & Stone', 'KG'],
    ['Harrow Sound Cold Store', 'HS'],
    ['Ylvanes Papir', 'YP'],
    ['The Öresund of Steel', 'OS'],
    ['Cobbett', 'CO'],
    ['7', 'EN'],
    ['', 'EN'],
  ])('of %j begin with %s', (name, initials) => {
    expect(initialsOf(name)).toBe(initials);
  });

  it.each([
    [[], 'KG-01'],
    [['KG-01', 'KG-07', 'HS-09'], 'KG-08'],
    [['KG-99'], 'KG-100'],
  ])('after %j comes %s', (used, code) => {
    expect(nextCode('Kestrel Gap', used)).toBe(code);
  });

  it('are proposed from all in use', async () => {
    await buildEngagement({ code: 'QV-41' });
    expect(await proposeCode(tom, 'Quarry Vale')).toBe('QV-42');
  });
});

describe('members', () => {
  it('are people of the practice only', async () => {
    const { code } = await buildEngagement({ memberIds: [tom.id] });
    const opened = await openEngagement(tom, code);
    const mira = await buildActor({ role: 'client' });
    const gone = await buildActor({ disabledAt: new Date() });
    for (const id of [mira.id, gone.id, 987_654])
      await expect(addMember(opened, id)).rejects.toMatchObject({ status: 422 });
  });

  it('open the engagement, and it is nothing to them afterwards', async () => {
    const { code, id } = await buildEngagement();
    const opened = await openEngagement(ilse, code);
    await addMember(opened, tom.id);
    await addMember(opened, tom.id);
    expect(await Membership.count({ where: { engagementId: id } })).toBe(1);
    expect((await openEngagement(tom, code)).engagement.id).toBe(id);
    await removeMember(opened, tom.id);
    await expect(openEngagement(tom, code)).rejects.toMatchObject({ status: 404 });
  });
});
