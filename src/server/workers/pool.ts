import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import { conflict } from '../errors';
import { log } from '../log';
import { locateWorker } from './locate';
import type { PlanMoney } from '../../schemas/assumptions';
import type { CompareResult } from '../../schemas/compare';
import type { PricedYear } from '../../schemas/pricing';
import type {
  CashFlowParts,
  CashTask,
  CompareTask,
  EstimateResult,
  EstimateTask,
  ReconcileTask,
  Refused,
  SearchProgress,
  SearchResult,
  SearchTask,
  TaskSetting,
  TextResult,
  TextTask,
  YearTask,
} from './tasks';

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

/** Estimates plans from bills alone in a thread of its own; what cannot be estimated says why in the result. */
export async function estimateInPool(task: EstimateTask): Promise<EstimateResult | Refused> {
  return (await pool().run(task)) as EstimateResult | Refused;
}

/** Samples cash flows in a thread of its own, in the order asked. */
export async function calculateCash(plans: PlanMoney[]): Promise<CashFlowParts[]> {
  const task: CashTask = { kind: 'cash', plans };
  return resultOf((await pool().run(task)) as CashFlowParts[] | Refused);
}

/**
 * Prices a year under several schedules in a thread of its own; a schedule that cannot price it says why in the result.
 *
 * @throws {ServiceError} 409 where the standing schedule itself cannot price the year
 */
export async function calculateComparison(task: CompareTask): Promise<CompareResult> {
  return resultOf((await pool().run(task)) as CompareResult | Refused);
}

/**
 * Prices a year and lays it beside what was billed in a thread of its own.
 *
 * @throws {ServiceError} 409 where the schedule cannot be read or a bill not be priced
 */
export async function reconcileInPool(basis: ReconcileTask['basis']): Promise<PricedYear> {
  const task: ReconcileTask = { kind: 'reconcile', basis };
  return resultOf((await pool().run(task)) as PricedYear | Refused);
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

const longestTextMs = 10_000;

/**
 * Tries a schedule's text in a thread of its own, which is ended where that takes too long.
 *
 * @throws {ServiceError} 409 where it does
 */
export async function calculateText(task: Omit<TextTask, 'kind'>): Promise<TextResult> {
  const signal = AbortSignal.timeout(longestTextMs);
  try {
    return resultOf((await pool().run({ ...task, kind: 'text' }, { signal })) as TextResult | Refused);
  } catch (error) {
    if (!signal.aborted) throw error;
    throw conflict('Pricing this text takes longer than ten seconds. Say fewer quantities by the hour or interval.');
  }
}

/** Ends the threads: for tests, and where the server stops. */
export async function closePool(): Promise<void> {
  const { counterlagPool } = shared;
  shared.counterlagPool = undefined;
  await counterlagPool?.destroy();
}
