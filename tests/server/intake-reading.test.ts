import { existsSync, readdirSync } from 'node:fs';
import path from 'node:path';
import { Readable } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { inTx } from '@/server/db/tx';
import { getEnv } from '@/server/env';
import { storeOriginal } from '@/server/drawer';
import { Intake } from '@/server/models/Intake';
import { authorizeIntake, readAgain, readIntake, receiveFile } from '@/server/services/intake';
import { keepIntake } from '@/server/services/intake-keep';
import { closeOrphanedReadings } from '@/server/services/intake-reading';
import { traceIntake } from '@/server/services/intake-trace';
import { cancelJob, jobEnded, readJob } from '@/server/services/jobs';
import { bring, intervalCsv, scene, stepMs } from '../setup/intake';

/** Takes a file in without waiting for it to be read. */
async function receive({ consultant, code }: Awaited<ReturnType<typeof scene>>, content: string) {
  const opened = await authorizeIntake(consultant, code);
  const file = await storeOriginal(Readable.from([Buffer.from(content)]));
  return receiveFile(consultant, opened, { kind: 'intervals', fileName: 'plant.csv', ...file }, 0);
}

describe('reading a file', () => {
  it('goes on as a job when nobody waits, and its row tells what was found', async () => {
    const place = await scene();
    const view = await receive(place, intervalCsv('2025-11-01', 96));
    expect(view).toMatchObject({ state: 'reading', preview: null });
    expect(view.reading).toMatchObject({ kind: 'read-file', subjectId: view.id, state: 'running' });
    expect(await jobEnded(view.reading!.id)).toBe(true);
    expect(await readJob(place.consultant, view.reading!.id)).toMatchObject({
      state: 'done',
      result: { intakeId: view.id },
    });
    const read = await readIntake(place.consultant, view.id);
    expect(read).toMatchObject({ state: 'read', reading: null });
    expect(read.preview?.report?.intervals).toBe(96);
  });

  it('can be stopped, which loses nothing, and read again', async () => {
    const place = await scene();
    const view = await receive(place, intervalCsv('2025-11-01', 96));
    await expect(readAgain(place.consultant, view.id, view.version)).rejects.toThrow(/still being read/);
    await expect(keepIntake(place.consultant, view.id, view.version)).rejects.toThrow(/still being read/);
    await cancelJob(place.consultant, view.reading!.id);
    await jobEnded(view.reading!.id);
    const stopped = await readIntake(place.consultant, view.id);
    expect(stopped.state).toBe('refused');
    expect(stopped.problems[0]?.message).toMatch(/stopped before its end/);
    expect(await readJob(place.consultant, view.reading!.id)).toMatchObject({ state: 'cancelled' });
    const again = await readAgain(place.consultant, view.id, stopped.version);
    expect(again).toMatchObject({ state: 'read', problems: [] });
    await expect(readAgain(place.consultant, view.id, again.version)).rejects.toThrow(/has been read/);
  });

  it('that a stopped server left is said to be so at the next start', async () => {
    const place = await scene();
    const view = await bring(place.consultant, place.code, 'intervals', 'plant.csv', intervalCsv('2025-11-01', 96));
    const intake = await Intake.findByPk(view.id, { rejectOnEmpty: true });
    await inTx(() => intake.update({ state: 'reading', preview: null }));
    await closeOrphanedReadings();
    const left = await readIntake(place.consultant, view.id);
    expect(left).toMatchObject({ state: 'refused', reading: null });
    expect(left.problems[0]).toMatchObject({ message: expect.stringMatching(/server was stopped/) as string });
  });

  it('leaves nothing of a load it handed over behind', async () => {
    const place = await scene();
    const view = await bring(place.consultant, place.code, 'intervals', 'plant.csv', intervalCsv('2025-11-01', 96));
    await keepIntake(place.consultant, view.id, view.version);
    const folder = path.resolve(getEnv().DATA_DIR, 'handed-over');
    expect(existsSync(folder)).toBe(true);
    expect(readdirSync(folder)).toEqual([]);
  });
});

describe('tracing a kept value', () => {
  it('names the row of the original, and refuses what is none of the file', async () => {
    const place = await scene();
    const view = await bring(place.consultant, place.code, 'intervals', 'plant.csv', intervalCsv('2025-11-01', 96));
    const ms = Date.parse('2025-11-01T00:00:00Z') + 10 * stepMs;
    const trace = await traceIntake(place.consultant, view.id, { ms });
    // The names stand in row 1, the eleventh reading in row 12.
    expect(trace.rows.map((row) => [row.number, row.cells[1]?.text])).toEqual([[12, '10.1']]);
    await expect(traceIntake(place.consultant, view.id, { ms: 0 })).rejects.toMatchObject({ status: 422 });
    await expect(traceIntake(place.consultant, view.id, { from: '2025-11-01' })).rejects.toMatchObject({ status: 422 });
    const stranger = await scene();
    await expect(traceIntake(stranger.consultant, view.id, { ms })).rejects.toMatchObject({ status: 404 });
  });
});
