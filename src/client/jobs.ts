import { useEffect, useState } from 'react';
import type { JobProgress } from '../schemas/job';
import { ApiError, call } from './api';

/** How far long work is. */
export const readJob = (id: number) => call<JobProgress>('GET', `/api/jobs/${id}`);

/** Asks long work to stop. */
export const cancelJob = (id: number) => call<JobProgress>('POST', `/api/jobs/${id}/cancel`);

export interface WatchedJob {
  job: JobProgress | null;
  /** Seconds left at the pace so far; null while nothing can be said. */
  secondsLeft: number | null;
  error: string | null;
}

const pollMs = 2_000;

/** Seconds left at the mean pace since the watch saw its first step. */
function secondsLeft(job: JobProgress | null, first: { done: number; atMs: number } | null): number | null {
  if (!job || !first || !job.planned || job.state !== 'running') return null;
  const steps = job.done - first.done;
  const seconds = (Date.now() - first.atMs) / 1000;
  return steps > 0 && seconds > 0.5 ? ((job.planned - job.done) * seconds) / steps : null;
}

/** Follows a job until it ends: by server-sent events, by asking again where these do not pass. */
export function useJob(id: number | null): WatchedJob {
  const [job, setJob] = useState<JobProgress | null>(null);
  const [first, setFirst] = useState<{ done: number; atMs: number } | null>(null);
  const [error, setError] = useState<string | null>(null);
  useEffect(() => {
    setJob(null);
    setFirst(null);
    setError(null);
    if (id === null) return undefined;
    let poll: ReturnType<typeof setTimeout> | undefined;
    let stopped = false;
    const take = (progress: JobProgress) => {
      if (stopped) return;
      setJob(progress);
      setFirst((known) => known ?? { done: progress.done, atMs: Date.now() });
      if (progress.state !== 'running') source.close();
    };
    const ask = () => {
      readJob(id).then(
        (progress) => {
          take(progress);
          if (!stopped && progress.state === 'running') poll = setTimeout(ask, pollMs);
        },
        (failure: unknown) => setError(failure instanceof ApiError ? failure.message : String(failure)),
      );
    };
    const source = new EventSource(`/api/jobs/${id}/events`);
    source.onmessage = (event: MessageEvent<string>) => take(JSON.parse(event.data) as JobProgress);
    source.onerror = () => {
      if (source.readyState === EventSource.CLOSED && !stopped) ask();
    };
    return () => {
      stopped = true;
      source.close();
      clearTimeout(poll);
    };
  }, [id]);
  return { job, secondsLeft: secondsLeft(job, first), error };
}
