import { describe, expect, it } from 'vitest';
import type { IntervalsOverlap } from '@/schemas/overlap';
import { inTx } from '@/server/db/tx';
import { Engagement } from '@/server/models/Engagement';
import { Intake } from '@/server/models/Intake';
import { ReadingBlock } from '@/server/models/ReadingBlock';
import { Trail } from '@/server/models/Trail';
import { keepIntake, undoIntake } from '@/server/services/intake-keep';
import { intakeOverlap } from '@/server/services/intake-overlap';
import { laidSeries, loadSeries, presentFraction } from '@/server/services/readings';
import type { Actor } from '@/server/policies/actor';
import { buildActor, buildClient, buildEngagement } from '../setup/build';
import { billCsv, bring, bringAndKeep, confirmAll, scene, stepMs } from '../setup/intake';

const start = Date.parse('2026-01-01T00:00:00Z');

/** Rows of kWh and lagging kvarh from an index on; null is blank. */
function csv(from: number, kwh: (number | null)[], stepMinutes = 15): string {
  const rows = kwh.map((value, index) => {
    const stamp = new Date(start + (from + index) * stepMinutes * 60_000).toISOString().replace('T', ' ').slice(0, 16);
    return `${stamp},${value ?? ''},${value === null ? '' : value / 2}`;
  });
  return ['Interval start,Active energy kWh,Reactive lagging kvarh', ...rows].join('\n');
}

const run = (count: number, value = (index: number) => 10 + (index % 7)) =>
  Array.from({ length: count }, (_, i) => value(i));

async function ready(actor: Actor, code: string, fileName: string, content: string) {
  return confirmAll(actor, await bring(actor, code, 'intervals', fileName, content));
}

/** January 1 to 3 kept with two blanks; a file of January 2 to 4 with another value everywhere on the 2nd. */
async function overlapping() {
  const { consultant, engagement, code } = await scene();
  const kept = run(288);
  const old = await bringAndKeep(
    consultant,
    code,
    'intervals',
    'old.csv',
    csv(
      0,
      kept.map((one, i) => (i === 100 || i === 101 ? null : one)),
    ),
  );
  const comes = run(288, (i) => (i < 96 ? 20 : 10 + ((i + 96) % 7)));
  comes[8] = null as never;
  const fresh = await ready(consultant, code, 'new.csv', csv(96, comes));
  const read = () => loadSeries(engagement.meterId, start, start + 384 * stepMs);
  return { consultant, engagement, code, old, fresh, read };
}

const bitsOf = (load: Awaited<ReturnType<typeof loadSeries>>) =>
  ['kwh', 'kvarhLagging', 'kvarhLeading', 'quality'].map((channel) =>
    Buffer.from(load[channel as 'kwh'].buffer).toString('hex'),
  );

