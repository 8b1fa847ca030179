import { simpleParser } from 'mailparser';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { addDays } from '@/core/load';
import { requestInput } from '@/schemas/request';
import { today } from '@/server/clock';
import { inTx } from '@/server/db/tx';
import { DataRequest } from '@/server/models/DataRequest';
import { RequestPerson } from '@/server/models/RequestPerson';
import type { Actor } from '@/server/policies/actor';
import { canAnswerRequest, canAskClient, canOpenFile, canReadRequest } from '@/server/policies/request';
import { clientFrame, clientHome, requestFrame } from '@/server/services/client-pages';
import { openEngagement } from '@/server/services/engagements';
import { requestDraft } from '@/server/services/request-draft';
import { openRequest, openRequestAsStaff, openRequestToAnswer } from '@/server/services/request-open';
import { changeRequest, sendRequest } from '@/server/services/request-sending';
import { clientRequest, listRequests, staffRequest } from '@/server/services/requests';
import { todayOf } from '@/server/services/today';
import { buildActor } from '../setup/build';
import { startCatcher, type Catcher } from '../setup/findings';
import { ask, askInput, buildRequestScene, type RequestScene } from '../setup/requests';

let catcher: Catcher;
let scene: RequestScene;
beforeAll(async () => {
  catcher = await startCatcher();
});
afterAll(() => catcher.close());
beforeEach(async () => {
  scene = await buildRequestScene();
  catcher.received.length = 0;
  catcher.refuses = false;
});

describe('policies of requests', () => {
  const rights = { view: false, record: false, decide: false, pay: false };
  const person = (given: Partial<Actor>): Actor => ({
    id: 1,
    email: 'a@b.example',
    name: 'A',
    role: 'client',
    clientId: 7,
    rights,
    ...given,
  });
  const scope = { clientId: 7, memberIds: [20], addressedIds: [1] };
  // Who: may ask, may read, may answer, may open a file sent by person 1.
  const table: [string, Actor, [boolean, boolean, boolean, boolean]][] = [
    ['partner', person({ id: 30, role: 'partner', clientId: null }), [true, true, false, true]],
    ['member', person({ id: 20, role: 'consultant', clientId: null }), [true, true, false, true]],
    ['consultant elsewhere', person({ id: 21, role: 'consultant', clientId: null }), [false, false, false, false]],
    ['addressed, without rights', person({}), [false, true, true, true]],
    ['not addressed, without rights', person({ id: 2 }), [false, false, false, false]],
    ['viewer', person({ id: 2, rights: { ...rights, view: true } }), [false, true, false, false]],
    [
      'viewer who records',
      person({ id: 2, rights: { ...rights, view: true, record: true } }),
      [false, true, true, false],
    ],
    ['recorder who may not view', person({ id: 2, rights: { ...rights, record: true } }), [false, false, false, false]],
    ['addressed id of another client', person({ clientId: 8 }), [false, false, false, false]],
  ];
  it.each(table)('%s', (_, actor, expected) => {
    const found = [
      canAskClient(actor, scope),
      canReadRequest(actor, scope),
      canAnswerRequest(actor, scope),
      canOpenFile(actor, scope, { uploadedById: 1 }),
    ];
    expect(found).toEqual(expected);
  });
});

describe('requestInput', () => {
  const fault = (given: object) => {
    const { items, ...rest } = askInput([1]);
    return requestInput.safeParse({ ...rest, items, ...given }).error?.issues[0]?.path.join('.');
  };
  it('wants people, things, a day, whole periods', () => {
    const thing = { kind: 'bills', words: 'Bills', from: null, to: null, motorId: null };
    expect(fault({ userIds: [] })).toBe('userIds');
    expect(fault({ items: [] })).toBe('items');
    expect(fault({ dueOn: '2026-02-30' })).toBe('dueOn');
    expect(fault({ items: [{ ...thing, words: ' ' }] })).toBe('items.0.words');
    expect(fault({ items: [{ ...thing, from: '2026-06-01' }] })).toBe('items.0.to');
    expect(fault({ items: [{ ...thing, from: '2026-06-01', to: '2026-06-01' }] })).toBe('items.0.to');
    expect(fault({ reminders: { daysBefore: 0, onDue: true, everyDaysAfter: null } })).toBe('reminders.daysBefore');
    expect(fault({})).toBeUndefined();
  });
});

