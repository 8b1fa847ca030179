import { UniqueConstraintError } from 'sequelize';
import type { LetterOutcome, PersonView } from '../../schemas/account';
import type { PersonChangeInput, PersonInput } from '../../schemas/client';
import type { RateView } from '../../schemas/rate';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { forbidden, invalid, notFound, staleVersion } from '../errors';
import { Client } from '../models/Client';
import { Engagement } from '../models/Engagement';
import { Rate } from '../models/Rate';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canManagePeople } from '../policies/engagement';
import { canSetAccess, canSetLicence } from '../policies/people';
import { presentRate } from '../presenters/rate';
import { presentPerson } from '../presenters/user';
import { sendInvitation } from './account';
import { practiceCurrency } from './rates';
import { endTokens } from './tokens';

const noRights = { view: false, record: false, decide: false, pay: false };

/** A person of the practice with their rates, newest first. */
export interface StaffView extends PersonView {
  rates: RateView[];
  checkedBy: string | null;
}

/** Everybody, for partners: the practice's people with rates, the clients' with their client. */
export interface PeopleView {
  staff: StaffView[];
  clients: (PersonView & { client: string })[];
}

/** @throws {ServiceError} 404 to clients, 403 to consultants */
export function authorizePeople(actor: Actor): void {
  if (!isStaff(actor)) throw notFound();
  if (!canManagePeople(actor)) throw forbidden('People and their rights are kept by partners.');
}

/** Everybody who has an account. @throws {ServiceError} 404, 403 for anybody but partners */
export async function listPeople(actor: Actor): Promise<PeopleView> {
  authorizePeople(actor);
  const [users, rates, clients, engagements] = await Promise.all([
    User.findAll({ order: ['name'] }),
    Rate.findAll({ order: [['from', 'DESC']] }),
    Client.findAll(),
    Engagement.findAll(),
  ]);
  const names = new Map(users.map((user) => [user.id, user.name]));
  const clientNames = new Map(clients.map((client) => [client.id, client.name]));
  const codes = new Map(engagements.map((engagement) => [engagement.id, engagement.code]));
  const staff = users.filter((user) => user.role !== 'client');
  return {
    staff: staff.map((user) => ({
      ...presentPerson(user),
      checkedBy: names.get(user.licenceCheckedById ?? 0) ?? null,
      rates: rates.filter((rate) => rate.userId === user.id).map((rate) => presentRate(rate, rates, codes)),
    })),
    clients: users
      .filter((user) => user.role === 'client')
      .map((user) => ({ ...presentPerson(user), client: clientNames.get(user.clientId ?? 0) ?? '' })),
  };
}

/** What the form of a rate may choose from. */
export async function rateChoices(): Promise<{ engagements: { id: number; code: string }[]; currency: string }> {
  const engagements = await Engagement.findAll({ where: { closedAt: null }, order: ['code'] });
  return { engagements: engagements.map(({ id, code }) => ({ id, code })), currency: await practiceCurrency() };
}

async function create(input: PersonInput): Promise<User> {
  const { name, email, role } = input;
  const ofClient = input.role === 'client' ? { clientId: input.clientId, rights: input.rights } : null;
  try {
    return await inTx(() =>
      User.create({
        name,
        email,
        role,
        clientId: ofClient?.clientId ?? null,
        rights: ofClient?.rights ?? noRights,
        passwordHash: null,
        licenceJurisdiction: null,
        licenceNumber: null,
        licenceExpires: null,
        licenceCheckedById: null,
        disabledAt: null,
      }),
    );
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    throw invalid('This e-mail has an account already.', {
      email: ['This e-mail has an account already. Look for the person in the list.'],
    });
  }
}

/**
 * Makes an account without a password and mails its invitation.
 *
 * @throws {ServiceError} 404, 403; 422 by field
 */
export async function addPerson(
  actor: Actor,
  input: PersonInput,
): Promise<{ person: PersonView; letter: LetterOutcome }> {
  authorizePeople(actor);
  if (input.role === 'client' && !(await Client.findByPk(input.clientId))) {
    throw invalid('Choose the client.', { clientId: ['There is no such client.'] });
  }
  const user = await create(input);
  return { person: presentPerson(user), letter: await sendInvitation(actor, user.id) };
}

/** Opens a person for change. @throws {ServiceError} 404, 403 */
export async function openPerson(actor: Actor, id: number): Promise<User> {
  authorizePeople(actor);
  const user = await User.findByPk(id);
  if (!user) throw notFound();
  return user;
}

type Values = Partial<
  Pick<
    User,
    | 'name'
    | 'role'
    | 'rights'
    | 'disabledAt'
    | 'sessionEpoch'
    | 'licenceJurisdiction'
    | 'licenceNumber'
    | 'licenceExpires'
    | 'licenceCheckedById'
  >
>;

/** What a change writes, once it is allowed. */
function valuesOf(actor: Actor, user: User, input: PersonChangeInput): Values {
  switch (input.change) {
    case 'name':
      return { name: input.name };
    case 'rights':
      if (user.role !== 'client') throw invalid('Rights are given to people of clients.');
      return { rights: input.rights };
    case 'role':
      if (user.role === 'client') throw invalid('A person of a client stays one. Invite them anew as staff.');
      if (!canSetAccess(actor, user)) throw forbidden('Your own role is changed by another partner.');
      return { role: input.role };
    case 'access':
      if (!canSetAccess(actor, user)) throw forbidden('Your own account is closed by another partner.');
      return { disabledAt: input.closed ? new Date() : null, sessionEpoch: user.sessionEpoch + 1 };
    case 'licence':
      if (user.role === 'client') throw invalid('Licences are kept for people of the practice.');
      if (!canSetLicence(actor, user))
        throw forbidden('A licence is entered and checked by another partner, never by its holder.');
      return {
        licenceJurisdiction: input.licence?.jurisdiction ?? null,
        licenceNumber: input.licence?.number ?? null,
        licenceExpires: input.licence?.expires ?? null,
        licenceCheckedById: input.licence ? actor.id : null,
      };
  }
}

/**
 * Changes one thing of a person: name, role, rights, access or licence.
 *
 * @throws {ServiceError} 403 for the actor's own role, access and licence; 409 with both versions; 422
 */
export async function changePerson(actor: Actor, user: User, input: PersonChangeInput): Promise<PersonView> {
  await inTx(async () => {
    await freshen(user);
    const values = valuesOf(actor, user, input);
    if (user.version !== input.version) {
      const theirs = Object.fromEntries(Object.keys(values).map((name) => [name, user.get(name as keyof User)]));
      throw staleVersion(user.name, values, { ...theirs, version: user.version });
    }
    await user.update(values);
    if (values.disabledAt) await endTokens(user.id);
  });
  return presentPerson(user);
}