describe('a file that overlaps what is kept', () => {
  it('is nobody’s to see but those who work on it', async () => {
    const { engagement, fresh } = await overlapping();
    const person = await buildActor({ role: 'client', clientId: engagement.clientId });
    for (const actor of [person, await buildActor()]) {
      await expect(intakeOverlap(actor, fresh.id)).rejects.toMatchObject({ status: 404 });
      await expect(keepIntake(actor, fresh.id, fresh.version, 'keep-new')).rejects.toMatchObject({ status: 404 });
    }
  });

  it('is shown side by side: in common, equal, differing, and missing in each', async () => {
    const { consultant, old, fresh } = await overlapping();
    const view = (await intakeOverlap(consultant, fresh.id)) as IntervalsOverlap;
    // Day 2 (96 intervals): blanks at 100 and 101 of the kept, at 104 of the new: 93 in common, all differing (10..16 against 20).
    // Day 3 (96): equal. Day 4 (96): only in the new file.
    expect(view).toMatchObject({
      kind: 'intervals',
      asks: true,
      files: [{ intakeId: old.id, fileName: 'old.csv' }],
      span: { fromMs: start + 96 * stepMs, toMs: start + 288 * stepMs },
      stepMinutes: { kept: [15], comes: 15, compared: 15 },
      keepNewRefused: null,
      total: { inCommon: 189, equal: 96, onlyKept: 1, onlyComes: 98 },
    });
    // 20 kWh for 10 kWh in a quarter-hour: 40 kW apart at most, first where index % 7 = 0, the 98th.
    expect(view.total!.greatest).toEqual({ ms: start + 98 * stepMs, channel: 'kwh', difference: 40 });
    expect(view.months).toHaveLength(1);
  });

  it('is not kept without a choice: 409 with both, and nothing stored', async () => {
    const { consultant, fresh, read } = await overlapping();
    const before = bitsOf(await read());
    await expect(keepIntake(consultant, fresh.id, fresh.version)).rejects.toMatchObject({
      status: 409,
      details: { overlap: { asks: true, total: { inCommon: 189 } } },
    });
    expect(bitsOf(await read())).toEqual(before);
    expect((await Intake.findByPk(fresh.id))?.state).toBe('read');
  });

  it('kept as new lies above what was kept, which comes back bit for bit when it is undone', async () => {
    const { consultant, engagement, fresh, read } = await overlapping();
    const before = bitsOf(await read());
    const kept = await keepIntake(consultant, fresh.id, fresh.version, 'keep-new');
    const { load, sources } = await laidSeries(engagement.meterId, start, start + 384 * stepMs);
    expect([...load.kwh.slice(95, 99)]).toEqual([10 + (95 % 7), 20, 20, 20]);
    expect(load.kwh[104]).toBe(10 + (104 % 7));
    expect([sources[95], sources[96], sources[104]]).toEqual([kept.id - 1, kept.id, kept.id - 1]);
    expect(load.quality.every((mark) => mark === 0)).toBe(true);
    await undoIntake(consultant, kept.id, kept.version);
    expect(bitsOf(await read())).toEqual(before);
    const again = (await Intake.findByPk(fresh.id))!;
    await keepIntake(consultant, fresh.id, again.version, 'keep-new');
    expect([...(await read()).kwh.slice(95, 99)]).toEqual([10 + (95 % 7), 20, 20, 20]);
  });

  it('kept beneath fills only what is missing, and comes to light where the old file is undone', async () => {
    const { consultant, engagement, old, fresh, read } = await overlapping();
    await keepIntake(consultant, fresh.id, fresh.version, 'keep-old');
    const load = await read();
    expect([...load.kwh.slice(98, 103)]).toEqual([10, 11, 20, 20, 14]);
    expect(load.kwh[300]).toBe(10 + (300 % 7));
    expect(await presentFraction(engagement.meterId, start, start + 384 * stepMs)).toBe(1);
    await undoIntake(consultant, old.id, old.version);
    expect((await read()).kwh[98]).toBe(20);
  });

  it('keeps three files apart, whichever is undone first', async () => {
    const { consultant, code, old, fresh, read } = await overlapping();
    const second = await keepIntake(consultant, fresh.id, fresh.version, 'keep-new');
    const two = bitsOf(await read());
    const third = await ready(
      consultant,
      code,
      'third.csv',
      csv(
        90,
        run(20, () => 99),
      ),
    );
    const kept = await keepIntake(consultant, third.id, third.version, 'keep-new');
    expect((await read()).kwh[97]).toBe(99);
    await undoIntake(consultant, kept.id, kept.version);
    expect(bitsOf(await read())).toEqual(two);
    await undoIntake(consultant, old.id, old.version);
    await undoIntake(consultant, second.id, second.version);
    expect(await ReadingBlock.count({ where: { intakeId: [old.id, second.id, third.id] } })).toBe(0);
  });

  it('touches no block of the old file, and leaves its own in the trail', async () => {
    const { consultant, old, fresh } = await overlapping();
    const blocks = await ReadingBlock.findAll({ where: { intakeId: old.id }, raw: true });
    await keepIntake(consultant, fresh.id, fresh.version, 'keep-new');
    expect(await ReadingBlock.findAll({ where: { intakeId: old.id }, raw: true })).toEqual(blocks);
    const own = await ReadingBlock.findAll({ where: { intakeId: fresh.id }, attributes: ['id', 'rank'] });
    expect(own.every(({ rank }) => rank > blocks[0]!.rank)).toBe(true);
    const rows = await Trail.findAll({ where: { subject: 'ReadingBlock', subjectId: own.map(({ id }) => id) } });
    expect(rows).toHaveLength(own.length);
  });

  it('needs no choice where it only fills gaps, or carries another channel', async () => {
    const { consultant, code, read } = await overlapping();
    const filler = await ready(consultant, code, 'filler.csv', csv(100, [55, 56]));
    expect(await intakeOverlap(consultant, filler.id)).toMatchObject({ asks: false, total: { onlyComes: 2 } });
    await keepIntake(consultant, filler.id, filler.version);
    expect([...(await read()).kwh.slice(100, 102)]).toEqual([55, 56]);
  });

  it('goes beneath, not above, readings of another engagement, whose files it does not name', async () => {
    const { consultant, engagement, code, fresh } = await overlapping();
    const client = await buildClient();
    const other = await buildEngagement({ clientId: client.id, memberIds: [consultant.id], timeZone: 'UTC' });
    await inTx(() => other.update({ meterId: engagement.meterId }));
    const mine = await ready(
      consultant,
      other.code,
      'mine.csv',
      csv(
        0,
        run(96, () => 3),
      ),
    );
    const view = (await intakeOverlap(consultant, mine.id)) as IntervalsOverlap;
    expect(view.files).toEqual([{ intakeId: null, fileName: null }]);
    expect(view.keepNewRefused).toMatch(/another engagement/);
    expect(JSON.stringify(view)).not.toContain('old.csv');
    await expect(keepIntake(consultant, mine.id, mine.version, 'keep-new')).rejects.toMatchObject({ status: 409 });
    await keepIntake(consultant, mine.id, mine.version, 'keep-old');
    expect(await Engagement.count({ where: { code } })).toBe(1);
    expect(fresh.state).toBe('read');
  });
});

