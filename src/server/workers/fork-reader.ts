import { fork, type ChildProcess } from 'node:child_process';
import { stat } from 'node:fs/promises';
import { Semaphore } from 'async-mutex';
import {
  IntakeError,
  type BillPreview,
  type BillReading,
  type ColumnMap,
  type IntakeProblem,
  type IntervalPreview,
  type IntervalReading,
} from '../../core/intake';
import { locateWorker } from './locate';

interface Results {
  intervals: { preview: IntervalPreview; read: IntervalReading };
  bills: { preview: BillPreview; read: BillReading };
}

export type ReadResult = Results['intervals' | 'bills']['preview' | 'read'];

/** What the child is asked to read, and how. */
export interface ReadRequest<
  Kind extends keyof Results = keyof Results,
  Mode extends 'preview' | 'read' = 'preview' | 'read',
> {
  kind: Kind;
  mode: Mode;
  /** Where the file lies. */
  path: string;
  /** What the file is called in messages. */
  fileName: string;
  /** IANA zone of stamps without offset. */
  timeZone: string;
  columnMap?: ColumnMap | undefined;
}

/** What the child answers: a result, why the file is refused, or a fault of ours. */
export type ReadAnswer = { result: ReadResult } | { problems: IntakeProblem[] } | { fault: string };

/** When to give up on a child. */
export interface ReadLimits {
  signal?: AbortSignal | undefined;
  timeoutMs?: number;
  heapMegabytes?: number;
}

/** Most bytes of a file that is read at all. */
export const fileByteCap = 128 * 1024 * 1024;
const defaultHeapMegabytes = 256;
const defaultTimeoutMs = 60_000;

/** At most two files are read at once; others wait their turn. */
const places = new Semaphore(2);

/**
 * Reads a stranger's file in a child process of its own with a heap limit, an empty environment and a deadline; whatever
 * the file does to the child, the server stands.
 *
 * @param request  File, kind, and whether to preview or to read
 * @param options.signal  Gives up, also while waiting
 * @param options.timeoutMs  Time the child may take, waiting not counted. [ms]
 * @param options.heapMegabytes  Limit of the child's heap. [MiB]
 * @throws {IntakeError} if the file is refused, too large, too slow, or takes too much memory
 */
export async function readInChild<Kind extends keyof Results, Mode extends 'preview' | 'read'>(
  request: ReadRequest<Kind, Mode>,
  options: ReadLimits = {},
): Promise<Results[Kind][Mode]> {
  const { size } = await stat(request.path);
  if (size > fileByteCap) {
    throw refusal(
      request,
      `The file has ${Math.ceil(size / 1024 / 1024)} MiB; at most ${fileByteCap / 1024 / 1024} MiB are read.`,
      'Split the file by year or by meter and bring in the parts.',
    );
  }
  return places.runExclusive(async () => {
    options.signal?.throwIfAborted();
    const answer = await askChild(request, options);
    if ('problems' in answer) throw new IntakeError(answer.problems);
    if ('fault' in answer) throw new Error(`The reader of files failed on ${request.fileName}: ${answer.fault}`);
    return answer.result as Results[Kind][Mode];
  });
}

function refusal(request: ReadRequest, message: string, remedy: string): IntakeError {
  return new IntakeError([{ message, where: request.fileName, remedy }]);
}

/** The child gets no environment, so that no secret of the server is within reach of what it reads. */
function startChild(heapMegabytes: number): ChildProcess {
  const { file, execArgv } = locateWorker('read-file');
  return fork(file, [], {
    execArgv: [...execArgv, `--max-old-space-size=${heapMegabytes}`],
    serialization: 'advanced',
    stdio: ['ignore', 'ignore', 'pipe', 'ipc'],
    env: {},
  });
}

function askChild(
  request: ReadRequest,
  { signal, timeoutMs = defaultTimeoutMs, heapMegabytes = defaultHeapMegabytes }: ReadLimits,
): Promise<ReadAnswer> {
  const child = startChild(heapMegabytes);
  let words = '';
  child.stderr?.on('data', (chunk: Buffer) => (words = (words + chunk.toString()).slice(-4000)));
  let timer: NodeJS.Timeout | undefined;
  const giveUp = new AbortController();
  const asked = new Promise<ReadAnswer>((resolve, reject) => {
    timer = setTimeout(() => {
      const seconds = Math.round(timeoutMs / 1000);
      reject(
        refusal(
          request,
          `Reading the file took longer than ${seconds} seconds and was stopped.`,
          'Bring in the table of readings or bills alone, as delimited text.',
        ),
      );
    }, timeoutMs);
    signal?.addEventListener('abort', () => reject(signal.reason as Error), { signal: giveUp.signal });
    child.once('message', (answer: ReadAnswer) => resolve(answer));
    child.once('error', reject);
    child.once('exit', (code, death) => reject(endedEarly(request, words, code, death)));
    child.send(request);
  });
  return asked.finally(() => {
    clearTimeout(timer);
    giveUp.abort();
    child.kill('SIGKILL');
  });
}

/** A child that ran out of memory says so before it dies; anything else is a fault of ours. */
function endedEarly(request: ReadRequest, words: string, code: number | null, death: NodeJS.Signals | null): Error {
  if (/heap out of memory|heap limit|Array buffer allocation failed/i.test(words) || death === 'SIGABRT') {
    return refusal(
      request,
      'Reading the file takes more memory than one file may have.',
      'Bring in the table of readings or bills alone, as delimited text.',
    );
  }
  return new Error(
    `The reader of ${request.fileName} ended without an answer (${death ?? code ?? 'unknown'}). ${words}`,
  );
}
