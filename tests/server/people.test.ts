import { beforeEach, describe, expect, it } from 'vitest';
import { personChangeInput, personInput, type PersonChangeInput } from '@/schemas/client';
import { inTx } from '@/server/db/tx';
import { Letter } from '@/server/models/Letter';
import { Trail } from '@/server/models/Trail';
import { User } from '@/server/models/User';
import type { Actor } from '@/server/policies/actor';
import { invite, readLink } from '@/server/services/account';
import { listClients, readClient } from '@/server/services/clients';
import { addPerson, changePerson, listPeople, openPerson } from '@/server/services/people';
import { loadActor } from '@/server/services/sign-in';
import { readTrail } from '@/server/services/trail';
import { buildActor, buildClient, buildEngagement, buildUser } from '../setup/build';

let ilse: Actor;
let tom: Actor;
let mira: Actor;

beforeEach(async () => {
  ilse = await buildActor({ role: 'partner', name: 'Ilse Aldaran' });
  tom = await buildActor({ name: 'Tom Renwick' });
  mira = await buildActor({ role: 'client', name: 'Mira Oyelade' });
});

const change = async (actor: Actor, id: number, input: PersonChangeInput) =>
  changePerson(actor, await openPerson(actor, id), input);
const licence = { jurisdiction: 'IL', number: 'PE 062-048113', expires: '2027-11-30' };

describe('people', () => {
  it('are kept by partners only', async () => {
    for (const [actor, status] of [
      [tom, 403],
      [mira, 404],
    ] as const) {
      await expect(listPeople(actor)).rejects.toMatchObject({ status });
      await expect(openPerson(actor, ilse.id)).rejects.toMatchObject({ status });
      await expect(
        addPerson(actor, { role: 'consultant', name: 'New', email: 'new@practice.example' }),
      ).rejects.toMatchObject({ status });
    }
    await expect(openPerson(ilse, 987_654)).rejects.toMatchObject({ status: 404 });
  });

  it('are added without a password and invited by mail; an e-mail counts once', async () => {
    const { person, letter } = await addPerson(ilse, {
      role: 'consultant',
      name: 'Lea Brandt',
      email: 'lea@p.example',
    });
    expect(person).toMatchObject({ access: 'invited', role: 'consultant', clientId: null });
    expect(letter.recipient).toBe('lea@p.example');
    expect(await Letter.count({ where: { userId: person.id, kind: 'invitation' } })).toBe(1);
    await expect(addPerson(ilse, { role: 'partner', name: 'Lea', email: 'lea@p.example' })).rejects.toMatchObject({
      status: 422,
      fields: { email: [expect.stringContaining('has an account')] },
    });
    const rights = { view: true, record: false, decide: true, pay: false };
    await expect(
      addPerson(ilse, { role: 'client', name: 'Jon', email: 'jon@h.example', clientId: 987_654, rights }),
    ).rejects.toMatchObject({ fields: { clientId: [expect.any(String)] } });
    const client = await buildClient();
    const jon = await addPerson(ilse, {
      role: 'client',
      name: 'Jon',
      email: 'jon@h.example',
      clientId: client.id,
      rights,
    });
    expect(jon.person).toMatchObject({ clientId: client.id, rights });
  });

  it('are refused by field with an address of many or a client without a client', () => {
    const parsed = personInput.safeParse({ role: 'client', name: 'J', email: 'a@b.example, c@d.example' });
    expect(parsed.error?.issues.map((issue) => issue.path[0]).sort()).toEqual(['clientId', 'email', 'name', 'rights']);
  });

  it('never carry a licence of their own making', async () => {
    const input = { change: 'licence', licence, version: 0 } as const;
    await expect(change(ilse, ilse.id, input)).rejects.toMatchObject({ status: 403 });
    await expect(change(ilse, mira.id, input)).rejects.toMatchObject({ status: 422 });
    expect(await change(ilse, tom.id, input)).toMatchObject({ licence: { ...licence, checkedById: ilse.id } });
    const other = await buildActor({ role: 'partner' });
    expect(await change(other, ilse.id, input)).toMatchObject({ licence: { checkedById: other.id } });
    expect(await change(ilse, tom.id, { change: 'licence', licence: null, version: 1 })).toMatchObject({
      licence: null,
    });
    const odd = { change: 'licence', licence: { ...licence, jurisdiction: 'everywhere' }, version: 0 };
    expect(personChangeInput.safeParse(odd).success).toBe(false);
  });

  it('lose their sessions and links when their account is closed, and may be let in again', async () => {
    const newcomer = await buildUser();
    const secret = (await invite(ilse, newcomer)).url.split('/').at(-1)!;
    expect(await change(ilse, newcomer.id, { change: 'access', closed: true, version: 0 })).toMatchObject({
      access: 'closed',
    });
    expect(await loadActor(newcomer.id, 1)).toBeNull();
    await expect(readLink('invitation', secret)).rejects.toMatchObject({ status: 410 });
    await change(ilse, newcomer.id, { change: 'access', closed: false, version: 1 });
    expect(await loadActor(newcomer.id, 0)).toBeNull();
    expect(await loadActor(newcomer.id, 2)).toMatchObject({ id: newcomer.id });
    await expect(readLink('invitation', secret)).rejects.toMatchObject({ status: 410 });
    await expect(change(ilse, ilse.id, { change: 'access', closed: true, version: 0 })).rejects.toMatchObject({
      status: 403,
    });
  });

  it('change role within the practice only, and never their own', async () => {
    expect(await change(ilse, tom.id, { change: 'role', role: 'partner', version: 0 })).toMatchObject({
      role: 'partner',
    });
    await expect(change(ilse, mira.id, { change: 'role', role: 'partner', version: 0 })).rejects.toMatchObject({
      status: 422,
    });
    await expect(change(ilse, ilse.id, { change: 'role', role: 'consultant', version: 0 })).rejects.toMatchObject({
      status: 403,
    });
  });

  it('show both values where somebody else saved meanwhile', async () => {
    const rights = { view: true, record: true, decide: false, pay: false };
    await change(ilse, mira.id, { change: 'rights', rights, version: 0 });
    const mine = { ...rights, decide: true };
    await expect(change(ilse, mira.id, { change: 'rights', rights: mine, version: 0 })).rejects.toMatchObject({
      status: 409,
      details: { mine: { rights: mine }, theirs: { rights } },
    });
  });
});

