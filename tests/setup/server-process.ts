import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';

/** A running copy of the built server with the demo scenario in a folder of its own. */
export interface ServerProcess {
  origin: string;
  dataDir: string;
  pid: number;
  stop(): Promise<void>;
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() =>
        address && typeof address === 'object' ? resolve(address.port) : reject(new Error('no port')),
      );
    });
  });
}

async function answers(origin: string, child: ChildProcess, words: () => string): Promise<void> {
  const deadline = Date.now() + 150_000;
  while (Date.now() < deadline) {
    if (child.exitCode !== null) throw new Error(`The built server ended before it answered:\n${words()}`);
    const response = await fetch(`${origin}/sign-in`).catch(() => null);
    if (response?.ok) return;
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
  throw new Error(`The built server did not answer in time:\n${words()}`);
}

/** The flags the demo is started with, so that tests and bench measure what people run. */
function nodeFlags(): string[] {
  const { scripts } = JSON.parse(readFileSync('package.json', 'utf8')) as { scripts: { demo: string } };
  return scripts.demo.split(' ').filter((word) => word.startsWith('--'));
}

/**
 * Starts `cli.mjs demo` from the build on free ports and waits until it answers.
 *
 * @param more.flags  further flags of Node, `more.env` further variables of its environment
 */
export async function startServerProcess(
  more: { flags?: string[]; env?: Record<string, string> } = {},
): Promise<ServerProcess> {
  const cli = path.resolve('dist/server/cli.mjs');
  if (!existsSync(cli)) throw new Error('There is no build. Run `npm run build` before these tests.');
  const dataDir = mkdtempSync(path.join(tmpdir(), 'counterlag-built-'));
  const [port, smtpPort] = [await freePort(), await freePort()];
  const origin = `http://127.0.0.1:${port}`;
  const env = {
    ...process.env,
    ...more.env,
    PORT: String(port),
    SMTP_PORT: String(smtpPort),
    APP_ORIGIN: origin,
    NODE_ENV: 'production',
  };
  const child = spawn(process.execPath, [...nodeFlags(), ...(more.flags ?? []), cli, 'demo', dataDir], {
    env,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (output += chunk.toString()));
  try {
    await answers(origin, child, () => output);
  } catch (error) {
    child.kill('SIGKILL');
    throw error;
  }
  const stop = async () => {
    const ended = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGTERM');
    await Promise.race([ended, new Promise((resolve) => setTimeout(resolve, 10_000))]);
    if (child.exitCode === null) child.kill('SIGKILL');
    rmSync(dataDir, { recursive: true, force: true });
  };
  return { origin, dataDir, pid: child.pid ?? 0, stop };
}
