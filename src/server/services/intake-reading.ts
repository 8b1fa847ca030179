import type { IntakeProblem } from '../../core/intake';
import type { StoredReading } from '../../schemas/intake';
import type { JobProgress } from '../../schemas/job';
import { inTx } from '../db/tx';
import { conflict } from '../errors';
import { Intake } from '../models/Intake';
import type { Actor } from '../policies/actor';
import type { OpenIntake } from './intake-guard';
import { previewFile, type FileReading } from './intake-read';
import { runningJobs, startJob, type JobControls } from './jobs';

const kind = 'read-file';

/** Begins reading a file whose row says so; its row tells what was found, also when nobody waits for it. */
export function startReading(actor: Actor, { intake, opened }: OpenIntake): Promise<JobProgress> {
  const what = { engagementId: opened.engagement.id, kind, subjectId: intake.id, unit: 'bytes' };
  return startJob(actor, what, (controls) => readAndStore(intake, opened.site.timeZone, controls));
}

async function readAndStore(intake: Intake, timeZone: string, { report, signal }: JobControls) {
  try {
    const onProgress = ({ done, planned, unit }: { done: number; planned: number; unit: string }) =>
      report(done, planned, unit);
    const reading = await previewFile(intake, { timeZone }, { signal, onProgress });
    signal.throwIfAborted();
    await inTx(() => intake.update(readingValues(reading, { timeZone, confirmed: [], readWithId: null })));
  } catch (error) {
    const message = signal.aborted ? 'Reading was stopped before its end.' : 'Reading failed on our side.';
    await inTx(() => intake.update(notRead(intake, message)));
    throw error;
  }
  return { intakeId: intake.id };
}

/** What of a reading goes into the row. */
export function readingValues(reading: FileReading, said: Omit<StoredReading, 'preview'>) {
  if (!('preview' in reading)) return refusedWith(reading.problems);
  const { preview } = reading;
  return {
    state: 'read' as const,
    columnMap: preview.columnMap,
    preview: { ...said, preview },
    report: preview.report,
    problems: preview.problems,
  };
}

function refusedWith(problems: IntakeProblem[]) {
  return { state: 'refused' as const, columnMap: null, preview: null, report: null, problems };
}

const notRead = ({ fileName }: Intake, message: string) =>
  refusedWith([{ message, where: fileName, remedy: 'Nothing is lost: read it again, or give it up.' }]);

/** The job that reads a file; null where none runs. */
export async function readingOf({ id, engagementId, state }: Intake): Promise<JobProgress | null> {
  if (state !== 'reading') return null;
  return (await runningJobs(engagementId, kind)).find((job) => job.subjectId === id) ?? null;
}

/** @throws {ServiceError} 409 while a file is being read */
export function assertNotReading({ state, fileName }: Intake): void {
  if (state === 'reading') throw conflict(`${fileName} is still being read. Wait for it, or stop the reading first.`);
}

/** Says of files that a stopped server was reading that they can be read again. Called at boot. */
export async function closeOrphanedReadings(): Promise<void> {
  const left = await Intake.findAll({ where: { state: 'reading' } });
  await inTx(async () => {
    for (const intake of left) await intake.update(notRead(intake, 'The server was stopped while it read this file.'));
  });
}
