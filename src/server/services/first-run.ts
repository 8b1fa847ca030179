import { inTx } from '../db/tx';
import { conflict } from '../errors';
import { Practice } from '../models/Practice';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { hashPassword } from './passwords';
import { toActor } from './sign-in';

export interface FirstRunInput {
  practice: { name: string; legalName: string; phone: string; currency: string };
  /** Without a password the partner comes in by an invitation. */
  partner: { name: string; email: string; password?: string };
}

/**
 * Founds the practice on an empty server: its own row and its first partner. Everybody else is invited by a partner.
 *
 * @throws {ServiceError} 409 where there is a practice already
 */
export async function foundPractice({ practice, partner }: FirstRunInput): Promise<Actor> {
  if ((await Practice.count()) > 0 || (await User.count()) > 0) {
    throw conflict('There is a practice on this server already. Its partners invite further people.');
  }
  const passwordHash = partner.password === undefined ? null : await hashPassword(partner.password);
  return inTx(async () => {
    await Practice.create(practice);
    const user = await User.create({
      email: partner.email,
      name: partner.name,
      role: 'partner',
      clientId: null,
      passwordHash,
      rights: { view: false, record: false, decide: false, pay: false },
      licenceJurisdiction: null,
      licenceNumber: null,
      licenceExpires: null,
      licenceCheckedById: null,
      disabledAt: null,
    });
    return toActor(user);
  });
}
