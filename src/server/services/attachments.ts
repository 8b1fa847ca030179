import { Op } from 'sequelize';
import type { AttachedFile, AttachmentChange, AttachmentView, MediaType, Places } from '../../schemas/attachment';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { readOriginal, type StoredFile } from '../drawer';
import { conflict, invalid, notFound, staleVersion } from '../errors';
import { Attachment } from '../models/Attachment';
import { Bill } from '../models/Bill';
import { User } from '../models/User';
import type { Handed } from '../download';
import type { Actor } from '../policies/actor';
import { presentAttachment } from '../presenters/attachment';
import { openEngagement, openEngagementById, type OpenEngagement } from './engagements';
import { assertNotClosed } from './intake-guard';

/** @throws {ServiceError} 404 where the engagement has no such bill; pages that wait have none */
export async function assertBillOf(engagementId: number, billId: number | null): Promise<void> {
  if (billId !== null && !(await Bill.findOne({ where: { id: billId, engagementId } }))) throw notFound();
}

/** Pages that lie in the drawer. */
export interface ReceivedPages extends StoredFile {
  fileName: string;
  mediaType: MediaType;
  pageCount: number | null;
  billId: number | null;
}

/**
 * Attaches stored pages. The same file is not attached to the same bill twice: if it waits for a bill it goes to this
 * one, if it was removed it comes back.
 */
export async function attachPages(actor: Actor, opened: OpenEngagement, pages: ReceivedPages): Promise<AttachedFile> {
  const engagementId = opened.engagement.id;
  const { attachment, known, others } = await inTx(async () => {
    await assertBillOf(engagementId, pages.billId);
    const same = await Attachment.findAll({ where: { engagementId, sha256: pages.sha256 }, order: ['id'] });
    const here = same.filter((one) => one.billId === pages.billId);
    const living = here.find((one) => one.removedAt === null);
    const others = same.filter((one) => one.removedAt === null && one.billId !== null && one.billId !== pages.billId);
    if (living) return { attachment: living, known: true, others };
    const waiting = same.find((one) => one.removedAt === null && one.billId === null);
    const back = waiting ?? here[0];
    if (back) {
      const attachment = await back.update({ billId: pages.billId, removedAt: null });
      return { attachment, known: false, others };
    }
    const attachment = await Attachment.create({
      engagementId,
      ...pages,
      attachedById: actor.id,
      removedAt: null,
    });
    return { attachment, known: false, others };
  });
  const alsoOf = others.flatMap((one) => one.billId ?? []);
  return { attachment: await present(attachment), known, alsoOf };
}

/** Pages of an engagement that are attached to a bill or wait for one, in the order in which they came. */
export async function listAttachments(actor: Actor, code: string): Promise<AttachmentView[]> {
  const { engagement } = await openEngagement(actor, code);
  return presentAll(
    await Attachment.findAll({ where: { engagementId: engagement.id, removedAt: null }, order: ['id'] }),
  );
}

/** Pages of a bill, and where they belong. */
export interface OpenAttachment {
  attachment: Attachment;
  opened: OpenEngagement;
}

/** @throws {ServiceError} 404 where there are none, or none this person may know of */
export async function openAttachment(actor: Actor, id: number): Promise<OpenAttachment> {
  const attachment = Number.isSafeInteger(id) ? await Attachment.findByPk(id) : null;
  if (!attachment) throw notFound();
  return { attachment, opened: await openEngagementById(actor, attachment.engagementId) };
}

/** The same for a page of an engagement, by its address. */
export async function readAttachmentOf(actor: Actor, code: string, id: number): Promise<AttachmentView> {
  const { attachment, opened } = await openAttachment(actor, id);
  if (opened.engagement.code !== code) throw notFound();
  return present(attachment);
}

/** The pages exactly as they came. */
export async function openPages(actor: Actor, id: number): Promise<Handed> {
  const { attachment } = await openAttachment(actor, id);
  const { fileName, bytes, sha256 } = attachment;
  return { fileName, bytes, sha256, stream: readOriginal(sha256) };
}

/**
 * Moves pages to another bill, lets them wait, removes them or takes that back. The file stays in the drawer.
 *
 * @throws {ServiceError} 409 where the engagement is closed, somebody was faster, or the bill has the same file already
 */
export async function changeAttachment(
  { attachment, opened }: OpenAttachment,
  change: AttachmentChange,
): Promise<AttachmentView> {
  assertNotClosed(opened);
  const { engagementId } = attachment;
  await inTx(async () => {
    await freshen(attachment);
    if (attachment.version !== change.version) {
      throw staleVersion(attachment.fileName, change, await present(attachment));
    }
    const billId = change.billId === undefined ? attachment.billId : change.billId;
    const removed = change.removed ?? false;
    await assertBillOf(engagementId, billId);
    if (!removed) await assertOnce(attachment, billId);
    await attachment.update({ billId, removedAt: removed ? new Date() : null });
  });
  return present(attachment);
}

async function assertOnce({ id, engagementId, sha256, fileName }: Attachment, billId: number | null): Promise<void> {
  const where = { engagementId, sha256, billId, removedAt: null, id: { [Op.ne]: id } };
  if (!(await Attachment.findOne({ where }))) return;
  throw conflict(`That bill has the same file already. ${fileName} was left where it is.`);
}

/** Pages of bills, for lists of bills. */
export function attachmentsOf(billIds: number[]): Promise<Attachment[]> {
  return Attachment.findAll({ where: { billId: billIds, removedAt: null }, order: ['id'] });
}

/** Gives waiting pages to a bill that is being kept. Call inside inTx. */
export async function takeWaitingPages(bill: Bill, attachmentIds: readonly number[]): Promise<void> {
  if (attachmentIds.length === 0) return;
  const where = { id: [...attachmentIds], engagementId: bill.engagementId, billId: null, removedAt: null };
  for (const attachment of await Attachment.findAll({ where })) await attachment.update({ billId: bill.id });
}

/** Lets the pages of a bill that goes wait for another. Call inside inTx. */
export async function releasePages(billId: number): Promise<void> {
  for (const attachment of await Attachment.findAll({ where: { billId } })) await attachment.update({ billId: null });
}

/**
 * Values of a bill are traced to pages of its own engagement only.
 *
 * @throws {ServiceError} 422 naming the fields
 */
export async function assertPlaces(engagementId: number, places: Places | undefined): Promise<void> {
  const ids = [...new Set(Object.values(places ?? {}).map(({ attachmentId }) => attachmentId))];
  if (ids.length === 0) return;
  const known = new Set((await Attachment.findAll({ where: { id: ids, engagementId } })).map(({ id }) => id));
  const strange = Object.entries(places ?? {}).filter(([, { attachmentId }]) => !known.has(attachmentId));
  if (strange.length === 0) return;
  const message = 'This engagement has no such page. Attach it first, then take the value from it.';
  throw invalid(
    'A value names a page that is not here.',
    Object.fromEntries(strange.map(([field]) => [`places.${field}`, [message]])),
  );
}

async function presentAll(attachments: Attachment[]): Promise<AttachmentView[]> {
  const people = await User.findAll({
    where: { id: attachments.flatMap((one) => one.attachedById ?? []) },
    attributes: ['id', 'name'],
  });
  return attachments.map((one) =>
    presentAttachment(one, people.find((person) => person.id === one.attachedById)?.name ?? null),
  );
}

async function present(attachment: Attachment): Promise<AttachmentView> {
  const [view] = await presentAll([attachment]);
  if (!view) throw notFound();
  return view;
}
