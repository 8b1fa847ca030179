import { beforeEach, describe, expect, it } from 'vitest';
import { addDays } from '@/core/load';
import { mondayOf, weekNumber } from '@/schemas/hour';
import { today as todayHere } from '@/server/clock';
import { inTx } from '@/server/db/tx';
import { Edition } from '@/server/models/Edition';
import type { Engagement } from '@/server/models/Engagement';
import { HourEntry } from '@/server/models/HourEntry';
import { Letter } from '@/server/models/Letter';
import type { Actor } from '@/server/policies/actor';
import { invite } from '@/server/services/account';
import { todayOf } from '@/server/services/today';
import { buildActor, buildEngagement, buildIntake, buildUser } from '../setup/build';
import { buildEditionContent } from '../setup/edition';

let ilse: Actor;
let tom: Actor;
let engagement: Engagement;
const passwordHash = 'set';

beforeEach(async () => {
  ilse = await buildActor({ role: 'partner', passwordHash });
  tom = await buildActor({ passwordHash });
  engagement = await buildEngagement({ memberIds: [tom.id] });
});

/** What waits for a person at the engagement of this test. */
async function waitingFor(actor: Actor, on?: string) {
  const { waiting } = await todayOf(actor, on);
  return waiting.filter((row) => row.where.includes(engagement.code) || row.href.includes(engagement.code));
}

const file = (kind: 'bills' | 'intervals') =>
  buildIntake({ engagementId: engagement.id, kind, fileName: 'kestrel-2026.csv', state: 'read', broughtById: tom.id });

const edition = (shownAt: Date | null) =>
  inTx(() =>
    Edition.create({
      engagementId: engagement.id,
      planId: null,
      number: 1,
      content: buildEditionContent({ plan: { ...buildEditionContent().plan, saving: 71884.36 } }),
      digest: 'c'.repeat(64),
      madeById: tom.id,
      shownAt,
    }),
  );