describe('opening a request', () => {
  it('tells people of another client, and consultants elsewhere, nothing of it', async () => {
    const { request } = await ask(scene);
    const other = await buildRequestScene();
    for (const actor of [
      other.asked,
      other.recorder,
      other.consultant,
      await buildActor({ role: 'client' }),
      scene.outsideClient,
    ]) {
      await expect(openRequest(actor, scene.code, request.number)).rejects.toMatchObject({ status: 404 });
      await expect(openRequestToAnswer(actor, scene.code, request.number)).rejects.toMatchObject({ status: 404 });
      await expect(openRequestAsStaff(actor, scene.code, request.number)).rejects.toMatchObject({ status: 404 });
    }
    await expect(openRequest(scene.asked, scene.code, request.number + 1)).rejects.toMatchObject({ status: 404 });
    await expect(openRequest(scene.asked, other.code, request.number)).rejects.toMatchObject({ status: 404 });
  });

  it('lets the client’s people read and answer by their rights, and decide nothing', async () => {
    await ask(scene);
    for (const actor of [scene.asked, scene.recorder]) {
      await expect(openRequestToAnswer(actor, scene.code, 1)).resolves.toBeTruthy();
      await expect(openRequestAsStaff(actor, scene.code, 1)).rejects.toMatchObject({ status: 403 });
    }
    await expect(openRequest(scene.viewer, scene.code, 1)).resolves.toBeTruthy();
    await expect(openRequestToAnswer(scene.viewer, scene.code, 1)).rejects.toMatchObject({ status: 403 });
    await expect(openRequestToAnswer(scene.consultant, scene.code, 1)).rejects.toMatchObject({ status: 403 });
  });

  it('numbers requests in each engagement anew', async () => {
    const other = await buildRequestScene();
    expect((await ask(scene)).request.number).toBe(1);
    expect((await ask(scene)).request.number).toBe(2);
    expect((await ask(other)).request.number).toBe(1);
  });

  it('shows the client nothing the practice keeps for itself', async () => {
    const open = await ask(scene);
    const seen = JSON.stringify(await clientRequest(scene.asked, open));
    expect(seen).toContain('The April week matters most.');
    expect(seen).not.toContain('call the electrician');
    expect(JSON.stringify(await staffRequest(open))).toContain('call the electrician');
  });
});

describe('sendRequest', () => {
  const opened = () => openEngagement(scene.consultant, scene.code);

  it('refuses a passed day, people of others, closed accounts and motors of others, and writes nothing', async () => {
    const other = await buildRequestScene();
    const closed = await buildActor({ role: 'client', clientId: scene.engagement.clientId, disabledAt: new Date() });
    const items = [{ kind: 'nameplate', words: 'A photo', from: null, to: null, motorId: 987_654 }];
    const tries: [object, number[], string][] = [
      [{ dueOn: addDays(today(), -1) }, [scene.asked.id], 'dueOn'],
      [{}, [other.asked.id], 'userIds'],
      [{}, [closed.id], 'userIds'],
      [{ items }, [scene.asked.id], 'items.0.motorId'],
    ];
    for (const [given, ids, field] of tries) {
      await expect(sendRequest(scene.consultant, await opened(), askInput(ids, given))).rejects.toMatchObject({
        status: 422,
        fields: { [field]: expect.any(Array) },
      });
    }
    expect(await DataRequest.count({ where: { engagementId: scene.engagement.id } })).toBe(0);
    expect(catcher.received).toHaveLength(0);
  });

  it('asks nothing in a closed engagement', async () => {
    const one = await opened();
    await inTx(() => one.engagement.update({ closedAt: new Date() }));
    await expect(sendRequest(scene.consultant, one, askInput([scene.asked.id]))).rejects.toMatchObject({ status: 409 });
  });

  it('mails each person what is asked, by when and where to, as text and HTML, with answers to who asks', async () => {
    await ask(scene, { userIds: [scene.asked.id, scene.recorder.id] });
    expect(catcher.received).toHaveLength(2);
    const mail = await simpleParser(catcher.received[0]!);
    expect(mail.replyTo?.value[0]?.address).toBe(scene.consultant.email);
    expect(mail.subject).toMatch(/^Works: two things are needed by /);
    for (const text of [mail.text ?? '', mail.html || '']) {
      expect(text).toContain('The bill of June, all pages');
      expect(text).toContain('1 Jun 2026 to 30 Jun 2026');
      expect(text).toContain('A photo of the plate of M-1');
      expect(text).toContain('The April week matters most.');
      expect(text).not.toContain('call the electrician');
      expect(text).toContain(`/sign-in?next=${encodeURIComponent(`/client/${scene.code}/requests/1`)}`);
    }
  });

  it('gives who has no password yet a link to choose one, which leads to the request', async () => {
    const fresh = await buildActor({ role: 'client', clientId: scene.engagement.clientId });
    await ask(scene, { userIds: [fresh.id] });
    const mail = await simpleParser(catcher.received[0]!);
    expect(mail.text).toMatch(/\/invitation\/\S+/);
    expect(mail.text).toContain('The link is yours alone');
  });

  it('sends once when the button is pressed twice, and when the request comes again later', async () => {
    const input = askInput([scene.asked.id]);
    const one = await opened();
    const both = await Promise.all([
      sendRequest(scene.consultant, one, input),
      sendRequest(scene.consultant, one, input),
    ]);
    const again = await sendRequest(scene.consultant, one, input);
    expect([...both, again].map(({ request }) => request.number)).toEqual([1, 1, 1]);
    expect(catcher.received).toHaveLength(1);
  });

  it('keeps a request whose mail does not go, tells Today, and mails it again when told', async () => {
    catcher.refuses = true;
    const open = await ask(scene);
    const failed = await staffRequest(await openRequestAsStaff(scene.consultant, scene.code, 1));
    expect(failed.people).toMatchObject([{ state: 'failed', error: expect.stringContaining('refused the letter') }]);
    const { waiting } = await todayOf(scene.consultant);
    expect(waiting.find(({ id }) => id.startsWith('letter-'))?.href).toBe(`/engagements/${scene.code}/requests`);
    catcher.refuses = false;
    const mail = { change: 'mail' as const, userId: scene.asked.id, version: open.request.version };
    await changeRequest(await openRequestAsStaff(scene.consultant, scene.code, 1), mail);
    expect(await RequestPerson.findOne({ where: { requestId: open.request.id } })).toMatchObject({ state: 'sent' });
    await expect(changeRequest(await openRequestAsStaff(scene.consultant, scene.code, 1), mail)).rejects.toMatchObject({
      status: 409,
    });
    expect(catcher.received).toHaveLength(1);
  });
});

