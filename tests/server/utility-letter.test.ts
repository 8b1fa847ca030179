import { createHash, randomUUID } from 'node:crypto';
import { simpleParser } from 'mailparser';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { utilityLetterInput, usualWords } from '@/schemas/utility-letter';
import { inTx } from '@/server/db/tx';
import { sequelize } from '@/server/db/connection';
import { Letter } from '@/server/models/Letter';
import { UtilityLetter } from '@/server/models/UtilityLetter';
import { openEngagement } from '@/server/services/engagements';
import { todayOf } from '@/server/services/today';
import {
  listUtilityLetters,
  openUtilityLetter,
  sendAgain,
  sendUtilityLetter,
  utilityLetterDraft,
} from '@/server/services/utility-letters';
import { buildActor } from '../setup/build';
import { buildFindings, findingsOf, reprint, startCatcher, type Catcher, type FindingsScene } from '../setup/findings';

let catcher: Catcher;
beforeAll(async () => {
  catcher = await startCatcher();
});
afterAll(() => catcher.close());

// As worked in finding-states: June's demand 2,320.00 too much and 116.00 of tax on it; July's service 50.00 and 2.50.
const overBilled = { june: { demand: 18_560, tax: 2_749.75 }, july: { service: 450, tax: 2_532 } };
let scene: FindingsScene;

beforeEach(async () => {
  scene = await buildFindings(overBilled);
  catcher.received.length = 0;
  catcher.refuses = false;
});

const words = {
  requestId: '',
  way: 'mail' as const,
  name: 'Test Valley Power, Accounts',
  address: 'accounts@test-valley.example',
  postal: '',
  account: '77-3',
  ...usualWords,
  replyBy: '2026-12-31',
};

async function inputOf(letters: string[], given: object = {}) {
  const findings = (await findingsOf(scene)).filter(({ letter }) => letter !== null && letters.includes(letter));
  const chosen = findings.map(({ id, version }) => ({ id, version }));
  return utilityLetterInput.parse({ ...words, requestId: randomUUID(), findings: chosen, ...given });
}

const open = () => openEngagement(scene.actor, scene.engagement.code);
const states = async () => (await findingsOf(scene)).map(({ state }) => state);

describe('utilityLetterInput', () => {
  const fault = (given: object) => {
    const input = { ...words, requestId: randomUUID(), findings: [{ id: 1, version: 0 }], ...given };
    return utilityLetterInput.safeParse(input).error?.issues.map(({ path, message }) => [path.join('.'), message]);
  };

  it('asks for findings, who gets it, an address to mail to, a day, and fields there are', () => {
    expect(fault({ findings: [] })?.[0]?.[0]).toBe('findings');
    expect(fault({ name: ' ' })?.[0]?.[0]).toBe('name');
    expect(fault({ address: 'a@b.example, c@d.example' })?.[0]?.[0]).toBe('address');
    expect(fault({ address: '', way: 'post' })).toBeUndefined();
    expect(fault({ replyBy: '2026-13-01' })?.[0]?.[0]).toBe('replyBy');
    expect(fault({ opening: 'We claim {totl}.' })?.[0]?.[1]).toContain('There is no field {totl}.');
    expect(fault({ name: 'A\nBcc: b@c.example' })?.[0]?.[0]).toBe('name');
  });
});

describe('utilityLetterDraft', () => {
  it('is closed to strangers and the client', async () => {
    const client = await buildActor({ role: 'client', clientId: scene.engagement.clientId });
    for (const actor of [await buildActor(), client]) {
      await expect(utilityLetterDraft(actor, scene.engagement.code)).rejects.toMatchObject({ status: 404 });
    }
  });

  it('drafts every open finding with clause, amounts and working, and the words it begins with', async () => {
    const { content } = await utilityLetterDraft(scene.actor, scene.engagement.code);
    expect(content).toMatchObject({ number: 1, addressee: { name: 'Test Valley Power' }, ...usualWords });
    const [june] = content.claims;
    expect(june).toMatchObject({
      letter: 'A',
      clause: '4',
      billedMinor: 1_856_000,
      scheduledMinor: 1_624_000,
      differenceMinor: 232_000,
      amountMinor: 243_600,
    });
    expect(june?.words).toContain('Peak on peak read at all hours');
    expect(june?.working.at(-1)).toMatchObject({ label: 'Demand, clause 4', result: '16,240.00\u00a0USD' });
  });
});

