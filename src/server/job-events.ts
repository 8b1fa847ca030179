import type { JobProgress } from '../schemas/job';
import type { Actor } from './policies/actor';
import { watchJob } from './services/jobs';

const heartbeatMs = 15_000;

/**
 * A job's steps as server-sent events, ending with the job. Leaving the page cancels the stream, never the job.
 *
 * @throws {ServiceError} 404 where the job is none of this person's business
 */
export async function jobEvents(actor: Actor, id: number): Promise<ReadableStream<Uint8Array>> {
  const encoder = new TextEncoder();
  const backlog: JobProgress[] = [];
  let send = (progress: JobProgress) => void backlog.push(progress);
  const unwatch = await watchJob(actor, id, (progress) => send({ ...progress }));
  let heartbeat: ReturnType<typeof setInterval> | undefined;
  const end = () => {
    unwatch();
    clearInterval(heartbeat);
    send = () => undefined;
  };
  return new ReadableStream({
    start(controller) {
      send = (progress) => {
        controller.enqueue(encoder.encode(`data: ${JSON.stringify(progress)}\n\n`));
        if (progress.state === 'running') return;
        end();
        controller.close();
      };
      heartbeat = setInterval(() => controller.enqueue(encoder.encode(': still here\n\n')), heartbeatMs);
      for (const progress of backlog) send(progress);
    },
    cancel: end,
  });
}
