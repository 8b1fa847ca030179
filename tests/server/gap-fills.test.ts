import { beforeEach, describe, expect, it } from 'vitest';
import { localDateStartMs, type LoadSeries } from '@/core/load';
import { inTx } from '@/server/db/tx';
import { GapFill } from '@/server/models/GapFill';
import { Trail } from '@/server/models/Trail';
import { Engagement } from '@/server/models/Engagement';
import { ReadingBlock } from '@/server/models/ReadingBlock';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { fillGap, listFills, previewGap, refreshFills, takeBackFill } from '@/server/services/gap-fills';
import { intervalsStation } from '@/server/services/intervals';
import { keepSeries } from '@/server/services/reading-blocks';
import { laidSeries, loadSeries, presentFraction } from '@/server/services/readings';
import { buildActor, buildEngagement, buildIntake } from '../setup/build';

const zone = 'America/Chicago';
const hour = 3_600_000;
const startMs = localDateStartMs('2026-01-01', zone);
const endMs = localDateStartMs('2026-03-01', zone);
/** An hour of Wednesday 28 January, with four Wednesdays on either side. */
const gapAt = (localDateStartMs('2026-01-28', zone) - startMs) / hour + 10;
const gap = { fromMs: startMs + gapAt * hour, toMs: startMs + (gapAt + 2) * hour };

/** Hours of January and February; the energy is 100 and the number of the week. */
function hours(blank: number[] = []): LoadSeries {
  const count = (endMs - startMs) / hour;
  const load: LoadSeries = {
    startMs,
    stepMinutes: 60,
    kwh: Float64Array.from({ length: count }, (_, at) => 100 + Math.floor(at / 168)),
    kvarhLagging: new Float64Array(count).fill(50),
    kvarhLeading: new Float64Array(count).fill(NaN),
    quality: new Uint8Array(count),
  };
  for (const at of blank) {
    load.quality[at] = 2;
    load.kwh[at] = load.kvarhLagging[at] = NaN;
  }
  return load;
}

let actor: Actor;
let engagement: Engagement;
let intakeId: number;
const read = () => loadSeries(engagement.meterId, startMs, endMs);
const fill = (method: 'same-weekday' | 'linear' = 'same-weekday') =>
  fillGap(actor, engagement.code, { ...gap, method });

beforeEach(async () => {
  actor = await buildActor();
  const year = { yearFrom: '2026-01-01', yearTo: '2026-03-01' };
  engagement = await buildEngagement({ memberIds: [actor.id], timeZone: zone, ...year });
  intakeId = (await buildIntake({ engagementId: engagement.id, fileName: 'hours.csv', keptAt: new Date() })).id;
  await inTx(() => keepSeries(engagement.meterId, intakeId, hours([gapAt, gapAt + 1])));
});

