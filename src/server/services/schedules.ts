import { createHash } from 'node:crypto';
import { readdir, readFile, stat } from 'node:fs/promises';
import path from 'node:path';
import { readSchedule, ScheduleError } from '../../core/tariff';
import type { Schedule, ScheduleProblem } from '../../core/tariff';
import { getEnv } from '../env';
import { notFound } from '../errors';
import { TariffChoice } from '../models/TariffChoice';
import { isStaff, type Actor } from '../policies/actor';
import { listEngagements } from './engagements';

/** A file of the library: its text, and the schedule in it or the reasons why there is none. */
export interface ScheduleFile {
  id: string;
  fileName: string;
  text: string;
  bytes: number;
  sha256: string;
  schedule: Schedule | null;
  problems: ScheduleProblem[];
}

/** Engagements priced on a schedule, as far as the person may know of them. */
export interface ScheduleUse {
  code: string;
  title: string;
  sha256: string;
}

const largestBytes = 200_000;
const readFiles = new Map<string, { stamp: string; file: ScheduleFile }>();

/** SHA-256 of a schedule's text, in hex. */
export const digestOf = (text: string) => createHash('sha256').update(text, 'utf8').digest('hex');

/** The library's files in order of their names; a broken one is in the list with its problems. Staff only. */
export async function listScheduleFiles(actor: Actor): Promise<ScheduleFile[]> {
  if (!isStaff(actor)) throw notFound();
  return readLibrary();
}

/**
 * One file of the library.
 *
 * @throws {ServiceError} 404 where there is none of that name
 */
export async function openScheduleFile(actor: Actor, id: string): Promise<ScheduleFile> {
  const file = (await listScheduleFiles(actor)).find((one) => one.id === id);
  if (!file) throw notFound();
  return file;
}

/** Where schedules are in use, by schedule id. */
export async function scheduleUses(actor: Actor): Promise<Map<string, ScheduleUse[]>> {
  const engagements = new Map((await listEngagements(actor)).map(({ engagement }) => [engagement.id, engagement]));
  const uses = new Map<string, ScheduleUse[]>();
  for (const choice of await TariffChoice.findAll({ order: ['engagementId'] })) {
    const engagement = engagements.get(choice.engagementId);
    if (!engagement) continue;
    const use = { code: engagement.code, title: engagement.title, sha256: choice.sha256 };
    uses.set(choice.scheduleId, [...(uses.get(choice.scheduleId) ?? []), use]);
  }
  return uses;
}

async function readLibrary(): Promise<ScheduleFile[]> {
  const folder = path.resolve(getEnv().TARIFF_DIR);
  const names = (await readdir(folder).catch(() => [])).filter((name) => name.endsWith('.yaml')).sort();
  return Promise.all(names.map((name) => readFileOf(folder, name)));
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
  const known = readFiles.get(full);
  if (known?.stamp === stamp) return known.file;
  const file = size > largestBytes ? tooLargeFile(fileName, size) : parseFile(fileName, await readFile(full, 'utf8'));
  readFiles.set(full, { stamp, file });
  return file;
}

function tooLargeFile(fileName: string, bytes: number): ScheduleFile {
  const message = `the file has ${bytes} bytes, more than ${largestBytes}.`;
  return unreadFile(fileName, bytes, message, 'Split it, or take out what no bill needs.');
}

function unreadFile(fileName: string, bytes: number, message: string, remedy: string): ScheduleFile {
  const problems = [{ line: 1, column: 1, path: '', message, remedy }];
  return { id: idOf(fileName), fileName, text: '', bytes, sha256: '', schedule: null, problems };
}

const idOf = (fileName: string) => fileName.replace(/\.yaml$/, '');

/** Reads the text of a file; a schedule under another name than its file's is a problem of its own. */
function parseFile(fileName: string, text: string): ScheduleFile {
  const file = { id: idOf(fileName), fileName, text, bytes: Buffer.byteLength(text), sha256: digestOf(text) };
  try {
    const schedule = readSchedule(text);
    if (schedule.id === file.id) return { ...file, schedule, problems: [] };
    const message = `calls the schedule "${schedule.id}" in a file named ${fileName}.`;
    const remedy = `Name the file ${schedule.id}.yaml, or write schedule: ${file.id}.`;
    return { ...file, schedule: null, problems: [{ line: 1, column: 1, path: 'schedule', message, remedy }] };
  } catch (error) {
    if (!(error instanceof ScheduleError)) throw error;
    return { ...file, schedule: null, problems: error.problems };
  }
}
