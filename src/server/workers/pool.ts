import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import { conflict } from '../errors';
import { log } from '../log';
import { locateWorker } from './locate';
import type { Refused, SearchProgress, SearchResult, SearchTask, TaskSetting, YearTask } from './tasks';

const shared = globalThis as typeof globalThis & { counterlagPool?: Piscina };

function createPool(): Piscina {
  const { file, execArgv } = locateWorker('calculate');
  const pool = new Piscina({
    filename: file,
    execArgv,
    minThreads: 0,
    maxThreads: 2,
    idleTimeout: 60_000,
    maxQueue: 50,
    resourceLimits: { maxOldGenerationSizeMb: 512, maxYoungGenerationSizeMb: 64 },
  });
  pool.on('error', (error: unknown) => log().error({ err: error }, 'calculation worker failed'));
  return pool;
}

const pool = () => (shared.counterlagPool ??= createPool());

/** A task's result, or the error of what a person can act on. */
function resultOf<Result extends object>(answer: Result | Refused): Result {
  if (!('refused' in answer)) return answer;
  throw conflict(`The year cannot be priced: ${answer.refused}`, { station: 'tariff' });
}

/**
 * Prices settings over a year in a thread of its own, in the order asked.
 *
 * @throws {ServiceError} 409 where schedule, readings or motors do not allow it
 */
export async function calculateYear(task: YearTask): Promise<TaskSetting[]> {
  return resultOf((await pool().run(task)) as TaskSetting[] | Refused);
}

/** Searches in a thread of its own and tells how far it is. An abort ends the thread. */
export async function calculateSearch(
  task: Omit<SearchTask, 'port' | 'kind'>,
  onProgress: (progress: SearchProgress) => void,
  signal: AbortSignal,
): Promise<SearchResult> {
  const { port1, port2 } = new MessageChannel();
  port1.on('message', onProgress);
  try {
    const withPort: SearchTask = { ...task, kind: 'search', port: port2 };
    return resultOf((await pool().run(withPort, { signal, transferList: [port2] })) as SearchResult | Refused);
  } finally {
    port1.close();
  }
}

/** Ends the threads: for tests, and where the server stops. */
export async function closePool(): Promise<void> {
  const { counterlagPool } = shared;
  shared.counterlagPool = undefined;
  await counterlagPool?.destroy();
}
