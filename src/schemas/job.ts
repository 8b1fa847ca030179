import type { AssumedSaving } from './assumed-saving';
import type { SearchView } from './search';

/**
 * What long work leaves behind: what a search found, how a saving moves, the number of the edition that was made, or the
 * file that was read.
 */
export type JobResult = SearchView | AssumedSaving | { number: number } | { intakeId: number };

/** How far long work is, or how it ended. */
export interface JobProgress {
  id: number;
  kind: string;
  subjectId: number | null;
  state: 'running' | 'done' | 'failed' | 'cancelled';
  done: number;
  planned: number | null;
  unit: string | null;
  startedAt: string;
  result: JobResult | null;
  error: string | null;
}

/** What a search found; null for other work, and for a search that did not end well. */
export function searchFound(job: Pick<JobProgress, 'kind' | 'state' | 'result'> | null | undefined): SearchView | null {
  if (!job?.result || job.kind !== 'search' || job.state !== 'done') return null;
  return 'curves' in job.result ? job.result : null;
}

/** How a plan's saving moves with what is assumed; null for other work, and where it did not end well. */
export function assumedSavingFound(
  job: Pick<JobProgress, 'kind' | 'state' | 'result'> | null | undefined,
): AssumedSaving | null {
  if (!job?.result || job.kind !== 'assumed-saving' || job.state !== 'done') return null;
  return 'swings' in job.result ? job.result : null;
}