describe('estimating a gap', () => {
  it('is for those who work on the engagement, while it is open, and where something is missing', async () => {
    const { code, clientId } = engagement;
    const person = await buildActor({ role: 'client', clientId });
    for (const other of [person, await buildActor()]) {
      await expect(previewGap(other, code, gap)).rejects.toMatchObject({ status: 404 });
      await expect(fillGap(other, code, { ...gap, method: 'linear' })).rejects.toMatchObject({ status: 404 });
      await expect(takeBackFill(other, code, { id: 1, version: 0 })).rejects.toMatchObject({ status: 404 });
    }
    const whole = { fromMs: startMs, toMs: startMs + hour };
    await expect(previewGap(actor, code, whole)).rejects.toMatchObject({ status: 422 });
    await expect(fillGap(actor, code, { ...whole, method: 'linear' })).rejects.toMatchObject({ status: 422 });
    await inTx(() => engagement.update({ closedAt: new Date() }));
    await expect(fill()).rejects.toMatchObject({ status: 409 });
  });

  it('shows what each way would add before, and stores nothing', async () => {
    const { ways, measuredKw, stepMinutes } = await previewGap(actor, engagement.code, gap);
    // The hours lie in the fourth week from 0 (103 kWh); the Wednesdays around are of weeks 0 to 2 and 4 to 7, and one before the
    // year is not there: (100+101+102 + 104+105+106+107) / 7 = 725 / 7.
    expect(stepMinutes).toBe(60);
    expect(ways[0]).toMatchObject({ method: 'same-weekday', intervals: 2, left: 0 });
    expect(ways[0]!.kwh).toBeCloseTo((2 * 725) / 7, 9);
    expect(ways[1]).toMatchObject({ method: 'linear', intervals: 2, left: 0, kwh: 206, highestKw: 103 });
    expect(measuredKw).toHaveLength(24);
    expect([measuredKw[9], measuredKw[10], measuredKw[11], measuredKw[12]]).toEqual([103, null, null, 103]);
    expect(await GapFill.count({ where: { meterId: engagement.meterId } })).toBe(0);
  });

  it('fills the readings in, marked estimated, with method, person and span kept; taking it back leaves the gap', async () => {
    const before = await read();
    const made = await fill();
    expect(made).toMatchObject({ ...gap, method: 'same-weekday', intervals: 2, madeBy: actor.name });
    const { load, sources } = await laidSeries(engagement.meterId, startMs, endMs);
    expect(load.kwh[gapAt]).toBeCloseTo(725 / 7, 9);
    expect(load.kvarhLagging[gapAt]).toBe(50);
    expect([...load.quality.slice(gapAt - 1, gapAt + 3)]).toEqual([0, 1, 1, 0]);
    expect([sources[gapAt - 1], sources[gapAt]]).toEqual([intakeId, -made.id]);
    expect(await presentFraction(engagement.meterId, startMs, endMs)).toBe(1);
    const { year, picture } = await intervalsStation(await openEngagement(actor, engagement.code));
    expect(year).toMatchObject({ estimated: 2, gapCount: 0, fills: [{ id: made.id, madeBy: actor.name }] });
    expect(picture!.days.find(({ date }) => date === '2026-01-28')?.estimated).toEqual([10, 11]);
    await expect(fill('linear')).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/Take that back/) as string,
    });
    await expect(takeBackFill(actor, engagement.code, { id: made.id, version: 9 })).rejects.toMatchObject({
      code: 'stale',
    });
    await takeBackFill(actor, engagement.code, made);
    expect(await read()).toEqual(before);
  });

  it('says why where a way cannot estimate', async () => {
    await inTx(async () => {
      for (const block of await ReadingBlock.findAll({ where: { intakeId } })) await block.destroy();
      await keepSeries(engagement.meterId, intakeId, hours([gapAt, gapAt + 1, gapAt + 2]));
    });
    const long = { fromMs: gap.fromMs, toMs: gap.toMs + hour, method: 'linear' as const };
    await expect(fillGap(actor, engagement.code, long)).rejects.toMatchObject({
      status: 422,
      fields: { method: [expect.stringMatching(/at most two hours/)] },
    });
  });
});

describe('when readings change', () => {
  const change = (load: LoadSeries, overlap: 'keep-old' | 'keep-new') =>
    inTx(async () => {
      const other = await buildIntake({ engagementId: engagement.id, fileName: 'more.csv', keptAt: new Date() });
      await keepSeries(engagement.meterId, other.id, load, overlap);
      await refreshFills(engagement.meterId, zone);
      return other;
    });
  const undo = (id: number) =>
    inTx(async () => {
      for (const block of await ReadingBlock.findAll({ where: { intakeId: id } })) await block.destroy();
      await refreshFills(engagement.meterId, zone);
    });
  const trailOf = (id: number) => Trail.findAll({ where: { subject: 'GapFill', subjectId: id }, order: ['id'] });

  it('an estimate gives way to what was measured, and comes back bit for bit when that is undone', async () => {
    const made = await fill();
    const before = await read();
    const file = await change(hours(), 'keep-old');
    expect((await read()).kwh[gapAt]).toBe(103);
    expect((await read()).quality[gapAt]).toBe(0);
    expect(await listFills(engagement.meterId, startMs, endMs)).toMatchObject([
      { id: made.id, intervals: 0, left: 0, kwh: null },
    ]);
    await undo(file.id);
    expect(await read()).toEqual(before);
    const rows = await trailOf(made.id);
    expect(rows.map(({ action }) => action)).toEqual(['create', 'update', 'update']);
    expect(rows[1]!.after).toMatchObject({ intervals: 0 });
  });

  it('an estimate that rests on them is worked out again, one that does not is let alone', async () => {
    const made = await fill();
    const raised = hours();
    raised.kwh = raised.kwh.map((kwh) => kwh + 70);
    raised.quality.set([2, 2], gapAt);
    raised.kwh.set([NaN, NaN], gapAt);
    raised.kvarhLagging.set([NaN, NaN], gapAt);
    await change(raised, 'keep-new');
    expect((await read()).kwh[gapAt]).toBeCloseTo(725 / 7 + 70, 9);
    expect((await trailOf(made.id)).at(-1)).toMatchObject({
      action: 'update',
      after: { kwh: expect.closeTo(2 * (725 / 7 + 70), 6) as number },
    });
    const far = hours();
    const later = { ...far, startMs: localDateStartMs('2027-01-01', zone) };
    const { length } = await trailOf(made.id);
    await change(later, 'keep-new');
    expect(await trailOf(made.id)).toHaveLength(length);
  });

  it('an estimate with nothing left to go by fills nothing and says so', async () => {
    const made = await fill();
    await undo(intakeId);
    expect(await listFills(engagement.meterId, startMs, endMs)).toMatchObject([{ id: made.id, intervals: 0 }]);
  });
});
