import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { LoadSeries } from '../../src/core/load';
import type { Measured } from './run';

const intervals = 35_040;

/** A year of quarter-hours with kWh, lagging and leading kvarh and quality: four channels. */
function year(): LoadSeries {
  return {
    startMs: Date.UTC(2026, 0, 1),
    stepMinutes: 15,
    kwh: Float64Array.from({ length: intervals }, (_, index) => 100 + (index % 96) * 1.7),
    kvarhLagging: Float64Array.from({ length: intervals }, (_, index) => 50 + (index % 96) * 0.3),
    kvarhLeading: new Float64Array(intervals),
    quality: new Uint8Array(intervals),
  };
}

/**
 * Keeping a year of four channels: milliseconds of the transaction and bytes stored, and reading it back. The tables are
 * made from the models: the migrations need the bundler, and the bench runs without it.
 */
export async function benchKeep(): Promise<Measured[]> {
  const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-bench-'));
  const { configureEnv } = await import('../../src/server/env');
  configureEnv({ NODE_ENV: 'test', DATA_DIR: folder, SESSION_SECRET: 'a-secret-of-the-bench-of-enough-length' });
  const { sequelize } = await import('../../src/server/db/connection');
  const { inTx } = await import('../../src/server/db/tx');
  const { ReadingBlock } = await import('../../src/server/models/ReadingBlock');
  const { Trail } = await import('../../src/server/models/Trail');
  const { GapFill } = await import('../../src/server/models/GapFill');
  const { keepSeries } = await import('../../src/server/services/reading-blocks');
  const { loadSeries } = await import('../../src/server/services/readings');
  try {
    for (const model of [ReadingBlock, Trail, GapFill]) await model.sync();
    const load = year();
    const endMs = load.startMs + intervals * 15 * 60_000;
    const keptMs: number[] = [];
    const readMs: number[] = [];
    for (let meterId = 1; meterId <= 7; meterId++) {
      const begun = performance.now();
      await inTx(() => keepSeries(meterId, meterId, load));
      const kept = performance.now();
      await loadSeries(meterId, load.startMs, endMs);
      keptMs.push(kept - begun);
      readMs.push(performance.now() - kept);
    }
    const bytes = Number(await ReadingBlock.sum('count', { where: { meterId: 1, channel: 'quality' } })) * (3 * 8 + 1);
    const [{ stored }] = (await sequelize
      .query('SELECT SUM(LENGTH("values")) stored FROM reading_blocks WHERE meter_id = 1')
      .then(([rows]) => rows)) as [{ stored: number }];
    if (stored !== bytes) throw new Error(`stored ${stored} bytes, ${bytes} expected`);
    return [
      {
        name: 'keeping a year of 15-minute readings in four channels, years a second',
        perSecond: 1000 / middle(keptMs),
        figures: `${middle(keptMs).toFixed(0)} ms in one transaction with its trail, ${stored.toLocaleString('en-US')} bytes stored in 48 blocks; read back in ${middle(readMs).toFixed(0)} ms`,
      },
    ];
  } finally {
    await sequelize.close();
    rmSync(folder, { recursive: true, force: true });
  }
}

const middle = (values: number[]) => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN;
