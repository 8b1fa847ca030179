import { fork } from 'node:child_process';
import type { ChartRequest } from '../../components/charts/drawn-chart';
import { locateWorker } from '../workers/locate';

/** A chart to be drawn outside a browser. */
export type Drawing = ChartRequest & {
  /** What the picture is called in the edition. */
  name: string;
  /** Pixels across of a PNG, where one is wanted; twice the shown width looks sharp. */
  pngWidth?: number;
  /** Ground of the PNG. */
  background?: string;
};

export interface DrawnChart {
  name: string;
  svg: string;
  png?: Uint8Array;
}

type Answer = { charts: DrawnChart[] } | { error: string };

const timeoutMs = 60_000;

/**
 * Draws charts in a child of its own, which ends afterwards: the browser it pretends to be takes more memory than the
 * whole server.
 */
export function drawCharts(drawings: Drawing[]): Promise<DrawnChart[]> {
  const { file, execArgv } = locateWorker('draw-charts');
  const child = fork(file, [], { execArgv, serialization: 'advanced', stdio: ['ignore', 'ignore', 'pipe', 'ipc'] });
  let words = '';
  child.stderr?.on('data', (chunk: Buffer) => (words = (words + chunk.toString()).slice(-4000)));
  return new Promise<DrawnChart[]>((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error('Drawing the charts took longer than a minute.')), timeoutMs);
    child.once('message', (answer: Answer) => {
      clearTimeout(timer);
      if ('error' in answer) reject(new Error(`The charts could not be drawn: ${answer.error}`));
      else resolve(answer.charts);
    });
    child.once('error', reject);
    child.once('exit', () => reject(new Error(`The drawing child ended without an answer. ${words}`)));
    child.send(drawings);
  }).finally(() => child.kill('SIGKILL'));
}
