import { createHash } from 'node:crypto';
import { readdir, readFile, stat } from 'node:fs/promises';
import path from 'node:path';
import { readSchedule, ScheduleError } from '../../core/tariff';
import type { Schedule, ScheduleProblem } from '../../core/tariff';

/** A text of a schedule: the schedule in it, or the reasons why there is none. */
export interface ScheduleFile {
  id: string;
  fileName: string;
  text: string;
  bytes: number;
  sha256: string;
  schedule: Schedule | null;
  problems: ScheduleProblem[];
  /** Revision kept in the application; null for a file of the folder. */
  revision: number | null;
}

/** Bytes a schedule's text may have. */
export const largestText = 200_000;

const known = new Map<string, { stamp: string; file: ScheduleFile }>();

/** SHA-256 of a schedule's text, in hex. */
export const digestOf = (text: string) => createHash('sha256').update(text, 'utf8').digest('hex');

/** The schedule files of a folder in order of their names; a broken one is in the list with its problems. */
export async function readScheduleFolder(folder: string): Promise<ScheduleFile[]> {
  const full = path.resolve(folder);
  const names = (await readdir(full).catch(() => [])).filter((name) => name.endsWith('.yaml')).sort();
  return Promise.all(names.map((name) => readFileOf(full, name)));
}

/** Reads a file unless it was read before and is still the same. */
async function readFileOf(folder: string, fileName: string): Promise<ScheduleFile> {
  const full = path.join(folder, fileName);
  try {
    return await readKnown(full, fileName);
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === undefined) throw error;
    const message = `cannot be read from the disk (${code}).`;
    return unreadFile(fileName, 0, message, 'Look whether it is a file the server may read, or take it away.');
  }
}

async function readKnown(full: string, fileName: string): Promise<ScheduleFile> {
  const { mtimeMs, size } = await stat(full);
  const stamp = `${mtimeMs}/${size}`;
  const before = known.get(full);
  if (before?.stamp === stamp) return before.file;
  const file =
    size > largestText ? tooLargeFile(fileName, size) : readScheduleText(idOf(fileName), await readFile(full, 'utf8'));
  known.set(full, { stamp, file });
  return file;
}

function tooLargeFile(fileName: string, bytes: number): ScheduleFile {
  const message = `the file has ${bytes} bytes, more than ${largestText}.`;
  return unreadFile(fileName, bytes, message, 'Split it, or take out what no bill needs.');
}

function unreadFile(fileName: string, bytes: number, message: string, remedy: string): ScheduleFile {
  const problems = [{ line: 1, column: 1, path: '', message, remedy }];
  return { id: idOf(fileName), fileName, text: '', bytes, sha256: '', schedule: null, problems, revision: null };
}

const idOf = (fileName: string) => fileName.replace(/\.yaml$/, '');

/** Reads a text that is to be the schedule of an id; one under another id is a problem of its own. */
export function readScheduleText(id: string, text: string, revision: number | null = null): ScheduleFile {
  const fileName = `${id}.yaml`;
  const file = { id, fileName, text, bytes: Buffer.byteLength(text), sha256: digestOf(text), revision };
  try {
    const schedule = readSchedule(text);
    if (schedule.id === id) return { ...file, schedule, problems: [] };
    const message = `calls the schedule "${schedule.id}" in a file named ${fileName}.`;
    const remedy = `Name the file ${schedule.id}.yaml, or write schedule: ${id}.`;
    return { ...file, schedule: null, problems: [{ ...placeOfId(text), path: 'schedule', message, remedy }] };
  } catch (error) {
    if (!(error instanceof ScheduleError)) throw error;
    return { ...file, schedule: null, problems: error.problems };
  }
}

/** Where a text names itself. */
function placeOfId(text: string): { line: number; column: number } {
  const lines = text.split('\n');
  const index = lines.findIndex((line) => /^schedule\s*:/.test(line));
  const column = /^schedule\s*:\s*/.exec(lines[index] ?? '')?.[0].length ?? 0;
  return { line: Math.max(0, index) + 1, column: column + 1 };
}
