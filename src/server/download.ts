import { Readable } from 'node:stream';

/** A file in the drawer that is to be handed out. */
export interface Handed {
  fileName: string;
  bytes: number;
  sha256: string;
  stream: Readable;
  /** Only where its first bytes were looked at; else it is bytes. */
  mediaType?: string;
}

/** A name in a header: the plain letters for old readers, all of them percent-encoded for the others (RFC 6266, RFC 8187). */
function disposition(fileName: string): string {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\]/g, '_');
  const encoded = encodeURIComponent(fileName).replace(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}

/** A stranger's file as a download: never shown as a page, never guessed at, whoever made it. */
export function attachment(file: Handed): Response {
  const headers = {
    'content-type': file.mediaType ?? 'application/octet-stream',
    'content-length': String(file.bytes),
    'content-disposition': disposition(file.fileName),
    'content-security-policy': "default-src 'none'; sandbox",
    'x-content-type-options': 'nosniff',
    digest: `sha-256=${Buffer.from(file.sha256, 'hex').toString('base64')}`,
  };
  return new Response(Readable.toWeb(file.stream) as ReadableStream, { headers });
}
