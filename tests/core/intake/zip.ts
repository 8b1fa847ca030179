import { deflateRawSync } from 'node:zlib';

/** A member of a ZIP. */
export interface Member {
  name: string;
  bytes: Uint8Array;
  /** What the directory says the size is, if it lies. */
  claimed?: number;
  isStored?: boolean;
}

/** A ZIP after PKWARE's application note (local headers, central directory, end record); checksums left at nought. */
export function zip(members: Member[]): Uint8Array {
  const locals: Buffer[] = [];
  const directory: Buffer[] = [];
  let at = 0;
  for (const { name, bytes, claimed = bytes.length, isStored = false } of members) {
    const packed = isStored ? Buffer.from(bytes) : deflateRawSync(bytes);
    const sizes = Buffer.alloc(26);
    sizes.writeUInt16LE(20, 0);
    sizes.writeUInt16LE(isStored ? 0 : 8, 4);
    sizes.writeUInt32LE(packed.length, 14);
    sizes.writeUInt32LE(claimed, 18);
    sizes.writeUInt16LE(name.length, 22);
    locals.push(Buffer.concat([Buffer.from([0x50, 0x4b, 3, 4]), sizes, Buffer.from(name), packed]));
    const tail = Buffer.alloc(14);
    tail.writeUInt32LE(at, 10);
    directory.push(Buffer.concat([Buffer.from([0x50, 0x4b, 1, 2, 20, 0]), sizes, tail, Buffer.from(name)]));
    at += locals.at(-1)?.length ?? 0;
  }
  const size = directory.reduce((sum, part) => sum + part.length, 0);
  const end = Buffer.alloc(22);
  end.writeUInt32LE(0x06054b50, 0);
  end.writeUInt16LE(members.length, 8);
  end.writeUInt16LE(members.length, 10);
  end.writeUInt32LE(size, 12);
  end.writeUInt32LE(at, 16);
  return new Uint8Array(Buffer.concat([...locals, ...directory, end]));
}
