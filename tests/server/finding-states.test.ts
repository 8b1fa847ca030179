import { beforeEach, describe, expect, it } from 'vitest';
import { addDays } from '@/core/load';
import { findingStates, moveFindingInput, type FindingState } from '@/schemas/finding';
import { today } from '@/server/clock';
import { actAs } from '@/server/db/context';
import { Finding } from '@/server/models/Finding';
import { FindingChange } from '@/server/models/FindingChange';
import { Trail } from '@/server/models/Trail';
import { canDecideFindings, movesFrom } from '@/server/policies/finding';
import { openEngagement } from '@/server/services/engagements';
import { recoveredOf } from '@/server/services/finding-records';
import { moveFinding, noteFinding, openFinding } from '@/server/services/finding-moves';
import { stationsOf } from '@/server/services/stations';
import { tariffPage } from '@/server/services/tariff-page';
import { todayOf } from '@/server/services/today';
import { buildActor } from '../setup/build';
import { buildFindings, findingsOf, reprint, type FindingsScene } from '../setup/findings';

// June at 1,600 kW: 18,560.00 for 16,240.00, 2,320.00 too much; tax 5 % of 400 + 18,560 + 36,035 = 2,749.75, 116.00 more.
const overBilled = { june: { demand: 18_560, tax: 2_749.75 }, july: { service: 450, tax: 2_532 } };
const wholeMinor = 243_600;

let scene: FindingsScene;
beforeEach(async () => {
  scene = await buildFindings(overBilled);
});

const only = async () => (await findingsOf(scene))[0]!;
const step = (to: FindingState, given: Partial<Parameters<typeof moveFinding>[2]> = {}) => ({
  to,
  day: today(),
  amount: null,
  note: '',
  ...given,
});

async function move(to: FindingState, given: Partial<Parameters<typeof moveFinding>[2]> = {}, id?: number) {
  const finding = id === undefined ? await only() : (await findingsOf(scene)).find((one) => one.id === id)!;
  const open = await openFinding(scene.actor, finding.id);
  await moveFinding(scene.actor, open, { version: finding.version, ...step(to, given) });
}

describe('policies of findings', () => {
  it('let go from each state only to those of the table', () => {
    expect(Object.fromEntries(findingStates.map((state) => [state, movesFrom(state)]))).toEqual({
      open: ['raised', 'dropped'],
      raised: ['agreed', 'refunded', 'dropped', 'open'],
      agreed: ['refunded', 'dropped', 'raised'],
      refunded: ['agreed'],
      dropped: ['open'],
    });
  });

  it('are for who works on the engagement', async () => {
    const scope = { clientId: scene.engagement.clientId, memberIds: [scene.actor.id] };
    const client = await buildActor({ role: 'client', clientId: scene.engagement.clientId });
    expect(canDecideFindings(scene.actor, scope)).toBe(true);
    expect(canDecideFindings(await buildActor({ role: 'partner' }), scope)).toBe(true);
    expect(canDecideFindings(await buildActor(), scope)).toBe(false);
    expect(canDecideFindings(client, scope)).toBe(false);
  });
});

describe('moveFindingInput', () => {
  const fault = (given: object) =>
    moveFindingInput
      .safeParse({ version: 0, ...step('raised'), ...given })
      .error?.issues.map(({ path }) => path.join('.'));

  it('asks for a reason to drop, an amount to refund, a day there is', () => {
    expect(fault({ to: 'dropped' })).toEqual(['note']);
    expect(fault({ to: 'refunded' })).toEqual(['amount']);
    expect(fault({ to: 'refunded', amount: 0 })).toEqual(['amount']);
    expect(fault({ day: '2026-02-30' })).toEqual(['day']);
    expect(fault({ to: 'lost' })).toEqual(['to']);
    expect(fault({})).toBeUndefined();
  });
});

