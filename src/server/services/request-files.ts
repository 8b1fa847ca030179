import type { FileActInput } from '../../schemas/request';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { readOriginal } from '../drawer';
import { conflict, invalid, notFound, staleVersion } from '../errors';
import { DataRequest } from '../models/DataRequest';
import { Motor } from '../models/Motor';
import { RequestFile } from '../models/RequestFile';
import { RequestItem } from '../models/RequestItem';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import type { OpenEngagement } from './engagements';
import { authorizeIntake, receiveFile } from './intake';
import { acceptWhenDealtWith } from './request-items';
import { fileOf, openSentFile, type OpenRequest } from './request-open';

/** Time after which a file that is still being taken was left so by a server that stopped. [ms] */
const longestTakingMs = 10 * 60_000;

/** What came of an act: the intake a file was taken into, where there is one. */
export interface FileActOutcome {
  intakeId: number | null;
}

interface Came {
  file: RequestFile;
  item: RequestItem;
}

/** A file as it came, for its sender and the practice. @throws {ServiceError} 404, 403 */
export async function openRequestFile(actor: Actor, open: OpenRequest, key: string) {
  const { fileName, bytes, sha256, mediaType } = await openSentFile(actor, open, key);
  return { fileName, bytes, sha256, mediaType, stream: readOriginal(sha256) };
}

const isFree = ({ state, updatedAt }: RequestFile) =>
  state === 'new' ||
  state === 'set-aside' ||
  (state === 'taking' && Date.now() - updatedAt.getTime() > longestTakingMs);

/** Reads a file's row again and holds it to what the person saw. Call inside inTx. */
async function reserve(file: RequestFile, version: number): Promise<void> {
  await freshen(file);
  if (file.state === 'removed') throw notFound();
  if (file.version !== version) {
    throw staleVersion(file.fileName, { version }, { version: file.version, state: file.state });
  }
}

/**
 * Takes a file into intake in the name of who does it; the original is the one the client sent.
 *
 * @throws {ServiceError} 409 where it was taken already or the engagement is closed
 */
async function takeIn(
  actor: Actor,
  { file, item }: Came,
  code: string,
  input: Extract<FileActInput, { act: 'intake' }>,
) {
  const engagement = await authorizeIntake(actor, code);
  const before = file.state;
  await inTx(async () => {
    await reserve(file, input.version);
    if (!isFree(file)) throw conflict(`${file.fileName} was taken already.`);
    await file.update({ state: 'taking' });
  });
  const { fileName, bytes, sha256 } = file;
  const intake = await receiveFile(actor, engagement, { kind: input.kind, fileName, bytes, sha256 }).catch(
    async (error: unknown) => {
      await inTx(() => file.update({ state: before === 'set-aside' ? 'set-aside' : 'new' }));
      throw error;
    },
  );
  await inTx(async () => {
    await file.update({ state: 'taken', intakeId: intake.id });
    await freshen(item);
    await acceptWhenDealtWith(item);
  });
  return { intakeId: intake.id };
}

/** @throws {ServiceError} 422 where the motor is none of the engagement */
async function assertMotor({ engagement }: OpenEngagement, motorId: number | null): Promise<void> {
  if (motorId === null || (await Motor.findOne({ where: { id: motorId, engagementId: engagement.id } }))) return;
  throw invalid('This motor is none of the engagement.', { motorId: ['Choose a motor of the list, or none yet.'] });
}

async function move({ file, item }: Came, input: Exclude<FileActInput, { act: 'intake' }>) {
  await inTx(async () => {
    await reserve(file, input.version);
    if (file.state === 'taken' || file.state === 'taking') {
      throw conflict(`${file.fileName} was taken into intake. Give it up or undo it there.`);
    }
    const to = { plate: 'plate', 'set-aside': 'set-aside', back: 'new' } as const;
    await file.update({ state: to[input.act], motorId: input.act === 'plate' ? input.motorId : null });
    await freshen(item);
    if (input.act !== 'back') return acceptWhenDealtWith(item);
    if (item.state === 'accepted') await item.update({ state: 'answered' });
  });
  return { intakeId: null };
}

/**
 * Decides about a file that came: into intake, beside a motor's nameplate, aside, or back among the new ones.
 *
 * @throws {ServiceError} 404, 409 where somebody did meanwhile, 422
 */
export async function actOnFile(
  actor: Actor,
  open: OpenRequest,
  key: string,
  input: FileActInput,
): Promise<FileActOutcome> {
  const came = await fileOf(open, key);
  if (input.act === 'intake') return takeIn(actor, came, open.opened.engagement.code, input);
  if (input.act === 'plate') await assertMotor(open.opened, input.motorId);
  return move(came, input);
}

/** A picture or paper of a nameplate that came from the client. */
export interface PlateFile {
  key: string;
  fileName: string;
  mediaType: string;
  number: number;
  motorId: number | null;
}

/** The nameplates that came for an engagement's motors; those of none yet lie with the next motor to be entered. */
export async function plateFiles({ engagement }: OpenEngagement): Promise<PlateFile[]> {
  const requests = await DataRequest.findAll({ where: { engagementId: engagement.id } });
  const items = await RequestItem.findAll({ where: { requestId: requests.map(({ id }) => id) } });
  const files = await RequestFile.findAll({
    where: { itemId: items.map(({ id }) => id), state: 'plate' },
    order: ['id'],
  });
  return files.map(({ key, fileName, mediaType, motorId, itemId }) => {
    const requestId = items.find(({ id }) => id === itemId)?.requestId;
    const number = requests.find(({ id }) => id === requestId)?.number ?? 0;
    return { key, fileName, mediaType, motorId, number };
  });
}

/** Where a file on its way in came from, if the client sent it for a request. */
export async function sourceOfIntake(intakeId: number): Promise<{ number: number; by: string; at: string } | null> {
  const file = await RequestFile.findOne({ where: { intakeId } });
  if (!file) return null;
  const item = await RequestItem.findByPk(file.itemId, { rejectOnEmpty: true });
  const [request, sender] = await Promise.all([
    DataRequest.findByPk(item.requestId, { rejectOnEmpty: true }),
    file.uploadedById === null ? null : User.findByPk(file.uploadedById),
  ]);
  return { number: request.number, by: sender?.name ?? 'the client', at: file.createdAt.toISOString() };
}
