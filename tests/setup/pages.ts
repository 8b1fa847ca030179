import { Readable } from 'node:stream';
import type { AttachedFile } from '@/schemas/attachment';
import { storePages } from '@/server/page-stream';
import type { Actor } from '@/server/policies/actor';
import { attachPages } from '@/server/services/attachments';
import { openForChange } from '@/server/services/intake-guard';

/** A PNG of a size in pixels, cut off after the header that says it: PNG specification, section 11.2.2. */
export function pngHead(width: number, height: number): Buffer {
  const bytes = Buffer.alloc(33);
  bytes.write('\x89PNG\r\n\x1a\n', 'latin1');
  bytes.writeUInt32BE(13, 8);
  bytes.write('IHDR', 12);
  bytes.writeUInt32BE(width, 16);
  bytes.writeUInt32BE(height, 20);
  return bytes;
}

/** A JPEG cut off after its frame header, behind a segment of an application as cameras write it: ITU-T T.81, annex B. */
export function jpegHead(width: number, height: number): Buffer {
  const application = Buffer.concat([Buffer.from([0xff, 0xe1, 0x03, 0xea]), Buffer.alloc(1000)]);
  const frame = Buffer.from([0xff, 0xc0, 0, 17, 8, 0, 0, 0, 0, 3, 1, 0x22, 0, 2, 0x11, 1, 3, 0x11, 1]);
  frame.writeUInt16BE(height, 5);
  frame.writeUInt16BE(width, 7);
  return Buffer.concat([Buffer.from([0xff, 0xd8]), application, frame]);
}

/** Bytes that begin as a PDF does; what follows tells one file from another. */
export const pdfHead = (what = '') => Buffer.from(`%PDF-1.7\n%${what}\n`);

/** Attaches a file as the upload does. */
export async function attach(
  actor: Actor,
  code: string,
  file: { fileName: string; bytes: Buffer; billId?: number; pageCount?: number },
): Promise<AttachedFile> {
  const opened = await openForChange(actor, code);
  const stored = await storePages(Readable.from([file.bytes]), file.fileName);
  const { fileName, billId = null, pageCount = null } = file;
  return attachPages(actor, opened, { ...stored, fileName, billId, pageCount });
}
