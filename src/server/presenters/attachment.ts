import type { AttachmentView, BillPages } from '../../schemas/attachment';
import type { Attachment } from '../models/Attachment';

/** Pages with who attached them. */
export function presentAttachment(attachment: Attachment, attachedBy: string | null): AttachmentView {
  const { id, version, billId, fileName, bytes, sha256, mediaType, pageCount, removedAt, createdAt } = attachment;
  return {
    id,
    version,
    billId,
    fileName,
    bytes,
    sha256,
    mediaType,
    pageCount,
    attachedBy,
    attachedAt: createdAt.toISOString(),
    removed: removedAt !== null,
  };
}

/** Pages as the table of bills names them. */
export function presentBillPages({ id, fileName, mediaType }: Attachment): BillPages {
  return { id, fileName, kind: mediaType === 'application/pdf' ? 'PDF' : 'photo' };
}
