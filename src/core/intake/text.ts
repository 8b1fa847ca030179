import { intakeError } from './errors';

/** Text of a file and the encoding it was written in. */
interface DecodedText {
  text: string;
  encoding: 'UTF-8' | 'UTF-8 with mark' | 'UTF-16 LE' | 'UTF-16 BE' | 'Windows-1252';
}

/**
 * Decodes the bytes of a text file: a byte order mark decides; then UTF-16 by its pattern of zero bytes; then UTF-8 if every
 * byte fits; else Windows-1252.
 * @throws {IntakeError} if the bytes are no text.
 */
export function decodeText(bytes: Uint8Array, fileName: string): DecodedText {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) {
    return { text: new TextDecoder('utf-8').decode(bytes), encoding: 'UTF-8 with mark' };
  }
  if (bytes[0] === 0xff && bytes[1] === 0xfe)
    return { text: new TextDecoder('utf-16le').decode(bytes), encoding: 'UTF-16 LE' };
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return { text: decodeBigEndian(bytes), encoding: 'UTF-16 BE' };
  const zeros = countZeros(bytes.subarray(0, 2048));
  const half = Math.min(bytes.length, 2048) / 2;
  if (zeros.odd > half * 0.6 && zeros.even < half * 0.05) {
    return { text: new TextDecoder('utf-16le').decode(bytes), encoding: 'UTF-16 LE' };
  }
  if (zeros.even > half * 0.6 && zeros.odd < half * 0.05)
    return { text: decodeBigEndian(bytes), encoding: 'UTF-16 BE' };
  if (zeros.odd + zeros.even > 0) {
    throw intakeError(
      'The file is binary, not text.',
      fileName,
      'Bring in delimited text, a spreadsheet, ESPI XML, NEM12 or a ZIP of one of them.',
    );
  }
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'UTF-8' };
  } catch {
    return { text: new TextDecoder('windows-1252').decode(bytes), encoding: 'Windows-1252' };
  }
}

function countZeros(bytes: Uint8Array): { even: number; odd: number } {
  const zeros = { even: 0, odd: 0 };
  bytes.forEach((byte, at) => {
    if (byte === 0) zeros[at % 2 === 0 ? 'even' : 'odd'] += 1;
  });
  return zeros;
}

/** The runtime may lack a big-endian decoder, so the pairs are swapped first. */
function decodeBigEndian(bytes: Uint8Array): string {
  const swapped = new Uint8Array(bytes.length - (bytes.length % 2));
  for (let at = 0; at < swapped.length; at += 2) {
    swapped[at] = bytes[at + 1] ?? 0;
    swapped[at + 1] = bytes[at] ?? 0;
  }
  return new TextDecoder('utf-16le').decode(swapped);
}
