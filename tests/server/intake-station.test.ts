import { describe, expect, it } from 'vitest';
import { localDateStartMs, type LoadSeries } from '@/core/load';
import { inTx } from '@/server/db/tx';
import type { Actor } from '@/server/policies/actor';
import { addBill } from '@/server/services/bills';
import { billsStation } from '@/server/services/bills-station';
import { openEngagement } from '@/server/services/engagements';
import { intervalsStation } from '@/server/services/intervals';
import { keepSeries } from '@/server/services/reading-blocks';
import { buildActor, buildEngagement, buildIntake } from '../setup/build';

const zone = 'America/Chicago';
const stepMs = 15 * 60_000;

/** One kWh, half a kvarh lagging in every quarter-hour between two local midnights; `blank` are missing. */
function evenLoad(from: string, to: string, blank: number[] = []): LoadSeries {
  const startMs = localDateStartMs(from, zone);
  const count = (localDateStartMs(to, zone) - startMs) / stepMs;
  const load: LoadSeries = {
    startMs,
    stepMinutes: 15,
    kwh: new Float64Array(count).fill(1),
    kvarhLagging: new Float64Array(count).fill(0.5),
    kvarhLeading: new Float64Array(count).fill(NaN),
    quality: new Uint8Array(count),
  };
  for (const index of blank) {
    load.kwh[index] = NaN;
    load.kvarhLagging[index] = NaN;
    load.quality[index] = 2;
  }
  return load;
}

async function keptEngagement(load: LoadSeries, year: { yearFrom: string; yearTo: string }) {
  const actor: Actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id], timeZone: zone, ...year });
  const intake = await buildIntake({ engagementId: engagement.id, fileName: 'even.csv', keptAt: new Date() });
  await inTx(() => keepSeries(engagement.meterId, intake.id, load));
  return { actor, opened: await openEngagement(actor, engagement.code) };
}

describe('station Intervals', () => {
  it('says nothing is kept where nothing is', async () => {
    const actor = await buildActor();
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    const station = await intervalsStation(await openEngagement(actor, engagement.code));
    expect(station).toMatchObject({ year: null, picture: null, kept: [], files: [] });
  });

  // US clock changes: back on the first Sunday of November, forward on the second Sunday of March (15 U.S.C. 260a).
  it('gives the days of clock changes their 25 and 23 hours', async () => {
    const year = { yearFrom: '2025-11-01', yearTo: '2026-04-01' };
    const { opened } = await keptEngagement(evenLoad('2025-11-01', '2026-04-01'), year);
    const { year: kept, picture } = await intervalsStation(opened);
    const lengthOf = (date: string) => picture!.days.find((day) => day.date === date)?.readings.length;
    expect([lengthOf('2025-11-01'), lengthOf('2025-11-02'), lengthOf('2026-03-08')]).toEqual([96, 100, 92]);
    // November has 30 days and an hour more, March 31 days and an hour less.
    expect(kept!.months.map((month) => month.kwh)).toEqual([30 * 96 + 4, 31 * 96, 31 * 96, 28 * 96, 31 * 96 - 4]);
    expect(kept!.months[0]!.kvarhLagging).toBe((30 * 96 + 4) / 2);
    expect(kept!.months[0]!.kvarhLeading).toBeNull();
    expect(kept!.peak).toMatchObject({ kw: 4, kvarLagging: 2, date: '2025-11-01', minute: 0 });
  });

  it('counts what nobody brought in as missing, in gaps from instant to instant', async () => {
    const year = { yearFrom: '2026-01-01', yearTo: '2026-01-04' };
    const { opened } = await keptEngagement(evenLoad('2026-01-01', '2026-01-03', [4, 5, 20]), year);
    const { year: kept } = await intervalsStation(opened);
    const start = localDateStartMs('2026-01-01', zone);
    expect(kept).toMatchObject({ intervals: 288, present: 189, gapCount: 3 });
    expect(kept!.gaps).toEqual([
      { fromMs: start + 4 * stepMs, toMs: start + 6 * stepMs, intervals: 2 },
      { fromMs: start + 20 * stepMs, toMs: start + 21 * stepMs, intervals: 1 },
      { fromMs: start + 192 * stepMs, toMs: start + 288 * stepMs, intervals: 96 },
    ]);
  });
});

describe('station Bills', () => {
  it('sets printed energies against the readings, of a period with a missing one as the least it can be', async () => {
    const year = { yearFrom: '2026-01-01', yearTo: '2026-04-01' };
    const { actor, opened } = await keptEngagement(evenLoad('2026-01-01', '2026-03-01', [3000]), year);
    const bill = (from: string, to: string, kwh: number) =>
      addBill(actor, opened.engagement.code, { from, to, quantities: { kwh }, lines: [], totalMinor: 100 });
    const january = await bill('2026-01-01', '2026-02-01', 2975);
    const february = await bill('2026-02-01', '2026-03-01', 2688);
    const later = await bill('2026-04-01', '2026-05-01', 10);
    const station = await billsStation(opened);
    const energy = (printed: number, metered: number) => [{ name: 'kwh', printed, metered }];
    // One kWh in each quarter-hour: 31 days in January, 28 in February less the one that is missing.
    expect(station.meterChecks).toMatchObject([
      { billId: january.id, missing: 0, figures: energy(2975, 31 * 96) },
      { billId: february.id, missing: 1, figures: energy(2688, 28 * 96 - 1) },
    ]);
    expect(station.meterChecks[1]!.remarks.join()).toMatch(/at least 2,687\skWh/);
    expect(station.bills).toHaveLength(2);
    expect(station.laterBills.map((one) => one.id)).toEqual([later.id]);
  });
});
