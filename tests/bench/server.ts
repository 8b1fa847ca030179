import { readFileSync } from 'node:fs';
import autocannon from 'autocannon';
import { demoAccounts } from '../../src/server/demo-accounts';
import { startServerProcess, type ServerProcess } from '../setup/server-process';
import type { Measured } from './run';

/** Resident memory of the server process itself, children apart. [MB] */
function residentMb(pid: number): number {
  const line = readFileSync(`/proc/${pid}/status`, 'utf8').match(/VmRSS:\s+(\d+) kB/);
  return Number(line?.[1] ?? NaN) / 1024;
}

async function signedInCookie({ origin }: ServerProcess): Promise<string> {
  const body = new URLSearchParams({ email: 'tom@calder-vane.example', password: demoAccounts.password });
  const response = await fetch(`${origin}/sign-in`, { method: 'POST', body, headers: { origin }, redirect: 'manual' });
  const cookie = response.headers.getSetCookie().find((one) => one.startsWith('counterlag.sid='));
  if (!cookie) throw new Error(`sign-in answered ${response.status} without a session`);
  return cookie.split(';')[0] as string;
}

async function load(url: string, cookie?: string) {
  const result = await autocannon({ url, connections: 10, duration: 8, headers: cookie ? { cookie } : {} });
  if (result.non2xx > 0) throw new Error(`${url}: ${result.non2xx} answers were no success`);
  return { perSecond: result.requests.average, p95: result.latency.p97_5 };
}

/** A signed-in engagement page of the built server beside a bare static file, and the server's memory. */
export async function benchServer(): Promise<Measured[]> {
  const server = await startServerProcess();
  try {
    const cookie = await signedInCookie(server);
    const idle = residentMb(server.pid);
    const page = await load(`${server.origin}/engagements/KG-02/tariff`, cookie);
    const bare = await load(`${server.origin}/robots.txt`);
    const after = residentMb(server.pid);
    return [
      {
        name: 'signed-in engagement page, requests a second',
        perSecond: page.perSecond,
        figures: `p97.5 ${page.p95} ms with 10 connections; bare static file ${bare.perSecond.toFixed(0)} a second, p97.5 ${bare.p95} ms`,
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
