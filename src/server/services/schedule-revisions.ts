import { checkExamples, type ExampleResult } from '../../core/tariff';
import type { Beginning, KeepRevisionInput, NewScheduleInput, PutAwayInput } from '../../schemas/schedule-editor';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound, staleVersion } from '../errors';
import { KeptSchedule } from '../models/KeptSchedule';
import { ScheduleDraft } from '../models/ScheduleDraft';
import { ScheduleRevision } from '../models/ScheduleRevision';
import { isStaff, type Actor } from '../policies/actor';
import { digestOf, readScheduleText, type ScheduleFile } from './schedule-files';
import { beginText, textWithIdentity } from './schedule-texts';
import { fileInFolder, openForm, openScheduleFile } from './schedules';

/** Refuses everybody but the practice's own people. @throws {ServiceError} 404 */
export function authorizeSchedules(actor: Actor): void {
  if (!isStaff(actor)) throw notFound();
}

/**
 * Begins a schedule of one's own: its first revision is the form's or the other schedule's text under the new id.
 *
 * @returns the new schedule's id in the language
 * @throws {ServiceError} 422 where the id is taken or what it is to begin from cannot be read
 */
export async function createSchedule(actor: Actor, input: NewScheduleInput): Promise<string> {
  authorizeSchedules(actor);
  const { slug, title, from } = input;
  const taken = (await KeptSchedule.findOne({ where: { slug } })) ?? (await fileInFolder(slug));
  if (taken) throw takenId(slug);
  const file = readScheduleText(slug, await beginning(actor, input));
  if (!file.schedule) throw unreadable('What it is to begin from cannot be read.', file);
  await inTx(async () => {
    if (await KeptSchedule.findOne({ where: { slug } })) throw takenId(slug);
    const schedule = await KeptSchedule.create({
      slug,
      madeFrom: from.kind === 'blank' ? null : `${from.kind} ${from.id}`,
      madeById: actor.id,
      putAwayAt: null,
    });
    await addRevision(schedule, { number: 1, text: file.text, note: noteOf(from, title), madeById: actor.id });
  });
  return slug;
}

const takenId = (slug: string) =>
  invalid('This id is taken.', { slug: [`There is a schedule "${slug}" already. Choose another id.`] });

const noteOf = (from: Beginning, title: string) =>
  from.kind === 'blank' ? `Begun blank as "${title}"` : `Begun from the ${from.kind} ${from.id}`;

async function beginning(actor: Actor, { slug, title, from }: NewScheduleInput): Promise<string> {
  if (from.kind === 'blank') return beginText(slug, title);
  const file = from.kind === 'form' ? await openForm(actor, from.id) : await openScheduleFile(actor, from.id);
  return textWithIdentity(file.text, slug, title);
}

interface NewRevision {
  number: number;
  text: string;
  note: string | null;
  madeById: number | null;
}

const addRevision = (schedule: KeptSchedule, revision: NewRevision) =>
  ScheduleRevision.create({ ...revision, scheduleId: schedule.id, sha256: digestOf(revision.text) });

/**
 * Keeps a text as the next revision. What stands on an earlier one stays on it. A schedule that was a file so far becomes a
 * kept one, its file's text the first revision.
 *
 * @throws {ServiceError} 422 where the text has errors, says nothing new or misses a worked bill; 409 where somebody kept one meanwhile
 */
export async function keepRevision(actor: Actor, id: string, input: KeepRevisionInput): Promise<number> {
  const current = await openScheduleFile(actor, id);
  const file = readScheduleText(id, input.text);
  if (!file.schedule) throw unreadable('The text has errors. Nothing was kept.', file);
  if (file.sha256 === current.sha256) {
    throw invalid('The text is the one that is kept already.', { text: ['Nothing is changed in it.'] });
  }
  refuseMissed(checkExamples(file.schedule));
  return inTx(async () => {
    const newest = await openScheduleFile(actor, id);
    const base = newest.revision ?? 0;
    if (input.baseNumber !== base) {
      throw staleVersion(`The schedule ${id}`, input.text, { text: newest.text, revision: base });
    }
    const schedule = (await KeptSchedule.findOne({ where: { slug: id } })) ?? (await adoptFile(newest));
    const number = Math.max(1, base) + 1;
    const note = input.note === '' ? null : input.note;
    await addRevision(schedule, { number, text: input.text, note, madeById: actor.id });
    await ScheduleDraft.destroy({ where: { scheduleSlug: id, userId: actor.id } });
    return number;
  });
}

/** Makes a file of the folder a kept schedule, its text the first revision. Call it inside inTx. */
async function adoptFile(file: ScheduleFile): Promise<KeptSchedule> {
  const schedule = await KeptSchedule.create({
    slug: file.id,
    madeFrom: "the library's file",
    madeById: null,
    putAwayAt: null,
  });
  await addRevision(schedule, { number: 1, text: file.text, note: "The library's file as it stood", madeById: null });
  return schedule;
}

function unreadable(message: string, { problems }: ScheduleFile) {
  const [first] = problems;
  const where = first ? `Line ${first.line}, column ${first.column}: ${first.message} ${first.remedy}` : message;
  return invalid(message, { text: [where] }, { problems });
}

/** A text that misses one of its own worked bills is not kept: a wrong digit is seen by nothing else. */
function refuseMissed(examples: ExampleResult[]): void {
  const missed = examples.filter((example) => !example.fits);
  if (missed.length === 0) return;
  const words = missed.map(({ title, problem, figures }) => {
    const figure = figures.find((one) => !one.fits);
    return `${title}: ${problem ?? `${figure?.name} is ${figure?.found}, not ${figure?.expected}.`}`;
  });
  throw invalid('The text misses a worked bill of its own. Nothing was kept.', { text: words });
}

/** Puts a kept schedule away, out of the lists, or brings it back. @throws {ServiceError} 404 for a file; 409 stale */
export async function putAway(actor: Actor, id: string, input: PutAwayInput): Promise<void> {
  authorizeSchedules(actor);
  const schedule = await KeptSchedule.findOne({ where: { slug: id } });
  if (!schedule) {
    await openScheduleFile(actor, id);
    throw conflict('A file of the folder of tariffs is taken away in the folder itself.');
  }
  await inTx(async () => {
    await freshen(schedule);
    if (schedule.version !== input.version) {
      throw staleVersion(`The schedule ${id}`, input.putAway, { putAway: schedule.putAwayAt !== null });
    }
    await schedule.update({ putAwayAt: input.putAway ? new Date() : null });
  });
}
