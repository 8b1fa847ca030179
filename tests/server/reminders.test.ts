import { simpleParser } from 'mailparser';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { addDays } from '@/core/load';
import { today } from '@/server/clock';
import { inTx } from '@/server/db/tx';
import { RequestReminder } from '@/server/models/RequestReminder';
import { User } from '@/server/models/User';
import { openEngagement } from '@/server/services/engagements';
import { nextReminderDay, reminderSteps, stepOn } from '@/server/services/reminder-days';
import { runReminders } from '@/server/services/reminders';
import { answerInWords } from '@/server/services/request-answers';
import { runDigests } from '@/server/services/request-digests';
import { decideItem } from '@/server/services/request-items';
import { itemOf, openRequestAsStaff, openRequestToAnswer } from '@/server/services/request-open';
import { changeRequest } from '@/server/services/request-sending';
import { startCatcher, type Catcher } from '../setup/findings';
import { ask, buildRequestScene, noonOf, sendAnswer, type RequestScene } from '../setup/requests';

let catcher: Catcher;
let scene: RequestScene;
const due = addDays(today(), 10);
const on = (days: number) => runReminders(noonOf(addDays(due, days)));

beforeAll(async () => {
  catcher = await startCatcher();
});
afterAll(() => catcher.close());
beforeEach(async () => {
  // Requests of other tests must not be due here.
  await closeAll();
  scene = await buildRequestScene();
  catcher.refuses = false;
});
const forget = () => (catcher.received.length = 0);
const subjects = async () => Promise.all(catcher.received.map(async (raw) => (await simpleParser(raw)).subject ?? ''));

async function closeAll() {
  const { DataRequest } = await import('@/server/models/DataRequest');
  await inTx(async () => {
    for (const request of await DataRequest.findAll({ where: { state: 'open' } }))
      await request.update({ state: 'closed' });
  });
}

describe('reminderSteps', () => {
  const rule = { daysBefore: 3, onDue: true, everyDaysAfter: 7 };
  const ruled = { dueOn: '2026-12-15', sentOn: '2026-12-01', rule };
  it('counts before, on and after the due day', () => {
    // 15 - 3 = 12; 15; then 22, 29 and 5 January: weekly, three times.
    expect(reminderSteps(ruled).map(({ day }) => day)).toEqual([
      '2026-12-12',
      '2026-12-15',
      '2026-12-22',
      '2026-12-29',
      '2027-01-05',
    ]);
    expect(stepOn(ruled, '2026-12-11')).toBeNull();
    expect(stepOn(ruled, '2026-12-13')).toMatchObject({ step: 0 });
    expect(stepOn(ruled, '2027-03-01')).toMatchObject({ step: 4 });
    expect(nextReminderDay(ruled, '2026-12-15')).toBe('2026-12-22');
    expect(nextReminderDay(ruled, '2027-01-05')).toBeNull();
  });
  it('leaves out what falls on the day of sending or before it, and what the rule leaves out', () => {
    expect(reminderSteps({ ...ruled, sentOn: '2026-12-12' })[0]?.day).toBe('2026-12-15');
    expect(reminderSteps({ ...ruled, rule: { daysBefore: null, onDue: false, everyDaysAfter: null } })).toEqual([]);
  });
});

