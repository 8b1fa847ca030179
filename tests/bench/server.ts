import { readFileSync } from 'node:fs';
import autocannon, { type Result } from 'autocannon';
import { startServerProcess } from '../setup/server-process';
import { signInCookie } from '../setup/sign-in';
import type { Measured } from './run';

/** Resident memory of the server process itself, children apart. [MB] */
function residentMb(pid: number): number {
  const line = readFileSync(`/proc/${pid}/status`, 'utf8').match(/VmRSS:\s+(\d+) kB/);
  return Number(line?.[1] ?? NaN) / 1024;
}

interface LoadResult {
  perSecond: number;
  p95Ms: number;
}

/** Ten connections for eight seconds; the 95th percentile is taken over every answer. */
async function load(url: string, cookie?: string): Promise<LoadResult> {
  const timesMs: number[] = [];
  const result = await new Promise<Result>((resolve, reject) => {
    const options = { url, connections: 10, duration: 8, headers: cookie ? { cookie } : {} };
    const run = autocannon(options, (error, done) => (error ? reject(error as Error) : resolve(done)));
    run.on('response', (_client, _status, _bytes, responseTimeMs) => timesMs.push(responseTimeMs));
  });
  if (result.non2xx > 0) throw new Error(`${url}: ${result.non2xx} answers were no success`);
  timesMs.sort((one, other) => one - other);
  return { perSecond: result.requests.average, p95Ms: timesMs[Math.ceil(0.95 * timesMs.length) - 1] ?? NaN };
}

/** A signed-in engagement page of the built server beside a bare static file, and the server's memory. */
export async function benchServer(): Promise<Measured[]> {
  const server = await startServerProcess();
  try {
    const cookie = await signInCookie(server.origin, 'tom@calder-vane.example');
    const idle = residentMb(server.pid);
    const page = await load(`${server.origin}/engagements/KG-02/tariff`, cookie);
    const bare = await load(`${server.origin}/robots.txt`);
    const after = residentMb(server.pid);
    return [
      {
        name: 'signed-in engagement page, requests a second',
        perSecond: page.perSecond,
        figures: `p95 ${page.p95Ms.toFixed(0)} ms with 10 connections; bare static file ${bare.perSecond.toFixed(0)} a second, p95 ${bare.p95Ms.toFixed(0)} ms`,
      },
      {
        name: 'server memory after the load, MB',
        perSecond: after,
        figures: `idle ${idle.toFixed(0)} MB, aim under 300 MB`,
      },
    ];
  } finally {
    await server.stop();
  }
}
