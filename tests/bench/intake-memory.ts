import { fork } from 'node:child_process';
import { closeSync, mkdtempSync, openSync, readFileSync, rmSync, statSync, writeSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { readInChild, type ReadAnswer } from '../../src/server/workers/fork-reader';
import { readerFlags } from '../../src/server/workers/reader-child';
import type { Measured } from './run';

const megabyte = 1024 * 1024;

/** Resident memory of a process, or NaN where the system does not tell. [MB] */
function residentMegabytes(pid: number | 'self'): number {
  try {
    const status = readFileSync(`/proc/${pid}/status`, 'utf8');
    return Number(/VmRSS:\s*(\d+) kB/.exec(status)?.[1] ?? Number.NaN) / 1024;
  } catch {
    return Number.NaN;
  }
}

/** The built program that reads files: run from its source it would carry the translator of TypeScript with it. */
const builtReader = 'dist/server/read-file.worker.mjs';

/** Highest memory of a child that reads a file, with the flags the server gives it. [MiB] */
async function childPeak(file: string, handOver: string): Promise<{ peakMb: number; seconds: number }> {
  const child = fork(builtReader, [], { execArgv: readerFlags(), serialization: 'advanced', env: {} });
  let peakMb = 0;
  const timer = setInterval(() => (peakMb = Math.max(peakMb, residentMegabytes(child.pid ?? 0) || 0)), 10);
  const startMs = performance.now();
  try {
    const answer = new Promise<ReadAnswer>((resolve, reject) => {
      child.on('message', (message: { answer?: ReadAnswer }) => message.answer && resolve(message.answer));
      child.once('exit', () => reject(new Error('the reader ended without an answer')));
    });
    child.send({ ...requestOf(file), handOver });
    if (!('handed' in (await answer))) throw new Error(`${file} was not read`);
    return { peakMb, seconds: (performance.now() - startMs) / 1000 };
  } finally {
    clearInterval(timer);
    child.kill('SIGKILL');
  }
}

const requestOf = (file: string) => ({
  kind: 'intervals' as const,
  mode: 'read' as const,
  path: file,
  fileName: path.basename(file),
  timeZone: 'UTC',
});

/** How much this process grows while it has a file read. [MiB] */
async function serverGrowth(file: string): Promise<{ growthMb: number; intervals: number }> {
  const before = residentMegabytes('self');
  let most = before;
  const timer = setInterval(() => (most = Math.max(most, residentMegabytes('self'))), 10);
  try {
    const { load } = await readInChild(requestOf(file));
    most = Math.max(most, residentMegabytes('self'));
    return { growthMb: most - before, intervals: load.kwh.length };
  } finally {
    clearInterval(timer);
  }
}

/** Writes text piece by piece, so that this process stays small. */
function writePieces(file: string, pieces: Iterable<string>): void {
  const handle = openSync(file, 'w');
  for (const piece of pieces) writeSync(handle, piece);
  closeSync(handle);
}

const start = Date.UTC(2020, 0, 1) / 1000;

/** An ESPI feed of quarter-hours of 250 Wh, a block a day, until it has the bytes asked for. */
function* feedPieces(bytes: number): Generator<string> {
  const link = (rel: string, href: string) => `<link rel="${rel}" href="${href}"/>`;
  const self = '/UsagePoint/1/MeterReading/1';
  const head = `<?xml version="1.0"?><feed xmlns="http://www.w3.org/2005/Atom" xmlns:espi="http://naesb.org/espi"><entry>${link('self', self)}${link('related', '/ReadingType/1')}<title>Energy</title><content><espi:MeterReading/></content></entry><entry>${link('self', '/ReadingType/1')}<content><espi:ReadingType><espi:accumulationBehaviour>4</espi:accumulationBehaviour><espi:flowDirection>1</espi:flowDirection><espi:intervalLength>900</espi:intervalLength><espi:powerOfTenMultiplier>0</espi:powerOfTenMultiplier><espi:uom>72</espi:uom></espi:ReadingType></content></entry>`;
  yield head;
  let written = head.length;
  for (let day = 0; written < bytes; day += 1) {
    const readings = Array.from({ length: 96 }, (_, at) => {
      const begin = start + day * 86_400 + at * 900;
      return `<espi:IntervalReading><espi:ReadingQuality><espi:quality>17</espi:quality></espi:ReadingQuality><espi:timePeriod><espi:duration>900</espi:duration><espi:start>${begin}</espi:start></espi:timePeriod><espi:value>250</espi:value></espi:IntervalReading>\n`;
    });
    const block = `<entry>${link('self', `${self}/IntervalBlock/${day}`)}${link('up', `${self}/IntervalBlock`)}<content><espi:IntervalBlock><espi:interval><espi:duration>86400</espi:duration><espi:start>${start + day * 86_400}</espi:start></espi:interval>${readings.join('')}</espi:IntervalBlock></content></entry>`;
    yield block;
    written += block.length;
  }
  yield '</feed>';
}

/** One-minute readings of two channels. */
function* minutePieces(rows: number): Generator<string> {
  yield 'Interval start (UTC),Active energy kWh,Reactive lagging kvarh\n';
  const perPiece = 1000;
  for (let from = 0; from < rows; from += perPiece) {
    yield Array.from({ length: perPiece }, (_, at) => {
      const row = from + at;
      const stamp = new Date((start + row * 60) * 1000).toISOString().slice(0, 16).replace('T', ' ');
      return `${stamp},${(row % 997) / 8},${(row % 499) / 16}\n`;
    }).join('');
  }
}

/** Memory of the child that reads and of the server that asks, against what they may take. */
export async function benchIntakeMemory(): Promise<Measured[]> {
  if (Number.isNaN(residentMegabytes('self'))) return [];
  const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-bench-'));
  try {
    const feed = path.join(folder, 'feed.xml');
    writePieces(feed, feedPieces(100 * 1000 * 1000));
    const minutes = path.join(folder, 'minutes.csv');
    writePieces(minutes, minutePieces(1_000_000));
    return [
      ...(await measured('ESPI feed', feed, (mb) => mb + 150)),
      ...(await measured('a million minutes', minutes, () => 900)),
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

async function measured(name: string, file: string, childLimitMb: (fileMb: number) => number): Promise<Measured[]> {
  const fileMb = statSync(file).size / megabyte;
  const { peakMb: childMb, seconds } = await childPeak(file, `${file}.load`);
  const { growthMb, intervals } = await serverGrowth(file);
  const limitMb = childLimitMb(fileMb);
  const size = `${fileMb.toFixed(0)} MiB, ${intervals} intervals, ${seconds.toFixed(1)} s`;
  return [
    {
      name: `${name}: memory of the child against its limit`,
      ratio: childMb / limitMb,
      atMost: 1,
      figures: `${childMb.toFixed(0)} of ${limitMb.toFixed(0)} MiB; ${size}`,
    },
    {
      name: `${name}: growth of the server against 60 MiB`,
      ratio: growthMb / 60,
      atMost: 1,
      figures: `${growthMb.toFixed(0)} MiB; ${size}`,
    },
  ];
}
