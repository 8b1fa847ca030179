import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { SMTPServer } from 'smtp-server';
import { getEnv } from '../env';
import { log } from '../log';

/** The folder where the local catcher lays mails. */
export const caughtMailFolder = () => path.resolve(getEnv().DATA_DIR, 'mail');

async function keep(chunks: Buffer[], recipients: string[]): Promise<string> {
  await mkdir(caughtMailFolder(), { recursive: true });
  const stamp = new Date().toISOString().replace(/[:.]/g, '-');
  const to = (recipients[0] ?? 'nobody').replace(/[^a-z0-9@.-]/gi, '_');
  const file = path.join(caughtMailFolder(), `${stamp}-${to}.eml`);
  await writeFile(file, Buffer.concat(chunks), { flag: 'wx' });
  return file;
}

/** A mail server for this machine only: it takes every mail and lays it in a folder as an .eml file. */
export function startMailCatcher(port: number): Promise<SMTPServer> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: 30 * 1024 * 1024,
    onData(stream, session, done) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        const recipients = session.envelope.rcptTo.map((recipient) => recipient.address);
        keep(chunks, recipients).then(
          (file) => {
            log().info({ file }, 'mail caught');
            done();
          },
          (error: Error) => done(error),
        );
      });
    },
  });
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', () => resolve(server));
  });
}
