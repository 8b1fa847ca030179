import { Readable } from 'node:stream';
import { afterHead } from './body-head';
import { invalid } from './errors';

const headBytes = 4096;

const begins = (head: Buffer, bytes: number[], at = 0) => bytes.every((byte, index) => head[at + index] === byte);
const ascii = (head: Buffer, from: number, to: number) => head.toString('latin1', from, to);

/** Brands of HEIF containers that hold HEVC pictures (ISO/IEC 23008-12). */
const heicBrands = new Set(['heic', 'heix', 'heim', 'heis', 'hevc', 'hevx', 'mif1', 'msf1']);

function pictureOf(head: Buffer): string | null {
  if (begins(head, [0xff, 0xd8, 0xff])) return 'image/jpeg';
  if (begins(head, [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])) return 'image/png';
  if (ascii(head, 0, 4) === 'RIFF' && ascii(head, 8, 12) === 'WEBP') return 'image/webp';
  if (ascii(head, 4, 8) === 'ftyp' && heicBrands.has(ascii(head, 8, 12))) return 'image/heic';
  return null;
}

/** Workbooks are archives; which kind is told by the first entry of an .ods and by the name of the others. */
function archiveOf(head: Buffer, fileName: string): string | null {
  if (!begins(head, [0x50, 0x4b, 0x03, 0x04])) return null;
  if (ascii(head, 30, 100).startsWith('mimetypeapplication/vnd.oasis.opendocument.spreadsheet')) {
    return 'application/vnd.oasis.opendocument.spreadsheet';
  }
  const isWorkbook = /\.xls[xm]$/i.test(fileName);
  return isWorkbook ? 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet' : 'application/zip';
}

/** The bytes as signs: UTF-16 where its mark stands first, else one sign a byte, which is enough to know text from other things. */
function signsOf(head: Buffer): string {
  const whole = head.subarray(0, head.length - (head.length % 2));
  if (begins(head, [0xff, 0xfe])) return whole.toString('utf16le', 2);
  if (begins(head, [0xfe, 0xff])) return Buffer.from(whole).swap16().toString('utf16le', 2);
  return head.toString('latin1', begins(head, [0xef, 0xbb, 0xbf]) ? 3 : 0);
}

/** Text has no control signs but tabs, ends of lines and pages, and the end of file of old systems; a web page is none. */
function textOf(head: Buffer): string | null {
  const signs = signsOf(head);
  if ([...signs].some((sign) => sign < ' ' && !'\t\n\f\r\u001a'.includes(sign))) return null;
  const start = signs.slice(0, 300).trimStart().toLowerCase();
  if (/^(<!doctype html|<html|<svg|<script)/.test(start)) return null;
  return start.startsWith('<') ? 'application/xml' : 'text/plain';
}

/**
 * What a file is by its first bytes; its name decides only what kind of archive a workbook is. Null for what is not
 * taken: programs, web pages, films, documents of word processors in their old form.
 */
export function mediaTypeOf(head: Buffer, fileName: string): string | null {
  if (begins(head, [0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1])) {
    return /\.xls$/i.test(fileName) ? 'application/vnd.ms-excel' : null;
  }
  if (ascii(head, 0, 1024).includes('%PDF-')) return 'application/pdf';
  return pictureOf(head) ?? archiveOf(head, fileName) ?? textOf(head);
}

/**
 * Lets a file through once its first bytes say that it is of a kind that is taken; `told` hears which.
 *
 * @throws {ServiceError} 422 through the stream, before anything of it went on
 */
export function checkedBody(body: Readable, fileName: string, told: (mediaType: string) => void): Readable {
  const onHead = (head: Buffer) => {
    const mediaType = mediaTypeOf(head, fileName);
    if (mediaType === null) throw notTaken(fileName);
    told(mediaType);
  };
  return Readable.from(afterHead(body, { headBytes, onHead }), { objectMode: false });
}

const notTaken = (fileName: string) =>
  invalid(
    `${fileName} is of a kind that cannot be taken. Send tables (CSV, text, xlsx, xls, ods, XML, also zipped), PDFs, or photos (JPEG, PNG, WebP, HEIC).`,
    { fileName: ['Save it as one of these kinds, or take a photo of it.'] },
  );
