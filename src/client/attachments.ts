import type { AttachedFile, AttachmentView } from '../schemas/attachment';
import { call, sendFile } from './api';

const pagesOf = (code: string) => `/api/engagements/${encodeURIComponent(code)}/attachments`;

/** Address of pages as they came. */
export const pagesPath = (id: number) => `/api/attachments/${id}/original`;

/** Address of the window that shows pages by themselves. */
export const pageWindow = (code: string, id: number) => `/engagements/${encodeURIComponent(code)}/attachments/${id}`;

/** Pages of an engagement, attached or waiting. */
export const fetchAttachments = (code: string) => call<AttachmentView[]>('GET', pagesOf(code));

/** Attaches a file to a bill; without one it waits. */
export function attachFile(
  code: string,
  file: File,
  to: { billId: number | null; pageCount: number | null },
  onProgress: (share: number) => void,
): Promise<AttachedFile> {
  const query = new URLSearchParams({ fileName: file.name });
  if (to.billId !== null) query.set('billId', String(to.billId));
  if (to.pageCount !== null) query.set('pageCount', String(to.pageCount));
  return sendFile(`${pagesOf(code)}?${query}`, file, onProgress);
}

type Seen = { id: number; version: number };

/** Moves pages to a bill; null lets them wait. */
export const movePages = ({ id, version }: Seen, billId: number | null) =>
  call<AttachmentView>('PATCH', `/api/attachments/${id}`, { version, billId });

/** Removes pages or takes that back. */
export const removePages = ({ id, version }: Seen, removed: boolean) =>
  call<AttachmentView>('PATCH', `/api/attachments/${id}`, { version, removed });
