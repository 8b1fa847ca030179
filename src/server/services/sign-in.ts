import { inTx } from '../db/tx';
import { actAs } from '../db/context';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { checkPassword } from './passwords';

const windowMs = 15 * 60 * 1000;
const triesAllowed = 8;

interface Failures {
  count: number;
  since: number;
}

const shared = globalThis as typeof globalThis & { counterlagFailures?: Map<string, Failures> };
const failures = (shared.counterlagFailures ??= new Map());

export type SignInResult = { user: Actor } | { message: string };

/** The person behind an account, as policies see them. */
export function toActor(user: User): Actor {
  const { id, email, name, role, clientId, rights } = user;
  return { id, email, name, role, clientId, rights };
}

/** Loads the person of a session; nobody if the account is gone, disabled, or its sessions were ended since. */
export async function loadActor(id: number, sessionEpoch: number): Promise<Actor | null> {
  const user = await User.findByPk(id);
  if (!user || user.disabledAt || user.sessionEpoch !== sessionEpoch) return null;
  return toActor(user);
}

/** The session epoch of an account: it rises when a password changes, which ends its older sessions. */
export async function sessionEpochOf(id: number): Promise<number> {
  const user = await User.findByPk(id, { rejectOnEmpty: true });
  return user.sessionEpoch;
}

function failuresOf(email: string, now: number): Failures {
  const known = failures.get(email);
  return known && now - known.since < windowMs ? known : { count: 0, since: now };
}

function refuse(email: string, now: number): SignInResult {
  const { count, since } = failuresOf(email, now);
  failures.set(email, { count: count + 1, since });
  if (failures.size > 10_000) failures.delete(failures.keys().next().value as string);
  const left = triesAllowed - count - 1;
  const tries = left === 1 ? 'One try is left' : `${left} tries are left`;
  return {
    message:
      left > 4
        ? 'This password does not fit this e-mail. Check both, or ask for a new password.'
        : `This password does not fit this e-mail. ${tries}, then wait 15 minutes.`,
  };
}

/** Checks an e-mail and password. Wrong ones are counted per account; the answer never tells whether the account exists. */
export async function checkSignIn(email: string, password: string, now = Date.now()): Promise<SignInResult> {
  if (failuresOf(email, now).count >= triesAllowed) {
    return { message: 'Too many wrong passwords for this e-mail. Wait 15 minutes, or ask for a new password.' };
  }
  const user = await User.findOne({ where: { email } });
  const fits = await checkPassword(user?.passwordHash ?? null, password);
  if (!user || !fits) return refuse(email, now);
  if (user.disabledAt) return { message: 'This account is closed. Ask the practice to open it again.' };
  failures.delete(email);
  return { user: toActor(user) };
}

/** Sets a new password and ends all sessions of the account. The hash is made before the transaction opens. */
export async function setPasswordHash(userId: number, passwordHash: string): Promise<void> {
  await actAs({ actorId: userId, ip: null }, () =>
    inTx(async () => {
      const user = await User.findByPk(userId, { rejectOnEmpty: true });
      await user.update({ passwordHash, sessionEpoch: user.sessionEpoch + 1 });
    }),
  );
}
