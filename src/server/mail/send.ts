import { randomUUID } from 'node:crypto';
import { mkdir, rename, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { createTransport, type SendMailOptions, type SentMessageInfo } from 'nodemailer';
import { emailInput } from '../../schemas/account';
import { currentTransaction } from '../db/connection';
import { inTx } from '../db/tx';
import { getEnv } from '../env';
import { invalid } from '../errors';
import { log } from '../log';
import { Letter } from '../models/Letter';
import { Practice } from '../models/Practice';

/** A picture that the letter's HTML shows by `cid:`. */
export interface InlineImage {
  cid: string;
  fileName: string;
  mediaType: string;
  content: Buffer;
}

/** A letter to one person. `text` says everything; `html` may show it better. */
export interface LetterInput {
  to: { name: string; address: string };
  /** Who gets the answer, where it is not the practice's own address. */
  replyTo?: { name: string; address: string };
  subject: string;
  text: string;
  html?: string;
  attachments?: InlineImage[];
  /** What kind of letter it is: "invitation", "reset", "edition", "utility". */
  kind: string;
  engagementId?: number;
  editionId?: number;
  userId?: number;
}

/** Folder of the letters as they were sent, one .eml file per row by its id. */
export const lettersFolder = () => path.resolve(getEnv().DATA_DIR, 'letters');

/** Where a letter lies as it was sent. */
export const letterPath = (id: number) => path.join(lettersFolder(), `${id}.eml`);

const loopback = /^(127\.|localhost$|::1$)/;
const hasControl = (value: string) => [...value].some((sign) => sign < ' ' || sign === '\u007f');

/**
 * Holds a recipient to one plain address and a name without line breaks, so that no header or further recipient can be
 * smuggled in.
 *
 * @throws {ServiceError} 422
 */
function checkRecipient({ name, address }: LetterInput['to']): LetterInput['to'] {
  const parsed = emailInput.safeParse(address);
  if (hasControl(address) || !parsed.success) {
    throw invalid('The letter was not sent: the recipient is not one plain e-mail address.', {
      address: ['Write one e-mail address, such as name@firm.example.'],
    });
  }
  if (hasControl(name)) {
    throw invalid('The letter was not sent: the name of the recipient holds a line break.', {
      name: ['Write the name on one line.'],
    });
  }
  return { name, address: parsed.data };
}

/** The letter as the bytes that go over the wire; files and addresses in it are never fetched. */
async function compose(input: LetterInput): Promise<SentMessageInfo> {
  const practice = await Practice.findOne();
  const message: SendMailOptions = {
    from: { name: practice?.name ?? 'Counterlag', address: getEnv().MAIL_FROM },
    to: [checkRecipient(input.to)],
    replyTo: input.replyTo && checkRecipient(input.replyTo),
    subject: input.subject.replace(/\s+/g, ' ').trim(),
    text: input.text,
    html: input.html,
    textEncoding: 'quoted-printable',
    headers: { 'Auto-Submitted': 'auto-generated' },
    attachments: input.attachments?.map((image) => ({
      cid: image.cid,
      filename: image.fileName,
      contentType: image.mediaType,
      content: image.content,
      contentDisposition: 'inline' as const,
    })),
    disableFileAccess: true,
    disableUrlAccess: true,
  };
  const composer = createTransport({ streamTransport: true, buffer: true, newline: 'windows' });
  return composer.sendMail(message);
}

function smtp() {
  const { SMTP_HOST: host, SMTP_PORT: port, SMTP_USER: user, SMTP_PASSWORD: pass } = getEnv();
  return createTransport({
    host,
    port,
    secure: port === 465,
    requireTLS: Boolean(user) && !loopback.test(host),
    auth: user ? { user, pass: pass ?? '' } : undefined,
    connectionTimeout: 10_000,
    greetingTimeout: 10_000,
    socketTimeout: 60_000,
    disableFileAccess: true,
    disableUrlAccess: true,
  });
}

/** Why a letter did not go, for a person. */
function plainReason(error: unknown): string {
  const { SMTP_HOST, SMTP_PORT } = getEnv();
  const where = `The mail server ${SMTP_HOST}:${SMTP_PORT}`;
  const { code, responseCode } = error as { code?: string; responseCode?: number };
  if (code === 'EAUTH') return `${where} refused the practice's own sign-in. Check SMTP_USER and SMTP_PASSWORD.`;
  if (responseCode) return `${where} refused the letter (answer ${responseCode}). Check the address, then send again.`;
  return `${where} could not be reached. The letter is kept; send it again when the server is back.`;
}

async function deliver(composed: SentMessageInfo): Promise<string | null> {
  try {
    await smtp().sendMail({ envelope: composed.envelope, raw: composed.message as Buffer });
    return null;
  } catch (error) {
    log().warn({ err: error }, 'letter not sent');
    return plainReason(error);
  }
}

/**
 * Sends a letter and keeps it: its row says sent or failed, and the very bytes lie as `letters/<id>.eml`. A server that
 * does not answer is no exception: the row's `error` says so in words. Never call it inside a transaction.
 *
 * @throws {ServiceError} 422 where the recipient is not one plain address; nothing is sent or kept then
 */
export async function sendLetter(input: LetterInput): Promise<Letter> {
  if (currentTransaction()) throw new Error('A letter was sent inside a transaction. Send it after the transaction.');
  const composed = await compose(input);
  await mkdir(lettersFolder(), { recursive: true });
  const waiting = path.join(lettersFolder(), `${randomUUID()}.part`);
  await writeFile(waiting, composed.message as Buffer, { flag: 'wx' });
  try {
    const error = await deliver(composed);
    const letter = await keepRow(input, composed.messageId, error);
    await rename(waiting, letterPath(letter.id));
    return letter;
  } finally {
    await rm(waiting, { force: true });
  }
}

function keepRow(input: LetterInput, messageId: string, error: string | null): Promise<Letter> {
  return inTx(() =>
    Letter.create({
      engagementId: input.engagementId ?? null,
      editionId: input.editionId ?? null,
      userId: input.userId ?? null,
      kind: input.kind,
      recipient: input.to.address,
      subject: input.subject,
      messageId,
      state: error === null ? 'sent' : 'failed',
      error,
      sentAt: error === null ? new Date() : null,
    }),
  );
}
