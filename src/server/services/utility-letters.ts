import { createHash } from 'node:crypto';
import { addDays } from '../../core/load';
import {
  fillFields,
  usualWords,
  type LetterClaim,
  type UtilityLetterContent,
  type UtilityLetterInput,
  type UtilityLetterSummary,
} from '../../schemas/utility-letter';
import { today } from '../clock';
import { inTx } from '../db/tx';
import { conflict, notFound, staleVersion } from '../errors';
import { Finding } from '../models/Finding';
import { Practice } from '../models/Practice';
import { UtilityLetter } from '../models/UtilityLetter';
import type { Actor } from '../policies/actor';
import { movesFrom } from '../policies/finding';
import { isUncertain, presentUtilityLetter } from '../presenters/utility-letter';
import { renderUtilityLetter } from '../reports/render-utility-letter';
import { openEngagement, type OpenEngagement } from './engagements';
import { findingsSummary } from './finding-records';
import { claimOf } from './letter-claims';
import { pricingBasis } from './pricing';
import { deliverUtilityLetter, raiseFindings } from './utility-letter-delivery';

const replyDays = 30;

/** A letter as it could be written now: every finding that may be put to the utility, and the words it begins with. */
export interface UtilityLetterDraft {
  opened: OpenEngagement;
  content: UtilityLetterContent;
  letters: UtilityLetterSummary[];
}

/** The letters of an engagement, the newest first. */
export async function listUtilityLetters(engagementId: number): Promise<UtilityLetterSummary[]> {
  const rows = await UtilityLetter.findAll({ where: { engagementId }, order: [['number', 'DESC']] });
  return rows.map((row) => presentUtilityLetter(row));
}

/** Findings that may be put to the utility, as claims. */
async function claimsOf(opened: OpenEngagement): Promise<LetterClaim[]> {
  const { year, findings } = await findingsSummary(opened);
  return findings
    .filter(({ moves, letterNumber }) => moves.includes('raised') && letterNumber === null)
    .flatMap((view) => claimOf(year, view, opened.engagement.code) ?? []);
}

async function contentOf(actor: Actor, opened: OpenEngagement, claims: LetterClaim[]): Promise<UtilityLetterContent> {
  const { engagement, client, site, meter } = opened;
  const [practice, basis, last] = await Promise.all([
    Practice.findOne(),
    pricingBasis(opened),
    UtilityLetter.findOne({ where: { engagementId: engagement.id }, order: [['number', 'DESC']] }),
  ]);
  const { title, source } = basis.schedule;
  const madeOn = today();
  const before = last?.content;
  return {
    number: (last?.number ?? 0) + 1,
    madeOn,
    currency: engagement.currency,
    practice: { name: practice?.name ?? '', phone: practice?.phone ?? '' },
    by: { name: actor.name, email: actor.email },
    client: client.name,
    site: { name: site.name, place: site.place },
    meter: meter.label,
    account: before?.account ?? '',
    schedule: { title, publisher: source.publisher ?? null },
    year: { from: engagement.yearFrom, to: engagement.yearTo },
    addressee: before?.addressee ?? { name: source.publisher ?? '', address: '', postal: '' },
    ...usualWords,
    replyBy: addDays(madeOn, replyDays),
    claims,
  };
}

/**
 * The draft of the next letter to the utility.
 *
 * @throws {ServiceError} 404 to those who do not work on the engagement, 409 where its year cannot be priced
 */
export async function utilityLetterDraft(actor: Actor, code: string): Promise<UtilityLetterDraft> {
  const opened = await openEngagement(actor, code);
  const content = await contentOf(actor, opened, await claimsOf(opened));
  return { opened, content, letters: await listUtilityLetters(opened.engagement.id) };
}

/** The chosen claims with the figures the person saw. @throws {ServiceError} 409 where one was decided or changed meanwhile */
async function chosenClaims(opened: OpenEngagement, input: UtilityLetterInput): Promise<LetterClaim[]> {
  const claims = await claimsOf(opened);
  return input.findings.map(({ id, version }) => {
    const claim = claims.find((one) => one.findingId === id);
    if (!claim) {
      throw conflict(
        'One of the findings was put to the utility, or is found no more. Load the page again and choose.',
      );
    }
    if (claim.version !== version)
      throw staleVersion(`Finding ${claim.letter}`, { version }, { version: claim.version });
    return claim;
  });
}

/**
 * Freezes a letter to the utility and sends it, by mail or as printed for the post; its findings are raised with it. The same
 * request a second time sends nothing and answers with the letter it made.
 *
 * @throws {ServiceError} 409 where a finding is in a letter already or was changed meanwhile
 */
