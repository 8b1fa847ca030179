import { describe, expect, it } from 'vitest';
import { inTx } from '@/server/db/tx';
import { HourEntry } from '@/server/models/HourEntry';
import { Rate } from '@/server/models/Rate';
import { practiceOn } from '@/server/services/practice';
import { buildActor, buildClient, buildEngagement } from '../setup/build';

const today = '2026-12-01';

describe('practiceOn', () => {
  it('is closed to consultants and nothing to clients', async () => {
    await expect(practiceOn(await buildActor(), today)).rejects.toMatchObject({ status: 403 });
    await expect(practiceOn(await buildActor({ role: 'client' }), today)).rejects.toMatchObject({ status: 404 });
  });

  it('has work in progress, oldest entries, budgets and utilisation as worked out by hand', async () => {
    const ilse = await buildActor({ role: 'partner', name: 'Ilse' });
    const tom = await buildActor({ name: 'Tom' });
    const client = await buildClient({ name: 'Kestrel Gap' });
    const first = await buildEngagement({ code: 'KG-02', clientId: client.id, memberIds: [tom.id], budgetHours: 10 });
    const second = await buildEngagement({ code: 'HS-01', memberIds: [tom.id] });
    const euro = await buildEngagement({ code: 'EU-01', currency: 'EUR' });
    const rate = (userId: number, perHourMinor: number, engagementId: number | null = null, currency = 'USD') =>
      Rate.create({ userId, engagementId, perHourMinor, currency, from: '2026-01-01' });
    const log = (userId: number, engagementId: number, day: string, minutes: number, billable = true) =>
      HourEntry.create({ engagementId, userId, day, minutes, station: 'tariff', note: 'work', billable });
    await inTx(async () => {
      await rate(ilse.id, 19500);
      await rate(tom.id, 14500);
      await rate(tom.id, 12000, second.id);
      await log(tom.id, first.id, '2026-11-12', 240);
      await log(tom.id, first.id, '2026-11-30', 90);
      await log(ilse.id, first.id, '2026-11-30', 60);
      await log(ilse.id, first.id, '2026-11-30', 30, false);
      await log(tom.id, second.id, '2026-12-01', 45);
      await log(tom.id, euro.id, '2026-12-01', 60);
    });
    const practice = await practiceOn(ilse, today);
    // KG-02: 5.5 h x 145.00 = 797.50, 1 h x 195.00 = 195.00, half an hour not billable: 992.50; 7 h of 10 told.
    // HS-01: 0.75 h x 120.00 = 90.00, its own rate before the general one. EU-01: no rate in euro.
    expect(practice.progress.map((row) => [row.code, row.amountMinor, row.minutes, row.oldestDays])).toEqual([
      ['KG-02', 99250, 420, 19],
      ['HS-01', 9000, 45, 0],
      ['EU-01', 0, 60, 0],
    ]);
    expect(practice.progress[0]).toMatchObject({
      budgetFraction: 0.7,
      client: 'Kestrel Gap',
      people: [
        { name: 'Tom', minutes: 330 },
        { name: 'Ilse', minutes: 90 },
      ],
    });
    expect(practice.progress[2]).toMatchObject({ unratedMinutes: 60, budgetFraction: null });
    expect(practice.totals).toEqual([
      { currency: 'USD', minutes: 465, billableMinutes: 435, amountMinor: 108250, unratedMinutes: 0 },
      { currency: 'EUR', minutes: 60, billableMinutes: 60, amountMinor: 0, unratedMinutes: 60 },
    ]);
    // Tom in dollars: 797.50 + 90.00; the hour in euro has no rate and stands on a line of its own.
    expect(practice.people.map((row) => [row.person, row.currency, row.amountMinor])).toEqual([
      ['Tom', 'USD', 88750],
      ['Ilse', 'USD', 19500],
      ['Tom', 'EUR', 0],
    ]);
    expect(practice.weeks).toHaveLength(8);
    expect(practice.weeks.at(-1)).toBe('2026-11-30');
    expect(practice.weeks[0]).toBe('2026-10-12');
    const ofTom = practice.utilisation.find((row) => row.person === 'Tom');
    expect(ofTom?.weeks.map((week) => week.minutes)).toEqual([0, 0, 0, 0, 240, 0, 0, 195]);
    const ofIlse = practice.utilisation.find((row) => row.person === 'Ilse');
    // 60 of 90 min.
    expect(ofIlse?.billableFraction).toBeCloseTo(2 / 3, 12);
  });
});
