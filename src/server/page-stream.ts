import { Readable } from 'node:stream';
import { pagesCapBytes, type MediaType } from '../schemas/attachment';
import { storeOriginal, type StoredFile } from './drawer';
import { tooLarge } from './errors';
import { headBytes, mediaTypeOf } from './media-type';

/** Passes the bytes on once the first of them say what the file is, and counts them. */
async function* looked(body: Readable, onHead: (head: Buffer) => void): AsyncGenerator<Buffer> {
  let head: Buffer | null = Buffer.alloc(0);
  let bytes = 0;
  // A refusal leaves the request open, so that the sender can be told.
  for await (const chunk of body.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
    bytes += chunk.length;
    if (bytes > pagesCapBytes) throw tooLarge('The file is larger than 32 MiB. Split it by bill, or save it smaller.');
    if (!head) {
      yield chunk;
      continue;
    }
    head = Buffer.concat([head, chunk]);
    if (head.length < headBytes) continue;
    onHead(head);
    yield head;
    head = null;
  }
  if (!head || head.length === 0) return;
  onHead(head);
  yield head;
}

/**
 * Streams pages of a bill to the drawer. Nothing that is no PDF or photo, too large or empty is left there.
 *
 * @throws {ServiceError} 413 or 422 naming the file and what to do
 */
export async function storePages(body: Readable, fileName: string): Promise<StoredFile & { mediaType: MediaType }> {
  let mediaType: MediaType = 'application/pdf';
  const stream = Readable.from(
    looked(body, (head) => (mediaType = mediaTypeOf(head, fileName))),
    { objectMode: false },
  );
  const stored = await storeOriginal(stream);
  return { ...stored, mediaType };
}
