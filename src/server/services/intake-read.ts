import {
  IntakeError,
  type BillReading,
  type ColumnMap,
  type IntakeProblem,
  type IntervalReading,
  type Trace,
  type TracePoint,
} from '../../core/intake';
import type { IntakePreview } from '../../schemas/intake';
import { originalPath } from '../drawer';
import { invalid } from '../errors';
import { readInChild } from '../workers/fork-reader';
import type { ReadLimits } from '../workers/reader-child';

/** A file in the drawer that is to be read. */
interface StoredOriginal {
  kind: 'intervals' | 'bills';
  fileName: string;
  sha256: string;
}

/** How a file is read: the zone of stamps without offset, and the map of its columns where one is settled. */
export interface HowToRead {
  timeZone: string;
  columnMap?: ColumnMap;
}

/** What reading found, or why nothing could be made of the file at all. */
export type FileReading = { preview: IntakePreview } | { problems: IntakeProblem[] };

const request = ({ fileName, sha256 }: StoredOriginal, how: HowToRead) => ({
  path: originalPath(sha256),
  fileName,
  ...how,
});

/** What the row will give back: a sum the file does not carry is NaN in the core and null in JSON. */
const plainJson = <Value>(value: Value) => JSON.parse(JSON.stringify(value)) as Value;

/** Previews a file in a child process; a file that is refused is a finding, not an error. */
export async function previewFile(
  file: StoredOriginal,
  how: HowToRead,
  limits: Pick<ReadLimits, 'signal' | 'onProgress'> = {},
): Promise<FileReading> {
  try {
    const { kind } = file;
    const preview = await readInChild({ kind, mode: 'preview', ...request(file, how) }, limits);
    return { preview: plainJson(preview) };
  } catch (error) {
    if (error instanceof IntakeError) return { problems: error.problems };
    throw error;
  }
}

/**
 * Reads the readings of a file as matched, in a child process.
 *
 * @throws {ServiceError} 422 with what is wrong, where, and what to do
 */
export const readIntervalFile = (file: StoredOriginal, how: HowToRead): Promise<IntervalReading> =>
  refusedAsInvalid(file, readInChild({ kind: 'intervals', mode: 'read', ...request(file, how) }));

/** The same for a table of bills. */
export const readBillFile = (file: StoredOriginal, how: HowToRead): Promise<BillReading> =>
  refusedAsInvalid(file, readInChild({ kind: 'bills', mode: 'read', ...request(file, how) }));

/** Where in a file a kept value stands. */
export const traceInFile = (file: StoredOriginal, how: HowToRead, at: TracePoint): Promise<Trace> =>
  refusedAsInvalid(file, readInChild({ kind: file.kind, mode: 'trace', at, ...request(file, how) }));

async function refusedAsInvalid<Reading>(file: StoredOriginal, reading: Promise<Reading>): Promise<Reading> {
  try {
    return await reading;
  } catch (error) {
    if (!(error instanceof IntakeError)) throw error;
    const { problems } = error;
    throw invalid(`${file.fileName} cannot be read as it is matched. ${problems[0]?.message ?? ''}`.trim(), undefined, {
      problems,
    });
  }
}
