import { intakeError } from './errors';
import { checkZip, zipCaps, type ZipMember } from './zip-caps';

const readable = /\.(csv|txt|tsv|dat|xml|xlsx|xlsm|xls|ods|nem|nem12|asc|prn)$/i;

/** The one file of readings or bills in an archive. */
interface UnzippedFile {
  name: string;
  bytes: Uint8Array;
}

/**
 * Takes the one readable file out of a ZIP. Bytes are counted while they come out: the directory's word is not trusted.
 * @throws {IntakeError} if there is none or more than one, or the archive is damaged, locked or too large.
 */
export async function unzipOnly(bytes: Uint8Array, fileName: string): Promise<UnzippedFile> {
  const members = checkZip(bytes, fileName).filter((member) => !/(^|\/)(__MACOSX|\.)|\/$/.test(member.name));
  const named = members.filter((member) => readable.test(member.name));
  const candidates = named.length > 0 ? named : members;
  const [only] = candidates;
  if (!only) throw intakeError('The archive holds no file.', fileName, 'Pack the file of readings again.');
  if (candidates.length > 1) {
    const names = candidates
      .slice(0, 12)
      .map((member) => member.name)
      .join(', ');
    throw intakeError(`The archive holds ${candidates.length} files: ${names}.`, fileName, 'Bring them in one by one.');
  }
  return { name: only.name.split('/').at(-1) ?? only.name, bytes: await inflate(bytes, only, fileName) };
}

/**
 * The bytes of one member of a ZIP.
 * @throws {IntakeError} if it is locked, damaged, or larger than its directory says.
 */
export async function inflate(bytes: Uint8Array, member: ZipMember, fileName: string): Promise<Uint8Array> {
  const where = `${fileName}, ${member.name}`;
  if (member.isEncrypted)
    throw intakeError('The file in the archive is locked by a password.', where, 'Pack it without a password.');
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const damaged = () =>
    intakeError('The archive is damaged or cut off.', where, 'Send the file again and bring in the new copy.');
  if (member.headerAt + 30 > bytes.length || view.getUint32(member.headerAt, true) !== 0x04034b50) throw damaged();
  const begin =
    member.headerAt + 30 + view.getUint16(member.headerAt + 26, true) + view.getUint16(member.headerAt + 28, true);
  const packed = bytes.slice(begin, begin + member.compressedBytes);
  if (packed.length !== member.compressedBytes) throw damaged();
  if (member.method === 0) return packed;
  if (member.method !== 8)
    throw intakeError('The archive is packed in a way that is not read.', where, 'Pack it as a plain ZIP (deflate).');
  const pieces: Uint8Array[] = [];
  let size = 0;
  const reader = new Blob([packed]).stream().pipeThrough(new DecompressionStream('deflate-raw')).getReader();
  for (;;) {
    const piece = await reader.read().catch(() => null);
    if (piece === null) throw damaged();
    if (piece.done) break;
    size += piece.value.length;
    if (size > zipCaps.inflatedBytes || size > member.inflatedBytes) {
      await reader.cancel();
      throw intakeError(
        'The file in the archive is larger than the archive says.',
        where,
        'Do not trust this archive; ask the sender for the plain file.',
      );
    }
    pieces.push(piece.value);
  }
  if (size !== member.inflatedBytes) throw damaged();
  const whole = new Uint8Array(size);
  let at = 0;
  for (const piece of pieces) {
    whole.set(piece, at);
    at += piece.length;
  }
  return whole;
}