describe('files of different length of interval', () => {
  it('are compared and read in the longer one, and in the shorter again when that is undone', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(
      consultant,
      code,
      'intervals',
      'quarters.csv',
      csv(
        0,
        run(192, () => 5),
      ),
    );
    const hours = await ready(
      consultant,
      code,
      'hours.csv',
      csv(
        24,
        run(48, () => 21),
        60,
      ),
    );
    const view = (await intakeOverlap(consultant, hours.id)) as IntervalsOverlap;
    // The second day is in both: 24 hours of 4 x 5 = 20 kWh against 21 kWh, 1 kW apart.
    expect(view.stepMinutes).toEqual({ kept: [15], comes: 60, compared: 60 });
    expect(view.total).toMatchObject({ inCommon: 24, equal: 0, keptKwh: 480, comesKwh: 504, onlyComes: 24 });
    expect(view.total!.greatest!.difference).toBe(1);
    const kept = await keepIntake(consultant, hours.id, hours.version, 'keep-new');
    const load = await loadSeries(engagement.meterId, start, start + 72 * 4 * stepMs);
    expect(load.stepMinutes).toBe(60);
    expect([load.kwh[0], load.kwh[23], load.kwh[24], load.kwh[71]]).toEqual([20, 20, 21, 21]);
    await undoIntake(consultant, kept.id, kept.version);
    expect((await loadSeries(engagement.meterId, start, start + 192 * stepMs)).stepMinutes).toBe(15);
  });

  it('are refused where neither is a multiple of the other, or they begin apart', async () => {
    const { consultant, code } = await scene();
    await bringAndKeep(
      consultant,
      code,
      'intervals',
      'quarters.csv',
      csv(
        0,
        run(192, () => 5),
      ),
    );
    const twenties = await ready(
      consultant,
      code,
      'twenties.csv',
      csv(
        150,
        run(200, () => 5),
        20,
      ),
    );
    const refusal = { status: 409, message: expect.stringMatching(/neither length is a multiple/) as string };
    await expect(intakeOverlap(consultant, twenties.id)).rejects.toMatchObject(refusal);
    await expect(keepIntake(consultant, twenties.id, twenties.version, 'keep-new')).rejects.toMatchObject(refusal);
    expect((await Intake.findByPk(twenties.id))?.state).toBe('read');
  });
});

describe('bills that overlap kept ones', () => {
  it('are listed beside them', async () => {
    const { consultant, code } = await scene('America/Chicago');
    await bringAndKeep(consultant, code, 'bills', 'kept.csv', billCsv);
    const again = await confirmAll(consultant, await bring(consultant, code, 'bills', 'again.csv', billCsv));
    expect(await intakeOverlap(consultant, again.id)).toMatchObject({ kind: 'bills', asks: true });
  });
});
