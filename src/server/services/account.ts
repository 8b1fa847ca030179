import { Op } from 'sequelize';
import type { z } from 'zod';
import {
  choosePasswordInput,
  localPath,
  type changePasswordInput,
  type LetterOutcome,
  type profileInput,
  type ProfileView,
} from '../../schemas/account';
import { actAs } from '../db/context';
import { inTx } from '../db/tx';
import { getEnv } from '../env';
import { forbidden, invalid, notFound, staleVersion } from '../errors';
import { parseOrThrow } from '../http';
import { log } from '../log';
import { invitationLetter, resetLetter } from '../mail/account-letters';
import { sendLetter } from '../mail/send';
import { Client } from '../models/Client';
import { Practice } from '../models/Practice';
import { Token } from '../models/Token';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canInvite } from '../policies/people';
import { presentOutcome, presentProfile } from '../presenters/user';
import { listEngagements } from './engagements';
import { checkPassword, hashPassword } from './passwords';
import { setPasswordHash } from './sign-in';
import { endTokens, issueToken, readToken, useToken } from './tokens';

const hourMs = 60 * 60 * 1000;
const resetsPerHour = 4;

/** An address of this application as it goes into mails. */
export const absoluteUrl = (path: string) => new URL(path, getEnv().APP_ORIGIN).href;

/** Where a person begins. */
export const homeOf = (actor: Pick<Actor, 'role'>) => (actor.role === 'client' ? '/client' : '/today');

/** Where a person begins who has just signed in with this e-mail. */
export async function signedInHome(email: string): Promise<string> {
  const user = await User.findOne({ where: { email } });
  return user ? homeOf(user) : '/';
}

/** Name of the practice, for letters and the pages outside the sheet. */
export async function practiceName(): Promise<string> {
  return (await Practice.findOne())?.name ?? 'this practice';
}

/** Name of the client a person belongs to. */
export async function clientNameOf(actor: Actor): Promise<string> {
  return (actor.clientId === null ? null : await Client.findByPk(actor.clientId))?.name ?? '';
}

/** Sends a link for a new password where there is such an account; the caller learns nothing. */
export async function requestReset(email: string, now = Date.now()): Promise<void> {
  const user = await User.findOne({ where: { email, disabledAt: null } });
  if (!user) return;
  const since = new Date(now - hourMs);
  const recent = await Token.count({ where: { userId: user.id, kind: 'reset', createdAt: { [Op.gt]: since } } });
  if (recent >= resetsPerHour) return;
  const { secret } = await inTx(() => issueToken(user.id, 'reset', null, now));
  const to = { name: user.name, address: user.email };
  const words = resetLetter({ name: user.name, url: absoluteUrl(`/reset/${secret}`), practice: await practiceName() });
  await sendLetter({ to, ...words, kind: 'reset', userId: user.id });
}

/** The same in the background: the answer takes equally long whether or not the account exists. */
export function beginReset(email: string): void {
  setImmediate(() => {
    requestReset(email).catch((error: unknown) => log().error({ err: error }, 'reset letter failed'));
  });
}

/** Whose password a link would set. @throws {ServiceError} 410 where the link is over */
export async function readLink(kind: Token['kind'], secret: string) {
  const { user, token } = await readToken(kind, secret);
  return { name: user.name, email: user.email, target: token.target };
}

async function takeLink(kind: Token['kind'], secret: string, input: unknown) {
  await readToken(kind, secret);
  const { password } = parseOrThrow(choosePasswordInput, input);
  const passwordHash = await hashPassword(password);
  return useToken(kind, secret, (user) => setPasswordHash(user.id, passwordHash));
}

/** Sets a new password by a link of one hour; all sessions end. @throws {ServiceError} 410, 422 */
export async function resetPassword(secret: string, input: unknown): Promise<void> {
  await takeLink('reset', secret, input);
}