describe('moveFinding', () => {
  it('is closed to strangers and clients, as if there were no finding', async () => {
    const { id } = await only();
    const client = await buildActor({ role: 'client', clientId: scene.engagement.clientId });
    for (const actor of [await buildActor(), client]) {
      await expect(openFinding(actor, id)).rejects.toMatchObject({ status: 404 });
    }
    await expect(openFinding(scene.actor, 999_999)).rejects.toMatchObject({ status: 404 });
  });

  it('refuses a day to come, a step the table does not have, and a version meanwhile changed', async () => {
    const finding = await only();
    await expect(move('raised', { day: addDays(today(), 1) })).rejects.toMatchObject({
      status: 422,
      fields: { day: [expect.any(String)] },
    });
    await expect(move('agreed')).rejects.toMatchObject({ status: 409, code: 'conflict' });
    await move('raised');
    const open = await openFinding(scene.actor, finding.id);
    const stale = moveFinding(scene.actor, open, { version: finding.version, ...step('dropped', { note: 'no' }) });
    await expect(stale).rejects.toMatchObject({
      status: 409,
      code: 'stale',
      details: { mine: { to: 'dropped' }, theirs: { to: 'raised' } },
    });
  });

  it('goes from open to refunded with its history, days and amounts, and leaves a trail in the person’s name', async () => {
    const day = addDays(today(), -9);
    await actAs({ actorId: scene.actor.id, ip: null }, async () => {
      await move('raised', { day, note: 'By telephone' });
      await move('agreed');
      await move('refunded', { amount: 2400.5 });
    });
    const finding = await only();
    expect(finding).toMatchObject({
      state: 'refunded',
      amountMinor: wholeMinor,
      wasMinor: null,
      refunded: { amountMinor: 240_050, on: today() },
    });
    expect(finding.changes).toMatchObject([
      { from: 'open', to: 'raised', day, note: 'By telephone', amountMinor: wholeMinor, by: scene.actor.name },
      { from: 'raised', to: 'agreed' },
      { from: 'agreed', to: 'refunded', amountMinor: 240_050 },
    ]);
    const trail = await Trail.findAll({ where: { subject: 'Finding', subjectId: finding.id }, order: ['id'] });
    expect(trail.map(({ action, actorId, after }) => [action, actorId, after?.state])).toEqual([
      ['create', null, 'open'],
      ['update', scene.actor.id, 'raised'],
      ['update', scene.actor.id, 'agreed'],
      ['update', scene.actor.id, 'refunded'],
    ]);
  });

  it('counts what was claimed, agreed and refunded', async () => {
    const [june, july] = await findingsOf(scene);
    // July: service 50.00 too much, tax 5 % of 450 + 12,990 + 37,200 = 2,532.00, 2.50 more: 52.50.
    expect(july?.amountMinor).toBe(5_250);
    await move('raised', {}, june?.id);
    await move('raised', {}, july?.id);
    await move('refunded', { amount: 2000 }, june?.id);
    expect(recoveredOf(await findingsOf(scene))).toEqual({
      claimedMinor: wholeMinor + 5_250,
      agreedMinor: wholeMinor,
      refundedMinor: 200_000,
    });
    await move('agreed', {}, june?.id);
    expect(recoveredOf(await findingsOf(scene)).refundedMinor).toBe(0);
  });

  it('keeps a note without changing the state', async () => {
    const { id, version } = await only();
    await noteFinding(scene.actor, await openFinding(scene.actor, id), { note: 'Ask for the meter card.' });
    const finding = await only();
    expect(finding).toMatchObject({ state: 'open', version });
    expect(finding.changes).toMatchObject([{ from: null, to: null, note: 'Ask for the meter card.' }]);
  });
});

