import { intakeError } from './errors';
import { checkZip, zipCaps, type ZipMember } from './zip-caps';

const readable = /\.(csv|txt|tsv|dat|xml|xlsx|xlsm|xls|ods|nem|nem12|asc|prn)$/i;

/**
 * The files of a ZIP that may hold readings or bills, the largest first; folders and hidden files are passed by.
 * @throws {IntakeError} if there is none, or the archive is damaged or too large.
 */
export function readableMembers(bytes: Uint8Array, fileName: string): ZipMember[] {
  const members = checkZip(bytes, fileName).filter((member) => !/(^|\/)(__MACOSX|\.)|\/$/.test(member.name));
  const named = members.filter((member) => readable.test(member.name));
  const candidates = named.length > 0 ? named : members;
  if (candidates.length === 0)
    throw intakeError('The archive holds no file.', fileName, 'Pack the file of readings again.');
  return [...candidates].sort((a, b) => b.inflatedBytes - a.inflatedBytes);
}

/**
 * Unpacks one file of a ZIP. Bytes are counted while they come out: the directory's word is not trusted.
 * @throws {IntakeError} if it is damaged, locked or larger than the archive says.
 */
export async function unzipMember(bytes: Uint8Array, member: ZipMember, fileName: string): Promise<Uint8Array> {
  const where = `${fileName}, ${member.name}`;
  if (member.isEncrypted)
    throw intakeError('The file in the archive is locked by a password.', where, 'Pack it without a password.');
  if (member.inflatedBytes > zipCaps.inflatedBytes) throw tooLarge(where);
  const packed = packedBytes(bytes, member, where);
  if (member.method === 0) return packed;
  if (member.method !== 8)
    throw intakeError('The archive is packed in a way that is not read.', where, 'Pack it as a plain ZIP (deflate).');
  // The directory's size is within the caps of bytes and ratio: room for it is no more than an honest file takes.
  const whole = new Uint8Array(member.inflatedBytes);
  let size = 0;
  const reader = streamOf(packed).pipeThrough(new DecompressionStream('deflate-raw')).getReader();
  for (;;) {
    const piece = await reader.read().catch(() => null);
    if (piece === null) throw damaged(where);
    if (piece.done) break;
    if (size + piece.value.length > whole.length) {
      await reader.cancel();
      throw tooLarge(where);
    }
    whole.set(piece.value, size);
    size += piece.value.length;
  }
  if (size !== whole.length) throw damaged(where);
  return whole;
}

function packedBytes(bytes: Uint8Array, member: ZipMember, where: string): Uint8Array {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (member.headerAt + 30 > bytes.length || view.getUint32(member.headerAt, true) !== 0x04034b50) throw damaged(where);
  const begin =
    member.headerAt + 30 + view.getUint16(member.headerAt + 26, true) + view.getUint16(member.headerAt + 28, true);
  const packed = bytes.subarray(begin, begin + member.compressedBytes);
  if (packed.length !== member.compressedBytes) throw damaged(where);
  return packed;
}

/** A stream over bytes without a copy of them. */
function streamOf(bytes: Uint8Array): ReadableStream<Uint8Array<ArrayBuffer>> {
  const pieceBytes = 64 * 1024;
  let at = 0;
  return new ReadableStream({
    pull(controller) {
      if (at >= bytes.length) return controller.close();
      controller.enqueue(bytes.slice(at, at + pieceBytes));
      at += pieceBytes;
    },
  });
}

const damaged = (where: string) =>
  intakeError('The archive is damaged or cut off.', where, 'Send the file again and bring in the new copy.');

const tooLarge = (where: string) =>
  intakeError(
    'The file in the archive is larger than the archive says.',
    where,
    'Do not trust this archive; ask the sender for the plain file.',
  );
