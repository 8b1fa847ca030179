import { mkdtempSync, openSync, closeSync, rmSync, statSync, writeSync } from 'node:fs';
import { readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { readInChild } from '../../src/server/workers/fork-reader';
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

/** Process ids of the children of this process that read files. */
function readers(): number[] {
  const children = readFileSync(`/proc/self/task/${process.pid}/children`, 'utf8').trim().split(' ');
  return children.filter((pid) => pid !== '').map(Number);
}

/** Reads a file in a child and watches both processes. */
async function watched(
  file: string,
): Promise<{ childMb: number; growthMb: number; seconds: number; kwh: number; intervals: number }> {
  const request = {
    kind: 'intervals' as const,
    mode: 'read' as const,
    path: file,
    fileName: path.basename(file),
    timeZone: 'UTC',
  };
  globalThis.gc?.();
  const before = residentMegabytes('self');
  let [childMb, most] = [0, before];
  const timer = setInterval(() => {
    for (const pid of readers()) childMb = Math.max(childMb, residentMegabytes(pid) || 0);
    most = Math.max(most, residentMegabytes('self'));
  }, 20);
  const startMs = performance.now();
  try {
    const { load, report } = await readInChild(request);
    most = Math.max(most, residentMegabytes('self'));
    const seconds = (performance.now() - startMs) / 1000;
    return { childMb, growthMb: most - before, seconds, kwh: report.totalKwh, intervals: load.kwh.length };
  } finally {
    clearInterval(timer);
  }
}

/** Writes text piece by piece, so that this process stays small. */
export function writePieces(file: string, pieces: Iterable<string>): void {
  const handle = openSync(file, 'w');
  for (const piece of pieces) writeSync(handle, piece);
  closeSync(handle);
}

const start = Date.UTC(2020, 0, 1) / 1000;

/** An ESPI feed of quarter-hours of 250 Wh, a block a day, until it has the bytes asked for. */
export function* feedPieces(bytes: number): Generator<string> {
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
export function* minutePieces(rows: number): Generator<string> {
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
  const { childMb, growthMb, seconds, intervals } = await watched(file);
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
