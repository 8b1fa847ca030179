import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import { startServerProcess } from '../setup/server-process';
import { signInCookie } from '../setup/sign-in';
import type { Measured } from './run';

const atMostMs = 50;
const runs = 3;
const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

/** Longest delay of the server's event loop since it was last asked. [ms] */
async function longestDelayMs(pid: number, file: string): Promise<number> {
  rmSync(file, { force: true });
  process.kill(pid, 'SIGWINCH');
  for (let tries = 0; !existsSync(file) && tries < 100; tries++) await pause(20);
  await pause(20);
  return Number(readFileSync(file, 'utf8'));
}

/**
 * A search on the built server from the press of the button to its end, asked after four times a second as the page does: the longest
 * delay of the server's event loop meanwhile, least of three runs.
 */
export async function benchSearchServer(): Promise<Measured[]> {
  const folder = mkdtempSync(path.join(tmpdir(), 'bench-delay-'));
  const file = path.join(folder, 'delay');
  const monitor = pathToFileURL(path.resolve('tests/bench/delay-monitor.mjs')).href;
  const server = await startServerProcess({ flags: [`--import=${monitor}`], env: { DELAY_FILE: file } });
  try {
    const cookie = await signInCookie(server.origin, 'tom@calder-vane.example');
    const headers = { cookie, origin: server.origin, 'content-type': 'application/json' };
    const delays: number[] = [];
    let seconds = 0;
    let priced = 0;
    for (let run = 0; run < runs; run++) {
      await longestDelayMs(server.pid, file);
      const begun = performance.now();
      const started = await fetch(`${server.origin}/api/engagements/KG-02/plans/search`, {
        method: 'POST',
        headers,
        body: JSON.stringify({ stepA: 1 }),
      });
      if (!started.ok) throw new Error(`the search answered ${started.status}: ${await started.text()}`);
      const { id } = (await started.json()) as { id: number };
      for (let state = 'running'; state === 'running';) {
        await pause(250);
        const job = (await (await fetch(`${server.origin}/api/jobs/${id}`, { headers })).json()) as {
          state: string;
          done: number;
          error?: string;
        };
        state = job.state;
        priced = job.done;
        if (state !== 'running' && state !== 'done') throw new Error(`the search ended ${state}: ${job.error}`);
      }
      seconds = (performance.now() - begun) / 1000;
      delays.push(await longestDelayMs(server.pid, file));
    }
    return [
      {
        name: 'event loop of the server during a search, longest delay against 50 ms',
        ratio: Math.min(...delays) / atMostMs,
        atMost: 1,
        figures: `${delays.map((ms) => ms.toFixed(0)).join(', ')} ms in ${runs} runs; the last priced ${priced} settings in ${seconds.toFixed(1)} s`,
      },
    ];
  } finally {
    await server.stop();
    rmSync(folder, { recursive: true, force: true });
  }
}