describe('runReminders', () => {
  it('reminds three days before, on the day and weekly after it, each once, and then no more', async () => {
    await ask(scene);
    forget();
    const went: number[] = [];
    for (let days = -9; days <= 40; days++) if ((await on(days)) > 0) went.push(days);
    expect(went).toEqual([-3, 0, 7, 14, 21]);
    expect(await subjects()).toEqual([
      expect.stringMatching(/^Works: two things still needed by /),
      'Works: two things needed today',
      ...Array<string>(3).fill('Works: two things still missing'),
    ]);
    const mail = await simpleParser(catcher.received[0]!);
    for (const text of [mail.text ?? '', mail.html || '']) {
      expect(text).toContain('The bill of June, all pages');
      expect(text).not.toContain('call the electrician');
    }
  });

  it('sends nothing twice on a day, however often and however many at once it looks', async () => {
    await ask(scene);
    forget();
    const at = noonOf(addDays(due, -3));
    const counts = await Promise.all([runReminders(at), runReminders(at), runReminders(at + 1000)]);
    expect(counts.sort()).toEqual([0, 0, 1]);
    expect(await runReminders(at + 3_600_000)).toBe(0);
    expect(catcher.received).toHaveLength(1);
  });

  it('sends nothing in the night', async () => {
    await ask(scene);
    forget();
    expect(await runReminders(noonOf(addDays(due, -3)) - 5 * 3_600_000)).toBe(0);
    expect(await runReminders(noonOf(addDays(due, -3)) - 4 * 3_600_000)).toBe(1);
  });

  it('sends only the newest of what a server slept through', async () => {
    await ask(scene);
    forget();
    expect(await on(8)).toBe(1);
    expect(await subjects()).toEqual(['Works: two things still missing']);
    expect(await on(9)).toBe(0);
  });

  it('never sends one it reserved before it stopped, and goes on with the next step', async () => {
    const { request } = await ask(scene);
    forget();
    const key = { requestId: request.id, userId: scene.asked.id, dueOn: due, step: 0 };
    await inTx(() => RequestReminder.create({ ...key, day: addDays(due, -3), state: 'sending', error: null }));
    expect([await on(-3), await on(-2), await on(-1)]).toEqual([0, 0, 0]);
    expect(await on(0)).toBe(1);
  });

  it('tries a mail that did not go again the day after, and never more than once a day', async () => {
    await ask(scene);
    forget();
    catcher.refuses = true;
    expect([await on(-3), await on(-3)]).toEqual([1, 0]);
    expect(catcher.received).toHaveLength(0);
    catcher.refuses = false;
    expect([await on(-3), await on(-2), await on(-1)]).toEqual([0, 1, 0]);
    expect(await RequestReminder.findAll({ where: { userId: scene.asked.id } })).toMatchObject([{ state: 'sent' }]);
  });

  it('writes to a person once a day about everything that is due', async () => {
    await ask(scene);
    await ask(scene);
    forget();
    expect(await on(-3)).toBe(1);
    const mail = await simpleParser(catcher.received[0]!);
    expect(mail.subject).toBe('Still needed for 2 audits of power bills');
    expect(mail.text).toContain(encodeURIComponent(`/client/${scene.code}/requests/1`));
    expect(mail.text).toContain(encodeURIComponent(`/client/${scene.code}/requests/2`));
  });

  it('reminds of what is left, and of nothing once all is answered', async () => {
    await ask(scene);
    forget();
    await sendAnswer(scene.asked, { code: scene.code, number: 1, position: 1 }, 'june.csv', 'a,b\n1,2\n');
    await on(-3);
    const mail = await simpleParser(catcher.received[0]!);
    expect(mail.text).not.toContain('The bill of June');
    expect(mail.text).toContain('A photo of the plate of M-1');
    const open = await openRequestToAnswer(scene.asked, scene.code, 1);
    const item = await itemOf(open, 2);
    await answerInWords(scene.asked, { open, item }, { words: 'The plate was painted over.', version: item.version });
    expect(await on(0)).toBe(0);
  });

  it('reminds again of what was sent back', async () => {
    const open = await ask(scene, {
      items: [{ kind: 'bills', words: 'The bill of June', from: null, to: null, motorId: null }],
    });
    await sendAnswer(scene.asked, { code: scene.code, number: 1, position: 1 }, 'june.csv', 'a,b\n1,2\n');
    expect(await on(-3)).toBe(0);
    const item = await itemOf(open, 1);
    forget();
    await decideItem(open, item, { to: 'sent-back', reason: 'Page 2 is missing.', version: item.version });
    expect(await subjects()).toEqual(['Works: one thing needs another look']);
    expect((await simpleParser(catcher.received[0]!)).text).toContain('Page 2 is missing.');
    expect(await on(0)).toBe(1);
  });

  it('goes by a moved day, with all steps of it', async () => {
    const { request } = await ask(scene);
    expect(await on(-3)).toBe(1);
    const open = await openRequestAsStaff(scene.consultant, scene.code, 1);
    await changeRequest(open, { change: 'due', dueOn: addDays(due, 20), version: request.version });
    expect([await on(0), await on(7), await on(17), await on(20)]).toEqual([0, 0, 1, 1]);
  });

  it('leaves alone closed and withdrawn requests, closed engagements and closed accounts', async () => {
    const stop: ((one: RequestScene) => Promise<unknown>)[] = [
      async (one) => {
        const open = await openRequestAsStaff(one.consultant, one.code, 1);
        return changeRequest(open, { change: 'close', version: open.request.version });
      },
      async (one) => {
        const open = await openRequestAsStaff(one.consultant, one.code, 1);
        return changeRequest(open, { change: 'withdraw', version: open.request.version });
      },
      async (one) => {
        const { engagement } = await openEngagement(one.consultant, one.code);
        return inTx(() => engagement.update({ closedAt: new Date() }));
      },
      async (one) => {
        const user = await User.findByPk(one.asked.id, { rejectOnEmpty: true });
        return inTx(() => user.update({ disabledAt: new Date() }));
      },
    ];
    for (const end of stop) {
      const one = await buildRequestScene();
      await ask(one);
      await end(one);
      expect(await on(-3)).toBe(0);
    }
    await ask(scene);
    expect(await on(-3)).toBe(1);
  });
});

describe('runDigests', () => {
  const minutes = (count: number) => Date.now() + count * 60_000;
  const send = (name: string, content: string) =>
    sendAnswer(scene.asked, { code: scene.code, number: 1, position: 1 }, name, content);

  it('tells the practice once of many files, after the client has paused, and then only of what is new', async () => {
    await ask(scene);
    forget();
    for (const month of ['june', 'july', 'august']) await send(`${month}.csv`, `a,b\n1,${month}\n`);
    expect(await runDigests(minutes(5))).toBe(0);
    expect((await Promise.all([runDigests(minutes(16)), runDigests(minutes(16))])).sort()).toEqual([0, 1]);
    expect(await runDigests(minutes(300))).toBe(0);
    expect(catcher.received).toHaveLength(1);
    const mail = await simpleParser(catcher.received[0]!);
    expect([mail.to].flat()[0]?.value[0]?.address).toBe(scene.consultant.email);
    expect(mail.subject).toMatch(/sent 3 files for request 1$/);
    for (const name of ['june.csv', 'july.csv', 'august.csv']) expect(mail.text).toContain(name);
    expect(mail.text).toContain('1 thing is still open.');
    await send('september.csv', 'a,b\n1,9\n');
    expect(await runDigests(minutes(16))).toBe(1);
    const second = await simpleParser(catcher.received[1]!);
    expect(second.text).toContain('september.csv');
    expect(second.text).not.toContain('june.csv');
  });

  it('tells of words that stand for a file', async () => {
    await ask(scene);
    const open = await openRequestToAnswer(scene.asked, scene.code, 1);
    const item = await itemOf(open, 2);
    await answerInWords(scene.asked, { open, item }, { words: 'Painted over in 1998.', version: item.version });
    forget();
    expect(await runDigests(minutes(16))).toBe(1);
    expect((await simpleParser(catcher.received[0]!)).text).toContain('Not there: Painted over in 1998.');
  });
});
