import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { type IntakeView } from '@/schemas/intake';
import { BillLine } from '@/server/models/BillLine';
import { Intake } from '@/server/models/Intake';
import { ReadingBlock } from '@/server/models/ReadingBlock';
import { Trail } from '@/server/models/Trail';
import type { Actor } from '@/server/policies/actor';
import { addBill, listBills } from '@/server/services/bills';
import { giveUpIntake } from '@/server/services/intake';
import { keepIntake, undoIntake } from '@/server/services/intake-keep';
import { intervalsStation } from '@/server/services/intervals';
import { openEngagement } from '@/server/services/engagements';
import { keptSpans, loadSeries } from '@/server/services/readings';
import { buildActor, buildEngagement } from '../setup/build';
import { hasShared, sharedFile } from '../setup/shared';
import { always, billCsv, bring, bringAndKeep, confirmAll, intervalCsv, scene, stepMs } from '../setup/intake';

describe('keeping intervals', () => {
  it('stores every value bit for bit and takes back exactly these when undone, and again', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'first.csv', intervalCsv('2026-01-01', 96 * 3));
    const kept = await bringAndKeep(
      consultant,
      code,
      'intervals',
      'gap.csv',
      intervalCsv('2026-01-30', 96 * 4, [7, 8]),
    );
    expect(kept.state).toBe('kept');
    const fromMs = Date.parse('2026-01-30T00:00:00Z');
    const toMs = fromMs + 96 * 4 * stepMs;
    const load = await loadSeries(engagement.meterId, fromMs, toMs);
    expect(load.kwh[0]).toBe(0.1);
    expect(load.kwh[383]).toBe(383.1);
    expect(load.kvarhLagging[383]).toBe(383.1 / 2);
    expect(Number.isNaN(load.kwh[7])).toBe(true);
    expect([...load.quality.slice(6, 10)]).toEqual([0, 2, 2, 0]);
    const before = await keptSpans(engagement.meterId, ...always);
    expect(before.map((span) => span.count)).toEqual([288, 192, 192]);

    const undone = await undoIntake(consultant, kept.id, kept.version);
    expect(undone.state).toBe('undone');
    expect((await keptSpans(engagement.meterId, ...always)).map((span) => span.count)).toEqual([288]);
    expect(await ReadingBlock.count({ where: { intakeId: kept.id } })).toBe(0);

    await keepIntake(consultant, kept.id, undone.version);
    expect(await keptSpans(engagement.meterId, ...always)).toEqual(before);
    const again = await loadSeries(engagement.meterId, fromMs, toMs);
    expect(Buffer.from(again.kwh.buffer).equals(Buffer.from(load.kwh.buffer))).toBe(true);
  });

  it('leaves a row in the trail for every block that comes or goes', async () => {
    const { consultant, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'intervals', 'trail.csv', intervalCsv('2026-02-01', 192));
    const blocks = await ReadingBlock.findAll({ where: { intakeId: kept.id }, attributes: ['id'] });
    expect(blocks).toHaveLength(4);
    await undoIntake(consultant, kept.id, kept.version);
    for (const { id } of blocks) {
      const rows = await Trail.findAll({ where: { subject: 'ReadingBlock', subjectId: id }, order: ['id'] });
      expect(rows.map((row) => row.action)).toEqual(['create', 'delete']);
    }
  });

  it('refuses what overlaps kept readings, naming the range and the file, and stores nothing', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'january.csv', intervalCsv('2026-01-01', 96 * 31));
    const late = await confirmAll(
      consultant,
      await bring(consultant, code, 'intervals', 'late.csv', intervalCsv('2026-01-31', 96 * 2)),
    );
    await expect(keepIntake(consultant, late.id, late.version)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/31 Jan 2026, 00:00 to 1 Feb 2026, 00:00.*january\.csv.*choose/) as string,
    });
    expect((await Intake.findByPk(late.id))?.state).toBe('read');
    expect(await keptSpans(engagement.meterId, ...always)).toHaveLength(1);
  });

  it('lets readings begin exactly where others end', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'one.csv', intervalCsv('2026-01-01', 96));
    await bringAndKeep(consultant, code, 'intervals', 'two.csv', intervalCsv('2026-01-02', 96));
    const load = await loadSeries(engagement.meterId, Date.parse('2026-01-01Z'), Date.parse('2026-01-03Z'));
    expect(load.quality.some((mark) => mark !== 0)).toBe(false);
  });

  it('refuses a second time, an old version and what was given up', async () => {
    const { consultant, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'intervals', 'once.csv', intervalCsv('2026-03-01', 96 * 2));
    await expect(keepIntake(consultant, kept.id, kept.version)).rejects.toMatchObject({ status: 409 });
    await expect(undoIntake(consultant, kept.id, kept.version - 1)).rejects.toMatchObject({
      status: 409,
      code: 'stale',
    });
    await expect(giveUpIntake(consultant, kept.id, kept.version)).rejects.toMatchObject({ status: 409 });
    const other = await bring(consultant, code, 'intervals', 'other.csv', intervalCsv('2026-04-01', 96 * 2));
    const given = await giveUpIntake(consultant, other.id, other.version);
    expect(given.state).toBe('given-up');
    await expect(keepIntake(consultant, other.id, given.version)).rejects.toMatchObject({ status: 409 });
    await expect(undoIntake(consultant, other.id, given.version)).rejects.toMatchObject({ status: 409 });
  });

  it('keeps one of two who press Keep at once', async () => {
    const { consultant, engagement, code } = await scene();
    const ready = await confirmAll(
      consultant,
      await bring(consultant, code, 'intervals', 'race.csv', intervalCsv('2026-05-01', 96 * 2)),
    );
    const ends = await Promise.allSettled([
      keepIntake(consultant, ready.id, ready.version),
      keepIntake(consultant, ready.id, ready.version),
    ]);
    expect(ends.map((end) => end.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await keptSpans(engagement.meterId, ...always)).toHaveLength(1);
  });
});

