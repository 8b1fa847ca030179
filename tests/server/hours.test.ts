import { beforeEach, describe, expect, it } from 'vitest';
import { hourInput, mondayOf, parseMinutes, type HourChangeInput, type HourInput } from '@/schemas/hour';
import type { Engagement } from '@/server/models/Engagement';
import { HourEntry } from '@/server/models/HourEntry';
import { Trail } from '@/server/models/Trail';
import type { Actor, Role } from '@/server/policies/actor';
import { canEditHours, canLogHours, canReadHours } from '@/server/policies/hours';
import { openEngagement } from '@/server/services/engagements';
import * as hours from '@/server/services/hours';
import { buildActor } from '../setup/build';
import { buildCrew, buildRate } from '../setup/crew';

describe('parseMinutes', () => {
  it.each([
    ['1:45', 105],
    ['01:45', 105],
    ['0:05', 5],
    ['1.75', 105],
    ['1,75', 105],
    ['.5', 30],
    ['0.333', 20],
    ['2', 120],
    ['2h', 120],
    ['2.5 h', 150],
    ['105m', 105],
    ['90 min', 90],
    ['1h 45m', 105],
    ['1h45', 105],
    ['0845-1030', 105],
    ['08:45-10:30', 105],
    ['8:45 - 10:30', 105],
    ['8:45 to 10:30', 105],
    ['0000-2400', 1440],
    ['24', 1440],
    [' 1:45 ', 105],
  ])('reads %j as %i min', (typed, minutes) => {
    expect(parseMinutes(typed)).toBe(minutes);
  });

  it.each(['', '0', '0:00', '1:60', '25', '24:01', '1030-0845', '0845-0845', '0860-0900', '2500-2600', '-1', '1.5.2'])(
    'reads nothing from %j',
    (typed) => {
      expect(parseMinutes(typed)).toBeNull();
    },
  );

  it.each(['ninety', '1e2', '1h 45m 3s', '105 metres', '2026-11-30'])('reads nothing from the words %j', (typed) => {
    expect(parseMinutes(typed)).toBeNull();
  });
});

// The steps of the endpoints: open, then do.
const listHours = async (actor: Actor, code: string) => hours.hoursOf(actor, await openEngagement(actor, code));
const logHours = async (actor: Actor, code: string, input: HourInput, at: number) =>
  hours.logHours(actor, await openEngagement(actor, code), input, at);
const changeHours = async (actor: Actor, id: number, input: HourChangeInput, at: number) =>
  hours.changeHours(actor, await hours.openHours(actor, id), input, at);
const removeHours = async (actor: Actor, id: number, version: number) =>
  hours.removeHours(await hours.openHours(actor, id), version);

const now = Date.parse('2026-12-01T12:00:00Z');
const entry: HourInput = { day: '2026-11-30', time: 90, station: 'tariff', note: 'Sheet 41 read', billable: true };

let ilse: Actor;
let tom: Actor;
let sana: Actor;
let engagement: Engagement;

beforeEach(async () => {
  ({ ilse, tom, sana, engagement } = await buildCrew());
});

