import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { beforeEach, describe, expect, it } from 'vitest';
import { aggregateLoad, type LoadSeries } from '@/core/load';
import { priceBills } from '@/core/tariff';
import { inTx } from '@/server/db/tx';
import { configureEnv } from '@/server/env';
import type { Engagement } from '@/server/models/Engagement';
import { ReadingBlock } from '@/server/models/ReadingBlock';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { fillGap, takeBackFill } from '@/server/services/gap-fills';
import { pricingInputs } from '@/server/services/pricing';
import { keepSeries } from '@/server/services/reading-blocks';
import { chooseSchedule } from '@/server/services/tariff';
import { buildActor, buildEngagement, buildIntake } from '../setup/build';
import { keepBills, keepLoad, quarrySchedule, steadyLoad, twelveMonths } from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
writeFileSync(path.join(folder, 'quarry-lp.yaml'), quarrySchedule);
process.env.TARIFF_DIR = folder;
configureEnv({});

const quarter = 15 * 60_000;
const blank = 20_000;
let actor: Actor;
let engagement: Engagement;

/** 3,000 kW throughout, one quarter-hour missing. */
function load(): LoadSeries {
  const steady = steadyLoad('2025-11-01', '2026-11-01', () => 3000);
  for (const channel of ['kwh', 'kvarhLagging', 'kvarhLeading'] as const) steady[channel][blank] = NaN;
  steady.quality[blank] = 2;
  return steady;
}

const inputs = async () => pricingInputs(await openEngagement(actor, engagement.code));

async function keepAbove(series: LoadSeries): Promise<() => Promise<void>> {
  const intake = await buildIntake({ engagementId: engagement.id, fileName: 'above.csv' });
  await inTx(() => keepSeries(engagement.meterId, intake.id, series, 'keep-new'));
  return () =>
    inTx(async () => {
      for (const block of await ReadingBlock.findAll({ where: { intakeId: intake.id } })) await block.destroy();
    });
}

beforeEach(async () => {
  actor = await buildActor();
  engagement = await buildEngagement({ memberIds: [actor.id] });
  const printed = twelveMonths(2025, 11).map((period) => ({ ...period, lines: [], totalMinor: 100 }));
  await keepBills(engagement, printed);
  await keepLoad(engagement, load());
  const contract = { contractKw: 500 };
  const history = { adjKw: Array.from({ length: 11 }, () => 4000) };
  await chooseSchedule(actor, engagement.code, {
    scheduleId: 'quarry-lp',
    contract,
    history,
    version: null,
    takeNewText: false,
  });
});

describe('what is priced from readings', () => {
  it('is worked out anew when a gap is estimated, tells it, and is as before when that is taken back', async () => {
    const before = await inputs();
    const fromMs = before.load.startMs + blank * quarter;
    const made = await fillGap(actor, engagement.code, { fromMs, toMs: fromMs + quarter, method: 'linear' });
    const filled = await inputs();
    expect(filled.dataKey).not.toBe(before.dataKey);
    expect([filled.load.kwh[blank], filled.load.quality[blank]]).toEqual([750, 1]);
    const { periods, contract, history, schedule } = filled;
    const notes = priceBills(schedule, filled.load, { periods, contract, history }).flatMap((bill) => bill.notes);
    expect(notes.filter((note) => /1 of [\d,]+ intervals are estimated/.test(note))).toHaveLength(1);
    await takeBackFill(actor, engagement.code, made);
    const after = await inputs();
    expect(after.dataKey).toBe(before.dataKey);
    expect(after.load).toEqual(before.load);
  });

  it('is worked out anew when a file is kept above, and as before when that is undone', async () => {
    const before = await inputs();
    const undo = await keepAbove(steadyLoad('2026-03-01', '2026-04-01', () => 3500));
    const above = await inputs();
    expect(above.dataKey).not.toBe(before.dataKey);
    expect(Math.max(...above.load.kwh.filter((kwh) => !Number.isNaN(kwh)))).toBe(875);
    await undo();
    expect((await inputs()).dataKey).toBe(before.dataKey);
    expect((await inputs()).load).toEqual(before.load);
  });

  it('is refused where the readings are longer than the demand window, naming the demand, until they are undone', async () => {
    const steady = steadyLoad('2026-03-01', '2026-04-01', () => 3500);
    const grid = { startMs: steady.startMs, stepMinutes: 60, count: steady.kwh.length / 4 };
    const undo = await keepAbove(aggregateLoad(steady, grid));
    await expect(inputs()).rejects.toMatchObject({
      status: 409,
      details: { station: 'intervals' },
      message: expect.stringMatching(/"maxKw" over 15 minutes.*means of 60/) as string,
    });
    await undo();
    expect((await inputs()).load.stepMinutes).toBe(15);
  });
});
