import { isWanted } from '../../schemas/request';
import { dateOfInstant, hourOfInstant, today } from '../clock';
import { inTx } from '../db/tx';
import { reminderLetter } from '../mail/request-letters';
import { DataRequest } from '../models/DataRequest';
import { RequestItem } from '../models/RequestItem';
import { RequestReminder } from '../models/RequestReminder';
import { User } from '../models/User';
import { listRunning } from './engagements';
import { stepOn } from './reminder-days';
import { addressed, mailToClient } from './request-delivery';
import { withScope, type OpenRequest } from './request-open';

/** Nobody is reminded in the night. [h of the practice's clock] */
const firstHour = 8;

/** Reminders of one person, reserved and to go in one mail. */
interface Reserved {
  user: User;
  due: { open: OpenRequest; reminder: RequestReminder }[];
}

/** Requests that still wait for their people. */
async function waitingRequests(): Promise<OpenRequest[]> {
  const waiting: OpenRequest[] = [];
  for (const opened of await listRunning()) {
    for (const request of await DataRequest.findAll({ where: { engagementId: opened.engagement.id, state: 'open' } })) {
      const items = await RequestItem.findAll({ where: { requestId: request.id } });
      if (items.some(isWanted)) waiting.push(await withScope(opened, request));
    }
  }
  return waiting;
}

/** Reserves the reminder of a request to a person if one is due that did not go; a failed one is tried again the day after. */
async function reserveOne({ request }: OpenRequest, userId: number, day: string): Promise<RequestReminder | null> {
  const { dueOn, sentAt, reminders: rule } = request;
  const reached = stepOn({ dueOn, sentOn: dateOfInstant(sentAt), rule }, day);
  if (!reached) return null;
  const key = { requestId: request.id, userId, dueOn, step: reached.step };
  const known = await RequestReminder.findOne({ where: key });
  if (!known) return RequestReminder.create({ ...key, day, state: 'sending', error: null });
  return known.state === 'failed' && known.day < day ? known.update({ day, state: 'sending', error: null }) : null;
}

/** Reserves everything that is due on a day, a mail a person. Call inside inTx, so that of two ticks one finds nothing. */
async function reserve(day: string): Promise<Reserved[]> {
  const reserved = new Map<number, Reserved>();
  const done = new Set((await RequestReminder.findAll({ where: { day } })).map(({ userId }) => userId));
  for (const open of await waitingRequests()) {
    const told = open.people.filter(({ state, userId }) => state === 'sent' && !done.has(userId));
    const users = await User.findAll({
      where: { id: told.map(({ userId }) => userId), clientId: open.opened.client.id, disabledAt: null },
    });
    for (const user of users) {
      const reminder = await reserveOne(open, user.id, day);
      if (!reminder) continue;
      const mail = reserved.get(user.id) ?? { user, due: [] };
      mail.due.push({ open, reminder });
      reserved.set(user.id, mail);
    }
  }
  return [...reserved.values()];
}

async function mail({ user, due }: Reserved, day: string): Promise<void> {
  const [first, ...more] = due;
  if (!first) return;
  const about = await addressed(first.open, user);
  const others = await Promise.all(more.map(({ open }) => addressed(open, user)));
  const letter = { ...reminderLetter([about, ...others], day), kind: 'reminder' };
  const error = await mailToClient(first.open, user, about, letter);
  await inTx(async () => {
    for (const { reminder } of due) await reminder.update({ state: error === null ? 'sent' : 'failed', error });
  });
}

/**
 * Mails every reminder that is due: each once, one mail a person a day. Rows first, then the mail, then whether it went; a
 * server that stops in between sends that one nevermore, and the next step goes as usual.
 *
 * @returns how many people got a mail
 */
export async function runReminders(nowMs: number): Promise<number> {
  const now = new Date(nowMs);
  if (hourOfInstant(now) < firstHour) return 0;
  const day = today(nowMs);
  const reserved = await inTx(() => reserve(day));
  for (const one of reserved) await mail(one, day);
  return reserved.length;
}
