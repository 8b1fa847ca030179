import { mkdir, mkdtemp, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { Semaphore } from 'async-mutex';
import {
  IntakeError,
  type BillPreview,
  type BillReading,
  type ColumnMap,
  type IntakeProblem,
  type IntervalPreview,
  type IntervalReading,
  type Trace,
  type TracePoint,
} from '../../core/intake';
import { getEnv } from '../env';
import { readLoad, type HandedLoad } from './load-file';
import { askChild, ChildStopped, type ReadLimits } from './reader-child';

interface Results {
  intervals: { preview: IntervalPreview; read: IntervalReading; trace: Trace };
  bills: { preview: BillPreview; read: BillReading; trace: Trace };
}

type Mode = keyof Results['intervals'];

/** What the child is asked to read, and how. */
export interface ReadRequest<Kind extends keyof Results = keyof Results, Asked extends Mode = Mode> {
  kind: Kind;
  mode: Asked;
  /** Where the file lies. */
  path: string;
  /** What the file is called in messages. */
  fileName: string;
  /** IANA zone of stamps without offset. */
  timeZone: string;
  columnMap?: ColumnMap | undefined;
  /** What is to be traced, for that mode. */
  at?: TracePoint;
}

/** The same as the child gets it: with the file it writes a load to. */
export type ChildRequest = ReadRequest & { handOver: string };

/** A load goes by file, all else by message. */
export type HandedReading = Omit<IntervalReading, 'load'> & { load: HandedLoad };

/** What the child answers: a result, why the file is refused, or a fault of ours. */
export type ReadAnswer =
  | { result: IntervalPreview | BillPreview | BillReading | Trace }
  | { handed: HandedReading }
  | { problems: IntakeProblem[] }
  | { fault: string };

/** Most bytes of a file that is read at all. */
export const fileByteCap = 128 * 1024 * 1024;

/** At most two files are read at once; others wait their turn. */
const places = new Semaphore(2);

/** Where children hand loads over. */
const handOverFolder = () => path.resolve(getEnv().DATA_DIR, 'handed-over');

/** Removes what a killed server left of loads that were handed over. Called at boot. */
export const clearHandOver = () => rm(handOverFolder(), { recursive: true, force: true });

/**
 * Reads a stranger's file in a child process of its own; whatever the file does to the child, the server stands. A load
 * comes back through a file of arrays that is removed in any case.
 *
 * @param request  File, kind, and whether to preview, to read or to trace
 * @param limits  When to give up, waiting for a place not counted, and who hears of progress
 * @throws {IntakeError} if the file is refused, too large, too slow, or takes too much memory
 */
export async function readInChild<Kind extends keyof Results, Asked extends Mode>(
  request: ReadRequest<Kind, Asked>,
  limits: ReadLimits = {},
): Promise<Results[Kind][Asked]> {
  const { size } = await stat(request.path);
  if (size > fileByteCap) {
    throw refusal(
      request,
      `The file has ${Math.ceil(size / 1024 / 1024)} MiB; at most ${fileByteCap / 1024 / 1024} MiB are read.`,
      'Split the file by year or by meter and bring in the parts.',
    );
  }
  return places.runExclusive(async () => {
    limits.signal?.throwIfAborted();
    await mkdir(handOverFolder(), { recursive: true });
    const folder = await mkdtemp(path.join(handOverFolder(), 'read-'));
    try {
      return (await ask(request, path.join(folder, 'load'), limits)) as Results[Kind][Asked];
    } finally {
      await rm(folder, { recursive: true, force: true });
    }
  });
}

async function ask(request: ReadRequest, handOver: string, limits: ReadLimits) {
  const answer = await askChild<ReadAnswer>({ ...request, handOver } satisfies ChildRequest, limits).catch(
    (error: unknown) => {
      if (error instanceof ChildStopped) throw stopped(request, error.reason);
      throw error;
    },
  );
  if ('problems' in answer) throw new IntakeError(answer.problems);
  if ('fault' in answer) throw new Error(`The reader of files failed on ${request.fileName}: ${answer.fault}`);
  if ('result' in answer) return answer.result;
  return { ...answer.handed, load: await readLoad(handOver, answer.handed.load) };
}

const alone = 'Bring in the table of readings or bills alone, as delimited text.';

function stopped(request: ReadRequest, reason: ChildStopped['reason']): IntakeError {
  return reason === 'memory'
    ? refusal(request, 'Reading the file takes more memory than one file may have.', alone)
    : refusal(request, `Reading the file took longer than ${reason.slowSeconds} seconds and was stopped.`, alone);
}

function refusal(request: ReadRequest, message: string, remedy: string): IntakeError {
  return new IntakeError([{ message, where: request.fileName, remedy }]);
}
