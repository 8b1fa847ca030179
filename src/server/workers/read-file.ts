import { readFile } from 'node:fs/promises';
import { IntakeError, previewBills, previewIntervals, readBills, readIntervals } from '../../core/intake';
import type { ReadAnswer, ReadRequest, ReadResult } from './fork-reader';

/** The program of the child that reads a stranger's file: one request, one answer, then it ends. */
process.once('message', (request: ReadRequest) => {
  void answer(request).then((reply) => process.send?.(reply, () => process.disconnect()));
});

async function answer(request: ReadRequest): Promise<ReadAnswer> {
  try {
    return { result: await read(request) };
  } catch (cause) {
    if (cause instanceof IntakeError) return { problems: cause.problems };
    return { fault: cause instanceof Error ? (cause.stack ?? cause.message) : String(cause) };
  }
}

async function read({ kind, mode, path, ...options }: ReadRequest): Promise<ReadResult> {
  const bytes = new Uint8Array(await readFile(path));
  if (kind === 'intervals')
    return mode === 'preview' ? previewIntervals(bytes, options) : readIntervals(bytes, options);
  return mode === 'preview' ? previewBills(bytes, options) : readBills(bytes, options);
}
