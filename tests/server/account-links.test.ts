import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { letterPath } from '@/server/mail/send';
import { Letter } from '@/server/models/Letter';
import { Token } from '@/server/models/Token';
import type { User } from '@/server/models/User';
import {
  acceptInvitation,
  invite,
  readLink,
  requestReset,
  resetPassword,
  sendInvitation,
} from '@/server/services/account';
import { loadActor, toActor } from '@/server/services/sign-in';
import { readToken } from '@/server/services/tokens';
import { buildActor, buildEngagement, buildUser } from '../setup/build';
import { buildHolder, fresh, messageOf } from '../setup/passwords';

const minute = 60_000;

/** The secret in the newest letter to a person: mails are the only place where it stands. */
async function secretMailedTo(user: User, page: string): Promise<string> {
  const letter = await Letter.findOne({ where: { userId: user.id }, order: [['id', 'DESC']], rejectOnEmpty: true });
  const text = readFileSync(letterPath(letter.id)).toString().replace(/=\r\n/g, '');
  return new RegExp(`/${page}/([A-Za-z0-9_-]{43})`).exec(text)?.[1] ?? 'no link in the letter';
}

describe('reset of a password', () => {
  it('sends nothing to an unknown or closed account and answers the same', async () => {
    const closed = await buildHolder({ disabledAt: new Date() });
    const before = await Letter.count();
    expect(await requestReset('nobody.here@practice.example')).toBeUndefined();
    expect(await requestReset(closed.email)).toBeUndefined();
    expect(await Letter.count()).toBe(before);
  });

  it('works once within an hour, ends sessions and forgets wrong tries', async () => {
    const user = await buildHolder();
    for (let tried = 0; tried < 9; tried++) await messageOf(user.email, 'wrong');
    expect(await requestReset(user.email)).toBeUndefined();
    const secret = await secretMailedTo(user, 'reset');
    expect(await readLink('reset', secret)).toMatchObject({ email: user.email });
    await expect(resetPassword(secret, { password: 'short', again: 'short' })).rejects.toMatchObject({ status: 422 });
    await expect(resetPassword(secret, { ...fresh, again: 'another' })).rejects.toMatchObject({
      fields: { again: ['The two passwords differ.'] },
    });
    await resetPassword(secret, fresh);
    expect(await loadActor(user.id, 0)).toBeNull();
    expect(await messageOf(user.email, fresh.password)).toBe('signed in');
    await expect(resetPassword(secret, fresh)).rejects.toMatchObject({ status: 410 });
    await expect(readLink('reset', secret)).rejects.toMatchObject({ status: 410 });
  });

  it('counts once even when used twice at the same moment', async () => {
    const user = await buildHolder();
    await requestReset(user.email);
    const secret = await secretMailedTo(user, 'reset');
    const uses = await Promise.allSettled([resetPassword(secret, fresh), resetPassword(secret, fresh)]);
    expect(uses.map((use) => use.status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('ends after an hour, and with the next use of any link of the person', async () => {
    const user = await buildHolder();
    await requestReset(user.email, Date.now() - 61 * minute);
    const late = await secretMailedTo(user, 'reset');
    await expect(resetPassword(late, fresh)).rejects.toMatchObject({ status: 410, code: 'link-over' });
    await requestReset(user.email);
    const first = await secretMailedTo(user, 'reset');
    await requestReset(user.email);
    const second = await secretMailedTo(user, 'reset');
    await resetPassword(second, fresh);
    await expect(resetPassword(first, fresh)).rejects.toMatchObject({ status: 410 });
  });

  it('sends at most four letters an hour to one person', async () => {
    const user = await buildHolder();
    for (let asked = 0; asked < 7; asked++) await requestReset(user.email);
    expect(await Letter.count({ where: { userId: user.id } })).toBe(4);
  });

  it('keeps only the hash of a link', async () => {
    const user = await buildHolder();
    await requestReset(user.email);
    const secret = await secretMailedTo(user, 'reset');
    const token = await Token.findOne({ where: { userId: user.id }, rejectOnEmpty: true });
    expect(secret).toHaveLength(43);
    expect(token.hash).toMatch(/^[0-9a-f]{64}$/);
    expect(JSON.stringify(token)).not.toContain(secret);
  });

  it('takes no invitation for a reset, nor the other way round', async () => {
    const user = await buildUser();
    const { url } = await invite(await buildActor({ role: 'partner' }), user);
    const secret = url.split('/').at(-1)!;
    await expect(resetPassword(secret, fresh)).rejects.toMatchObject({ status: 410 });
  });
});

describe('invitation', () => {
  it('is refused to consultants who do not work for the client, and to clients', async () => {
    const mira = await buildUser({ role: 'client' });
    await expect(invite(await buildActor(), mira)).rejects.toMatchObject({ status: 403 });
    await expect(invite(toActor(mira), mira)).rejects.toMatchObject({ status: 403 });
    await expect(sendInvitation(await buildActor(), mira.id)).rejects.toMatchObject({ status: 403 });
    await expect(sendInvitation(await buildActor({ role: 'partner' }), 999_999)).rejects.toMatchObject({ status: 404 });
  });

  it('is given by a consultant who works for the client, and leads to its target', async () => {
    const mira = await buildUser({ role: 'client' });
    const tom = await buildActor();
    await buildEngagement({ clientId: mira.clientId!, memberIds: [tom.id] });
    const { url, expiresAt } = await invite(tom, mira, '/client/KG-02/overview');
    expect(url).toMatch(/^http:\/\/127\.0\.0\.1:\d+\/invitation\/[\w-]{43}$/);
    const days = (expiresAt!.getTime() - Date.now()) / (24 * 60 * minute);
    expect(days).toBeGreaterThan(13.99);
    expect(days).toBeLessThanOrEqual(14);
    const taken = await acceptInvitation(url.split('/').at(-1)!, fresh);
    expect(taken).toEqual({ userId: mira.id, target: '/client/KG-02/overview' });
    expect(await messageOf(mira.email, fresh.password)).toBe('signed in');
    await expect(acceptInvitation(url.split('/').at(-1)!, fresh)).rejects.toMatchObject({ status: 410 });
  });

  it('leads who has a password to the sign-in, and a foreign target home', async () => {
    const partner = await buildActor({ role: 'partner' });
    const jon = await buildHolder({ role: 'client' });
    expect(await invite(partner, jon, '/client/HS-01/overview')).toEqual({
      url: expect.stringMatching(/\/sign-in\?next=%2Fclient%2FHS-01%2Foverview$/),
      expiresAt: null,
    });
    expect((await invite(partner, jon, 'https://elsewhere.example/')).url).toMatch(/next=%2Fclient$/);
  });

  it('is mailed to who has no password, and to nobody else', async () => {
    const partner = await buildActor({ role: 'partner', name: 'Ilse Aldaran' });
    const newcomer = await buildUser();
    const letter = await sendInvitation(partner, newcomer.id);
    expect(letter).toEqual({ recipient: newcomer.email, state: expect.any(String), error: expect.anything() });
    const secret = await secretMailedTo(newcomer, 'invitation');
    expect((await acceptInvitation(secret, fresh)).target).toBe('/today');
    await expect(sendInvitation(partner, newcomer.id)).rejects.toMatchObject({ status: 422 });
  });

  it('runs out after 14 days and is void for a closed account', async () => {
    const partner = await buildActor({ role: 'partner' });
    const user = await buildUser();
    const secret = (await invite(partner, user)).url.split('/').at(-1)!;
    const token = await Token.findOne({ where: { userId: user.id }, rejectOnEmpty: true });
    await expect(readToken('invitation', secret, token.expiresAt.getTime())).rejects.toMatchObject({ status: 410 });
    expect(await readToken('invitation', secret, token.expiresAt.getTime() - 1)).toMatchObject({
      user: { id: user.id },
    });
    const closed = await buildUser({ disabledAt: new Date() });
    await expect(invite(partner, closed)).rejects.toMatchObject({ status: 422 });
    expect(await readLink('invitation', secret)).toMatchObject({ name: user.name });
  });
});
