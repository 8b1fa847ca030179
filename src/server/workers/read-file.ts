import { readFile } from 'node:fs/promises';
import {
  IntakeError,
  previewBills,
  previewIntervals,
  readBills,
  readIntervals,
  traceBill,
  traceInterval,
  type ReadOptions,
} from '../../core/intake';
import type { ChildRequest, ReadAnswer } from './fork-reader';
import { writeLoad } from './load-file';

const tellEveryMs = 120;

/** The program of the child that reads a stranger's file: one request, one answer, then it ends. */
process.once('message', (request: ChildRequest) => {
  void answer(request).then((reply) => process.send?.({ answer: reply }, () => process.disconnect()));
});

async function answer(request: ChildRequest): Promise<ReadAnswer> {
  try {
    return await read(request);
  } catch (cause) {
    if (cause instanceof IntakeError) return { problems: cause.problems };
    return { fault: cause instanceof Error ? (cause.stack ?? cause.message) : String(cause) };
  }
}

async function read(request: ChildRequest): Promise<ReadAnswer> {
  const { kind, mode, path, handOver, at, ...how } = request;
  const { buffer, byteOffset, byteLength } = await readFile(path);
  const bytes = new Uint8Array(buffer, byteOffset, byteLength);
  const options: ReadOptions = { ...how, onProgress: tellProgress() };
  if (mode === 'trace') {
    if (!at) throw new Error('A trace needs a point.');
    return { result: await ('ms' in at ? traceInterval(bytes, options, at.ms) : traceBill(bytes, options, at.from)) };
  }
  if (kind === 'bills') return { result: await (mode === 'preview' ? previewBills : readBills)(bytes, options) };
  if (mode === 'preview') return { result: await previewIntervals(bytes, options) };
  const { load, ...reading } = await readIntervals(bytes, options);
  return { handed: { ...reading, load: await writeLoad(handOver, load) } };
}

/** Tells the server how far reading is, a few times a second; a message goes out at once though reading never pauses. */
function tellProgress(): ReadOptions['onProgress'] {
  let toldAtMs = 0;
  return (progress) => {
    const nowMs = Date.now();
    if (nowMs - toldAtMs < tellEveryMs && progress.done < progress.planned) return;
    toldAtMs = nowMs;
    process.send?.({ progress });
  };
}