export async function sendUtilityLetter(
  actor: Actor,
  opened: OpenEngagement,
  input: UtilityLetterInput,
): Promise<UtilityLetterSummary> {
  const made = await madeBefore(opened, input.requestId);
  if (made) return presentUtilityLetter(made);
  const claims = await chosenClaims(opened, input);
  const { row, isNew } = await freeze(actor, opened, input, await contentOf(actor, opened, claims));
  if (isNew && row.way === 'mail') await deliverUtilityLetter(actor, row);
  return presentUtilityLetter(row);
}

async function madeBefore({ engagement }: OpenEngagement, requestId: string): Promise<UtilityLetter | null> {
  const made = await UtilityLetter.findOne({ where: { requestId } });
  if (made && made.engagementId !== engagement.id) throw conflict('This letter was sent already. Load the page again.');
  return made;
}

/** Lays the letter down with its findings before anything is sent, so that no second one can take them. */
async function freeze(actor: Actor, opened: OpenEngagement, input: UtilityLetterInput, draft: UtilityLetterContent) {
  const { name, address, postal, account, replyBy, way } = input;
  const filled = { ...draft, addressee: { name, address, postal }, account, replyBy };
  const opening = fillFields(input.opening, filled);
  const closing = fillFields(input.closing, filled);
  return inTx(async () => {
    const made = await madeBefore(opened, input.requestId);
    if (made) return { row: made, isNew: false };
    const engagementId = opened.engagement.id;
    const last = await UtilityLetter.findOne({ where: { engagementId }, order: [['number', 'DESC']] });
    const content: UtilityLetterContent = { ...filled, opening, closing, number: (last?.number ?? 0) + 1 };
    const digest = createHash('sha256').update(JSON.stringify(content)).digest('hex');
    const row = await UtilityLetter.create({
      engagementId,
      number: content.number,
      requestId: input.requestId,
      way,
      state: way === 'mail' ? 'sending' : 'sent',
      error: null,
      content,
      html: renderUtilityLetter(content, digest),
      digest,
      madeById: actor.id,
      sentAt: way === 'post' ? new Date() : null,
    });
    await reserve(row, input);
    if (way === 'post') await raiseFindings(actor, row);
    return { row, isNew: true };
  });
}

/** Binds the findings to the letter. @throws {ServiceError} 409 where another letter holds one, or it was changed meanwhile */
async function reserve(letter: UtilityLetter, { findings }: UtilityLetterInput): Promise<void> {
  for (const { id, version } of findings) {
    const row = await Finding.findOne({ where: { id, engagementId: letter.engagementId }, rejectOnEmpty: true });
    const holder = row.letterId === null ? null : await UtilityLetter.findByPk(row.letterId);
    const isHeld = holder !== null && holder.state !== 'failed';
    if (isHeld || !movesFrom(row.state).includes('raised') || row.version !== version) {
      throw conflict(
        'One of the findings is in another letter, or was changed meanwhile. Load the page again and choose.',
      );
    }
    await row.update({ letterId: letter.id });
  }
}

/** A letter by its id, for who works on its engagement. @throws {ServiceError} 404 for everybody else */
export async function openUtilityLetter(actor: Actor, code: string, number: number): Promise<UtilityLetter> {
  const { engagement } = await openEngagement(actor, code);
  const row = await UtilityLetter.findOne({ where: { engagementId: engagement.id, number } });
  if (!row) throw notFound();
  return row;
}

/**
 * Sends a letter again that did not go, or of which it is not known.
 *
 * @throws {ServiceError} 409 where it went, is on its way, was sent again meanwhile, or its findings were decided since
 */
export async function sendAgain(actor: Actor, letter: UtilityLetter, version: number): Promise<UtilityLetterSummary> {
  await inTx(async () => {
    await letter.reload();
    if (letter.version !== version) throw staleVersion('This letter', { version }, presentUtilityLetter(letter));
    if (letter.state !== 'failed' && !isUncertain(letter)) {
      throw conflict('This letter went, or is on its way. Nothing was sent again.');
    }
    const held = await Finding.count({ where: { letterId: letter.id, state: 'open' } });
    if (held < letter.content.claims.length) {
      throw conflict('Some of its findings are in another letter or decided by now. Write a new letter.');
    }
    await letter.update({ state: 'sending', error: null });
  });
  await deliverUtilityLetter(actor, letter);
  return presentUtilityLetter(letter);
}
