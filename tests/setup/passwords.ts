import type { CreationAttributes } from 'sequelize';
import type { User } from '@/server/models/User';
import { hashPassword } from '@/server/services/passwords';
import { checkSignIn } from '@/server/services/sign-in';
import { buildUser } from './build';

/** The password of everybody {@link buildHolder} makes. */
export const old = 'the old password of this person';

/** A new password as a form sends it. */
export const fresh = { password: 'copper oxide and rain', again: 'copper oxide and rain' };

let oldHash: Promise<string> | undefined;

/** A person who has a password. */
export async function buildHolder(given: Partial<CreationAttributes<User>> = {}): Promise<User> {
  return buildUser({ passwordHash: await (oldHash ??= hashPassword(old)), ...given });
}

/** What signing in answers. */
export async function messageOf(email: string, password: string, now?: number): Promise<string> {
  const result = await checkSignIn(email, password, now);
  return 'message' in result ? result.message : 'signed in';
}
