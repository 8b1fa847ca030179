import { Readable } from 'node:stream';
import { pagesCapBytes, type MediaType } from '../schemas/attachment';
import { afterHead } from './body-head';
import { storeOriginal, type StoredFile } from './drawer';
import { tooLarge } from './errors';
import { headBytes, pageTypeOf } from './page-type';

function refuseLarge(bytes: number): void {
  if (bytes > pagesCapBytes) throw tooLarge('The file is larger than 32 MiB. Split it by bill, or save it smaller.');
}

/**
 * Streams pages of a bill to the drawer. Nothing that is no PDF or photo, too large or empty is left there.
 *
 * @throws {ServiceError} 413 or 422 naming the file and what to do
 */
export async function storePages(body: Readable, fileName: string): Promise<StoredFile & { mediaType: MediaType }> {
  let mediaType: MediaType = 'application/pdf';
  const onHead = (head: Buffer) => (mediaType = pageTypeOf(head, fileName));
  const looked = afterHead(body, { headBytes, onHead, onCount: refuseLarge });
  const stored = await storeOriginal(Readable.from(looked, { objectMode: false }));
  return { ...stored, mediaType };
}
