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
  result: Record<string, unknown> | null;
  error: string | null;
}
