import { inTx } from '../db/tx';
import { utilityLetterMail } from '../mail/utility-letter';
import { sendLetter } from '../mail/send';
import { today } from '../clock';
import { Finding } from '../models/Finding';
import type { UtilityLetter } from '../models/UtilityLetter';
import type { Actor } from '../policies/actor';
import { takeStep } from './finding-moves';

/** Raises the findings a letter holds with today's date. Call it inside inTx. */
export async function raiseFindings(actor: Actor, letter: UtilityLetter): Promise<void> {
  const rows = await Finding.findAll({ where: { letterId: letter.id, state: 'open' }, order: ['id'] });
  for (const row of rows) {
    const note = `Letter ${letter.number} to ${letter.content.addressee.name}`;
    await takeStep(actor, row, { to: 'raised', day: today(), amountMinor: null, note, letterId: letter.id });
  }
}

/** Mails a letter that is marked as sending. Its findings are raised when it went; where it did not, they stay open. */
export async function deliverUtilityLetter(actor: Actor, letter: UtilityLetter): Promise<void> {
  const { content, engagementId } = letter;
  const error = await mail(content, engagementId);
  await inTx(async () => {
    await letter.update(error === null ? { state: 'sent', sentAt: new Date() } : { state: 'failed', error });
    if (error === null) await raiseFindings(actor, letter);
  });
}

/** Null where it went, else why not. */
async function mail(content: UtilityLetter['content'], engagementId: number): Promise<string | null> {
  const sent = await sendLetter({
    to: { name: content.addressee.name, address: content.addressee.address },
    replyTo: { name: content.by.name, address: content.by.email },
    ...utilityLetterMail(content),
    kind: 'utility',
    engagementId,
  });
  return sent.error;
}
