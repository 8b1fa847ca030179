import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import { log } from '../log';
import { locateWorker } from './locate';
import type { SearchProgress, SearchResult, SearchTask, TaskSetting, YearTask } from './tasks';

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

/** Prices settings over a year in a thread of its own, in the order asked. */
export const calculateYear = (task: YearTask) => pool().run(task) as Promise<TaskSetting[]>;

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
    return (await pool().run(withPort, { signal, transferList: [port2] })) as SearchResult;
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
