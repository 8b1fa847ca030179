import { readFileSync, readdirSync, existsSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { configureEnv } from '@/server/env';
import { inTx } from '@/server/db/tx';
import { letterPath, lettersFolder, sendLetter } from '@/server/mail/send';
import { Letter } from '@/server/models/Letter';

const received: { recipients: string[]; body: Buffer }[] = [];
let refuse = false;

const server = new SMTPServer({
  authOptional: true,
  disabledCommands: ['STARTTLS', 'AUTH'],
  onRcptTo: (_address, _session, done) =>
    refuse ? done(Object.assign(new Error('no such person'), { responseCode: 550 })) : done(),
  onData(stream, session, done) {
    const chunks: Buffer[] = [];
    stream.on('data', (chunk: Buffer) => chunks.push(chunk));
    stream.on('end', () => {
      const recipients = session.envelope.rcptTo.map((one) => one.address);
      received.push({ recipients, body: Buffer.concat(chunks) });
      done();
    });
  },
});

beforeAll(async () => {
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
  process.env.SMTP_PORT = String((server.server.address() as AddressInfo).port);
  configureEnv({});
});

afterAll(() => new Promise<void>((resolve) => server.close(() => resolve())));

const to = { name: 'Mira Oyelade', address: 'mira@kestrel-gap.example' };
const letter = { to, subject: 'Edition 1 of KG-02', text: 'The answer is 71,884 USD a year.', kind: 'edition' };

describe('sendLetter', () => {
  it.each([
    'mira@kestrel-gap.example\r\nBcc: evil@elsewhere.example',
    'mira@kestrel-gap.example, evil@elsewhere.example',
    'group: evil@elsewhere.example;',
    'Mira <mira@kestrel-gap.example>',
    'mira',
    '',
  ])('refuses the address %j and sends nothing', async (address) => {
    const before = received.length;
    await expect(sendLetter({ ...letter, to: { name: 'Mira', address } })).rejects.toMatchObject({ status: 422 });
    expect(received.length).toBe(before);
    expect(await Letter.count({ where: { subject: letter.subject } })).toBe(0);
  });

  it('refuses a name with a line break', async () => {
    const name = 'Mira\r\nBcc: evil@elsewhere.example';
    await expect(sendLetter({ ...letter, to: { ...to, name } })).rejects.toMatchObject({ status: 422 });
  });

  it('refuses to run inside a transaction', async () => {
    await expect(inTx(() => sendLetter(letter))).rejects.toThrow('inside a transaction');
  });

  it('reads no file and no address for an attachment', async () => {
    const attachments = [{ cid: 'x', fileName: 'x', mediaType: 'text/plain', content: { path: '/etc/hostname' } }];
    const input = { ...letter, attachments: attachments as never };
    const row = await sendLetter(input).catch((error: Error) => error);
    expect(row).toBeInstanceOf(Error);
    expect(String(row)).toContain('File access rejected');
  });

  it('sends, keeps the row and the very bytes that went', async () => {
    const html = '<p>The answer is <b>71,884 USD</b> a year.</p><img src="cid:payback">';
    const image = { cid: 'payback', fileName: 'payback.png', mediaType: 'image/png', content: Buffer.from('png') };
    const row = await sendLetter({ ...letter, html, attachments: [image] });
    expect(row).toMatchObject({ state: 'sent', error: null, recipient: to.address, kind: 'edition' });
    expect(row.sentAt).toBeInstanceOf(Date);
    const { recipients, body } = received.at(-1)!;
    expect(recipients).toEqual([to.address]);
    expect(readFileSync(letterPath(row.id)).toString().trimEnd()).toBe(body.toString().trimEnd());
    const mail = await simpleParser(body);
    expect(mail.text).toContain('71,884 USD');
    expect(mail.messageId).toBe(row.messageId);
    expect(mail.attachments[0]).toMatchObject({ cid: 'payback', contentDisposition: 'inline' });
  });

  it('keeps text readable in the raw letter', async () => {
    await sendLetter({ ...letter, text: 'Zwölf bills of Kestrel Gap cost 71,884 USD.' });
    const body = received.at(-1)!.body.toString();
    expect(body).toContain('Content-Transfer-Encoding: quoted-printable');
    expect(body).toContain('bills of Kestrel Gap cost 71,884 USD.');
  });

  it('folds a subject with line breaks into one line', async () => {
    const row = await sendLetter({ ...letter, subject: 'Hello\r\nBcc: evil@elsewhere.example' });
    expect(row.state).toBe('sent');
    const mail = await simpleParser(received.at(-1)!.body);
    expect(mail.bcc).toBeUndefined();
    expect(mail.subject).toBe('Hello Bcc: evil@elsewhere.example');
    expect(received.at(-1)!.recipients).toEqual([to.address]);
  });

  it('tells a refusal of the server in words and still keeps the letter', async () => {
    refuse = true;
    const row = await sendLetter(letter);
    refuse = false;
    expect(row.state).toBe('failed');
    expect(row.error).toContain('refused the letter (answer 550)');
    expect(row.sentAt).toBeNull();
    expect(existsSync(letterPath(row.id))).toBe(true);
  });

  it('tells that the server cannot be reached', async () => {
    const port = process.env.SMTP_PORT;
    process.env.SMTP_PORT = '1';
    configureEnv({});
    const row = await sendLetter(letter);
    process.env.SMTP_PORT = port;
    configureEnv({});
    expect(row.state).toBe('failed');
    expect(row.error).toContain('could not be reached');
    expect(readdirSync(lettersFolder()).every((name) => name.endsWith('.eml'))).toBe(true);
  });
});
