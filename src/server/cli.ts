import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import closeWithGrace from 'close-with-grace';
import { configureEnv, readEnvFile } from './env';

/** A secret of this machine for the demo, made once, so that sessions outlive a restart. */
function demoSecret(folder: string): string {
  const file = path.join(folder, 'demo-secret');
  mkdirSync(folder, { recursive: true });
  if (!existsSync(file)) writeFileSync(file, randomBytes(48).toString('hex'), { mode: 0o600 });
  return readFileSync(file, 'utf8');
}

async function serve(stopMore: () => void = () => undefined): Promise<void> {
  const { startServer, stopServer } = await import('./main');
  const { closeOrphanedJobs } = await import('./services/jobs');
  const { startMailClock } = await import('./mail-clock');
  const { closeOrphanedReadings } = await import('./services/intake-reading');
  const { clearHandOver } = await import('./workers/fork-reader');
  const server = await startServer();
  await closeOrphanedJobs();
  await closeOrphanedReadings();
  await clearHandOver();
  const stopMailClock = startMailClock();
  closeWithGrace({ delay: 10_000 }, async () => {
    await Promise.all([stopMailClock(), stopServer(server)]);
    stopMore();
  });
}

/** The demo: local fakes of the outside services, a seeded scenario, then the server itself. */
async function demo(): Promise<void> {
  const folder = path.resolve(process.argv[3] ?? 'db/data');
  const env = configureEnv({
    NODE_ENV: 'production',
    DATA_DIR: folder,
    SESSION_SECRET: demoSecret(folder),
    LOG_LEVEL: 'warn',
  });
  const { startMailCatcher, caughtMailFolder } = await import('./mail/catcher');
  const catcher = await startMailCatcher(env.SMTP_PORT);
  const { migrate } = await import('./db/migrations');
  const { seeder } = await import('./db/seeders');
  await migrate();
  const pending = await seeder().pending();
  if (pending.length > 0) print('Setting up the demo scenario (about half a minute) ...');
  await seeder()
    .up()
    .catch((error: Error) => {
      const again = `Remove ${path.relative(process.cwd(), folder)} and start again.`;
      throw new Error(`The demo scenario could not be set up; it may have been interrupted before. ${again}`, {
        cause: error,
      });
    });
  await serve(() => catcher.close());
  const { demoAccounts } = await import('./demo-accounts');
  print(
    `\nCounterlag runs at ${env.APP_ORIGIN}\n\nPeople of the demo (every name is invented), password "${demoAccounts.password}":`,
  );
  for (const { email, name, what } of demoAccounts.people) print(`  ${email.padEnd(28)} ${name}, ${what}`);
  print(`\nMails are caught and lie as .eml files in ${path.relative(process.cwd(), caughtMailFolder())}`);
  print('Stop with Ctrl-C; what you did is still there at the next start. Remove db/data to begin anew.\n');
}

async function start(): Promise<void> {
  readEnvFile();
  configureEnv({ NODE_ENV: 'production' });
  await serve();
}

/** Founds the practice on an empty server and prints the link by which its first partner comes in. */
async function found(): Promise<void> {
  readEnvFile();
  configureEnv({ NODE_ENV: 'production' });
  const [, , , name, partnerName, address] = process.argv;
  const { emailInput } = await import('../schemas/account');
  const email = emailInput.safeParse(address);
  if (!name || !partnerName || !email.success) {
    throw new Error('Say the practice, its first partner and their e-mail: found "Practice" "Name" name@firm.example');
  }
  const { migrate } = await import('./db/migrations');
  const { foundPractice } = await import('./services/first-run');
  const { invite } = await import('./services/account');
  const { User } = await import('./models/User');
  await migrate();
  const practice = { name, legalName: name, phone: '', currency: 'USD' };
  const partner = await foundPractice({ practice, partner: { name: partnerName, email: email.data } });
  const { url } = await invite(partner, await User.findByPk(partner.id, { rejectOnEmpty: true }));
  print(`${name} is founded. ${partnerName} chooses a password here, within 14 days:\n${url}`);
}

function print(line: string): void {
  process.stdout.write(`${line}\n`);
}

/** Why a command ended, with what to do about a port that is taken. */
function reasonOf(error: unknown): string {
  if (!(error instanceof Error)) return String(error);
  const { code, port } = error as NodeJS.ErrnoException & { port?: number };
  if (code === 'EADDRINUSE') {
    return `Port ${port} is taken by another program. Stop it, or set PORT, APP_ORIGIN and SMTP_PORT to free ones.`;
  }
  const cause = error.cause instanceof Error ? `\n${error.cause.message}` : '';
  return `${error.message}${cause}`;
}

const commands: Record<string, () => Promise<void>> = { demo, found, start };
const command = commands[process.argv[2] ?? ''];

if (!command) {
  print('Say what to run: demo, found or start.');
  process.exitCode = 2;
} else {
  command().catch((error: unknown) => {
    process.stderr.write(`${reasonOf(error)}\n`);
    process.exit(1);
  });
}
