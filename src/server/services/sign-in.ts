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

/** Counts a try before its password is checked, so that tries made at the same time count too. */
function countTry(email: string, now: number): number {
  const { count, since } = failuresOf(email, now);
  failures.set(email, { count: count + 1, since });
  if (failures.size > 10_000) failures.delete(failures.keys().next().value as string);
  return triesAllowed - count - 1;
}

function refuse(triesLeft: number): SignInResult {
  const words = [
    'No try is left',
    'One try is left',
    'Two tries are left',
    'Three tries are left',
    'Four tries are left',
  ];
  const left = words[triesLeft];
  return {
    message: left
      ? `This password does not fit this e-mail. ${left}, then wait 15 minutes.`
      : 'This password does not fit this e-mail. Check both, or ask for a new password.',
  };
}

/** Checks an e-mail and password. Wrong ones are counted per account; the answer never tells whether the account exists. */
export async function checkSignIn(email: string, password: string, now = Date.now()): Promise<SignInResult> {
  const triesLeft = countTry(email, now);
  if (triesLeft < 0) {
    return { message: 'Too many wrong passwords for this e-mail. Wait 15 minutes, or ask for a new password.' };
  }
  const user = await User.findOne({ where: { email } });
  const fits = await checkPassword(user?.passwordHash ?? null, password);
  if (!user || !fits) return refuse(triesLeft);
  failures.delete(email);
  if (user.disabledAt) return { message: 'This account is closed. Ask the practice to open it again.' };
  return { user: toActor(user) };
}

/** Sets a new password, forgets wrong tries and ends all sessions of the account. The hash is made before the transaction opens. */
export async function setPasswordHash(userId: number, passwordHash: string): Promise<void> {
  await actAs({ actorId: userId, ip: null }, () =>
    inTx(async () => {
      const user = await User.findByPk(userId, { rejectOnEmpty: true });
      await user.update({ passwordHash, sessionEpoch: user.sessionEpoch + 1 });
      failures.delete(user.email);
    }),
  );
}
