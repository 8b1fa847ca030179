import { beforeEach, describe, expect, it } from 'vitest';
import { addDays, addMonths, localDateStartMs } from '@/core/load';
import { planDefaults } from '@/schemas/plan-money';
import { inTx } from '@/server/db/tx';
import { Edition } from '@/server/models/Edition';
import type { Engagement } from '@/server/models/Engagement';
import { HourEntry } from '@/server/models/HourEntry';
import { Motor } from '@/server/models/Motor';
import { Plan } from '@/server/models/Plan';
import { TariffChoice } from '@/server/models/TariffChoice';
import type { Actor } from '@/server/policies/actor';
import { engagementFrame, standsAt } from '@/server/services/stations';
import { keepSeries } from '@/server/services/reading-blocks';
import { buildActor, buildEngagement, buildIntake } from '../setup/build';
import { buildEditionContent } from '../setup/edition';
import { millMotor, motorOf } from '../setup/motors';
import { keepBills } from '../setup/tariff';

let partner: Actor;
let engagement: Engagement;

beforeEach(async () => {
  partner = await buildActor({ role: 'partner' });
  engagement = await buildEngagement();
});

async function stateOf(id: string, actor = partner) {
  const { stations } = await engagementFrame(actor, engagement.code);
  const station = stations.find((one) => one.id === id);
  return `${station?.state}: ${station?.reason}`;
}

/** Bills of months counted from the first of the engagement's year. */
const keepMonths = (months: number[]) =>
  keepBills(
    engagement,
    months.map((month) => {
      const from = addMonths('2025-11-01', month);
      return { from, to: addMonths(from, 1), lines: [], totalMinor: null };
    }),
  );

const fileOnItsWay = (state: 'read' | 'kept', kind: 'bills' | 'intervals') =>
  buildIntake({ engagementId: engagement.id, kind, state });

