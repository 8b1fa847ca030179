import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import { usualReminders } from '../../../src/schemas/request';
import { actAs } from '../../../src/server/db/context';
import { storeOriginal } from '../../../src/server/drawer';
import { checkedBody } from '../../../src/server/media-type';
import { Motor } from '../../../src/server/models/Motor';
import { User } from '../../../src/server/models/User';
import type { Actor } from '../../../src/server/policies/actor';
import type { OpenEngagement } from '../../../src/server/services/engagements';
import { authorizeAnswer, receiveAnswer } from '../../../src/server/services/request-answers';
import { sendRequest } from '../../../src/server/services/request-sending';
import { toActor } from '../../../src/server/services/sign-in';
import { daysAgo } from './helpers';
import { randomFrom } from './random';

const quarters = 7 * 96;

/** What the plant's own logger wrote in the week the revenue meter had failed; every figure is invented. */
function loggerFile(): string {
  const random = randomFrom(20_260_420);
  const start = Date.UTC(2026, 3, 20);
  const rows = Array.from({ length: quarters }, (_, index) => {
    const stamp = new Date(start + index * 900_000).toISOString().slice(0, 16).replace('T', ' ');
    const busy = index % 96 >= 24 && index % 96 < 70 ? 1 : 0.62;
    const kwh = 540 * busy * (0.95 + 0.1 * random());
    return `${stamp},${kwh.toFixed(1)},${(kwh * 0.63).toFixed(1)}`;
  });
  return ['Interval start (local),Active energy kWh,Reactive lagging kvarh', ...rows, ''].join('\n');
}

/** An open request to the first client, with one of its three things answered. */
export async function askKestrel(consultant: Actor, opened: OpenEngagement, reader: string): Promise<void> {
  const user = await User.findOne({ where: { email: reader }, rejectOnEmpty: true });
  const motor = await Motor.findOne({
    where: { engagementId: opened.engagement.id, name: 'M-2' },
    rejectOnEmpty: true,
  });
  const { request } = await sendRequest(consultant, opened, {
    requestId: randomUUID(),
    dueOn: daysAgo(-9),
    note: 'The week in April matters most: the utility has estimated it, and your own logger may show by how much it is off.',
    internalNote: 'Mira says the electrician has the exciter sheets in the workshop.',
    reminders: usualReminders,
    userIds: [user.id],
    items: [
      {
        kind: 'intervals',
        words: 'What the plant’s own logger wrote while the revenue meter had failed',
        from: '2026-04-20',
        to: '2026-04-27',
        motorId: null,
      },
      {
        kind: 'nameplate',
        words: 'A photo of the exciter’s plate of M-2, and the motor’s data sheet if there is one',
        from: null,
        to: null,
        motorId: motor.id,
      },
      {
        kind: 'bills',
        words: 'The bill of November 2026, all pages, when it has come',
        from: '2026-11-01',
        to: '2026-12-01',
        motorId: null,
      },
    ],
  });
  await actAs({ actorId: user.id, ip: null }, () => answerFirst(toActor(user), opened.engagement.code, request.number));
}

async function answerFirst(reader: Actor, code: string, number: number): Promise<void> {
  const bytes = Buffer.from(loggerFile());
  const answer = await authorizeAnswer(reader, { code, number, position: 1 }, bytes.length);
  const fileName = 'works2-logger-april.csv';
  let mediaType = '';
  const stored = await storeOriginal(checkedBody(Readable.from([bytes]), fileName, (found) => (mediaType = found)));
  await receiveAnswer(reader, answer, { fileName, mediaType, ...stored });
}
