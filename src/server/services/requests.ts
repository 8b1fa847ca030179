import { Op } from 'sequelize';
import {
  isWanted,
  type ClientRequestView,
  type ItemKind,
  type RequestSummary,
  type StaffRequestView,
} from '../../schemas/request';
import { dateOfInstant, today } from '../clock';
import { notFound } from '../errors';
import { DataRequest } from '../models/DataRequest';
import { Practice } from '../models/Practice';
import { RequestFile } from '../models/RequestFile';
import { RequestItem } from '../models/RequestItem';
import { RequestReminder } from '../models/RequestReminder';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { canAnswerRequest, canReadRequest, mayKnowOfRequests } from '../policies/request';
import {
  presentClientRequest,
  presentRequestSummary,
  presentStaffRequest,
  type RequestRows,
} from '../presenters/request';
import { openWhere, type OpenEngagement } from './engagements';
import { listMotors } from './motors';
import { nextReminderDay } from './reminder-days';
import { withScope, type OpenRequest } from './request-open';

/** Everything that hangs off a request, as its pages and mails need it. */
export async function requestRows({ request, opened, people }: OpenRequest): Promise<RequestRows> {
  const items = await RequestItem.findAll({ where: { requestId: request.id }, order: ['position'] });
  const files = await RequestFile.findAll({
    where: { itemId: items.map(({ id }) => id), state: { [Op.ne]: 'removed' } },
    order: ['id'],
  });
  const ids = [request.madeById, ...people.map(({ userId }) => userId), ...items.map((item) => item.answeredById)];
  const [users, motors] = await Promise.all([
    User.findAll({ where: { id: [...ids, ...files.map((file) => file.uploadedById)].filter((id) => id !== null) } }),
    listMotors(opened.engagement.id),
  ]);
  return {
    code: opened.engagement.code,
    today: today(),
    sentOn: dateOfInstant(request.sentAt),
    request,
    items,
    files,
    people,
    users: new Map(users.map(({ id, name, email }) => [id, { name, email }])),
    motors: motors.map(({ id, name }) => ({ id, name })),
  };
}

/** A request as the practice sees it. */
export async function staffRequest(open: OpenRequest): Promise<StaffRequestView> {
  const rows = await requestRows(open);
  const { request, opened } = open;
  const reminders = await RequestReminder.findAll({ where: { requestId: request.id }, order: ['id'] });
  const runs = request.state === 'open' && !opened.engagement.closedAt && rows.items.some(isWanted);
  const ruled = { dueOn: request.dueOn, sentOn: rows.sentOn, rule: request.reminders };
  return presentStaffRequest(rows, { reminders, nextReminderOn: runs ? nextReminderDay(ruled, rows.today) : null });
}

/** A request as its reader of the client sees it. */
export async function clientRequest(actor: Actor, open: OpenRequest): Promise<ClientRequestView> {
  const practice = await Practice.findOne();
  const isRunning = open.request.state === 'open' && !open.opened.engagement.closedAt;
  const mayAnswer = isRunning && canAnswerRequest(actor, open.scope);
  const { name = '', phone = '' } = practice ?? {};
  return presentClientRequest(await requestRows(open), { id: actor.id, mayAnswer }, { name, phone });
}

async function requestsOf(opened: OpenEngagement): Promise<OpenRequest[]> {
  const rows = await DataRequest.findAll({
    where: { engagementId: opened.engagement.id },
    order: [['number', 'DESC']],
  });
  return Promise.all(rows.map((request) => withScope(opened, request)));
}

const summariesOf = (open: OpenRequest[]) =>
  Promise.all(open.map(async (one) => presentRequestSummary(await requestRows(one))));

/** The requests of an engagement, the newest first; of one kind of item where it is named. */
export async function listRequests(opened: OpenEngagement, kind?: ItemKind): Promise<RequestSummary[]> {
  const all = await summariesOf(await requestsOf(opened));
  return kind === undefined ? all : all.filter(({ kinds }) => kinds.includes(kind));
}

/** The requests of an engagement that somebody of the client may read, the newest first. */
export async function listReadableRequests(actor: Actor, opened: OpenEngagement): Promise<RequestSummary[]> {
  const all = await requestsOf(opened);
  return summariesOf(all.filter(({ scope }) => canReadRequest(actor, scope)));
}

/**
 * An engagement for the client's page of its requests: for those who may read what was released, and for everybody a
 * request went to.
 *
 * @throws {ServiceError} 404 for everybody else
 */
export async function openWithRequests(actor: Actor, code: string) {
  const opened = await openWhere(code, (scope) => mayKnowOfRequests(actor, scope));
  const requests = await listReadableRequests(actor, opened);
  if (requests.length === 0 && !canReadRequest(actor, { ...opened.scope, addressedIds: [] })) throw notFound();
  return { opened, requests };
}
