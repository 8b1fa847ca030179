import type { RequestChangeInput, RequestInput } from '../../schemas/request';
import { today } from '../clock';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, staleVersion, type FieldErrors } from '../errors';
import { DataRequest } from '../models/DataRequest';
import { RequestItem } from '../models/RequestItem';
import { RequestPerson } from '../models/RequestPerson';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { isMailUncertain } from '../presenters/request';
import type { OpenEngagement } from './engagements';
import { listMotors } from './motors';
import { deliverRequest } from './request-delivery';
import { withScope, type OpenRequest } from './request-open';

/** People of the client who can be asked: their accounts are open. */
export const clientPeople = ({ client }: OpenEngagement): Promise<User[]> =>
  User.findAll({ where: { clientId: client.id, role: 'client', disabledAt: null }, order: ['name'] });

/** @throws {ServiceError} 422 by field where people, motors or the day do not fit the engagement */
async function checkFits(opened: OpenEngagement, input: RequestInput): Promise<void> {
  const fields: FieldErrors = {};
  const people = new Set((await clientPeople(opened)).map(({ id }) => id));
  const motors = new Set((await listMotors(opened.engagement.id)).map(({ id }) => id));
  if (input.userIds.some((id) => !people.has(id)))
    fields.userIds = ['One of the people is none of this client, or the account is closed. Choose among those listed.'];
  if (input.dueOn < today()) fields.dueOn = ['This day has passed. Choose today or a later day.'];
  input.items.forEach(({ motorId }, index) => {
    if (motorId !== null && !motors.has(motorId))
      fields[`items.${index}.motorId`] = ['This motor is none of the engagement. Choose another, or none.'];
  });
  if (Object.keys(fields).length > 0)
    throw invalid('The request was not sent. Each entry to change is marked.', fields);
}

function assertNotClosed({ engagement }: OpenEngagement): void {
  if (!engagement.closedAt) return;
  throw conflict(`${engagement.code} is closed. A partner can open it again; then the client can be asked.`);
}

async function createRows(actor: Actor, opened: OpenEngagement, input: RequestInput): Promise<DataRequest> {
  const { requestId, dueOn, note, internalNote, reminders, items, userIds } = input;
  const engagementId = opened.engagement.id;
  const last = await DataRequest.findOne({ where: { engagementId }, order: [['number', 'DESC']] });
  const request = await DataRequest.create({
    engagementId,
    number: (last?.number ?? 0) + 1,
    requestId,
    state: 'open',
    dueOn,
    note: note || null,
    internalNote: internalNote || null,
    reminders,
    madeById: actor.id,
    sentAt: new Date(),
    endedAt: null,
  });
  for (const userId of new Set(userIds))
    await RequestPerson.create({ requestId: request.id, userId, state: 'sending', error: null, sentAt: null });
  for (const [index, { from, to, ...item }] of items.entries()) {
    await RequestItem.create({
      ...item,
      requestId: request.id,
      position: index + 1,
      periodFrom: from,
      periodTo: to,
      state: 'asked',
      reason: null,
      answer: null,
      answeredById: null,
      answeredAt: null,
    });
  }
  return request;
}

/**
 * Makes a request and mails it to its people. Rows first, then the mails, then whether each went: the same request a second
 * time sends nothing and answers with what it made.
 *
 * @throws {ServiceError} 422 by field, 409 where the engagement is closed
 */
export async function sendRequest(actor: Actor, opened: OpenEngagement, input: RequestInput): Promise<OpenRequest> {
  const made = await madeBefore(opened, input.requestId);
  if (made) return withScope(opened, made);
  assertNotClosed(opened);
  await checkFits(opened, input);
  const { request, isNew } = await inTx(async () => {
    const before = await madeBefore(opened, input.requestId);
    return before
      ? { request: before, isNew: false }
      : { request: await createRows(actor, opened, input), isNew: true };
  });
  const open = await withScope(opened, request);
  if (isNew) await deliverRequest(open, open.people);
  return open;
}

async function madeBefore({ engagement }: OpenEngagement, requestId: string): Promise<DataRequest | null> {
  const made = await DataRequest.findOne({ where: { requestId } });
  if (made && made.engagementId !== engagement.id) throw conflict('This request was sent already. Open a new one.');
  return made;
}

/** What a change writes, once it is allowed. */
function valuesOf({ request, opened }: OpenRequest, input: Exclude<RequestChangeInput, { change: 'mail' }>) {
  const { state } = request;
  switch (input.change) {
    case 'close':
    case 'withdraw':
      if (state !== 'open') throw conflict('This request is not open any more.');
      return { state: input.change === 'close' ? ('closed' as const) : ('withdrawn' as const), endedAt: new Date() };
    case 'reopen':
      if (state === 'open') throw conflict('This request is open already.');
      assertNotClosed(opened);
      return { state: 'open' as const, endedAt: null };
    case 'due':
      if (state !== 'open') throw conflict('This request is not open any more, so no day is waited for.');
      if (input.dueOn < today()) {
        throw invalid('The day was not changed.', { dueOn: ['This day has passed. Choose today or a later day.'] });
      }
      return { dueOn: input.dueOn };
  }
}

/**
 * Changes one thing of a request: closes, withdraws or opens it again, moves its day, or mails it again to somebody.
 *
 * @throws {ServiceError} 409 where it was changed meanwhile or its state does not allow it, 422
 */
export async function changeRequest(open: OpenRequest, input: RequestChangeInput): Promise<void> {
  const { request } = open;
  const assertSeen = () => {
    if (request.version === input.version) return;
    const { state, dueOn, version } = request;
    throw staleVersion(`Request ${request.number}`, { version: input.version }, { state, dueOn, version });
  };
  if (input.change === 'mail') {
    await deliverRequest(open, [await inTx(() => reserveMail(open, input.userId))]);
    return;
  }
  await inTx(async () => {
    await freshen(request);
    assertSeen();
    await request.update(valuesOf(open, input));
  });
}

/** Marks the mail to a person as being sent again. Call inside inTx. */
async function reserveMail({ request, people }: OpenRequest, userId: number): Promise<RequestPerson> {
  const person = people.find((one) => one.userId === userId);
  if (!person) throw invalid('This person is none of the request.', { userId: ['Choose among the people listed.'] });
  await freshen(person);
  if (request.state !== 'open') throw conflict('This request is not open any more; nothing was sent.');
  if (person.state !== 'failed' && !isMailUncertain(person)) {
    throw conflict('This mail went, or is on its way. Nothing was sent again.');
  }
  return person.update({ state: 'sending', error: null });
}
