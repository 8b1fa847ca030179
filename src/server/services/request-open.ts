import { conflict, forbidden, notFound } from '../errors';
import { DataRequest } from '../models/DataRequest';
import { RequestFile } from '../models/RequestFile';
import { RequestItem } from '../models/RequestItem';
import { RequestPerson } from '../models/RequestPerson';
import type { Actor } from '../policies/actor';
import {
  canAnswerRequest,
  canAskClient,
  canOpenFile,
  canReadRequest,
  mayKnowOfRequests,
  type RequestScope,
} from '../policies/request';
import { openWhere, type OpenEngagement } from './engagements';

/** A request of an engagement, opened by somebody who may read it. */
export interface OpenRequest {
  request: DataRequest;
  opened: OpenEngagement;
  people: RequestPerson[];
  scope: RequestScope;
}

/** A request together with what decides who may do what to it. */
export async function withScope(opened: OpenEngagement, request: DataRequest): Promise<OpenRequest> {
  const people = await RequestPerson.findAll({ where: { requestId: request.id }, order: ['id'] });
  return { request, opened, people, scope: { ...opened.scope, addressedIds: people.map(({ userId }) => userId) } };
}

/**
 * Opens a request by its engagement and number.
 *
 * @throws {ServiceError} 404 where there is none, or none this person may know of
 */
export async function openRequest(actor: Actor, code: string, number: number): Promise<OpenRequest> {
  const opened = await openWhere(code, (scope) => mayKnowOfRequests(actor, scope));
  const request = await DataRequest.findOne({ where: { engagementId: opened.engagement.id, number } });
  if (!request) throw notFound();
  const open = await withScope(opened, request);
  if (!canReadRequest(actor, open.scope)) throw notFound();
  return open;
}

/** The same for the practice, which makes requests and decides about what came. @throws {ServiceError} 404, 403 */
export async function openRequestAsStaff(actor: Actor, code: string, number: number): Promise<OpenRequest> {
  const open = await openRequest(actor, code, number);
  if (!canAskClient(actor, open.scope)) throw forbidden('Requests are made and decided about by the practice.');
  return open;
}

/** The same for who answers it. @throws {ServiceError} 404, 403 */
export async function openRequestToAnswer(actor: Actor, code: string, number: number): Promise<OpenRequest> {
  const open = await openRequest(actor, code, number);
  if (!canAnswerRequest(actor, open.scope)) {
    throw forbidden(
      'Files are sent by the people this request went to, and by those of the client who record readings.',
    );
  }
  return open;
}

/** @throws {ServiceError} 409 where nothing may come or change any more */
export function assertOpen({ request, opened }: OpenRequest): void {
  if (opened.engagement.closedAt) {
    throw conflict(`${opened.engagement.code} is closed, so nothing can be added to it. Ask the practice.`);
  }
  if (request.state === 'closed') throw conflict('This request is closed. Ask the practice to open it again.');
  if (request.state === 'withdrawn') throw conflict('This request was withdrawn; nothing is needed for it any more.');
}

/** An item by its place in the request. @throws {ServiceError} 404 */
export async function itemOf({ request }: OpenRequest, position: number): Promise<RequestItem> {
  const item = await RequestItem.findOne({ where: { requestId: request.id, position } });
  if (!item) throw notFound();
  return item;
}

/** A file that came, by its key, removed ones left out. @throws {ServiceError} 404 */
export async function fileOf({ request }: OpenRequest, key: string): Promise<{ file: RequestFile; item: RequestItem }> {
  const file = await RequestFile.findOne({ where: { key } });
  const item = file && (await RequestItem.findOne({ where: { id: file.itemId, requestId: request.id } }));
  if (!file || !item || file.state === 'removed') throw notFound();
  return { file, item };
}

/** A file for its sender and the practice. @throws {ServiceError} 404, 403 to others of the client */
export async function openSentFile(actor: Actor, open: OpenRequest, key: string): Promise<RequestFile> {
  const { file } = await fileOf(open, key);
  if (!canOpenFile(actor, open.scope, file)) throw forbidden('Only who sent this file can open it here.');
  return file;
}
