import { open } from 'node:fs/promises';
import type { LoadSeries } from '../../core/load';

/** What of a load goes by message: the rest lies in the file beside it. */
export interface HandedLoad {
  startMs: number;
  stepMinutes: number;
  intervals: number;
}

// Three channels of doubles, then the marks of quality, in the order of bytes of the machine both run on.
const channelBytes = 8;
const intervalBytes = 3 * channelBytes + 1;

/** Writes a load as one file of plain arrays, for a reader on the same machine. */
export async function writeLoad(file: string, load: LoadSeries): Promise<HandedLoad> {
  const handle = await open(file, 'wx');
  try {
    for (const { buffer, byteOffset, byteLength } of [load.kwh, load.kvarhLagging, load.kvarhLeading, load.quality])
      await handle.writeFile(new Uint8Array(buffer, byteOffset, byteLength));
  } finally {
    await handle.close();
  }
  return { startMs: load.startMs, stepMinutes: load.stepMinutes, intervals: load.kwh.length };
}

/**
 * Reads a load back: the arrays are views of one buffer of exactly their size.
 * @throws {Error} if the file is not as long as was said
 */
export async function readLoad(file: string, { startMs, stepMinutes, intervals }: HandedLoad): Promise<LoadSeries> {
  const buffer = new ArrayBuffer(intervals * intervalBytes);
  const handle = await open(file, 'r');
  try {
    const { size } = await handle.stat();
    if (size !== buffer.byteLength)
      throw new Error(`The handed-over load has ${size} bytes, not ${buffer.byteLength}.`);
    for (let at = 0; at < size;) {
      const { bytesRead } = await handle.read(new Uint8Array(buffer, at), 0, size - at, at);
      if (bytesRead === 0) throw new Error('The handed-over load ended early.');
      at += bytesRead;
    }
  } finally {
    await handle.close();
  }
  const channel = (index: number) => new Float64Array(buffer, index * intervals * channelBytes, intervals);
  return {
    startMs,
    stepMinutes,
    kwh: channel(0),
    kvarhLagging: channel(1),
    kvarhLeading: channel(2),
    quality: new Uint8Array(buffer, 3 * intervals * channelBytes, intervals),
  };
}
