import { fork, type ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';
import type { ReadProgress } from '../../core/intake';
import { locateWorker } from './locate';

/** When to give up on a child, and who hears how far it is. */
export interface ReadLimits {
  signal?: AbortSignal | undefined;
  /** Time it may take. [ms] */
  timeoutMs?: number;
  /** Limit of its heap. [MiB] */
  heapMegabytes?: number;
  /** Memory it may hold in all, arrays outside the heap included. [MiB] */
  residentMegabytes?: number;
  onProgress?: ((progress: ReadProgress) => void) | undefined;
}

/** Why a child was given up. */
export class ChildStopped extends Error {
  override readonly name = 'ChildStopped';
  constructor(readonly reason: { slowSeconds: number } | 'memory') {
    super(reason === 'memory' ? 'too much memory' : 'too slow');
  }
}

// Measured: a million one-minute rows of two channels (30 MB of text) take 200 MiB in the child, a feed of 100 MB takes 230.
// What takes more than this is no file of readings. Of the heap, the text of the largest file is a quarter.
const defaultResidentMegabytes = 900;
const defaultHeapMegabytes = 512;
const defaultTimeoutMs = 180_000;
const watchEveryMs = 150;

/**
 * Asks a child process of its own: one request, one answer. It has a heap limit, an empty environment, a deadline, and is
 * watched from outside; it is killed in any case.
 *
 * @throws {ChildStopped} if it takes too long or too much memory
 * @throws {Error} if it dies otherwise, or as the signal says
 */
export function askChild<Answer>(request: object, limits: ReadLimits): Promise<Answer> {
  const { signal, timeoutMs = defaultTimeoutMs, residentMegabytes = defaultResidentMegabytes } = limits;
  const child = startChild(limits.heapMegabytes ?? defaultHeapMegabytes);
  let words = '';
  child.stderr?.on('data', (chunk: Buffer) => (words = (words + chunk.toString()).slice(-4000)));
  const timers: NodeJS.Timeout[] = [];
  const giveUp = new AbortController();
  const asked = new Promise<Answer>((resolve, reject) => {
    const slow = new ChildStopped({ slowSeconds: Math.round(timeoutMs / 1000) });
    timers.push(setTimeout(() => reject(slow), timeoutMs));
    timers.push(
      setInterval(() => isOver(child, residentMegabytes) && reject(new ChildStopped('memory')), watchEveryMs),
    );
    signal?.addEventListener('abort', () => reject(signal.reason as Error), { signal: giveUp.signal });
    child.on('message', (message: { progress: ReadProgress } | { answer: Answer }) => {
      if ('progress' in message) limits.onProgress?.(message.progress);
      else resolve(message.answer);
    });
    child.once('error', reject);
    child.once('exit', (code, death) => reject(endedEarly(words, code, death)));
    child.send(request);
  });
  return asked.finally(() => {
    for (const timer of timers) clearTimeout(timer);
    giveUp.abort();
    child.kill('SIGKILL');
  });
}

/** Flags of a child: its heap limit, and a small nursery, so that what parsers leave behind is cleared at once. */
export const readerFlags = (heapMegabytes = defaultHeapMegabytes): string[] => [
  `--max-old-space-size=${heapMegabytes}`,
  '--max-semi-space-size=4',
];

/** The child gets no environment, so that no secret of the server is within reach of what it reads. */
function startChild(heapMegabytes: number): ChildProcess {
  const { file, execArgv } = locateWorker('read-file');
  return fork(file, [], {
    execArgv: [...execArgv, ...readerFlags(heapMegabytes)],
    serialization: 'advanced',
    stdio: ['ignore', 'ignore', 'pipe', 'ipc'],
    env: {},
  });
}

/** Whether the child holds more than it may; where the system does not tell, the heap limit alone holds. */
function isOver({ pid }: ChildProcess, megabytes: number): boolean {
  try {
    const status = readFileSync(`/proc/${pid}/status`, 'utf8');
    return Number(/VmRSS:\s*(\d+) kB/.exec(status)?.[1] ?? 0) > megabytes * 1024;
  } catch {
    return false;
  }
}

/** A child that ran out of memory says so before it dies; anything else is a fault of ours. */
function endedEarly(words: string, code: number | null, death: NodeJS.Signals | null): Error {
  if (/heap out of memory|heap limit|Array buffer allocation failed/i.test(words) || death === 'SIGABRT')
    return new ChildStopped('memory');
  return new Error(`It ended without an answer (${death ?? code ?? 'unknown'}). ${words}`);
}
