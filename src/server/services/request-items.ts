import type { ItemDecisionInput } from '../../schemas/request';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, staleVersion } from '../errors';
import { RequestFile } from '../models/RequestFile';
import type { RequestItem } from '../models/RequestItem';
import type { Actor } from '../policies/actor';
import { tellSentBack } from './request-delivery';
import { assertOpen, type OpenRequest } from './request-open';

/** The files of an item that were not removed. */
export async function liveFiles(item: RequestItem): Promise<RequestFile[]> {
  const files = await RequestFile.findAll({ where: { itemId: item.id }, order: ['id'] });
  return files.filter(({ state }) => state !== 'removed');
}

/** Marks an item as answered by somebody of the client. Call inside inTx. */
export const markAnswered = (actor: Actor, item: RequestItem) =>
  item.update({ state: 'answered', answeredById: actor.id, answeredAt: new Date() });

/** What an item is once an answer was taken back: asked for again, unless something of it remains. Call inside inTx. */
export async function settleAfterRemoval(item: RequestItem): Promise<void> {
  const files = await liveFiles(item);
  if (item.answer !== null || files.some(({ state }) => state === 'new')) return;
  const isSettled = item.reason === null && files.some(({ state }) => state !== 'set-aside');
  if (isSettled) return acceptWhenDealtWith(item);
  await item.update({ state: item.reason === null ? 'asked' : 'sent-back', answeredById: null, answeredAt: null });
}

/** Accepts an answered item once all its files are dealt with and one of them was of use. Call inside inTx. */
export async function acceptWhenDealtWith(item: RequestItem): Promise<void> {
  const files = await liveFiles(item);
  const isOpen = files.some(({ state }) => state === 'new' || state === 'taking');
  const isUsed = files.some(({ state }) => state === 'taken' || state === 'plate');
  if (item.state === 'answered' && isUsed && !isOpen) await item.update({ state: 'accepted', reason: null });
}

/**
 * Accepts what came for an item, or sends it back with a reason, which its people get by mail.
 *
 * @throws {ServiceError} 409 where the client acted meanwhile, or nothing came yet
 */
export async function decideItem(open: OpenRequest, item: RequestItem, input: ItemDecisionInput): Promise<void> {
  assertOpen(open);
  await inTx(async () => {
    await freshen(item);
    if (item.version !== input.version) {
      throw staleVersion('This item', { version: input.version }, { version: item.version, state: item.state });
    }
    if (item.state === 'asked' || item.state === 'sent-back') throw conflict('Nothing came for this item yet.');
    if (input.to === 'accepted') return item.update({ state: 'accepted', reason: null });
    for (const file of await liveFiles(item)) if (file.state === 'new') await file.update({ state: 'set-aside' });
    return item.update({
      state: 'sent-back',
      reason: input.reason,
      answer: null,
      answeredById: null,
      answeredAt: null,
    });
  });
  if (input.to === 'sent-back') await tellSentBack(open, item);
}
