import { createHash, randomBytes } from 'node:crypto';
import { inTx } from '../db/tx';
import { ServiceError } from '../errors';
import { Token } from '../models/Token';
import { User } from '../models/User';

const hourMs = 60 * 60 * 1000;
const lifetimesMs: Record<Token['kind'], number> = { reset: hourMs, invitation: 14 * 24 * hourMs };

const hashOf = (plain: string) => createHash('sha256').update(plain).digest('hex');

/** 410: a link that was used, ran out or never was. */
const linkOver = (kind: Token['kind']) =>
  new ServiceError(
    410,
    'link-over',
    kind === 'reset'
      ? 'This link was used already or is older than one hour. Ask for a new one.'
      : 'This invitation was taken already or is older than 14 days. Sign in if you have a password, or ask for a new one.',
  );

/** Makes a link's secret, kept only as its hash. Call it inside inTx. */
export async function issueToken(
  userId: number,
  kind: Token['kind'],
  target: string | null = null,
  now = Date.now(),
): Promise<{ secret: string; expiresAt: Date }> {
  const secret = randomBytes(32).toString('base64url');
  const expiresAt = new Date(now + lifetimesMs[kind]);
  await Token.create({ userId, kind, hash: hashOf(secret), target, expiresAt, usedAt: null });
  return { secret, expiresAt };
}

/**
 * The person a link belongs to.
 *
 * @throws {ServiceError} 410 where it was used, ran out or never was, or the account is closed
 */
export async function readToken(kind: Token['kind'], secret: string, now = Date.now()) {
  const token = await Token.findOne({ where: { kind, hash: hashOf(secret) } });
  if (!token || token.usedAt || token.expiresAt.getTime() <= now) throw linkOver(kind);
  const user = await User.findByPk(token.userId, { rejectOnEmpty: true });
  if (user.disabledAt) throw linkOver(kind);
  return { token, user };
}

/**
 * Uses a link for a new password: it counts once, all other links of the person end, and so do the older sessions.
 *
 * @throws {ServiceError} 410 as readToken does
 */
export function useToken(
  kind: Token['kind'],
  secret: string,
  setPassword: (user: User) => Promise<void>,
  now = Date.now(),
) {
  return inTx(async () => {
    const { token, user } = await readToken(kind, secret, now);
    await endTokens(user.id, now);
    await setPassword(user);
    return { target: token.target, user };
  });
}

/** Ends all open links of a person. Call it inside inTx. */
export async function endTokens(userId: number, now = Date.now()): Promise<void> {
  for (const token of await Token.findAll({ where: { userId, usedAt: null } }))
    await token.update({ usedAt: new Date(now) });
}
