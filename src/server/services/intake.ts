import { isDeepStrictEqual } from 'node:util';
import type { ColumnMap } from '../../core/intake';
import { columnKey, guessKey, type IntakePreview, type IntakeView, type MatchInput } from '../../schemas/intake';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound } from '../errors';
import { readOriginal, type StoredFile } from '../drawer';
import { ColumnMapRow } from '../models/ColumnMapRow';
import { Intake } from '../models/Intake';
import type { Meter } from '../models/Meter';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { presentIntake } from '../presenters/intake';
import type { OpenEngagement } from './engagements';
import { openForChange, openIntake, openIntakeForChange, type OpenIntake } from './intake-guard';
import { previewFile } from './intake-read';
import { assertNotReading, readingOf, readingValues, startReading } from './intake-reading';
import { jobEnded } from './jobs';

/**
 * Whether the person may bring files into an engagement.
 *
 * @throws {ServiceError} 404 for those who do not work on it, 409 where it is closed
 */
export const authorizeIntake = (actor: Actor, code: string): Promise<OpenEngagement> => openForChange(actor, code);

/** How long an answer waits for reading to end: a small file is there at once, a large one goes on as a job. */
export const patienceMs = 1500;

/** A file that lies in the drawer. */
export interface ReceivedFile extends StoredFile {
  kind: 'intervals' | 'bills';
  fileName: string;
  /** The meter of its readings; left out: the engagement's own. */
  meterId?: number;
}

/**
 * Takes a stored file in: makes its row and reads it with what can be detected, as a job that goes on when nobody waits
 * for it. A file that cannot be read is taken in too, as refused, with what is wrong.
 *
 * @param withinMs  How long to wait for the end of reading; omitted: until the end
 */
export async function receiveFile(
  actor: Actor,
  opened: OpenEngagement,
  file: ReceivedFile,
  withinMs?: number,
): Promise<IntakeView> {
  const intake = await inTx(() =>
    Intake.create({
      engagementId: opened.engagement.id,
      meterId: meterFor(opened, file.meterId).id,
      kind: file.kind,
      fileName: file.fileName,
      bytes: file.bytes,
      sha256: file.sha256,
      state: 'reading',
      columnMap: null,
      preview: null,
      report: null,
      problems: null,
      broughtById: actor.id,
      keptAt: null,
      undoneAt: null,
    }),
  );
  return readAsJob(actor, { intake, opened }, withinMs);
}

/**
 * Reads a file again that could not be read, or whose reading was stopped.
 *
 * @throws {ServiceError} 409 where it is being read, or there is nothing to read again
 */
export async function readAgain(actor: Actor, id: number, version: number, withinMs?: number): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  const { intake } = open;
  assertNotReading(intake);
  if (intake.preview)
    throw conflict(`${intake.fileName} has been read. Change what it is taken for in the step Match.`);
  await inTx(() => intake.update({ state: 'reading', problems: null }));
  return readAsJob(actor, open, withinMs);
}

async function readAsJob(actor: Actor, open: OpenIntake, withinMs?: number): Promise<IntakeView> {
  const job = await startReading(actor, open);
  await jobEnded(job.id, withinMs);
  return present(open);
}

/** @throws {ServiceError} 422 where the meter is none of the engagement's */
function meterFor({ meter, meters }: OpenEngagement, meterId = meter.id): Meter {
  const found = meters.find(({ id }) => id === meterId);
  if (!found) throw invalid('Choose the meter.', { meterId: ['Choose one of the meters of this engagement.'] });
  return found;
}

/** The file with its four steps. */
export async function readIntake(actor: Actor, id: number): Promise<IntakeView> {
  return present(await openIntake(actor, id));
}

/** The same where it belongs to the engagement of the address. */
export async function readIntakeOf(actor: Actor, code: string, id: number): Promise<IntakeView> {
  const open = await openIntake(actor, id);
  if (open.opened.engagement.code !== code) throw notFound();
  return present(open);
}

/** The file exactly as it came. */
export async function openOriginal(actor: Actor, id: number) {
  const { intake } = await openIntake(actor, id);
  return { fileName: intake.fileName, bytes: intake.bytes, sha256: intake.sha256, stream: readOriginal(intake.sha256) };
}

