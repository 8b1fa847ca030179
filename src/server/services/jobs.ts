import { EventEmitter } from 'node:events';
import type { JobProgress, JobResult } from '../../schemas/job';
import { inTx } from '../db/tx';
import { actAs } from '../db/context';
import { conflict, notFound, ServiceError } from '../errors';
import { log } from '../log';
import { Job } from '../models/Job';
import type { Actor } from '../policies/actor';
import { openEngagementById } from './engagements';

interface Running {
  controller: AbortController;
  progress: JobProgress;
  events: EventEmitter;
}

/** What the work may tell and hear: how far it is, and whether it is to stop. */
export interface JobControls {
  /** Units may change on the way: what is counted first may not be what is counted last. */
  report(done: number, planned?: number, unit?: string): void;
  signal: AbortSignal;
}

type Work = (controls: JobControls) => Promise<JobResult>;

const shared = globalThis as typeof globalThis & { counterlagJobs?: Map<number, Running> };
const running = (shared.counterlagJobs ??= new Map());

function present(job: Job): JobProgress {
  const { id, kind, subjectId, state, done, planned, unit, result, error, createdAt } = job;
  return { id, kind, subjectId, state, done, planned, unit, result, error, startedAt: createdAt.toISOString() };
}

/** What a job is. `alone`: one of its kind runs for an engagement at a time; the sentence tells who starts a second. */
interface JobKind {
  engagementId: number;
  kind: string;
  subjectId?: number;
  unit: string;
  alone?: string;
}

/**
 * Begins long work in the background in the person's name. It goes on when the page is left; its row tells how it ended.
 *
 * @throws {ServiceError} 409 where it is to run alone and another runs already
 */
export async function startJob(actor: Actor, { alone, ...what }: JobKind, work: Work): Promise<JobProgress> {
  const { job, entry } = await inTx(async () => {
    const [other] = alone === undefined ? [] : await runningJobs(what.engagementId, what.kind);
    if (other) throw conflict(alone ?? '', { job: other.id });
    const created = await Job.create({
      ...what,
      subjectId: what.subjectId ?? null,
      state: 'running',
      done: 0,
      planned: null,
      startedById: actor.id,
      result: null,
      error: null,
      endedAt: null,
    });
    return { job: created, entry: enter(created) };
  });
  void actAs({ actorId: actor.id, ip: null }, () => carryOut(job, entry, work)).catch((error: unknown) =>
    log().error({ job: job.id, err: error }, 'the end of a job was not stored'),
  );
  return entry.progress;
}

/** Lists a job as running, in the same turn as its row is made: the next to look finds it. */
function enter(job: Job): Running {
  const entry: Running = { controller: new AbortController(), progress: present(job), events: new EventEmitter() };
  entry.events.setMaxListeners(100);
  running.set(job.id, entry);
  return entry;
}

async function carryOut(job: Job, entry: Running, work: Work): Promise<void> {
  const report: JobControls['report'] = (done, planned, unit) => {
    const { progress } = entry;
    Object.assign(progress, { done, planned: planned ?? progress.planned, unit: unit ?? progress.unit });
    entry.events.emit('progress', entry.progress);
  };
  const { signal } = entry.controller;
  let ending: Pick<JobProgress, 'state' | 'result' | 'error'>;
  try {
    const result = await work({ report, signal });
    ending = { state: signal.aborted ? 'cancelled' : 'done', result, error: null };
  } catch (error) {
    ending = signal.aborted ? { state: 'cancelled', result: null, error: null } : failure(job.id, error);
  }
  const { done, planned, unit } = entry.progress;
  try {
    await inTx(() => job.update({ ...ending, done, planned, unit, endedAt: new Date() }));
  } finally {
    Object.assign(entry.progress, ending);
    running.delete(job.id);
    entry.events.emit('progress', entry.progress);
  }
}

function failure(id: number, error: unknown): Pick<JobProgress, 'state' | 'result' | 'error'> {
  if (error instanceof ServiceError) return { state: 'failed', result: null, error: error.message };
  log().error({ job: id, err: error }, 'job failed');
  return {
    state: 'failed',
    result: null,
    error: `This work failed on our side and was noted as job ${id}. Start it again.`,
  };
}

async function authorize(actor: Actor, id: number): Promise<Job> {
  const job = await Job.findByPk(id);
  if (!job) throw notFound();
  await openEngagementById(actor, job.engagementId);
  return job;
}

/** How far a job is, or how it ended. */
export async function readJob(actor: Actor, id: number): Promise<JobProgress> {
  const job = await authorize(actor, id);
  const progress = running.get(id)?.progress;
  // A job that ended while its row was being read is read once more: its end is stored before it leaves `running`.
  return progress ?? present(job.state === 'running' ? await job.reload() : job);
}

/** The jobs of an engagement that still run, for pages that are opened in between. */
export function runningJobs(engagementId: number, kind: string): Promise<JobProgress[]> {
  return Job.findAll({ where: { engagementId, kind, state: 'running' } }).then((jobs) =>
    jobs.flatMap((job) => running.get(job.id)?.progress ?? []),
  );
}

/** Waits until a job has ended, at most for a while. Whether it has. */
export function jobEnded(id: number, withinMs = Number.POSITIVE_INFINITY): Promise<boolean> {
  const entry = running.get(id);
  if (!entry) return Promise.resolve(true);
  return new Promise((resolve) => {
    const finish = (hasEnded: boolean) => {
      clearTimeout(timer);
      entry.events.off('progress', hear);
      resolve(hasEnded);
    };
    const hear = ({ state }: JobProgress) => state !== 'running' && finish(true);
    const timer = Number.isFinite(withinMs) ? setTimeout(() => finish(false), withinMs) : undefined;
    entry.events.on('progress', hear);
  });
}

/** Asks a job to stop; it ends as cancelled. */
export async function cancelJob(actor: Actor, id: number): Promise<JobProgress> {
  const job = await authorize(actor, id);
  running.get(id)?.controller.abort();
  return running.get(id)?.progress ?? present(job);
}

/** Calls back at every step of a job until it ends; returns the undoing. */
export async function watchJob(
  actor: Actor,
  id: number,
  listener: (progress: JobProgress) => void,
): Promise<() => void> {
  const progress = await readJob(actor, id);
  listener(progress);
  const entry = running.get(id);
  if (!entry) return () => undefined;
  entry.events.on('progress', listener);
  return () => entry.events.off('progress', listener);
}

/** Marks the jobs that a stopped server left running. Called at boot. */
export async function closeOrphanedJobs(): Promise<void> {
  const orphans = await Job.findAll({ where: { state: 'running' } });
  const error = 'The server was stopped while this ran. Start it again.';
  await inTx(async () => {
    for (const job of orphans)
      if (!running.has(job.id)) await job.update({ state: 'failed', error, endedAt: new Date() });
  });
}
