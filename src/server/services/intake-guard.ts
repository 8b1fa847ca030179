import { Op } from 'sequelize';
import { conflict, notFound, staleVersion } from '../errors';
import { Bill } from '../models/Bill';
import { Intake } from '../models/Intake';
import type { Meter } from '../models/Meter';
import type { Actor } from '../policies/actor';
import { presentIntakeRow } from '../presenters/intake';
import { openEngagement, openEngagementById, type OpenEngagement } from './engagements';

/**
 * Opens an engagement whose bills and readings are to change.
 *
 * @throws {ServiceError} 404 for those who do not work on it, 409 where it is closed
 */
export async function openForChange(actor: Actor, code: string): Promise<OpenEngagement> {
  return assertNotClosed(await openEngagement(actor, code));
}

/** @throws {ServiceError} 409 where the engagement is closed */
export function assertNotClosed(opened: OpenEngagement): OpenEngagement {
  if (!opened.engagement.closedAt) return opened;
  throw conflict(
    `${opened.engagement.code} is closed. A partner can open it again; then its files and bills can change.`,
  );
}

/** A file on its way in, and the engagement it belongs to. */
export interface OpenIntake {
  intake: Intake;
  opened: OpenEngagement;
}

/** The meter whose readings a file holds. */
export const meterOf = ({ intake, opened }: OpenIntake): Meter =>
  opened.meters.find(({ id }) => id === intake.meterId) ?? opened.meter;

/** @throws {ServiceError} 404 where there is none, or none this person may know of */
export async function openIntake(actor: Actor, id: number): Promise<OpenIntake> {
  const intake = Number.isSafeInteger(id) ? await Intake.findByPk(id) : null;
  if (!intake) throw notFound();
  return { intake, opened: await openEngagementById(actor, intake.engagementId) };
}

/** The same for a change: 409 where the engagement is closed or somebody changed the file's row in between. */
export async function openIntakeForChange(actor: Actor, id: number, version: number): Promise<OpenIntake> {
  const { intake, opened } = await openIntake(actor, id);
  assertNotClosed(opened);
  if (intake.version !== version) throw staleVersion(intake.fileName, { version }, presentIntakeRow(intake));
  return { intake, opened };
}

/** The kept bills of an engagement that share a day with [from, to). */
export function billsWithin(engagementId: number, from: string, to: string): Promise<Bill[]> {
  const where = { engagementId, periodFrom: { [Op.lt]: to }, periodTo: { [Op.gt]: from } };
  return Bill.findAll({ where, order: ['periodFrom'] });
}

/** Marks a file as kept. Call inside inTx. */
export const markKept = (intake: Intake) => intake.update({ state: 'kept', keptAt: new Date(), undoneAt: null });