/** Reads the file again with a corrected map, zone, and the columns the person gave a word for. */
export async function matchIntake(actor: Actor, id: number, input: MatchInput): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, input.version);
  assertNotKept(open.intake);
  if (input.columnMap.kind !== open.intake.kind) {
    throw invalid('The column map is for another kind of file.', { 'columnMap.kind': ['Send a map of this kind.'] });
  }
  const { timeZone, columnMap, confirmed } = input;
  const stored = open.intake.preview;
  const readWithId = stored?.readWithId ?? null;
  if (stored && stored.timeZone === timeZone && isDeepStrictEqual(stored.preview.columnMap, columnMap)) {
    await inTx(() => open.intake.update({ preview: { ...stored, confirmed } }));
    return present(open);
  }
  const reading = await rereadFile(open.intake, { timeZone, columnMap });
  await inTx(() => open.intake.update(readingValues(reading, { timeZone, confirmed, readWithId })));
  return present(open);
}

/** Reads the file with a remembered map of its shape; whoever remembered it gave the word for its columns. */
export async function readWithMap(
  actor: Actor,
  id: number,
  input: { version: number; mapId: number },
): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, input.version);
  assertNotKept(open.intake);
  const map = (await mapsFor(open.intake)).find((row) => row.id === input.mapId);
  if (!map) throw notFound();
  const timeZone = open.intake.preview?.timeZone ?? open.opened.site.timeZone;
  const reading = await rereadFile(open.intake, { timeZone, columnMap: map.map });
  const confirmed = everyKey(reading.preview);
  await inTx(() => open.intake.update(readingValues(reading, { timeZone, confirmed, readWithId: map.id })));
  return present(open);
}

/** Remembers the map the file was read with under a name; the same name for the same shape is replaced. */
export async function rememberMap(actor: Actor, id: number, input: { name: string }): Promise<IntakeView> {
  const open = await openIntake(actor, id);
  const stored = open.intake.preview;
  if (!stored || stored.preview.problems.length > 0) {
    throw conflict('This file cannot be read yet, so there is no map to remember. Correct its columns first.');
  }
  const { kind } = open.intake;
  const key = { name: input.name, kind, signature: stored.preview.shape };
  const map = stored.preview.columnMap;
  await inTx(async () => {
    const known = await ColumnMapRow.findOne({ where: key });
    const row = known ? await known.update({ map }) : await ColumnMapRow.create({ ...key, map, createdById: actor.id });
    await open.intake.update({ preview: { ...stored, readWithId: row.id } });
  });
  return present(open);
}

/** Puts a file aside. It stays in the drawer; nothing of it was kept. */
export async function giveUpIntake(actor: Actor, id: number, version: number): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  assertNotKept(open.intake);
  await inTx(() => open.intake.update({ state: 'given-up' }));
  return present(open);
}

/** Reads a file again; a map with which nothing at all can be made of it is refused and changes nothing. */
async function rereadFile(intake: Intake, how: { timeZone: string; columnMap: ColumnMap }) {
  const reading = await previewFile(intake, how);
  if ('preview' in reading) return reading;
  const { problems } = reading;
  const message = `${intake.fileName} cannot be read like that, so it stays as it was matched. ${problems[0]?.message ?? ''}`;
  throw invalid(message.trim(), undefined, { problems });
}

function assertNotKept(intake: Intake): void {
  assertNotReading(intake);
  if (intake.state === 'kept') throw conflict(`${intake.fileName} is kept. Undo it first; then it can be changed.`);
}

const everyKey = (preview: IntakePreview) => [...preview.columns.map(columnKey), ...preview.guesses.map(guessKey)];

function mapsFor(intake: Intake): Promise<ColumnMapRow[]> {
  const stored = intake.preview;
  if (!stored) return Promise.resolve([]);
  const where = { kind: intake.kind, signature: stored.preview.shape };
  return ColumnMapRow.findAll({ where, order: [['updatedAt', 'DESC']] });
}

/** The row with its surroundings, for the page. */
export async function present({ intake, opened }: OpenIntake): Promise<IntakeView> {
  const { engagement, meter, meters, site } = opened;
  const [maps, reading, broughtBy] = await Promise.all([
    mapsFor(intake),
    readingOf(intake),
    intake.broughtById === null ? null : User.findByPk(intake.broughtById, { attributes: ['name'] }),
  ]);
  const { code, currency, yearFrom, yearTo } = engagement;
  return presentIntake(intake, {
    engagement: {
      code,
      currency,
      meter: (meters.find(({ id }) => id === intake.meterId) ?? meter).label,
      yearFrom,
      yearTo,
      siteTimeZone: site.timeZone,
    },
    broughtBy: broughtBy?.name ?? null,
    reading,
    maps,
  });
}
