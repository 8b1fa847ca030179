import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream, existsSync } from 'node:fs';
import { mkdir, rename, rm } from 'node:fs/promises';
import path from 'node:path';
import type { Readable } from 'node:stream';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { randomUUID } from 'node:crypto';
import { getEnv } from './env';
import { invalid, tooLarge } from './errors';

/** The largest file that is taken in. */
export const uploadCapBytes = 128 * 1024 * 1024;

export interface StoredFile {
  sha256: string;
  bytes: number;
}

const folder = () => path.resolve(getEnv().DATA_DIR, 'originals');

/** Where an original lies, byte for byte as it came. */
export const originalPath = (sha256: string) => path.join(folder(), sha256);

/** Streams a file to the drawer while hashing and counting; nothing is left behind when it fails or is too large. */
export async function storeOriginal(body: Readable): Promise<StoredFile> {
  await mkdir(folder(), { recursive: true });
  const temporary = path.join(folder(), `incoming-${randomUUID()}`);
  const digest = createHash('sha256');
  let bytes = 0;
  const counter = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      if (bytes > uploadCapBytes)
        return done(tooLarge('The file is larger than 128 MiB. Split it by month or zip it.'));
      digest.update(chunk);
      done(null, chunk);
    },
  });
  try {
    await pipeline(body, counter, createWriteStream(temporary, { flags: 'wx' }));
    if (bytes === 0)
      throw invalid('The file is empty: it has no bytes at all. Ask for it again, or save it once more.');
    const sha256 = digest.digest('hex');
    if (existsSync(originalPath(sha256))) await rm(temporary);
    else await rename(temporary, originalPath(sha256));
    return { sha256, bytes };
  } catch (error) {
    await rm(temporary, { force: true });
    throw error;
  }
}

/** Reads an original back. */
export const readOriginal = (sha256: string): Readable => createReadStream(originalPath(sha256));