describe('clients', () => {
  it('are nothing to their own people here, and to consultants only where they work', async () => {
    await expect(listClients(mira)).rejects.toMatchObject({ status: 404 });
    await expect(readClient(mira, mira.clientId!)).rejects.toMatchObject({ status: 404 });
    await expect(readClient(tom, mira.clientId!)).rejects.toMatchObject({ status: 404 });
    expect(await listClients(tom)).toEqual([]);
    const engagement = await buildEngagement({ clientId: mira.clientId!, memberIds: [tom.id] });
    expect((await listClients(tom)).map((row) => row.engagements[0]?.code)).toEqual([engagement.code]);
    const client = await readClient(tom, mira.clientId!);
    expect(client).toMatchObject({ mayManage: false, people: [{ name: 'Mira Oyelade' }] });
    expect(client.sites[0]?.meters).toHaveLength(1);
    expect((await readClient(ilse, mira.clientId!)).mayManage).toBe(true);
  });

  it('show a consultant no engagement of the client that they do not work on', async () => {
    await buildEngagement({ clientId: mira.clientId!, memberIds: [tom.id], code: 'MI-01' });
    await buildEngagement({ clientId: mira.clientId!, code: 'MI-02' });
    expect((await readClient(tom, mira.clientId!)).engagements.map((one) => one.code)).toEqual(['MI-01']);
    expect((await readClient(ilse, mira.clientId!)).engagements).toHaveLength(2);
  });
});

describe('readTrail', () => {
  it('is closed to consultants and nothing to clients', async () => {
    await expect(readTrail(tom, {})).rejects.toMatchObject({ status: 403 });
    await expect(readTrail(mira, {})).rejects.toMatchObject({ status: 404 });
  });

  it('finds changes by who, what, which and when, with both values', async () => {
    await change(ilse, tom.id, { change: 'name', name: 'T. Renwick', version: 0 });
    const found = await readTrail(ilse, { subject: 'User', row: String(tom.id), action: 'update' });
    expect(found.count).toBe(1);
    expect(found.rows[0]?.fields).toContainEqual({ name: 'name', before: 'Tom Renwick', after: 'T. Renwick' });
    const today = new Date().toISOString().slice(0, 10);
    expect((await readTrail(ilse, { row: String(tom.id), subject: 'User', from: today, to: today })).count).toBe(2);
    expect((await readTrail(ilse, { subject: 'User', to: '2020-01-01' })).count).toBe(0);
    expect((await readTrail(ilse, { who: String(tom.id) })).count).toBe(0);
    expect(found.subjects).toContain('User');
  });

  it('takes a filter it cannot read for none, and the last page for one beyond', async () => {
    const all = await readTrail(ilse, {});
    const odd = await readTrail(ilse, {
      who: 'x',
      row: '-1',
      action: 'drop',
      from: 'soon',
      to: '2026-02-30',
      page: '999',
    });
    expect(odd.count).toBe(all.count);
    expect(odd.page).toBe(odd.pages);
  });

  it('names fields in words', async () => {
    const { rows } = await readTrail(ilse, { subject: 'User', row: String(tom.id), action: 'create' });
    const names = rows[0]?.fields.map(({ name }) => name) ?? [];
    expect(names).toContain('session epoch');
    expect(names).not.toContain('sessionEpoch');
  });

  it('shows no password hash', async () => {
    const user = await User.findByPk(tom.id, { rejectOnEmpty: true });
    await inTx(() => user.update({ passwordHash: 'the-secret-hash' }));
    const { rows } = await readTrail(ilse, { subject: 'User', row: String(tom.id) });
    expect(JSON.stringify(rows)).not.toContain('the-secret-hash');
    expect(await Trail.count({ where: { subjectId: tom.id } })).toBeGreaterThan(0);
  });
});