describe('a finding and the pricings after it', () => {
  it('is the same one when the amount changes: state, history, and what it was when raised', async () => {
    const before = await only();
    await move('raised');
    await reprint(scene, '2026-06-01', 'Demand', 1_800_000);
    const after = await only();
    // 18,000.00 - 16,240.00 = 1,760.00, and 5 % of it, 88.00; the rest of the 116.00 of tax is a finding of its own.
    expect(after).toMatchObject({ id: before.id, state: 'raised', wasMinor: wholeMinor });
    expect(after.amountMinor).toBe(184_800);
    const page = await tariffPage(scene.actor, scene.engagement.code);
    expect(page.slips[0]?.finding).toMatchObject({ state: 'raised', wasMinor: wholeMinor });
  });

  it('stays in the list as no longer found where it was raised, and is gone where nobody decided', async () => {
    const [june, july] = await findingsOf(scene);
    await move('raised', {}, june?.id);
    await reprint(scene, '2026-06-01', 'Demand', 1_624_000);
    await reprint(scene, '2026-06-01', 'Tax', 263_375);
    await reprint(scene, '2026-07-01', 'Service', 40_000);
    await reprint(scene, '2026-07-01', 'Tax', 252_950);
    const left = await findingsOf(scene);
    expect(left).toMatchObject([{ id: june?.id, letter: null, state: 'raised', amountMinor: wholeMinor }]);
    expect(await Finding.findByPk(july?.id)).toMatchObject({ found: false, state: 'open' });
    // And it comes back as the same one.
    await reprint(scene, '2026-07-01', 'Service', 45_000);
    await reprint(scene, '2026-07-01', 'Tax', 253_200);
    expect((await findingsOf(scene)).map(({ id }) => id)).toEqual([july?.id, june?.id]);
  });

  it('writes nothing where the pricing says nothing new', async () => {
    await findingsOf(scene);
    const rows = () => Promise.all([Finding.count(), FindingChange.count(), Trail.count()]);
    const before = await rows();
    await Promise.all([findingsOf(scene), findingsOf(scene)]);
    expect(await rows()).toEqual(before);
  });

  it('is written once when two people look at the same moment', async () => {
    await Promise.all([findingsOf(scene), findingsOf(scene), findingsOf(scene)]);
    expect(await Finding.count({ where: { engagementId: scene.engagement.id } })).toBe(2);
  });
});

describe('where findings wait', () => {
  const tap = async () => {
    const opened = await openEngagement(scene.actor, scene.engagement.code);
    const { state, reason } = (await stationsOf(scene.actor, opened)).find(({ id }) => id === 'tariff')!;
    return [state, reason];
  };
  const rows = async (on?: string) =>
    (await todayOf(scene.actor, on)).waiting.filter(({ id }) => id.endsWith(`-${scene.engagement.id}`));

  it('the tap of the station is open while one is open and closes when all are handled', async () => {
    expect(await tap()).toEqual(['open', '2 findings open']);
    const [june, july] = await findingsOf(scene);
    await move('dropped', { note: 'Agreed in the contract.' }, july?.id);
    expect(await tap()).toEqual(['open', '1 finding open']);
    await move('raised', {}, june?.id);
    expect(await tap()).toEqual(['closed', '1 with the utility']);
    await move('refunded', { amount: 2436 }, june?.id);
    expect(await tap()).toEqual(['closed', 'findings settled']);
  });

  it('Today lists open ones, and those raised without an answer for more than 30 days', async () => {
    expect((await rows()).map(({ title }) => title)).toContain('Findings A and B in the bills');
    const [june, july] = await findingsOf(scene);
    await move('dropped', { note: 'Agreed in the contract.' }, july?.id);
    await move('raised', { day: addDays(today(), -30) }, june?.id);
    const unanswered = (all: Awaited<ReturnType<typeof rows>>) => all.find(({ id }) => id.startsWith('unanswered'));
    expect(unanswered(await rows())).toBeUndefined();
    expect(unanswered(await rows(addDays(today(), 1)))).toMatchObject({
      group: 'overdue',
      date: today(),
      days: 1,
      title: 'The utility has not answered on finding A',
      stake: { amountMinor: wholeMinor },
    });
    await move('agreed', {}, june?.id);
    expect(unanswered(await rows(addDays(today(), 1)))).toBeUndefined();
  });
});
