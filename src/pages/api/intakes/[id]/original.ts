import { Readable } from 'node:stream';
import { endpoint } from '@/server/http';
import { openOriginal } from '@/server/services/intake';

/** A name in a header: the plain letters for old readers, all of them percent-encoded for the others (RFC 6266, RFC 8187). */
function disposition(fileName: string): string {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\]/g, '_');
  const encoded = encodeURIComponent(fileName).replace(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}

export const GET = endpoint(async ({ actor, params }) => {
  const file = await openOriginal(actor, Number(params.id));
  const headers = {
    'content-type': 'application/octet-stream',
    'content-length': String(file.bytes),
    'content-disposition': disposition(file.fileName),
    'x-content-type-options': 'nosniff',
    digest: `sha-256=${Buffer.from(file.sha256, 'hex').toString('base64')}`,
  };
  return new Response(Readable.toWeb(file.stream) as ReadableStream, { headers });
});