describe('sendUtilityLetter', () => {
  it('mails what it says in words and figures, answers to the person, and raises its findings', async () => {
    const sent = await sendUtilityLetter(scene.actor, await open(), await inputOf(['A', 'B']));
    expect(sent).toMatchObject({ number: 1, state: 'sent', totalMinor: 248_850, letters: ['A', 'B'] });
    expect(catcher.received).toHaveLength(1);
    const mail = await simpleParser(catcher.received[0]!);
    expect(mail.replyTo?.value[0]?.address).toBe(scene.actor.email);
    // 2,436.00 + 52.50 = 2,488.50.
    for (const text of [mail.text ?? '', mail.html || '']) {
      expect(text).toContain('2,488.50\u00a0USD');
      expect(text).toContain('18,560.00\u00a0USD');
      expect(text).toContain('Thu 31 Dec 2026');
      expect(text).not.toMatch(/\{[a-z]+\}/i);
    }
    expect(await states()).toEqual(['raised', 'raised']);
    const [finding] = await findingsOf(scene);
    expect(finding).toMatchObject({ letterNumber: 1, changes: [{ note: 'Letter 1 to Test Valley Power, Accounts' }] });
  });

  it('freezes content and page: what is corrected later changes nothing in it', async () => {
    await sendUtilityLetter(scene.actor, await open(), await inputOf(['A']));
    const before = await openUtilityLetter(scene.actor, scene.engagement.code, 1);
    expect(before.digest).toBe(createHash('sha256').update(JSON.stringify(before.content)).digest('hex'));
    await reprint(scene, '2026-06-01', 'Demand', 1_700_000);
    const after = await openUtilityLetter(scene.actor, scene.engagement.code, 1);
    expect(after.html).toBe(before.html);
    expect(after.html).toContain('2,436.00\u00a0USD');
    expect(after.html).toContain('77-3');
    await expect(openUtilityLetter(await buildActor(), scene.engagement.code, 1)).rejects.toMatchObject({
      status: 404,
    });
  });

  it('sends once when the button is pressed twice, and when the request comes again later', async () => {
    const input = await inputOf(['A']);
    const opened = await open();
    const both = await Promise.all([
      sendUtilityLetter(scene.actor, opened, input),
      sendUtilityLetter(scene.actor, opened, input),
    ]);
    const again = await sendUtilityLetter(scene.actor, opened, input);
    expect([...both, again].map(({ number }) => number)).toEqual([1, 1, 1]);
    expect(catcher.received).toHaveLength(1);
  });

  it('takes no finding that is in another letter, changed meanwhile, or of another engagement', async () => {
    const first = await inputOf(['A']);
    const second = { ...first, requestId: randomUUID() };
    const opened = await open();
    await sendUtilityLetter(scene.actor, opened, first);
    await expect(sendUtilityLetter(scene.actor, opened, second)).rejects.toMatchObject({ status: 409 });
    const stale = await inputOf(['B']);
    await reprint(scene, '2026-07-01', 'Service', 46_000);
    await expect(sendUtilityLetter(scene.actor, opened, stale)).rejects.toMatchObject({ status: 409, code: 'stale' });
    const other = await buildFindings(overBilled, { actor: scene.actor });
    const foreign = {
      ...first,
      requestId: randomUUID(),
      findings: [{ id: (await findingsOf(other))[0]!.id, version: 0 }],
    };
    await expect(sendUtilityLetter(scene.actor, opened, foreign)).rejects.toMatchObject({ status: 409 });
    expect(catcher.received).toHaveLength(1);
  });

  it('leaves findings open where the mail does not go, tells Today, and sends again when told', async () => {
    catcher.refuses = true;
    const failed = await sendUtilityLetter(scene.actor, await open(), await inputOf(['A']));
    expect(failed).toMatchObject({ state: 'failed', error: expect.stringContaining('refused the letter') });
    expect(await states()).toEqual(['open', 'open']);
    const { waiting } = await todayOf(scene.actor);
    expect(waiting.find(({ id }) => id.startsWith('letter-'))?.href).toContain('/tariff#findings');
    catcher.refuses = false;
    const row = await openUtilityLetter(scene.actor, scene.engagement.code, 1);
    await expect(sendAgain(scene.actor, row, failed.version - 1)).rejects.toMatchObject({ status: 409, code: 'stale' });
    expect(await sendAgain(scene.actor, row, failed.version)).toMatchObject({ state: 'sent' });
    expect(await states()).toEqual(['raised', 'open']);
    await expect(sendAgain(scene.actor, row, row.version)).rejects.toMatchObject({ status: 409, code: 'conflict' });
    expect(await Letter.count({ where: { kind: 'utility', engagementId: scene.engagement.id, state: 'sent' } })).toBe(
      1,
    );
  });

  it('a failed letter lets its findings go into another one, and is then not sent again', async () => {
    catcher.refuses = true;
    await sendUtilityLetter(scene.actor, await open(), await inputOf(['A']));
    catcher.refuses = false;
    await sendUtilityLetter(scene.actor, await open(), await inputOf(['A', 'B']));
    const first = await openUtilityLetter(scene.actor, scene.engagement.code, 1);
    await expect(sendAgain(scene.actor, first, first.version)).rejects.toMatchObject({ status: 409 });
    expect(catcher.received).toHaveLength(1);
  });

  it('a server that stopped in between sends nothing by itself: the letter is told as uncertain', async () => {
    await sendUtilityLetter(scene.actor, await open(), await inputOf(['A'], { way: 'post' }));
    const row = await openUtilityLetter(scene.actor, scene.engagement.code, 1);
    await inTx(() => row.update({ way: 'mail', state: 'sending' }));
    expect(await listUtilityLetters(scene.engagement.id)).toMatchObject([{ state: 'sending', isUncertain: false }]);
    await expect(sendAgain(scene.actor, row, row.version)).rejects.toMatchObject({ status: 409, code: 'conflict' });
    await sequelize.query("UPDATE utility_letters SET updated_at = '2020-01-01 00:00:00.000 +00:00' WHERE id = $id", {
      bind: { id: row.id },
    });
    expect(await listUtilityLetters(scene.engagement.id)).toMatchObject([{ isUncertain: true }]);
    expect(catcher.received).toHaveLength(0);
  });

  it('keeps a posted one without mail and raises its findings', async () => {
    const posted = await sendUtilityLetter(
      scene.actor,
      await open(),
      await inputOf(['B'], { way: 'post', address: '' }),
    );
    expect(posted).toMatchObject({ way: 'post', state: 'sent' });
    expect(catcher.received).toHaveLength(0);
    expect(await states()).toEqual(['open', 'raised']);
    expect(await UtilityLetter.count({ where: { engagementId: scene.engagement.id } })).toBe(1);
  });

  it('remembers addressee and account for the next letter', async () => {
    await sendUtilityLetter(scene.actor, await open(), await inputOf(['A']));
    const { content } = await utilityLetterDraft(scene.actor, scene.engagement.code);
    expect(content).toMatchObject({
      number: 2,
      account: '77-3',
      addressee: { address: 'accounts@test-valley.example' },
    });
    expect(content.claims.map(({ letter }) => letter)).toEqual(['B']);
  });
});
