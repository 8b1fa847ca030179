import { intakeError } from './errors';
import { readZipDirectory } from './zip-caps';

/** What the first bytes say a file is; the extension and the sender's word are never asked. */
export type Container = 'text' | 'xml' | 'nem12' | 'zip' | 'workbook-zip' | 'workbook-ole';

const foreign: { bytes: number[]; name: string }[] = [
  { bytes: [0x89, 0x50, 0x4e, 0x47], name: 'a PNG picture' },
  { bytes: [0xff, 0xd8, 0xff], name: 'a JPEG picture' },
  { bytes: [0x47, 0x49, 0x46, 0x38], name: 'a GIF picture' },
  { bytes: [0x25, 0x50, 0x44, 0x46], name: 'a PDF document' },
  { bytes: [0x1f, 0x8b], name: 'a gzip archive' },
  { bytes: [0x37, 0x7a, 0xbc, 0xaf], name: 'a 7-Zip archive' },
  { bytes: [0x52, 0x61, 0x72, 0x21], name: 'a RAR archive' },
  { bytes: [0x50, 0x41, 0x52, 0x31], name: 'a Parquet file' },
  { bytes: [0x53, 0x51, 0x4c, 0x69, 0x74, 0x65], name: 'an SQLite database' },
];

const startsWith = (bytes: Uint8Array, head: number[]): boolean => head.every((byte, at) => bytes[at] === byte);

/**
 * Recognises the container of a file from its bytes.
 * @throws {IntakeError} if the file is empty or plainly no file of readings or bills.
 */
export function containerOf(bytes: Uint8Array, fileName: string): Container {
  if (bytes.length === 0) {
    throw intakeError(
      'The file is empty.',
      fileName,
      'Export the file again and check its size before bringing it in.',
    );
  }
  const known = foreign.find((kind) => startsWith(bytes, kind.bytes));
  if (known) {
    throw intakeError(
      `This is ${known.name}, not a file of readings or bills.`,
      fileName,
      'Bring in delimited text (.csv, .txt), a spreadsheet (.xlsx, .xls, .ods), ESPI XML, NEM12 or a ZIP of one of them.',
    );
  }
  if (startsWith(bytes, [0x50, 0x4b, 0x03, 0x04]) || startsWith(bytes, [0x50, 0x4b, 0x05, 0x06])) {
    return isWorkbookZip(bytes, fileName) ? 'workbook-zip' : 'zip';
  }
  if (startsWith(bytes, [0xd0, 0xcf, 0x11, 0xe0])) return 'workbook-ole';
  const head = new TextDecoder('latin1').decode(bytes.subarray(0, 4096)).replace(/^(ï»¿|þÿ|ÿþ)/, '');
  const text = head.replace(/\0/g, '').trimStart();
  if (/^<(\?xml|feed\b|[\w-]+:feed\b|!--|!DOCTYPE)/i.test(text)) return 'xml';
  if (/^"?(100"?\s*,\s*"?NEM1[23]|200"?\s*,[^,\n]*,[^,\n]*,[^,\n]*,[^,\n]*,)/i.test(text)) return 'nem12';
  return 'text';
}

const workbookPart =
  /^(\[Content_Types\]\.xml|_rels\/\.rels|docProps\/|xl\/|content\.xml|META-INF\/manifest\.xml|mimetype$)/;

/** A workbook's ZIP holds its parts at the root; one that is cut off shows at least the first of them. */
function isWorkbookZip(bytes: Uint8Array, fileName: string): boolean {
  try {
    const names = readZipDirectory(bytes, fileName).map((member) => member.name);
    return names.includes('[Content_Types].xml') || names.includes('content.xml');
  } catch {
    const nameLength = (bytes[26] ?? 0) + (bytes[27] ?? 0) * 256;
    return workbookPart.test(new TextDecoder().decode(bytes.subarray(30, 30 + nameLength)));
  }
}
