import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import { addDays, localDateStartMs } from '@/core/load';
import { requestInput, usualReminders } from '@/schemas/request';
import { practiceTimeZone, today } from '@/server/clock';
import { storeOriginal } from '@/server/drawer';
import { checkedBody } from '@/server/media-type';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { authorizeAnswer, receiveAnswer } from '@/server/services/request-answers';
import { openRequest } from '@/server/services/request-open';
import { sendRequest } from '@/server/services/request-sending';
import { buildActor, buildEngagement } from './build';

const noRights = { view: false, record: false, decide: false, pay: false };

/** An engagement with its consultant and people of the client: one asked, one who records, one who only views, one without rights. */
export async function buildRequestScene() {
  const consultant = await buildActor({ name: 'Tom Renwick', role: 'consultant' });
  const engagement = await buildEngagement({ memberIds: [consultant.id], timeZone: 'UTC' });
  const of = (name: string, rights: Partial<typeof noRights>) =>
    buildActor({
      role: 'client',
      clientId: engagement.clientId,
      name,
      rights: { ...noRights, ...rights },
      passwordHash: 'x',
    });
  return {
    consultant,
    engagement,
    code: engagement.code,
    asked: await of('Ada Asked', {}),
    recorder: await of('Rex Recorder', { view: true, record: true }),
    viewer: await of('Vera Viewer', { view: true }),
    outsideClient: await of('Uma Unnamed', {}),
  };
}

export type RequestScene = Awaited<ReturnType<typeof buildRequestScene>>;

/** What a request asks for, as a form sends it. */
export const askInput = (userIds: number[], given: object = {}) =>
  requestInput.parse({
    requestId: randomUUID(),
    dueOn: addDays(today(), 10),
    note: 'The April week matters most.',
    internalNote: 'They are slow; call the electrician.',
    reminders: usualReminders,
    userIds,
    items: [
      { kind: 'bills', words: 'The bill of June, all pages', from: '2026-06-01', to: '2026-07-01', motorId: null },
      { kind: 'nameplate', words: 'A photo of the plate of M-1', from: null, to: null, motorId: null },
    ],
    ...given,
  });

/** A request to the one who is asked, sent by the consultant. */
export async function ask(scene: RequestScene, given: object = {}) {
  const opened = await openEngagement(scene.consultant, scene.code);
  return sendRequest(scene.consultant, opened, askInput([scene.asked.id], given));
}

/** Sends a file as somebody of the client does, past the same checks. */
export async function sendAnswer(
  actor: Actor,
  address: { code: string; number: number; position: number },
  fileName: string,
  content: string | Buffer,
) {
  const bytes = Buffer.from(content);
  const answer = await authorizeAnswer(actor, address, bytes.length);
  let mediaType = '';
  const stored = await storeOriginal(checkedBody(Readable.from([bytes]), fileName, (found) => (mediaType = found)));
  await receiveAnswer(actor, answer, { fileName, mediaType, ...stored });
  return openRequest(actor, address.code, address.number);
}

/** The begin of a JPEG file: enough to be known as one. */
export const jpeg = Buffer.concat([Buffer.from([0xff, 0xd8, 0xff, 0xe0]), Buffer.from('JFIF invented for a test')]);

/** Noon of a day on the practice's clock. [ms] */
export const noonOf = (day: string) => localDateStartMs(day, practiceTimeZone()) + 12 * 3_600_000;
