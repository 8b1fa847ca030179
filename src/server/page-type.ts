import { photoCapPixels, type MediaType } from '../schemas/attachment';
import { invalid } from './errors';
import { mediaTypeOf } from './media-type';

/** How many bytes of a file are enough to know what it is and, of a photo, how large. A camera's own preview comes first. */
export const headBytes = 1024 * 1024;

interface Pixels {
  width: number;
  height: number;
}

const ascii = (head: Buffer, from: number, to: number) => head.toString('latin1', from, to);

/** The start-of-frame segment of a JPEG says its size; segments before it are stepped over. */
function jpegPixels(head: Buffer): Pixels | null {
  for (let at = 2; at + 9 <= head.length && head[at] === 0xff;) {
    const marker = head[at + 1] ?? 0;
    const isFrame = marker >= 0xc0 && marker <= 0xcf && ![0xc4, 0xc8, 0xcc].includes(marker);
    if (isFrame) return { height: head.readUInt16BE(at + 5), width: head.readUInt16BE(at + 7) };
    at += marker === 0xff ? 1 : 2 + head.readUInt16BE(at + 2);
  }
  return null;
}

function pngPixels(head: Buffer): Pixels | null {
  if (head.length < 24 || ascii(head, 12, 16) !== 'IHDR') return null;
  return { width: head.readUInt32BE(16), height: head.readUInt32BE(20) };
}

/** The three kinds of WebP each say their size in their own way. */
function webpPixels(head: Buffer): Pixels | null {
  if (head.length < 30) return null;
  const kind = ascii(head, 12, 16);
  if (kind === 'VP8X') return { width: 1 + head.readUIntLE(24, 3), height: 1 + head.readUIntLE(27, 3) };
  if (kind === 'VP8 ') return { width: head.readUInt16LE(26) & 0x3fff, height: head.readUInt16LE(28) & 0x3fff };
  if (kind !== 'VP8L') return null;
  const bits = head.readUInt32LE(21);
  return { width: 1 + (bits & 0x3fff), height: 1 + ((bits >>> 14) & 0x3fff) };
}

const pixelsOf: Record<MediaType, ((head: Buffer) => Pixels | null) | null> = {
  'application/pdf': null,
  'image/jpeg': jpegPixels,
  'image/png': pngPixels,
  'image/webp': webpPixels,
};

const isPage = (mediaType: string | null): mediaType is MediaType => mediaType !== null && mediaType in pixelsOf;

/** Files people attach by mistake, each with what to do instead. */
function misfit(head: Buffer, mediaType: string | null): string {
  if (mediaType === 'image/heic' || ascii(head, 4, 12) === 'ftypavif') {
    return 'is a photo in the format HEIC or AVIF, which not every browser can show. Save or share it as JPEG, then attach that.';
  }
  if (ascii(head, 0, 4) === 'II*\0' || ascii(head, 0, 4) === 'MM\0*') {
    return 'is a scan in the format TIFF. Save it as PDF or JPEG, then attach that.';
  }
  if (ascii(head, 0, 4) === 'PK\x03\x04') {
    return 'is a workbook, a text document or a ZIP archive. Tables of bills go through Bring in a file; save anything else as PDF.';
  }
  if (/^\s*(<!doctype|<html|<\?xml|<svg)/i.test(ascii(head, 0, 300))) {
    return 'is a web page and not what its name says. Print the page as PDF, then attach that.';
  }
  return 'is neither a PDF nor a photo (JPEG, PNG or WebP): its first bytes say so, whatever its name. Save it as one of these.';
}

/**
 * What a page of a bill is by its first bytes; its name and what the browser calls it count for nothing.
 *
 * @throws {ServiceError} 422 for anything but PDF, JPEG, PNG and WebP, and for a photo too large to show
 */
export function pageTypeOf(head: Buffer, fileName: string): MediaType {
  const mediaType = mediaTypeOf(head.subarray(0, 4096), fileName);
  if (!isPage(mediaType)) throw invalid(`${fileName} ${misfit(head, mediaType)}`);
  const measure = pixelsOf[mediaType];
  if (!measure) return mediaType;
  const size = measure(head);
  if (!size || size.width === 0 || size.height === 0) {
    throw invalid(`${fileName} begins like a photo but does not say how large it is. Save the photo once more.`);
  }
  if (size.width * size.height > photoCapPixels) {
    throw invalid(
      `${fileName} is ${size.width} by ${size.height} pixels, more than the 64 million that can be shown. Save it smaller.`,
    );
  }
  return mediaType;
}
