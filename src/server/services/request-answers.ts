import { randomUUID } from 'node:crypto';
import { requestCaps, type AnswerInput } from '../../schemas/request';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import type { StoredFile } from '../drawer';
import { conflict, ServiceError, staleVersion, tooLarge } from '../errors';
import { RequestFile } from '../models/RequestFile';
import { RequestItem } from '../models/RequestItem';
import type { Actor } from '../policies/actor';
import { markAnswered, settleAfterRemoval } from './request-items';
import { assertOpen, fileOf, itemOf, openRequestToAnswer, type OpenRequest } from './request-open';

/** An item somebody may send files for. */
export interface OpenAnswer {
  open: OpenRequest;
  item: RequestItem;
}

/** Removed files count too, twice over: nobody fills the disk by sending and removing. */
const mostEver = { files: 2 * requestCaps.files, bytes: 2 * requestCaps.bytes };

/** @throws {ServiceError} 409 or 413 where a request holds as much as it may */
async function assertRoom({ request }: OpenRequest, moreBytes: number): Promise<void> {
  const items = await RequestItem.findAll({ where: { requestId: request.id }, attributes: ['id'] });
  const where = { itemId: items.map(({ id }) => id) };
  const all = await RequestFile.findAll({ where, attributes: ['bytes', 'state'] });
  const live = all.filter(({ state }) => state !== 'removed');
  const bytesOf = (files: RequestFile[]) => files.reduce((sum, { bytes }) => sum + bytes, 0);
  if (live.length >= requestCaps.files || all.length >= mostEver.files) {
    throw conflict(`A request takes ${requestCaps.files} files. Put several into one ZIP, or ask for a new request.`);
  }
  if (bytesOf(live) + moreBytes > requestCaps.bytes || bytesOf(all) + moreBytes > mostEver.bytes) {
    throw tooLarge('A request takes 1 GiB in all, and this file would go beyond it. Ask for a new request.');
  }
}

/**
 * Whether a person may send a file for an item, before a byte of it is read.
 *
 * @throws {ServiceError} 404, 403, 409 where the request has ended or is full, 413
 */
export async function authorizeAnswer(
  actor: Actor,
  address: { code: string; number: number; position: number },
  bytes: number,
): Promise<OpenAnswer> {
  const open = await openRequestToAnswer(actor, address.code, address.number);
  const item = await itemOf(open, address.position);
  assertOpen(open);
  await assertRoom(open, bytes);
  return { open, item };
}

/** A file that lies in the drawer and was looked at. */
export interface SentFile extends StoredFile {
  fileName: string;
  mediaType: string;
}

/**
 * Takes a stored file as an answer. The same bytes for the same item are one file; one removed before comes back.
 *
 * @throws {ServiceError} 409 where the request ended while it was being sent, 413
 */
export async function receiveAnswer(actor: Actor, { open, item }: OpenAnswer, file: SentFile): Promise<void> {
  await inTx(async () => {
    await freshen(open.request);
    assertOpen(open);
    const same = await RequestFile.findOne({ where: { itemId: item.id, sha256: file.sha256 } });
    if (same && same.state !== 'removed' && same.state !== 'set-aside') return;
    await assertRoom(open, file.bytes);
    await freshen(item);
    const back = { fileName: file.fileName, uploadedById: actor.id, state: 'new' as const };
    if (same) await same.update(back);
    else {
      await RequestFile.create({ ...file, ...back, key: randomUUID(), itemId: item.id, intakeId: null, motorId: null });
    }
    await markAnswered(actor, item);
  });
}

/**
 * Removes a file the practice has not taken. The row stays for the trail and the limits.
 *
 * @throws {ServiceError} 404, 403, 409 where it was taken or changed
 */
export async function removeAnswer(open: OpenRequest, key: string, version: number): Promise<void> {
  const { file, item } = await fileOf(open, key);
  assertOpen(open);
  await inTx(async () => {
    await freshen(file);
    if (file.state !== 'new') throw conflict(`${file.fileName} was taken by the practice already. Ask them about it.`);
    if (file.version !== version) throw staleVersion(file.fileName, { version }, { version: file.version });
    await file.update({ state: 'removed' });
    await freshen(item);
    await settleAfterRemoval(item);
  });
}

/**
 * Says that something is not there, with a word about it; null takes the word back.
 *
 * @throws {ServiceError} 409 where somebody answered meanwhile
 */
export async function answerInWords(actor: Actor, { open, item }: OpenAnswer, input: AnswerInput): Promise<void> {
  await inTx(async () => {
    await freshen(open.request);
    assertOpen(open);
    await freshen(item);
    if (item.version !== input.version) {
      throw staleVersion('This item', { version: input.version }, { version: item.version, state: item.state });
    }
    if (item.state === 'accepted') throw new ServiceError(409, 'conflict', 'The practice has accepted this already.');
    await item.update({ answer: input.words });
    if (input.words !== null) await markAnswered(actor, item);
    else await settleAfterRemoval(item);
  });
}
