import { isWanted } from '../../schemas/request';
import { today } from '../clock';
import { inTx } from '../db/tx';
import { requestLetter, sentBackLetter, type AddressedRequest } from '../mail/request-letters';
import type { PlainLetter } from '../mail/plain-letter';
import { sendLetter } from '../mail/send';
import { Practice } from '../models/Practice';
import type { RequestItem } from '../models/RequestItem';
import type { RequestPerson } from '../models/RequestPerson';
import { User } from '../models/User';
import { linkFor } from './account';
import type { OpenRequest } from './request-open';
import { requestRows } from './requests';

/** The page of a request for the client's people. */
const clientPage = ({ request, opened }: OpenRequest) => `/client/${opened.engagement.code}/requests/${request.number}`;

/** A request as a mail to a person tells it, with their own link. `pick` chooses the items it tells of. */
export async function addressed(
  open: OpenRequest,
  user: User,
  pick: (item: RequestItem) => boolean = isWanted,
): Promise<AddressedRequest> {
  const { request, opened } = open;
  const [practice, rows, link] = await Promise.all([
    Practice.findOne(),
    requestRows(open),
    linkFor(user, clientPage(open)),
  ]);
  const { name = '', phone = '' } = practice ?? {};
  return {
    content: {
      practice: { name, phone },
      by: rows.users.get(request.madeById ?? 0) ?? { name, email: '' },
      recipientName: user.name,
      client: opened.client.name,
      site: opened.site.name,
      dueOn: request.dueOn,
      note: request.note ?? '',
      items: rows.items.filter(pick).map(({ kind, words, periodFrom: from, periodTo: to, motorId, reason, state }) => ({
        kind,
        words,
        period: from && to ? { from, to } : null,
        motor: rows.motors.find(({ id }) => id === motorId)?.name ?? null,
        reason: state === 'sent-back' ? reason : null,
      })),
    },
    link: link.url,
    linkEnds: link.expiresAt?.toISOString() ?? null,
  };
}

/** Mails a letter about a request to somebody of the client; answers go to who made it. Null where it went, else why not. */
export async function mailToClient(
  open: Pick<OpenRequest, 'opened'>,
  user: User,
  first: AddressedRequest,
  letter: PlainLetter & { kind: string },
): Promise<string | null> {
  const { by } = first.content;
  const sent = await sendLetter({
    to: { name: user.name, address: user.email },
    replyTo: by.email ? { name: by.name, address: by.email } : undefined,
    ...letter,
    engagementId: open.opened.engagement.id,
    userId: user.id,
  });
  return sent.error;
}

/** Mails a request to people whose rows are marked as sending, and marks each as it went. */
export async function deliverRequest(open: OpenRequest, people: RequestPerson[]): Promise<void> {
  for (const person of people) {
    const user = await User.findByPk(person.userId, { rejectOnEmpty: true });
    const request = await addressed(open, user);
    const error = await mailToClient(open, user, request, { ...requestLetter(request, today()), kind: 'request' });
    await inTx(() =>
      person.update(error === null ? { state: 'sent', sentAt: new Date(), error } : { state: 'failed', error }),
    );
  }
}

/** Tells the people of a request that one thing came back. One that does not go stands on Today and on the page. */
export async function tellSentBack(open: OpenRequest, item: RequestItem): Promise<void> {
  const ids = open.people.map(({ userId }) => userId);
  for (const user of await User.findAll({ where: { id: ids, disabledAt: null } })) {
    const request = await addressed(open, user, ({ id }) => id === item.id);
    await mailToClient(open, user, request, { ...sentBackLetter(request, today()), kind: 'sent-back' });
  }
}
