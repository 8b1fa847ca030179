import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { operatingPoint } from '@/core/machine';
import { searchFound, type JobProgress, type JobResult } from '@/schemas/job';
import { planInput } from '@/schemas/plan-input';
import type { ServiceError } from '@/server/errors';
import { jobEvents } from '@/server/job-events';
import { Job } from '@/server/models/Job';
import { cancelJob, readJob, startJob, watchJob } from '@/server/services/jobs';
import { motorsOf } from '@/server/services/motors';
import { createPlan, plansOf } from '@/server/services/plans';
import { latestSearch, startSearch } from '@/server/services/search';
import { closePool } from '@/server/workers/pool';
import { buildActor } from '../setup/build';
import { buildPlansStation, type PlansStation } from '../setup/plans';

let station: PlansStation;
beforeAll(async () => {
  station = await buildPlansStation();
});
afterAll(closePool);

async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

/** Waits until a job ends. */
function ended(id: number): Promise<JobProgress> {
  return new Promise((resolve, reject) => {
    watchJob(station.actor, id, (progress) => {
      if (progress.state !== 'running') resolve({ ...progress });
    }).catch(reject);
  });
}

/** Everything an event stream says until it ends. */
async function heard(stream: ReadableStream<Uint8Array>): Promise<JobProgress[]> {
  const text = await new Response(stream).text();
  return text
    .split('\n\n')
    .filter((event) => event.startsWith('data: '))
    .map((event) => JSON.parse(event.slice('data: '.length)) as JobProgress);
}

/** A job that runs until it is told to end. */
async function heldJob() {
  let release: (result: JobResult) => void = () => undefined;
  let tell: (done: number, planned?: number) => void = () => undefined;
  const engagementId = station.opened.engagement.id;
  const job = await startJob(station.actor, { engagementId, kind: 'held', unit: 'steps' }, ({ report, signal }) => {
    tell = report;
    return new Promise((resolve, reject) => {
      release = resolve;
      signal.addEventListener('abort', () => reject(new Error('stopped')));
    });
  });
  return {
    id: job.id,
    tell: (done: number, planned?: number) => tell(done, planned),
    release: () => release({ number: 1 }),
  };
}

describe('who may see a job', () => {
  it('is nobody outside the engagement: reading, watching and stopping are 404', async () => {
    const { id, release } = await heldJob();
    const stranger = await buildActor();
    const client = await buildActor({ role: 'client', clientId: station.opened.engagement.clientId });
    for (const actor of [stranger, client]) {
      expect(await refusal(readJob(actor, id))).toMatchObject({ status: 404 });
      expect(await refusal(cancelJob(actor, id))).toMatchObject({ status: 404 });
      expect(await refusal(jobEvents(actor, id))).toMatchObject({ status: 404 });
    }
    release();
    expect((await ended(id)).state).toBe('done');
  });
});

describe('the events of a job', () => {
  it('tell every step and end with it', async () => {
    const { id, tell, release } = await heldJob();
    const stream = await jobEvents(station.actor, id);
    const all = heard(stream);
    await new Promise((resolve) => setTimeout(resolve, 10));
    tell(3, 10);
    tell(10, 10);
    release();
    const steps = await all;
    expect(steps.map(({ state, done, planned }) => [state, done, planned])).toEqual([
      ['running', 0, null],
      ['running', 3, 10],
      ['running', 10, 10],
      ['done', 10, 10],
    ]);
    expect(steps.at(-1)?.result).toEqual({ number: 1 });
  });

  it('tell at once how an ended job ended', async () => {
    const { id, release } = await heldJob();
    release();
    await ended(id);
    expect((await heard(await jobEvents(station.actor, id))).map((step) => step.state)).toEqual(['done']);
  });

  it('can be left without stopping the job', async () => {
    const { id, tell, release } = await heldJob();
    const stream = await jobEvents(station.actor, id);
    await stream.cancel();
    tell(5, 10);
    expect(await readJob(station.actor, id)).toMatchObject({ state: 'running', done: 5, planned: 10 });
    release();
    await ended(id);
    expect(await Job.findByPk(id)).toMatchObject({ state: 'done', done: 5 });
  });

  it('say so when the work failed', async () => {
    const engagementId = station.opened.engagement.id;
    const job = await startJob(station.actor, { engagementId, kind: 'held', unit: 'steps' }, () =>
      Promise.reject(new Error('secret detail')),
    );
    const { state, error } = await ended(job.id);
    expect(state).toBe('failed');
    expect(error).toContain(`job ${job.id}`);
    expect(error).not.toContain('secret detail');
  });
});

