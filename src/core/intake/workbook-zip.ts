import { intakeError } from './errors';
import { unzipMember } from './unzip';
import { checkZip } from './zip-caps';

const crcTable = Uint32Array.from({ length: 256 }, (_, byte) => {
  let crc = byte;
  for (let bit = 0; bit < 8; bit += 1) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  return crc >>> 0;
});

/** Checksum of the members of a ZIP (CRC-32 of ISO 3309, polynomial 0xEDB88320 reflected). */
export function crc32(bytes: Uint8Array): number {
  let crc = 0xffffffff;
  for (let at = 0; at < bytes.length; at += 1) crc = (crcTable[(crc ^ (bytes[at] ?? 0)) & 0xff] ?? 0) ^ (crc >>> 8);
  return (crc ^ 0xffffffff) >>> 0;
}

/** Pictures and macros, which no reading needs. */
const idle = /\.(png|jpe?g|gif|bmp|tiff?|emf|wmf|svg)$|vbaProject\.bin$/i;

/**
 * The workbook with its parts unpacked: bytes are counted while they come out and held against their checksums, which the
 * parser of workbooks does not do. It then meets nothing packed, so that a broken part can neither hang nor swell it.
 * @throws {IntakeError} if it is damaged, locked or too large.
 */
export async function unpackedWorkbook(bytes: Uint8Array, fileName: string): Promise<Uint8Array> {
  const parts: { name: Uint8Array; bytes: Uint8Array; crc: number }[] = [];
  for (const member of checkZip(bytes, fileName)) {
    if (idle.test(member.name) || member.name.endsWith('/')) continue;
    const part = await unzipMember(bytes, member, fileName).catch((cause: unknown) => {
      throw member.isEncrypted ? cause : damaged(fileName);
    });
    const crc = crc32(part);
    // Nought stands where a writer gave none.
    if (member.crc !== 0 && member.crc !== crc) throw damaged(fileName);
    parts.push({ name: new TextEncoder().encode(member.name), bytes: part, crc });
  }
  return stored(parts);
}

const damaged = (fileName: string) =>
  intakeError(
    'The workbook is damaged or cut off: its parts cannot be read.',
    fileName,
    'Open it in a spreadsheet program, save it again, and bring in the new file.',
  );

/** A ZIP of parts that are not packed (PKWARE's application note: local headers, directory, end record). */
function stored(parts: readonly { name: Uint8Array; bytes: Uint8Array; crc: number }[]): Uint8Array {
  const size = parts.reduce((sum, { name, bytes }) => sum + 30 + 46 + 2 * name.length + bytes.length, 22);
  const whole = new Uint8Array(size);
  const view = new DataView(whole.buffer);
  const places: number[] = [];
  let at = 0;
  const sizes = (from: number, part: (typeof parts)[number]): void => {
    view.setUint32(from, part.crc, true);
    view.setUint32(from + 4, part.bytes.length, true);
    view.setUint32(from + 8, part.bytes.length, true);
    view.setUint16(from + 12, part.name.length, true);
  };
  for (const part of parts) {
    places.push(at);
    view.setUint32(at, 0x04034b50, true);
    view.setUint16(at + 4, 20, true);
    sizes(at + 14, part);
    whole.set(part.name, at + 30);
    whole.set(part.bytes, at + 30 + part.name.length);
    at += 30 + part.name.length + part.bytes.length;
  }
  const directory = at;
  parts.forEach((part, index) => {
    view.setUint32(at, 0x02014b50, true);
    view.setUint16(at + 4, 20, true);
    view.setUint16(at + 6, 20, true);
    sizes(at + 16, part);
    view.setUint32(at + 42, places[index] ?? 0, true);
    whole.set(part.name, at + 46);
    at += 46 + part.name.length;
  });
  view.setUint32(at, 0x06054b50, true);
  view.setUint16(at + 8, parts.length, true);
  view.setUint16(at + 10, parts.length, true);
  view.setUint32(at + 12, at - directory, true);
  view.setUint32(at + 16, directory, true);
  return whole;
}