/** Takes an invitation with a password. @throws {ServiceError} 410, 422 */
export async function acceptInvitation(secret: string, input: unknown): Promise<{ userId: number; target: string }> {
  const { user, target } = await takeLink('invitation', secret, input);
  return { userId: user.id, target: localPath(target) ?? homeOf(user) };
}

async function authorizeInvitation(actor: Actor, user: User): Promise<void> {
  const engaged = actor.role === 'consultant' ? await listEngagements(actor) : [];
  const clientIds = engaged.map((opened) => opened.client.id);
  if (!canInvite(actor, user, clientIds)) throw forbidden('Only a partner may invite this person.');
  if (user.disabledAt) throw invalid(`The account of ${user.name} is closed. Open it again first.`);
}

/** A link that goes into a mail; `expiresAt` is null where it does not run out. */
export interface MailLink {
  url: string;
  expiresAt: Date | null;
}

/**
 * A link for a mail that brings a person in: to an invitation where they have no password yet, else to sign in, and
 * then to the target (a path of this site). Whether they may be written to is the caller's to know.
 */
export async function linkFor(user: User, target?: string): Promise<MailLink> {
  const path = localPath(target) ?? homeOf(user);
  if (user.passwordHash) return { url: absoluteUrl(`/sign-in?next=${encodeURIComponent(path)}`), expiresAt: null };
  const { secret, expiresAt } = await inTx(() => issueToken(user.id, 'invitation', path));
  return { url: absoluteUrl(`/invitation/${secret}`), expiresAt };
}

/** The same in the name of somebody. @throws {ServiceError} 403 where they may not invite the person, 422 where the account is closed */
export async function invite(actor: Actor, user: User, target?: string): Promise<MailLink> {
  await authorizeInvitation(actor, user);
  return linkFor(user, target);
}

/** Mails an invitation. @throws {ServiceError} 404, 403, 422 where the person has a password already */
export async function sendInvitation(actor: Actor, userId: number): Promise<LetterOutcome> {
  const user = await User.findByPk(userId);
  if (!user || !isStaff(actor)) throw notFound();
  await authorizeInvitation(actor, user);
  if (user.passwordHash) throw invalid(`${user.name} has a password already and can sign in.`);
  const { url, expiresAt } = await invite(actor, user);
  const practice = await practiceName();
  const words = invitationLetter({ name: user.name, by: actor.name, practice, url, expiresAt });
  const to = { name: user.name, address: user.email };
  return presentOutcome(await sendLetter({ to, ...words, kind: 'invitation', userId }));
}

/** What a person sees of their own account. */
export async function profileOf(actor: Actor): Promise<ProfileView> {
  return presentProfile(await User.findByPk(actor.id, { rejectOnEmpty: true }));
}

/** Changes the actor's own name. @throws {ServiceError} 409 where it was changed elsewhere meanwhile */
export function changeName(actor: Actor, input: z.output<typeof profileInput>): Promise<ProfileView> {
  return inTx(async () => {
    const user = await User.findByPk(actor.id, { rejectOnEmpty: true });
    if (user.version !== input.version) throw staleVersion('Your name', input.name, user.name);
    return presentProfile(await user.update({ name: input.name }));
  });
}

/** Changes the actor's own password and ends their sessions. @throws {ServiceError} 422 where the old one does not fit */
export async function changePassword(actor: Actor, input: z.output<typeof changePasswordInput>): Promise<void> {
  const user = await User.findByPk(actor.id, { rejectOnEmpty: true });
  if (!(await checkPassword(user.passwordHash, input.old))) {
    throw invalid('The password was not changed.', { old: ['This is not the password you have today.'] });
  }
  const passwordHash = await hashPassword(input.password);
  await actAs({ actorId: actor.id, ip: null }, () =>
    inTx(async () => {
      await endTokens(actor.id);
      await setPasswordHash(actor.id, passwordHash);
    }),
  );
}