describe('todayOf', () => {
  it('is nothing to clients', async () => {
    await expect(todayOf(await buildActor({ role: 'client' }))).rejects.toMatchObject({ status: 404 });
  });

  it('shows a consultant nothing of engagements they do not work on', async () => {
    await file('bills');
    const stranger = await buildActor({ passwordHash });
    expect(await todayOf(stranger)).toMatchObject({ waiting: [], engagements: [], running: [] });
  });

  it('names the first station that is not complete', async () => {
    const rows = await waitingFor(tom);
    expect(rows.map((row) => row.title)).toEqual(['Bring in the bills of the year']);
    expect(rows[0]).toMatchObject({ href: `/engagements/${engagement.code}/bills`, group: 'yours', mark: 'hollow' });
  });

  it('names a file half brought in, and its station not twice', async () => {
    const intake = await file('bills');
    const rows = await waitingFor(tom);
    expect(rows.map((row) => row.id)).toEqual([`intake-${intake.id}`]);
    expect(rows[0]).toMatchObject({
      mark: 'half',
      title: 'Bring in kestrel-2026.csv to the end',
      href: `/engagements/${engagement.code}/intake/${intake.id}`,
    });
  });

  it('names an edition that is made but not mailed, with its saving, then that the client has it', async () => {
    const made = await edition(null);
    const find = async () => (await waitingFor(tom)).find((row) => row.id === `edition-${made.id}`);
    expect(await find()).toMatchObject({ title: 'Mail edition 1', group: 'yours', stake: { text: '71,884\u00a0USD' } });
    await inTx(() => made.update({ shownAt: new Date() }));
    expect(await find()).toMatchObject({ title: 'Edition 1 is with the client', group: 'others', mark: 'circle' });
  });

  it('names a letter that did not go until the same one goes', async () => {
    const letter = (state: 'sent' | 'failed') =>
      inTx(() =>
        Letter.create({
          engagementId: engagement.id,
          editionId: null,
          userId: null,
          kind: 'edition',
          recipient: 'mira@kestrel-gap.example',
          subject: 'Edition 1',
          messageId: null,
          state,
          error: state === 'failed' ? 'The mail server could not be reached.' : null,
          sentAt: null,
        }),
      );
    const failed = await letter('failed');
    const ids = async () => (await waitingFor(tom)).map((row) => row.id);
    expect(await ids()).toContain(`letter-${failed.id}`);
    await letter('sent');
    expect(await ids()).not.toContain(`letter-${failed.id}`);
  });

  it('asks for the hours of full weeks without any, overdue after the Monday', async () => {
    const monday = mondayOf(todayHere());
    const later = addDays(monday, 15);
    const weeks = async (actor: Actor) =>
      (await todayOf(actor, later)).waiting.filter((row) => row.id.startsWith('week-'));
    expect(await weeks(ilse)).toEqual([]);
    expect((await weeks(tom)).map((row) => [row.id, row.group, row.days])).toEqual([
      [`week-${monday}`, 'overdue', 8],
      [`week-${addDays(monday, 7)}`, 'overdue', 1],
    ]);
    const entry = { engagementId: engagement.id, userId: tom.id, minutes: 90, station: 'tariff', note: 'Sheet 41' };
    await inTx(() => HourEntry.create({ ...entry, day: addDays(monday, 9) }));
    expect((await weeks(tom)).map((row) => row.id)).toEqual([`week-${monday}`]);
    expect((await todayOf(tom, addDays(monday, 13))).week).toMatchObject({
      rows: [{ day: addDays(monday, 9), code: engagement.code, minutes: 90 }],
      minutes: 90,
    });
  });

  it('tells partners of invitations out, run out and never sent, and consultants not', async () => {
    const newcomer = await buildUser({ name: 'Lea Brandt' });
    const find = async (actor: Actor, on?: string) =>
      (await todayOf(actor, on)).waiting.find((row) => row.id === `invitation-${newcomer.id}`);
    expect(await find(ilse)).toMatchObject({ group: 'yours', action: 'Invite' });
    await invite(ilse, newcomer);
    expect(await find(ilse)).toMatchObject({ group: 'others', title: 'Lea Brandt has not taken the invitation' });
    expect(await find(ilse, addDays(todayHere(), 16))).toMatchObject({
      group: 'yours',
      stake: { note: 'the link ended' },
    });
    expect(await find(tom)).toBeUndefined();
  });

  it('warns partners of licences that end within 60 days', async () => {
    const licence = { licenceJurisdiction: 'IL', licenceNumber: 'PE 062', passwordHash };
    const soon = await buildUser({ ...licence, licenceExpires: '2027-01-15' });
    const { waiting } = await todayOf(ilse, '2026-12-01');
    expect(waiting.find((row) => row.id === `licence-${soon.id}`)).toMatchObject({
      group: 'yours',
      date: '2027-01-15',
    });
    const after = (await todayOf(ilse, '2027-01-20')).waiting.find((row) => row.id === `licence-${soon.id}`);
    expect(after).toMatchObject({ group: 'overdue', mark: 'diamond', days: 5 });
    expect((await todayOf(ilse, '2026-10-01')).waiting.some((row) => row.id === `licence-${soon.id}`)).toBe(false);
  });

  it('puts overdue first and what is with others last', async () => {
    await edition(new Date());
    await file('bills');
    const { waiting } = await todayOf(ilse, addDays(todayHere(), 30));
    const groups = waiting.map((row) => ['overdue', 'yours', 'others'].indexOf(row.group));
    expect(groups).toEqual([...groups].sort());
  });
});

describe('weekNumber', () => {
  it.each([
    // ISO 8601: week 1 is the week of the year's first Thursday.
    ['2026-11-30', 49],
    ['2025-12-29', 1],
    ['2026-12-28', 53],
    ['2027-01-04', 1],
    ['2021-01-04', 1],
    ['2020-12-28', 53],
  ])('of the week that begins on %s is %i', (monday, week) => {
    expect(weekNumber(monday)).toBe(week);
  });
});
