import { intakeError } from './errors';

type Encoding = 'UTF-8' | 'UTF-8 with mark' | 'UTF-16 LE' | 'UTF-16 BE' | 'Windows-1252';

/** Text of a file and the encoding it was written in. */
interface DecodedText {
  text: string;
  encoding: Encoding;
}

/** Bytes decoded at a time; even, so that no UTF-16 pair is cut. */
const pieceBytes = 64 * 1024;

/**
 * Tells the encoding of a text file: a byte order mark decides; then UTF-16 by its pattern of zero bytes; then UTF-8 if
 * every byte fits; else Windows-1252.
 * @throws {IntakeError} if the bytes are no text.
 */
export function encodingOf(bytes: Uint8Array, fileName: string): Encoding {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return 'UTF-8 with mark';
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'UTF-16 LE';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'UTF-16 BE';
  const zeros = countZeros(bytes.subarray(0, 2048));
  const half = Math.min(bytes.length, 2048) / 2;
  if (zeros.odd > half * 0.6 && zeros.even < half * 0.05) return 'UTF-16 LE';
  if (zeros.even > half * 0.6 && zeros.odd < half * 0.05) return 'UTF-16 BE';
  if (zeros.odd + zeros.even > 0) {
    throw intakeError(
      'The file is binary, not text.',
      fileName,
      'Bring in delimited text, a spreadsheet, ESPI XML, NEM12 or a ZIP of one of them.',
    );
  }
  return isUtf8(bytes) ? 'UTF-8' : 'Windows-1252';
}

function isUtf8(bytes: Uint8Array): boolean {
  const decoder = new TextDecoder('utf-8', { fatal: true });
  try {
    for (let at = 0; at < bytes.length; at += pieceBytes)
      decoder.decode(bytes.subarray(at, at + pieceBytes), { stream: true });
    decoder.decode();
    return true;
  } catch {
    return false;
  }
}

/**
 * Decodes the bytes of a text file in whatever encoding they are.
 * @throws {IntakeError} if the bytes are no text.
 */
export function decodeText(bytes: Uint8Array, fileName: string): DecodedText {
  const encoding = encodingOf(bytes, fileName);
  if (encoding === 'UTF-16 BE') return { text: decoderOf(encoding).decode(swapped(bytes)), encoding };
  return { text: decoderOf(encoding).decode(bytes), encoding };
}

/**
 * Decodes a text file piece by piece, so that its whole text never stands in memory.
 * @throws {IntakeError} if the bytes are no text.
 */
export function* decodePieces(bytes: Uint8Array, fileName: string): Generator<{ text: string; bytesRead: number }> {
  const encoding = encodingOf(bytes, fileName);
  const decoder = decoderOf(encoding);
  for (let at = 0; at < bytes.length; at += pieceBytes) {
    const piece = bytes.subarray(at, at + pieceBytes);
    const bytesRead = at + piece.length;
    const stream = bytesRead < bytes.length;
    yield { text: decoder.decode(encoding === 'UTF-16 BE' ? swapped(piece) : piece, { stream }), bytesRead };
  }
}

/** The runtime may lack a big-endian decoder, so the pairs are swapped first. */
function decoderOf(encoding: Encoding): TextDecoder {
  if (encoding === 'Windows-1252') return new TextDecoder('windows-1252');
  return new TextDecoder(encoding.startsWith('UTF-16') ? 'utf-16le' : 'utf-8');
}

function countZeros(bytes: Uint8Array): { even: number; odd: number } {
  const zeros = { even: 0, odd: 0 };
  bytes.forEach((byte, at) => {
    if (byte === 0) zeros[at % 2 === 0 ? 'even' : 'odd'] += 1;
  });
  return zeros;
}

function swapped(bytes: Uint8Array): Uint8Array {
  const pairs = new Uint8Array(bytes.length - (bytes.length % 2));
  for (let at = 0; at < pairs.length; at += 2) {
    pairs[at] = bytes[at + 1] ?? 0;
    pairs[at + 1] = bytes[at] ?? 0;
  }
  return pairs;
}

/** The beginning of a text file, for showing its first rows. */
export function decodeHead(bytes: Uint8Array, fileName: string): string {
  const [first] = decodePieces(bytes, fileName);
  return first?.text ?? '';
}
