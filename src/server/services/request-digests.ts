import { isWanted } from '../../schemas/request';
import { today } from '../clock';
import { inTx } from '../db/tx';
import { receivedLetter, type ReceivedContent } from '../mail/request-letters';
import { sendLetter } from '../mail/send';
import { DataRequest } from '../models/DataRequest';
import { RequestDigest } from '../models/RequestDigest';
import { User } from '../models/User';
import { canWorkOn } from '../policies/engagement';
import { absoluteUrl, practiceName } from './account';
import { listRunning, type OpenEngagement } from './engagements';
import { withScope, type OpenRequest } from './request-open';
import { requestRows } from './requests';
import { toActor } from './sign-in';

const minuteMs = 60_000;
/** The practice hears of it when the client has paused, or has been at it for long. */
const quietMs = 15 * minuteMs;
const longestMs = 120 * minuteMs;

type News = ReceivedContent['items'][number];

/** What came for a request since the practice was last told, and when. */
async function newsOf(open: OpenRequest, sinceMs: number) {
  const rows = await requestRows(open);
  const instants: number[] = [];
  const hear = (at: Date) => {
    const isNew = at.getTime() > sinceMs;
    if (isNew) instants.push(at.getTime());
    return isNew;
  };
  const items = rows.items.flatMap((item): News[] => {
    const files = rows.files.filter((file) => file.itemId === item.id && file.state === 'new' && hear(file.createdAt));
    const isAnswer =
      item.state === 'answered' && item.answer !== null && item.answeredAt !== null && hear(item.answeredAt);
    if (files.length === 0 && !isAnswer) return [];
    return [{ words: item.words, files: files.map(({ fileName }) => fileName), answer: isAnswer ? item.answer : null }];
  });
  return { items, instants, left: rows.items.filter(isWanted).length };
}

/** Who made a request, if they may still work on it; else every member of the engagement. */
async function readersOf({ request, opened }: OpenRequest): Promise<User[]> {
  const maker = request.madeById === null ? null : await User.findByPk(request.madeById);
  if (maker && !maker.disabledAt && canWorkOn(toActor(maker), opened.scope)) return [maker];
  return opened.members.filter(({ disabledAt }) => disabledAt === null);
}

interface Reserved {
  open: OpenRequest;
  digest: RequestDigest;
  items: News[];
  left: number;
}

async function reserveOne(open: OpenRequest, nowMs: number): Promise<Reserved | null> {
  const last = await RequestDigest.findOne({ where: { requestId: open.request.id }, order: [['id', 'DESC']] });
  const { items, instants, left } = await newsOf(open, last?.until.getTime() ?? 0);
  if (instants.length === 0) return null;
  const newest = Math.max(...instants);
  if (nowMs - newest < quietMs && nowMs - Math.min(...instants) < longestMs) return null;
  const values = { requestId: open.request.id, until: new Date(newest), state: 'sending' as const, error: null };
  return { open, items, left, digest: await RequestDigest.create(values) };
}

async function reserve(engagements: OpenEngagement[], nowMs: number): Promise<Reserved[]> {
  const reserved: Reserved[] = [];
  for (const opened of engagements) {
    for (const request of await DataRequest.findAll({ where: { engagementId: opened.engagement.id, state: 'open' } })) {
      const one = await reserveOne(await withScope(opened, request), nowMs);
      if (one) reserved.push(one);
    }
  }
  return reserved;
}

async function mail({ open, digest, items, left }: Reserved, day: string): Promise<void> {
  const { request, opened } = open;
  const { code, id: engagementId } = opened.engagement;
  const practice = await practiceName();
  const errors: string[] = [];
  for (const reader of await readersOf(open)) {
    const content: ReceivedContent = {
      recipientName: reader.name,
      practice,
      code,
      client: opened.client.name,
      site: opened.site.name,
      number: request.number,
      items,
      left,
      link: absoluteUrl(`/engagements/${code}/requests/${request.number}`),
    };
    const to = { name: reader.name, address: reader.email };
    const letter = { ...receivedLetter(content, day), kind: 'received', engagementId, userId: reader.id };
    const { error } = await sendLetter({ to, ...letter });
    if (error !== null) errors.push(error);
  }
  await inTx(() => digest.update({ state: errors.length === 0 ? 'sent' : 'failed', error: errors[0] ?? null }));
}

/**
 * Tells the practice what came from clients: a mail a request once the client has paused, not one a file.
 *
 * @returns how many requests were told of
 */
export async function runDigests(nowMs: number): Promise<number> {
  const reserved = await inTx(async () => reserve(await listRunning(), nowMs));
  for (const one of reserved) await mail(one, today(nowMs));
  return reserved.length;
}