describe('changeRequest', () => {
  it('closes, opens again, moves the day and withdraws, each against the version seen', async () => {
    const open = await ask(scene);
    const change = async (input: object) => {
      const found = await openRequestAsStaff(scene.consultant, scene.code, 1);
      await changeRequest(found, { version: found.request.version, ...input } as never);
      return found.request;
    };
    await expect(changeRequest(open, { change: 'close', version: 99 })).rejects.toMatchObject({ code: 'stale' });
    await expect(change({ change: 'reopen' })).rejects.toMatchObject({ status: 409 });
    await expect(change({ change: 'due', dueOn: addDays(today(), -1) })).rejects.toMatchObject({ status: 422 });
    expect((await change({ change: 'due', dueOn: addDays(today(), 30) })).dueOn).toBe(addDays(today(), 30));
    expect((await change({ change: 'close' })).state).toBe('closed');
    await expect(change({ change: 'due', dueOn: addDays(today(), 40) })).rejects.toMatchObject({ status: 409 });
    expect((await change({ change: 'reopen' })).endedAt).toBeNull();
    expect((await change({ change: 'withdraw' })).state).toBe('withdrawn');
    expect(await listRequests(await openEngagement(scene.consultant, scene.code))).toMatchObject([
      { state: 'withdrawn', items: 2, answered: 0 },
    ]);
  });
});

describe('the client’s pages', () => {
  it('have a tap for what is asked only where something was, and lead who may read nothing else there', async () => {
    expect((await clientFrame(scene.viewer, scene.code)).taps.map(({ id }) => id)).not.toContain('requests');
    await expect(requestFrame(scene.asked, scene.code)).rejects.toMatchObject({ status: 404 });
    expect(await clientHome(scene.asked)).toBeNull();
    await ask(scene);
    expect((await clientFrame(scene.viewer, scene.code)).taps.at(-1)).toMatchObject({ id: 'requests', state: 'open' });
    const frame = await requestFrame(scene.asked, scene.code);
    expect(frame.taps.map(({ id }) => id)).toEqual(['requests']);
    expect(await clientHome(scene.asked)).toBe(`/client/${scene.code}/requests`);
    await expect(clientFrame(scene.asked, scene.code)).rejects.toMatchObject({ status: 404 });
    await expect(requestFrame(scene.outsideClient, scene.code)).rejects.toMatchObject({ status: 404 });
  });
});

describe('Today', () => {
  it('tells what is with the client, then that it is overdue, and offers to ask where something is missing', async () => {
    const rows = async (on?: string) =>
      (await todayOf(scene.consultant, on)).waiting.filter(({ where }) => where.includes(scene.code));
    expect((await rows()).find(({ id }) => id.startsWith('station-'))?.other?.href).toBe(
      `/engagements/${scene.code}/requests/new?about=bills`,
    );
    await ask(scene);
    const id = `request-${scene.engagement.id}-1`;
    expect((await rows()).find((row) => row.id === id)).toMatchObject({ group: 'others', dateIs: 'due' });
    expect((await rows()).some((row) => row.id.startsWith('station-'))).toBe(false);
    expect((await rows(addDays(today(), 14))).find((row) => row.id === id)).toMatchObject({
      group: 'overdue',
      days: 4,
    });
  });
});

describe('the draft of a further request', () => {
  it('leaves out what an open one asks for and nobody answered, and says which', async () => {
    const opened = await openEngagement(scene.consultant, scene.code);
    const bills = async () =>
      (await requestDraft(scene.consultant, opened)).items.filter(({ kind }) => kind === 'bills');
    const [first] = await bills();
    expect(first).toMatchObject({ askedIn: null });
    const { kind, words, from, to, motorId } = first!;
    const { request } = await ask(scene, { items: [{ kind, words, from, to, motorId }] });
    expect((await bills()).map(({ askedIn }) => askedIn)).toEqual([request.number]);
  });
});
