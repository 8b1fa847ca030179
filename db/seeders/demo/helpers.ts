import { Readable } from 'node:stream';
import type { PersonInput } from '../../../src/schemas/client';
import { columnKey, guessKey, toConfirm } from '../../../src/schemas/intake';
import type { JobProgress } from '../../../src/schemas/job';
import { actAs } from '../../../src/server/db/context';
import { storeOriginal } from '../../../src/server/drawer';
import type { Actor } from '../../../src/server/policies/actor';
import type { OpenEngagement } from '../../../src/server/services/engagements';
import { matchIntake, receiveFile } from '../../../src/server/services/intake';
import { keepIntake } from '../../../src/server/services/intake-keep';
import { readJob } from '../../../src/server/services/jobs';
import { hashPassword } from '../../../src/server/services/passwords';
import { addPerson } from '../../../src/server/services/people';
import { loadActor, sessionEpochOf, setPasswordHash } from '../../../src/server/services/sign-in';
import { endTokens } from '../../../src/server/services/tokens';
import { inTx } from '../../../src/server/db/tx';
import { demoAccounts } from '../../../src/server/demo-accounts';

/** A day before today, so that the scenario is always of these weeks. */
export function daysAgo(days: number): string {
  return new Date(Date.now() - days * 86_400_000).toISOString().slice(0, 10);
}

/** A person who can sign in at once with the demo's password. */
export function addPersonWithPassword(actor: Actor, input: PersonInput): Promise<Actor> {
  return actAs({ actorId: actor.id, ip: null }, () => invited(actor, input));
}

async function invited(actor: Actor, input: PersonInput): Promise<Actor> {
  const { person: added } = await addPerson(actor, input);
  const passwordHash = await hashPassword(demoAccounts.password);
  await inTx(() => endTokens(added.id));
  await setPasswordHash(added.id, passwordHash);
  const person = await loadActor(added.id, await sessionEpochOf(added.id));
  if (!person) throw new Error(`${input.name} could not be loaded`);
  return person;
}

/** Brings a file in as a person would: read, every unsure column confirmed, kept. */
export async function bringIn(
  actor: Actor,
  opened: OpenEngagement,
  file: { kind: 'intervals' | 'bills'; fileName: string; bytes: Uint8Array },
): Promise<void> {
  const stored = await storeOriginal(Readable.from([Buffer.from(file.bytes)]));
  let intake = await receiveFile(actor, opened, { kind: file.kind, fileName: file.fileName, ...stored });
  if (!intake.preview) throw new Error(`${file.fileName}: ${JSON.stringify(intake.problems)}`);
  const { columns, guesses, count } = toConfirm(intake.preview, []);
  if (count > 0) {
    const confirmed = [...columns.map(columnKey), ...guesses.map(guessKey)];
    const { version, timeZone } = intake;
    intake = await matchIntake(actor, intake.id, { version, timeZone, columnMap: intake.preview.columnMap, confirmed });
  }
  await keepIntake(actor, intake.id, intake.version);
}

/** Waits for long work to end. */
export async function ended(actor: Actor, begun: JobProgress): Promise<JobProgress> {
  let job = begun;
  while (job.state === 'running') {
    await new Promise((resolve) => setTimeout(resolve, 100));
    job = await readJob(actor, begun.id);
  }
  if (job.state !== 'done')
    throw new Error(`The ${job.kind} of the demo scenario ended as ${job.state}: ${job.error ?? ''}`);
  return job;
}
