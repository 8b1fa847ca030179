import { beforeEach, describe, expect, it } from 'vitest';
import type { RateChangeInput } from '@/schemas/rate';
import type { Engagement } from '@/server/models/Engagement';
import { Rate } from '@/server/models/Rate';
import type { Actor } from '@/server/policies/actor';
import * as rates from '@/server/services/rates';
import { buildActor } from '../setup/build';
import { buildCrew, buildRate } from '../setup/crew';

const { amountMinorOf, listRates, rateInForce, setRate } = rates;

// The steps of the endpoints: open, then do.
const changeRate = async (actor: Actor, id: number, input: RateChangeInput) =>
  rates.changeRate(actor, await rates.openRate(actor, id), input);
const removeRate = async (actor: Actor, id: number, version: number) =>
  rates.removeRate(await rates.openRate(actor, id), version);

let ilse: Actor;
let tom: Actor;
let sana: Actor;
let engagement: Engagement;

beforeEach(async () => {
  ({ ilse, tom, sana, engagement } = await buildCrew());
});

describe('rateInForce', () => {
  it('takes the latest that has begun, and the own rate of the engagement before the general one', async () => {
    await buildRate(tom.id, 14000, '2026-01-01');
    await buildRate(tom.id, 15000, '2026-07-01');
    await buildRate(tom.id, 12000, '2026-03-01', engagement.id);
    await buildRate(tom.id, 12500, '2026-09-01', engagement.id);
    await buildRate(sana.id, 99900, '2026-01-01');
    const known = await Rate.findAll();
    const on = (day: string, engagementId = engagement.id, currency = 'USD') =>
      rateInForce(known, { userId: tom.id, engagementId, day, currency })?.perHourMinor ?? null;
    expect(on('2025-12-31')).toBeNull();
    expect(on('2026-01-01')).toBe(14000);
    expect(on('2026-02-28')).toBe(14000);
    expect(on('2026-03-01')).toBe(12000);
    expect(on('2026-08-31')).toBe(12000);
    expect(on('2026-09-01')).toBe(12500);
    expect(on('2026-08-31', -1)).toBe(15000);
    expect(on('2026-08-31', engagement.id, 'EUR')).toBeNull();
  });

  it.each([
    // 100 min at 145.00 an hour = 241.666... -> 241.67; 1 min at 0.30 = 0.005 -> 0.01; 20 min at 100.00 = 33.33.
    [100, 14500, 24167],
    [1, 30, 1],
    [20, 10000, 3333],
    [1440, 19500, 468000],
  ])('%i min at %i an hour are worth %i', (minutes, perHourMinor, expected) => {
    expect(amountMinorOf(minutes, perHourMinor)).toBe(expected);
  });
});

describe('rates', () => {
  const given = (change = {}) => ({ userId: tom.id, engagementId: null, perHour: 145, from: '2026-01-01', ...change });

  it('are set by partners only, and read by nobody else but their person', async () => {
    const mira = await buildActor({ role: 'client' });
    await expect(setRate(tom, given())).rejects.toMatchObject({ status: 403 });
    await expect(setRate(mira, given())).rejects.toMatchObject({ status: 404 });
    const made = await setRate(ilse, given());
    await expect(changeRate(tom, made.id, { ...given(), version: 0 })).rejects.toMatchObject({ status: 403 });
    await expect(removeRate(tom, made.id, 0)).rejects.toMatchObject({ status: 403 });
    await expect(listRates(sana, tom.id)).rejects.toMatchObject({ status: 404 });
    await expect(listRates(mira, tom.id)).rejects.toMatchObject({ status: 404 });
    expect(await listRates(tom, tom.id)).toHaveLength(1);
  });

  it('refuse a second one for the same day, clients and unknown engagements', async () => {
    const mira = await buildActor({ role: 'client' });
    await setRate(ilse, given());
    await expect(setRate(ilse, given({ perHour: 150 }))).rejects.toMatchObject({
      fields: { from: [expect.any(String)] },
    });
    await expect(setRate(ilse, given({ userId: mira.id }))).rejects.toMatchObject({ status: 422 });
    await expect(setRate(ilse, given({ engagementId: 987_654 }))).rejects.toMatchObject({ status: 422 });
    expect(await setRate(ilse, given({ engagementId: engagement.id }))).toMatchObject({ code: engagement.code });
  });

  it('run until the day before the next begins, and are corrected against the version seen', async () => {
    const first = await setRate(ilse, given());
    await setRate(ilse, given({ perHour: 152.5, from: '2026-07-01' }));
    expect(await listRates(ilse, tom.id)).toMatchObject([
      { perHourMinor: 15250, from: '2026-07-01', until: null },
      { perHourMinor: 14500, from: '2026-01-01', until: '2026-06-30' },
    ]);
    await changeRate(ilse, first.id, { perHour: 146, from: '2026-02-01', version: 0 });
    await expect(changeRate(ilse, first.id, { perHour: 1, from: '2026-02-01', version: 0 })).rejects.toMatchObject({
      status: 409,
      details: { theirs: { perHour: 146 } },
    });
    await removeRate(ilse, first.id, 1);
    expect(await listRates(ilse, tom.id)).toHaveLength(1);
  });
});