describe('keeping bills', () => {
  it('turns amounts into minor units, keeps quantities and rows, and undoes all of it', async () => {
    const { consultant, engagement, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'bills', 'bills.csv', billCsv);
    const [november, december] = await listBills(engagement.id);
    expect(november).toMatchObject({
      from: '2025-11-01',
      to: '2025-12-01',
      totalMinor: 16_932_529,
      differenceMinor: 0,
      source: { intakeId: kept.id, fileName: 'bills.csv', row: 'row 2' },
    });
    expect(november?.lines.map((line) => line.amountMinor)).toEqual([13_571_809, 3_360_720]);
    expect(november?.quantities).toMatchObject({ kwh: 2_508_159, maxKw: 5092 });
    expect(december).toMatchObject({ from: '2025-12-01', to: '2026-01-01', totalMinor: 16_289_316 });

    await undoIntake(consultant, kept.id, kept.version);
    expect(await listBills(engagement.id)).toEqual([]);
    const lineIds = [...(november?.lines ?? []), ...(december?.lines ?? [])].map((line) => line.id);
    expect(await BillLine.count({ where: { id: lineIds } })).toBe(0);
  });

  it('refuses bills that overlap a kept one, naming both periods, and stores none of them', async () => {
    const { consultant, engagement, code } = await scene();
    const typed = { from: '2025-12-20', to: '2026-01-20', quantities: {}, lines: [], totalMinor: 100 };
    await addBill(consultant, code, typed);
    const ready = await confirmAll(consultant, await bring(consultant, code, 'bills', 'late.csv', billCsv));
    await expect(keepIntake(consultant, ready.id, ready.version)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/1 Dec 2025 to 31 Dec 2025.*20 Dec 2025 to 19 Jan 2026/) as string,
    });
    expect(await listBills(engagement.id)).toHaveLength(1);
    expect((await Intake.findByPk(ready.id))?.state).toBe('read');
  });
});

describe.skipIf(!hasShared)('a real year of a steel plant (skipped where ../shared is absent)', () => {
  let view: IntakeView;
  let actor: Actor;
  let code: string;
  const content = hasShared ? readFileSync(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv')) : Buffer.alloc(0);

  beforeAll(async () => {
    actor = await buildActor();
    const year = { yearFrom: '2018-01-01', yearTo: '2019-01-01', timeZone: 'Asia/Seoul' };
    code = (await buildEngagement({ memberIds: [actor.id], ...year })).code;
    view = await confirmAll(actor, await bring(actor, code, 'intervals', 'steel-plant-2018.csv', content));
  });

  // Expected figures: README of the data set (UCI Machine Learning Repository 851), computed with a separate program.
  it('is read as it is', () => {
    const { report } = view.preview!;
    expect(report).toMatchObject({ intervals: 35_040, missing: 0, stepMinutes: 15 });
    expect(report!.totalKwh).toBeCloseTo(959_636.71, 2);
    expect(report!.totalKvarhLagging).toBeCloseTo(456_759.84, 2);
    expect(report!.totalKvarhLeading).toBeCloseTo(135_638.04, 2);
    expect(new Date(report!.firstMs).toISOString()).toBe('2017-12-31T15:00:00.000Z');
  });

  it('is kept whole, and the station tells its year', async () => {
    await keepIntake(actor, view.id, view.version);
    const { year, kept, picture } = await intervalsStation(await openEngagement(actor, code));
    expect(year).toMatchObject({ stepMinutes: 15, intervals: 35_040, present: 35_040, gapCount: 0 });
    expect(year!.peak).toMatchObject({ date: '2018-11-22', minute: 9 * 60 + 30 });
    expect(year!.peak!.kw).toBeCloseTo(628.72, 2);
    expect(year!.months).toHaveLength(12);
    expect(year!.months.reduce((sum, month) => sum + (month.kwh ?? 0), 0)).toBeCloseTo(959_636.71, 2);
    expect(kept).toMatchObject([{ fileName: 'steel-plant-2018.csv', intervals: 35_040, missing: 0 }]);
    expect(picture!.days).toHaveLength(365);
    expect(picture!.days.every((day) => day.readings.length === 96)).toBe(true);
  });
});
