import { Readable } from 'node:stream';

/** A name in a header: the plain letters for old readers, all of them percent-encoded for the others (RFC 6266, RFC 8187). */
function disposition(fileName: string): string {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\]/g, '_');
  const encoded = encodeURIComponent(fileName).replace(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}

/** A file exactly as it came. */
export interface Original {
  fileName: string;
  bytes: number;
  sha256: string;
  stream: Readable;
}

/** A stranger's file on its way out: to be saved and never opened as a page of this server, whatever it holds. */
export function originalResponse({ fileName, bytes, sha256, stream }: Original): Response {
  const headers = {
    'content-type': 'application/octet-stream',
    'content-length': String(bytes),
    'content-disposition': disposition(fileName),
    'content-security-policy': "default-src 'none'; sandbox",
    'x-content-type-options': 'nosniff',
    digest: `sha-256=${Buffer.from(sha256, 'hex').toString('base64')}`,
  };
  return new Response(Readable.toWeb(stream) as ReadableStream, { headers });
}