describe('hours', () => {
  it('are nothing to strangers and clients', async () => {
    const stranger = await buildActor();
    const mira = await buildActor({ role: 'client', clientId: engagement.clientId });
    for (const actor of [stranger, mira]) {
      await expect(listHours(actor, engagement.code)).rejects.toMatchObject({ status: 404 });
      await expect(logHours(actor, engagement.code, entry, now)).rejects.toMatchObject({ status: 404 });
    }
    const { id } = await logHours(tom, engagement.code, entry, now);
    for (const actor of [stranger, mira]) {
      await expect(changeHours(actor, id, { ...entry, version: 0 }, now)).rejects.toMatchObject({ status: 404 });
      await expect(removeHours(actor, id, 0)).rejects.toMatchObject({ status: 404 });
    }
  });

  it('of others are nothing to a consultant, and read-only to a partner', async () => {
    const { id } = await logHours(tom, engagement.code, entry, now);
    await expect(changeHours(sana, id, { ...entry, version: 0 }, now)).rejects.toMatchObject({ status: 404 });
    await expect(removeHours(sana, id, 0)).rejects.toMatchObject({ status: 404 });
    await expect(changeHours(ilse, id, { ...entry, version: 0 }, now)).rejects.toMatchObject({ status: 403 });
    await expect(removeHours(ilse, id, 0)).rejects.toMatchObject({ status: 403 });
    expect((await listHours(sana, engagement.code)).entries).toEqual([]);
  });

  it('are refused for days to come, long ago, and above 24 hours a day', async () => {
    const log = (change: Partial<HourInput>) => logHours(tom, engagement.code, { ...entry, ...change }, now);
    await expect(log({ day: '2026-12-03' })).rejects.toMatchObject({
      status: 422,
      fields: { day: [expect.any(String)] },
    });
    await expect(log({ day: '2016-11-30' })).rejects.toMatchObject({ status: 422 });
    await log({ time: 1380 });
    await expect(log({ time: 61 })).rejects.toMatchObject({
      status: 422,
      fields: { time: [/23\.00 h are logged/] },
    } as never);
    await log({ time: 60 });
    expect(await HourEntry.sum('minutes', { where: { userId: tom.id } })).toBe(1440);
  });

  it('say by field what cannot be used', () => {
    const parsed = hourInput.safeParse({ day: '2026-02-30', time: 'long', station: 'sea', note: ' ', billable: true });
    expect(parsed.error?.issues.map((issue) => issue.path[0]).sort()).toEqual(['day', 'note', 'station', 'time']);
  });

  it('of a day may be changed by who wrote them, against the version seen', async () => {
    const made = await logHours(tom, engagement.code, entry, now);
    const changed = await changeHours(tom, made.id, { ...entry, time: 120, version: 0 }, now);
    expect(changed).toMatchObject({ minutes: 120, version: 1, mine: true });
    await expect(changeHours(tom, made.id, { ...entry, time: 30, version: 0 }, now)).rejects.toMatchObject({
      status: 409,
      details: { mine: { minutes: 30 }, theirs: { minutes: 120 } },
    });
    await expect(removeHours(tom, made.id, 0)).rejects.toMatchObject({ status: 409 });
    await removeHours(tom, made.id, 1);
    expect(await HourEntry.findByPk(made.id)).toBeNull();
    const kept = await Trail.findOne({ where: { subject: 'HourEntry', subjectId: made.id, action: 'delete' } });
    expect(kept?.before).toMatchObject({ minutes: 120, note: 'Sheet 41 read' });
  });

  it('are priced at each rate of the day for a partner, and at the own rate for a consultant', async () => {
    await buildRate(tom.id, 14500, '2026-01-01');
    await buildRate(sana.id, 13800, '2026-01-01');
    await logHours(tom, engagement.code, entry, now);
    await logHours(sana, engagement.code, { ...entry, time: 50 }, now);
    await logHours(tom, engagement.code, { ...entry, billable: false, time: 30 }, now);
    // 1.5 h at 145.00 = 217.50; 50 min at 138.00 = 115.00; half an hour is not billable.
    expect((await listHours(ilse, engagement.code)).sums).toEqual({
      minutes: 170,
      billableMinutes: 140,
      amountMinor: 33250,
      unratedMinutes: 0,
    });
    const own = await listHours(tom, engagement.code);
    expect(own.sums).toEqual({ minutes: 120, billableMinutes: 90, amountMinor: 21750, unratedMinutes: 0 });
    expect(JSON.stringify(own)).not.toMatch(/13800|Sana/);
  });

  it('without a rate are counted apart, not as nought', async () => {
    await logHours(tom, engagement.code, entry, now);
    const { entries, sums } = await listHours(ilse, engagement.code);
    expect(entries[0]).toMatchObject({ perHourMinor: null, amountMinor: null });
    expect(sums).toMatchObject({ amountMinor: 0, unratedMinutes: 90 });
  });
});

describe('policies of hours', () => {
  const actor = (role: Role, id: number, clientId: number | null = null): Actor => ({
    id,
    role,
    clientId,
    email: '',
    name: '',
    rights: { view: true, record: true, decide: true, pay: true },
  });
  const scope = { clientId: 4, memberIds: [2, 3] };

  it.each([
    { who: actor('partner', 1), log: true, read: true, edit: false },
    { who: actor('consultant', 2), log: true, read: true, edit: true },
    { who: actor('consultant', 3), log: true, read: false, edit: false },
    { who: actor('consultant', 5), log: false, read: false, edit: false },
    { who: actor('client', 9, 4), log: false, read: false, edit: false },
    { who: actor('client', 2, 4), log: false, read: false, edit: false },
  ])('role x action on an entry of 2: $who.role $who.id', ({ who, log, read, edit }) => {
    expect(canLogHours(who, scope)).toBe(log);
    expect(canReadHours(who, { userId: 2 })).toBe(read);
    expect(canEditHours(who, { userId: 2 })).toBe(edit);
  });
});

describe('mondayOf', () => {
  it.each([
    ['2026-11-30', '2026-11-30'],
    ['2026-12-01', '2026-11-30'],
    ['2026-12-06', '2026-11-30'],
    ['2027-01-01', '2026-12-28'],
  ])('%s lies in the week of %s', (day, monday) => {
    expect(mondayOf(day)).toBe(monday);
  });
});
