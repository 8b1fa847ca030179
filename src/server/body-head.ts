import type { Readable } from 'node:stream';

/**
 * Passes the bytes of a request on once the first of them were looked at. A refusal leaves the request open, so that the sender can be told.
 *
 * @param headBytes  How many bytes are looked at, or all where there are fewer
 * @param onHead  Looks at them; what it throws ends the stream before anything of it went on
 * @param onCount  Hears after every piece how many bytes came so far; may throw too
 */
export async function* afterHead(
  body: Readable,
  {
    headBytes,
    onHead,
    onCount,
  }: { headBytes: number; onHead: (head: Buffer) => void; onCount?: (bytes: number) => void },
): AsyncGenerator<Buffer> {
  let head: Buffer | null = Buffer.alloc(0);
  let bytes = 0;
  for await (const chunk of body.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
    bytes += chunk.length;
    onCount?.(bytes);
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
