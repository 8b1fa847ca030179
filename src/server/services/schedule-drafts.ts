import { Op } from 'sequelize';
import type { DraftInput } from '../../schemas/schedule-editor';
import { inTx } from '../db/tx';
import { ScheduleDraft } from '../models/ScheduleDraft';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { openScheduleFile } from './schedules';

/**
 * Keeps what a person is writing, errors and all. What says no more than the kept text is no draft: one that comes late, after
 * its text was kept, leaves none behind.
 *
 * @throws {ServiceError} 404 where there is no such schedule
 */
export async function keepDraft(actor: Actor, id: string, { text, baseNumber }: DraftInput): Promise<{ at: string }> {
  const kept = await openScheduleFile(actor, id);
  const where = { scheduleSlug: id, userId: actor.id };
  if (text === kept.text) {
    await inTx(() => ScheduleDraft.destroy({ where }));
    return { at: new Date().toISOString() };
  }
  const draft = await inTx(async () => {
    const known = await ScheduleDraft.findOne({ where });
    return known ? known.update({ text, baseNumber }) : ScheduleDraft.create({ ...where, text, baseNumber });
  });
  return { at: draft.updatedAt.toISOString() };
}

/** Throws a person's draft away. */
export async function dropDraft(actor: Actor, id: string): Promise<void> {
  await openScheduleFile(actor, id);
  await inTx(() => ScheduleDraft.destroy({ where: { scheduleSlug: id, userId: actor.id } }));
}

/** A person's draft of a schedule. */
export const draftOf = (actor: Actor, id: string) =>
  ScheduleDraft.findOne({ where: { scheduleSlug: id, userId: actor.id } });

/** Names of others who have a draft of a schedule. */
export async function othersWriting(actor: Actor, id: string): Promise<string[]> {
  const drafts = await ScheduleDraft.findAll({ where: { scheduleSlug: id, userId: { [Op.ne]: actor.id } } });
  const people = await User.findAll({ where: { id: drafts.map((draft) => draft.userId) }, order: ['name'] });
  return people.map((person) => person.name);
}
