import { notFound } from '../errors';
import { KeptSchedule } from '../models/KeptSchedule';
import { ScheduleRevision } from '../models/ScheduleRevision';
import { User } from '../models/User';
import type { DifferenceView, RevisionView } from '../../schemas/schedule-editor';
import type { Actor } from '../policies/actor';
import { presentDifference } from '../presenters/text-difference';
import type { ScheduleFile } from './schedule-files';
import { openScheduleFile, revisionFile, scheduleUses } from './schedules';

/** A kept schedule with all its texts, newest first. */
export interface ScheduleHistory {
  file: ScheduleFile;
  schedule: KeptSchedule | null;
  revisions: RevisionView[];
}

/** Every text a schedule was kept in; a file of the folder has none but its own. */
export async function scheduleHistory(actor: Actor, id: string): Promise<ScheduleHistory> {
  const file = await openScheduleFile(actor, id);
  const schedule = await KeptSchedule.findOne({ where: { slug: id } });
  if (!schedule) return { file, schedule, revisions: [] };
  const revisions = await ScheduleRevision.findAll({
    where: { scheduleId: schedule.id },
    attributes: { exclude: ['text'] },
    order: [['number', 'DESC']],
  });
  const people = new Map((await User.findAll()).map((user) => [user.id, user.name]));
  const uses = (await scheduleUses(actor)).get(id) ?? [];
  return {
    file,
    schedule,
    revisions: revisions.map(({ number, note, madeById, createdAt, sha256 }) => ({
      number,
      note,
      by: madeById === null ? null : (people.get(madeById) ?? null),
      at: createdAt.toISOString(),
      sha256,
      uses: uses.filter((use) => use.sha256 === sha256).map((use) => use.code),
    })),
  };
}

/** A kept text of a schedule by its number. @throws {ServiceError} 404 where there is none */
export async function openRevision(actor: Actor, id: string, number: number): Promise<ScheduleFile> {
  await openScheduleFile(actor, id);
  const schedule = await KeptSchedule.findOne({ where: { slug: id } });
  const revision = schedule && (await ScheduleRevision.findOne({ where: { scheduleId: schedule.id, number } }));
  if (!revision) throw notFound();
  return revisionFile(schedule, revision);
}

/** What changed from one kept text to another. @throws {ServiceError} 404 where one of them does not exist */
export async function revisionDifference(
  actor: Actor,
  id: string,
  between: { before: number; after: number },
): Promise<DifferenceView> {
  const before = await openRevision(actor, id, between.before);
  const after = await openRevision(actor, id, between.after);
  return { ...between, ...presentDifference(before.text, after.text) };
}