describe('engagementFrame', () => {
  it('is nothing to a consultant who is no member, to a client and where there is no such code', async () => {
    const stranger = await buildActor();
    const client = await buildActor({ role: 'client', clientId: engagement.clientId });
    await expect(engagementFrame(stranger, engagement.code)).rejects.toMatchObject({ status: 404 });
    await expect(engagementFrame(client, engagement.code)).rejects.toMatchObject({ status: 404 });
    await expect(engagementFrame(partner, 'NO-99')).rejects.toMatchObject({ status: 404 });
  });

  it('gives eight open stations with a reason each for a new engagement', async () => {
    const { stations, strip } = await engagementFrame(partner, engagement.code, 'tariff');
    expect(stations.map((station) => station.id)).toEqual([
      'bills',
      'intervals',
      'tariff',
      'motors',
      'plans',
      'report',
      'proof',
      'hours',
    ]);
    expect(stations.every((station) => station.state === 'open' && station.reason.length > 4)).toBe(true);
    expect(strip).toContainEqual({ label: 'Year', value: '1 Nov 2025 to 31 Oct 2026' });
    expect(strip).toContainEqual({ label: 'Sheet', value: '3 of 8' });
    expect(standsAt(stations).id).toBe('bills');
  });

  it('closes Bills when the year is covered, and says what is missing before', async () => {
    await fileOnItsWay('read', 'bills');
    expect(await stateOf('bills')).toBe('open: 1 file to check');
    await keepMonths([0, 1, 2]);
    expect(await stateOf('bills')).toBe('open: 3 of 12 kept');
    await keepMonths([4, 5, 6, 7, 8, 9, 10, 11]);
    // February 2026 has no bill.
    expect(await stateOf('bills')).toBe('open: 28 days without a bill');
    await keepMonths([3]);
    expect(await stateOf('bills')).toBe('closed: 12 of 12 kept');
    expect(await stateOf('proof')).toBe('open: after the first bill');
    await keepMonths([12]);
    expect(await stateOf('bills')).toBe('closed: 12 of 12 kept');
    expect(await stateOf('proof')).toBe('open: 1 later bill');
  });

  it('tells the share of intervals present', async () => {
    const intake = await fileOnItsWay('kept', 'intervals');
    const startMs = localDateStartMs('2025-11-01', 'America/Chicago');
    const series = (from: number, count: number, missing: number) => ({
      startMs: startMs + from * 3_600_000,
      stepMinutes: 60,
      kwh: new Float64Array(count).fill(1),
      kvarhLagging: new Float64Array(count).fill(1),
      kvarhLeading: new Float64Array(count),
      quality: new Uint8Array(count).map((_, index) => (index < missing ? 2 : 0)),
    });
    // 8,760 h in the year: half of them kept, then all with 20 marked missing.
    await inTx(() => keepSeries(engagement.meterId, intake.id, series(0, 4380, 0)));
    expect(await stateOf('intervals')).toBe('open: 50 % present');
    await inTx(() => keepSeries(engagement.meterId, intake.id, series(4380, 4380, 20)));
    expect(await stateOf('intervals')).toBe('closed: 99.77 % present');
  });

  it('follows schedule, motors, plans and editions', async () => {
    const engagementId = engagement.id;
    await inTx(() =>
      TariffChoice.create({
        engagementId,
        scheduleId: 'ostrander-lp4',
        scheduleText: 'schedule: ostrander-lp4\ntitle: "Large power, LP-4"\n',
        sha256: 'b'.repeat(64),
        contract: {},
        history: null,
        lineMatches: {},
      }),
    );
    expect(await stateOf('tariff')).toBe('open: schedule chosen');
    const { strip } = await engagementFrame(partner, engagement.code);
    expect(strip).toContainEqual({ label: 'Schedule', value: 'Large power, LP-4' });
    const { plate, calendar } = motorOf(millMotor);
    await inTx(async () => {
      for (const name of ['M-1', 'M-2'])
        await Motor.create({
          engagementId,
          meterId: engagement.meterId,
          position: 1,
          name,
          drives: null,
          plate,
          calendar,
          fieldTodayA: 90,
        });
    });
    expect(await stateOf('motors')).toBe('closed: 2 motors');
    const plan = await inTx(() =>
      Plan.create({
        engagementId,
        name: 'A',
        actions: [],
        workCostMinor: 0,
        yearlyUpkeepMinor: 0,
        economics: { ...planDefaults },
        search: null,
      }),
    );
    expect(await stateOf('plans')).toBe('open: choose a plan');
    await inTx(() => plan.update({ chosen: true }));
    expect(await stateOf('plans')).toBe('closed: A chosen');
    const edition = await inTx(() =>
      Edition.create({
        engagementId,
        planId: plan.id,
        number: 1,
        content: buildEditionContent(),
        digest: 'c'.repeat(64),
        madeById: partner.id,
        shownAt: null,
      }),
    );
    expect(await stateOf('report')).toBe('open: edition 1 not mailed');
    await inTx(() => edition.update({ shownAt: new Date() }));
    expect(await stateOf('report')).toBe('closed: edition 1 shown');
  });

  it('shows a consultant only their own hours', async () => {
    const tom = await buildActor();
    engagement = await buildEngagement({ memberIds: [tom.id], budgetHours: 40 });
    const log = (userId: number, minutes: number, at: number) =>
      inTx(() =>
        HourEntry.create({
          engagementId: engagement.id,
          userId,
          day: addDays('2026-11-02', at),
          minutes,
          station: 'tariff',
          note: 'Sheet 41',
        }),
      );
    await log(tom.id, 90, 0);
    await log(partner.id, 1440, 0);
    expect(await stateOf('hours', tom)).toBe('open: 1.5 h of yours');
    expect(await stateOf('hours')).toBe('open: 25.5 h, not billed');
    await log(partner.id, 1440, 1);
    expect(await stateOf('hours')).toBe('attention: 49.5 h, over budget');
  });
});
