import { describe, expect, it } from 'vitest';
import { localPath } from '@/schemas/account';
import type { Actor, Role } from '@/server/policies/actor';
import { canInvite, canSeeRate, canSetAccess, canSetLicence } from '@/server/policies/people';
import { changeName, changePassword } from '@/server/services/account';
import { loadActor, toActor } from '@/server/services/sign-in';
import { buildUser } from '../setup/build';
import { buildHolder, fresh, messageOf, old } from '../setup/passwords';

const minute = 60_000;

describe('checkSignIn', () => {
  it('answers a wrong password and an unknown e-mail alike, try by try', async () => {
    const user = await buildHolder();
    const unknown = 'nobody.at.all@practice.example';
    for (let tried = 0; tried < 9; tried++) {
      const known = await messageOf(user.email, 'wrong');
      expect(await messageOf(unknown, 'wrong')).toBe(known);
    }
  });

  it('counts eight tries, says how many are left, then refuses even the right password for 15 minutes', async () => {
    const { email } = await buildHolder();
    const now = Date.now();
    const said = [];
    for (let tried = 0; tried < 8; tried++) said.push(await messageOf(email, 'wrong', now));
    expect(said.map((text) => /(\w+) (try is|tries are) left/.exec(text)?.[1])).toEqual([
      undefined,
      undefined,
      undefined,
      'Four',
      'Three',
      'Two',
      'One',
      'No',
    ]);
    expect(await messageOf(email, old, now + 14 * minute)).toMatch(/^Too many wrong passwords/);
    expect(await messageOf(email, old, now + 15 * minute)).toBe('signed in');
  });

  it('counts tries made at the same time', async () => {
    const { email } = await buildHolder();
    const said = await Promise.all(Array.from({ length: 12 }, () => messageOf(email, 'wrong')));
    expect(said.filter((text) => text.startsWith('Too many')).length).toBe(4);
  });

  it('begins to count anew after the right password', async () => {
    const { email } = await buildHolder();
    for (let tried = 0; tried < 5; tried++) await messageOf(email, 'wrong');
    expect(await messageOf(email, old)).toBe('signed in');
    expect(await messageOf(email, 'wrong')).toMatch(/Check both/);
  });

  it('keeps a closed account out and tells so only to who knows the password', async () => {
    const { email } = await buildHolder({ disabledAt: new Date() });
    expect(await messageOf(email, 'wrong')).toMatch(/does not fit/);
    expect(await messageOf(email, old)).toMatch(/account is closed/);
  });

  it('never lets an account without a password in', async () => {
    const { email } = await buildUser();
    expect(await messageOf(email, '')).toMatch(/does not fit/);
    expect(await messageOf(email, 'no account has this password')).toMatch(/does not fit/);
  });
});

describe('sessions', () => {
  it('end when the password changes and when the account is closed', async () => {
    const user = await buildHolder();
    expect(await loadActor(user.id, user.sessionEpoch)).toMatchObject({ id: user.id });
    await changePassword(toActor(user), { old, ...fresh });
    expect(await loadActor(user.id, 0)).toBeNull();
    expect(await loadActor(user.id, 1)).toMatchObject({ id: user.id });
    expect(await messageOf(user.email, old)).toMatch(/does not fit/);
    expect(await messageOf(user.email, fresh.password)).toBe('signed in');
    const closed = await buildHolder({ disabledAt: new Date() });
    expect(await loadActor(closed.id, 0)).toBeNull();
  });

  it('stand when the old password was wrong', async () => {
    const user = await buildHolder();
    const attempt = changePassword(toActor(user), { old: 'not this one', ...fresh });
    await expect(attempt).rejects.toMatchObject({ status: 422, fields: { old: [expect.any(String)] } });
    expect(await loadActor(user.id, 0)).toMatchObject({ id: user.id });
  });
});

describe('changeName', () => {
  it('shows both names where it was changed elsewhere meanwhile', async () => {
    const user = await buildHolder({ name: 'Tom Renwick' });
    const actor = toActor(user);
    const changed = await changeName(actor, { name: 'T. Renwick', version: 0 });
    expect(changed).toMatchObject({ name: 'T. Renwick', version: 1 });
    await expect(changeName(actor, { name: 'Thomas', version: 0 })).rejects.toMatchObject({
      status: 409,
      details: { mine: 'Thomas', theirs: 'T. Renwick' },
    });
  });
});

describe('localPath', () => {
  it.each([
    ['/today', '/today'],
    ['/engagements/KG-02/bills?year=1#total', '/engagements/KG-02/bills?year=1#total'],
    ['//elsewhere.example', null],
    ['/\\elsewhere.example', null],
    ['/\t/elsewhere.example', null],
    ['/\n/elsewhere.example', null],
    ['/today\\..\\', null],
    ['https://elsewhere.example/', null],
    ['javascript:alert(1)', null],
    ['today', null],
    ['/./\\/elsewhere.example', null],
    ['/.//elsewhere.example', null],
    ['', null],
    [null, null],
    [`/${'x'.repeat(2001)}`, null],
  ])('of %j is %j', (next, expected) => {
    expect(localPath(next)).toBe(expected);
  });
});

describe('policies of people', () => {
  const person = (role: Role, id: number, clientId: number | null = null): Actor => ({
    id,
    role,
    clientId,
    email: '',
    name: '',
    rights: { view: true, record: true, decide: true, pay: true },
  });
  const mira = person('client', 9, 4);
  const tom = person('consultant', 2);

  it.each([
    { actor: person('partner', 1), inviteClient: true, inviteStaff: true, licence: true, access: true, rate: true },
    { actor: tom, inviteClient: true, inviteStaff: false, licence: false, access: false, rate: true },
    {
      actor: person('consultant', 3),
      inviteClient: true,
      inviteStaff: false,
      licence: false,
      access: false,
      rate: false,
    },
    { actor: mira, inviteClient: false, inviteStaff: false, licence: false, access: false, rate: false },
  ])('role x action: $actor.role $actor.id', ({ actor, inviteClient, inviteStaff, licence, access, rate }) => {
    expect(canInvite(actor, mira, [4])).toBe(inviteClient);
    expect(canInvite(actor, mira, [5])).toBe(actor.role === 'partner');
    expect(canInvite(actor, tom, [4])).toBe(inviteStaff);
    expect(canSetLicence(actor, tom)).toBe(licence);
    expect(canSetAccess(actor, tom)).toBe(access);
    expect(canSeeRate(actor, tom)).toBe(rate);
  });

  it('lets nobody enter their own licence or close their own account', () => {
    const partner = person('partner', 1);
    expect(canSetLicence(partner, partner)).toBe(false);
    expect(canSetAccess(partner, partner)).toBe(false);
  });
});