describe('the search for the best field currents', () => {
  it('finds a setting within every limit, cheaper than standing, and becomes a plan at that price', async () => {
    const { actor, opened } = station;
    const job = await startSearch(actor, opened, { stepA: 10 });
    expect(job).toMatchObject({ kind: 'search', state: 'running', unit: 'settings' });
    const { state, result, done, planned } = await ended(job.id);
    expect(state).toBe('done');
    expect(done).toBe(planned);
    const found = searchFound({ kind: job.kind, state, result })!;
    expect(found.saving).toBeGreaterThan(0);
    expect(found.saving).toBeCloseTo(found.standingTotal - found.yearTotal, 6);
    for (const motor of await motorsOf(opened)) {
      const fieldCurrentA = found.fields.find((field) => field.motorId === motor.id)?.fieldA ?? 0;
      expect(fieldCurrentA).toBeLessThanOrEqual(motor.limits.fieldA);
      expect(operatingPoint(motor.machine, { shaftKw: motor.usualShaftKw, fieldCurrentA }).beyond).toEqual([]);
    }
    const cheapest = Math.min(
      ...found.curves.flatMap((curve) => curve.points.filter((p) => p.admissible).map((p) => p.total)),
    );
    expect(found.yearTotal).toBeCloseTo(cheapest, 6);
    const input = planInput.parse({
      name: 'Found',
      fields: found.fields.map(({ motorId, fieldA }) => ({ motorId, fieldA })),
      workCost: 1000,
      yearlyUpkeep: 0,
      economics: { discountPercent: 8, escalationPercent: 0, horizonYears: 10 },
      searchJobId: job.id,
    });
    await createPlan(opened, input);
    const plan = (await plansOf(opened)).plans.find((one) => one.name === 'Found');
    expect(plan?.yearTotal).toBeCloseTo(found.yearTotal, 2);
    expect(plan?.search?.priced).toBe(found.priced);
    expect(plan?.stale).toEqual([]);
    expect((await latestSearch(opened))?.id).toBe(job.id);
  });

  it('goes round a gap in the readings', async () => {
    const gapped = await buildPlansStation((load) => {
      for (const channel of [load.kwh, load.kvarhLagging, load.kvarhLeading]) channel.fill(NaN, 5000, 5040);
      load.quality.fill(2, 5000, 5040);
    });
    const job = await startSearch(gapped.actor, gapped.opened, { stepA: 25 });
    const { state, result } = await new Promise<JobProgress>((resolve, reject) => {
      const listener = (progress: JobProgress) => void (progress.state !== 'running' && resolve({ ...progress }));
      watchJob(gapped.actor, job.id, listener).catch(reject);
    });
    expect(state).toBe('done');
    expect(searchFound({ kind: job.kind, state, result })!.saving).toBeGreaterThan(0);
    const { readings, notes } = await plansOf(gapped.opened);
    expect(readings.missing).toBe(40);
    expect(notes.join(' ')).toContain('missing');
  });

  it('can be stopped, and another may begin then; two at once are refused', async () => {
    const { actor, opened } = station;
    const job = await startSearch(actor, opened, { stepA: 0.5 });
    expect(await refusal(startSearch(actor, opened, { stepA: 10 }))).toMatchObject({ status: 409 });
    await new Promise<void>((resolve, reject) => {
      watchJob(actor, job.id, ({ done }) => void (done > 0 && resolve())).catch(reject);
    });
    const asked = await cancelJob(actor, job.id);
    expect(asked.planned).toBeGreaterThan(asked.done);
    const { state, result } = await ended(job.id);
    expect(state).toBe('cancelled');
    expect(result).toBeNull();
    const next = await startSearch(actor, opened, { stepA: 25 });
    expect((await ended(next.id)).state).toBe('done');
  });
});
