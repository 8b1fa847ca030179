import { intakeError } from './errors';

/** What a ZIP may unpack to. */
export const zipCaps = { members: 2000, inflatedBytes: 512 * 1024 * 1024, ratio: 200, ratioFloorBytes: 1024 * 1024 };

/** One member of a ZIP by its central directory. */
export interface ZipMember {
  name: string;
  method: number;
  /** CRC-32 of the bytes inside. */
  crc: number;
  compressedBytes: number;
  inflatedBytes: number;
  /** Where its local header begins. */
  headerAt: number;
  isEncrypted: boolean;
}

const damaged = (fileName: string) =>
  intakeError(
    'The archive is damaged or cut off: its directory cannot be read.',
    fileName,
    'Save or send the file again and bring in the new copy.',
  );

/**
 * Members of a ZIP from its central directory, nothing inflated.
 * @throws {IntakeError} if the directory is missing, inconsistent or of the 64-bit kind.
 */
export function readZipDirectory(bytes: Uint8Array, fileName: string): ZipMember[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const end = endRecord(view);
  if (end < 0) throw damaged(fileName);
  const count = view.getUint16(end + 10, true);
  let at = view.getUint32(end + 16, true);
  if (count === 0xffff || at === 0xffffffff) {
    throw intakeError(
      'The archive is of the 64-bit kind, far beyond the size of a year of readings.',
      fileName,
      'Pack the file of readings alone.',
    );
  }
  const members: ZipMember[] = [];
  const decoder = new TextDecoder();
  for (let member = 0; member < count; member += 1) {
    if (at + 46 > view.byteLength || view.getUint32(at, true) !== 0x02014b50) throw damaged(fileName);
    const nameLength = view.getUint16(at + 28, true);
    members.push({
      name: decoder.decode(bytes.subarray(at + 46, at + 46 + nameLength)),
      isEncrypted: (view.getUint16(at + 8, true) & 1) === 1,
      method: view.getUint16(at + 10, true),
      crc: view.getUint32(at + 16, true),
      compressedBytes: view.getUint32(at + 20, true),
      inflatedBytes: view.getUint32(at + 24, true),
      headerAt: view.getUint32(at + 42, true),
    });
    at += 46 + nameLength + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
  }
  return members;
}

function endRecord(view: DataView): number {
  const lowest = Math.max(0, view.byteLength - 22 - 65_535);
  for (let at = view.byteLength - 22; at >= lowest; at -= 1) if (view.getUint32(at, true) === 0x06054b50) return at;
  return -1;
}

/**
 * Refuses a ZIP that would unpack to more than the caps, by its directory, before anything is inflated.
 * @returns its members
 * @throws {IntakeError} naming the cap that is broken.
 */
export function checkZip(bytes: Uint8Array, fileName: string): ZipMember[] {
  const members = readZipDirectory(bytes, fileName);
  const inflated = members.reduce((sum, member) => sum + member.inflatedBytes, 0);
  const packed = members.reduce((sum, member) => sum + member.compressedBytes, 0);
  const refuse = (message: string) =>
    intakeError(message, fileName, 'Bring in the table of readings or bills alone, in a file of its own.');
  if (members.length > zipCaps.members)
    throw refuse(`The archive has ${members.length} members; at most ${zipCaps.members} are read.`);
  if (inflated > zipCaps.inflatedBytes)
    throw refuse(
      `The archive would unpack to ${Math.round(inflated / 1024 / 1024)} MiB; at most ${zipCaps.inflatedBytes / 1024 / 1024} MiB are read.`,
    );
  if (inflated > zipCaps.ratioFloorBytes && inflated > packed * zipCaps.ratio) {
    throw refuse(
      `The archive unpacks to ${Math.round(inflated / Math.max(1, packed))} times its size, more than the ${zipCaps.ratio} of an honest file.`,
    );
  }
  return members;
}
