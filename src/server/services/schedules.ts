import path from 'node:path';
import { getEnv } from '../env';
import { notFound } from '../errors';
import { KeptSchedule } from '../models/KeptSchedule';
import { ScheduleRevision } from '../models/ScheduleRevision';
import { TariffChoice } from '../models/TariffChoice';
import { isStaff, type Actor } from '../policies/actor';
import { listEngagements } from './engagements';
import { readScheduleFolder, readScheduleText, type ScheduleFile } from './schedule-files';

/** Engagements priced on a schedule, as far as the person may know of them. */
export interface ScheduleUse {
  code: string;
  title: string;
  sha256: string;
}

const mostRemembered = 200;
const readTexts = new Map<string, ScheduleFile>();

/**
 * The library in order of ids: files of the folder of tariffs, and schedules kept in the application in their newest
 * revision, which take the place of a file of the same id. What is put away is left out. Staff only.
 */
export async function listScheduleFiles(actor: Actor): Promise<ScheduleFile[]> {
  if (!isStaff(actor)) throw notFound();
  const [files, kept] = await Promise.all([listFolder(), listKept()]);
  const ids = new Set(kept.map(({ schedule }) => schedule.slug));
  const shown = kept.flatMap(({ schedule, file }) => (schedule.putAwayAt ? [] : [file]));
  return [...files.filter((file) => !ids.has(file.id)), ...shown].sort((a, b) => (a.id < b.id ? -1 : 1));
}

/** Kept schedules that are put away. Staff only. */
export async function listPutAway(actor: Actor): Promise<ScheduleFile[]> {
  if (!isStaff(actor)) throw notFound();
  return (await listKept()).flatMap(({ schedule, file }) => (schedule.putAwayAt ? [file] : []));
}

/**
 * One schedule of the library in its newest text, put away or not.
 *
 * @throws {ServiceError} 404 where there is none of that id
 */
export async function openScheduleFile(actor: Actor, id: string): Promise<ScheduleFile> {
  if (!isStaff(actor)) throw notFound();
  const kept = await KeptSchedule.findOne({ where: { slug: id } });
  const file = kept ? await newestText(kept) : (await listFolder()).find((one) => one.id === id);
  if (!file) throw notFound();
  return file;
}

/** The file of an id in the folder of tariffs, whether or not a kept schedule has taken its place. */
export async function fileInFolder(id: string): Promise<ScheduleFile | null> {
  return (await listFolder()).find((one) => one.id === id) ?? null;
}

const listFolder = () => readScheduleFolder(getEnv().TARIFF_DIR);

/** Published forms of rules, each a schedule to begin one's own from. Staff only. */
export async function listForms(actor: Actor): Promise<ScheduleFile[]> {
  if (!isStaff(actor)) throw notFound();
  return readScheduleFolder(path.join(getEnv().TARIFF_DIR, 'forms'));
}

/** One form. @throws {ServiceError} 404 where there is none of that id */
export async function openForm(actor: Actor, id: string): Promise<ScheduleFile> {
  const form = (await listForms(actor)).find((one) => one.id === id);
  if (!form) throw notFound();
  return form;
}

/** Schedules kept in the application, each in its newest text. */
async function listKept(): Promise<{ schedule: KeptSchedule; file: ScheduleFile }[]> {
  const schedules = await KeptSchedule.findAll();
  const numbers = await ScheduleRevision.findAll({ attributes: ['id', 'scheduleId', 'number'], order: ['number'] });
  const newest = new Map(numbers.map(({ scheduleId, id }) => [scheduleId, id]));
  const revisions = await ScheduleRevision.findAll({ where: { id: [...newest.values()] } });
  return schedules.flatMap((schedule) => {
    const revision = revisions.find((one) => one.scheduleId === schedule.id);
    return revision ? [{ schedule, file: revisionFile(schedule, revision) }] : [];
  });
}

async function newestText(schedule: KeptSchedule): Promise<ScheduleFile | undefined> {
  const where = { scheduleId: schedule.id };
  const revision = await ScheduleRevision.findOne({ where, order: [['number', 'DESC']] });
  return revision ? revisionFile(schedule, revision) : undefined;
}

/** A kept text, read; remembered, since it never changes. */
export function revisionFile({ slug }: KeptSchedule, { text, sha256, number }: ScheduleRevision): ScheduleFile {
  const key = `${slug}/${number}/${sha256}`;
  const file = readTexts.get(key) ?? readScheduleText(slug, text, number);
  readTexts.delete(key);
  readTexts.set(key, file);
  const [oldest] = readTexts.keys();
  if (readTexts.size > mostRemembered && oldest !== undefined) readTexts.delete(oldest);
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
