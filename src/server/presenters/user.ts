import type { LetterOutcome, LicenceView, PersonView, ProfileView } from '../../schemas/account';
import type { Letter } from '../models/Letter';
import type { User } from '../models/User';

/** A licence as it was entered and checked; nothing where there is none. */
export function presentLicence(user: User): LicenceView | null {
  const { licenceJurisdiction: jurisdiction, licenceNumber: number, licenceExpires: expires } = user;
  if (!jurisdiction || !number) return null;
  return { jurisdiction, number, expires, checkedById: user.licenceCheckedById };
}

/** A person's own account. */
export function presentProfile(user: User): ProfileView {
  const { name, email, role, version } = user;
  return { name, email, role, version, licence: presentLicence(user) };
}

/** A person as a partner sees them. */
export function presentPerson(user: User): PersonView {
  const { id, name, email, role, clientId, rights, version } = user;
  const access = user.disabledAt ? 'closed' : user.passwordHash ? 'open' : 'invited';
  return { id, name, email, role, clientId, rights, version, access, licence: presentLicence(user) };
}

/** Whether a letter went. */
export const presentOutcome = ({ recipient, state, error }: Letter): LetterOutcome => ({ recipient, state, error });
