import { createHash } from 'node:crypto';
import type { EditionContent, EditionSummary, MailEditionInput } from '../../schemas/edition';
import type { JobProgress } from '../../schemas/job';
import type { PricedYear } from '../../schemas/pricing';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound } from '../errors';
import { editionLetter } from '../mail/edition-letter';
import { sendLetter, type InlineImage } from '../mail/send';
import { Edition } from '../models/Edition';
import { EditionImage } from '../models/EditionImage';
import { Letter } from '../models/Letter';
import { Plan } from '../models/Plan';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { drawCharts, type DrawnChart } from '../reports/draw';
import { editionDrawings } from '../reports/drawings';
import { renderLeaves } from '../reports/render';
import { editionContent, type EditionBasis } from './edition-content';
import { openEngagement, openEngagementById, openReleased, type OpenEngagement } from './engagements';
import { invite } from './account';
import { findingsOf } from './finding-records';
import { startJob, type JobControls } from './jobs';
import { motorsOf } from './motors';
import { plansOf } from './plans';
import { pricedYear, pricingInputs } from './pricing';

const steps = { priced: 1, drawn: 2, frozen: 3 };

/** Content and pictures as bytes in a fixed order: what the digest is taken of. */
function digestOf(content: EditionContent, drawn: DrawnChart[]): string {
  const hash = createHash('sha256').update(JSON.stringify(content));
  for (const { name, svg } of drawn) hash.update(name).update(svg);
  return hash.digest('hex');
}

async function basisOf(opened: OpenEngagement, planId: number): Promise<EditionBasis> {
  const year = await plansOf(opened);
  const plan = year.plans.find((one) => one.id === planId);
  if (!plan) {
    const reason = year.unpriced.find((one) => one.id === planId)?.reason;
    throw conflict(reason ?? 'This plan is gone. Choose another one at the station Plans.');
  }
  const [priced, inputs, motors] = await Promise.all([pricedYear(opened), pricingInputs(opened), motorsOf(opened)]);
  const schedule = { title: inputs.schedule.title, sha256: inputs.choice.sha256 };
  return { opened, year, plan, priced: await withoutDropped(opened, priced), motors, schedule };
}

/** The client is not told of what the practice has dropped. */
async function withoutDropped(opened: OpenEngagement, priced: PricedYear): Promise<PricedYear> {
  const views = await findingsOf(opened, priced);
  const dropped = new Set(views.filter(({ state }) => state === 'dropped').map(({ letter }) => letter));
  return { ...priced, findings: priced.findings.filter(({ letter }) => !dropped.has(letter)) };
}

/** The number of the next edition of an engagement. */
async function nextNumber(engagementId: number): Promise<number> {
  const last = await Edition.findOne({ where: { engagementId }, order: [['number', 'DESC']] });
  return (last?.number ?? 0) + 1;
}

/**
 * Begins making the next edition of an engagement: prices, draws and freezes it in the background.
 *
 * @throws {ServiceError} 409 where plans cannot be priced yet, the plan is gone, or an edition is being made already
 */
export async function makeEdition(actor: Actor, opened: OpenEngagement, planId: number): Promise<JobProgress> {
  const basis = await basisOf(opened, planId);
  const alone = 'An edition of this engagement is being made already. Wait for it, then make the next.';
  const what = { engagementId: opened.engagement.id, kind: 'edition', subjectId: planId, unit: 'steps', alone };
  return startJob(actor, what, (controls) => freeze(actor, basis, controls));
}

async function freeze(actor: Actor, basis: EditionBasis, { report, signal }: JobControls): Promise<{ number: number }> {
  const engagementId = basis.opened.engagement.id;
  report(0, steps.frozen);
  const content = await editionContent(actor, basis, await nextNumber(engagementId));
  report(steps.priced);
  const drawn = await drawCharts(editionDrawings(content, basis.motors));
  report(steps.drawn);
  if (signal.aborted) return { number: 0 };
  const digest = digestOf(content, drawn);
  const pictures = Object.fromEntries(drawn.map(({ name, svg }) => [name, svg]));
  const html = renderLeaves({ content, pictures, digest: `${digest.slice(0, 4)} ${digest.slice(4, 8)}` });
  await inTx(async () => {
    const edition = await Edition.create({
      engagementId,
      planId: basis.plan.id,
      number: content.number,
      content,
      digest,
      madeById: actor.id,
      shownAt: null,
    });
    await keepImage(edition.id, 'pages', 'text/html', Buffer.from(html));
    for (const { name, svg, png } of drawn) {
      await keepImage(edition.id, name, 'image/svg+xml', Buffer.from(svg));
      if (png) await keepImage(edition.id, name, 'image/png', Buffer.from(png));
    }
  });
  report(steps.frozen);
  return { number: content.number };
}

const keepImage = (editionId: number, name: string, mediaType: string, body: Buffer) =>
  EditionImage.create({ editionId, name, mediaType, body });

async function summary(edition: Edition): Promise<EditionSummary> {
  const content = edition.content;
  const letters = await Letter.findAll({ where: { editionId: edition.id }, order: ['id'] });
  return {
    id: edition.id,
    number: edition.number,
    madeOn: content.madeOn,
    madeBy: content.by,
    digest: edition.digest,
    planName: content.plan.name,
    saving: content.plan.saving,
    currency: content.currency,
    paybackWords: content.plan.paybackWords,
    shownAt: edition.shownAt?.toISOString() ?? null,
    letters: letters.map(({ id, recipient, state, error, createdAt }) => ({
      id,
      recipient,
      state,
      error,
      at: createdAt.toISOString(),
    })),
  };
}

/** The editions of an engagement, newest first; for staff all, with the letters that went. */
export async function listEditions(opened: OpenEngagement): Promise<EditionSummary[]> {
  const where = { engagementId: opened.engagement.id };
  return Promise.all((await Edition.findAll({ where, order: [['number', 'DESC']] })).map(summary));
}

/** The same for the client: only what was shown to them, and no letters. */
export async function listShownEditions(opened: OpenEngagement): Promise<EditionSummary[]> {
  const shown = (await listEditions(opened)).filter((edition) => edition.shownAt !== null);
  return shown.map((edition) => ({ ...edition, letters: [] }));
}

export interface FrozenEdition {
  content: EditionContent;
  digest: string;
  html: string;
  shownAt: string | null;
}

async function frozen(edition: Edition | null): Promise<FrozenEdition> {
  const pages = edition && (await EditionImage.findOne({ where: { editionId: edition.id, name: 'pages' } }));
  if (!edition || !pages) throw notFound();
  const { digest, shownAt } = edition;
  return { content: edition.content, digest, html: pages.body.toString(), shownAt: shownAt?.toISOString() ?? null };
}

/** An edition for those who work on the engagement. */
export async function readEdition(actor: Actor, code: string, number: number): Promise<FrozenEdition> {
  const { engagement } = await openEngagement(actor, code);
  return frozen(await Edition.findOne({ where: { engagementId: engagement.id, number } }));
}

/** An edition that was shown to the client; without a number the newest one, or null where none was shown yet. */
export async function readShownEdition(actor: Actor, code: string, number?: number): Promise<FrozenEdition | null> {
  const { engagement } = await openReleased(actor, code);
  const where = { engagementId: engagement.id, ...(number === undefined ? {} : { number }) };
  const editions = await Edition.findAll({ where, order: [['number', 'DESC']] });
  const shown = editions.find((edition) => edition.shownAt !== null);
  if (!shown && number !== undefined) throw notFound();
  return shown ? frozen(shown) : null;
}

/** A person of the client who may read what is shown to them. */
export interface Reader {
  id: number;
  name: string;
  email: string;
}

/** The people of the client who may read what is shown to them. */
export async function editionReaders(opened: OpenEngagement): Promise<Reader[]> {
  const people = await User.findAll({ where: { clientId: opened.client.id, disabledAt: null }, order: ['name'] });
  return people.filter((person) => person.rights.view).map(({ id, name, email }) => ({ id, name, email }));
}

async function inlineImages(editionId: number): Promise<InlineImage[]> {
  const images = await EditionImage.findAll({ where: { editionId, mediaType: 'image/png' } });
  return images.map(({ name, body }) => ({
    cid: name,
    fileName: `${name}.png`,
    mediaType: 'image/png',
    content: body,
  }));
}

/** One letter with one link: it leads a person without a password to choose one, others to sign in. */
async function mailTo(
  actor: Actor,
  edition: Edition,
  opened: OpenEngagement,
  reader: Reader,
  greeting: string,
  attachments: InlineImage[],
): Promise<void> {
  const user = await User.findByPk(reader.id, { rejectOnEmpty: true });
  const { url, expiresAt } = await invite(actor, user, `/client/${opened.engagement.code}/overview`);
  const linkEnds = expiresAt?.toISOString() ?? null;
  const letter = editionLetter({
    content: edition.content,
    recipientName: reader.name,
    greeting,
    link: url,
    linkEnds,
  });
  const to = { name: reader.name, address: reader.email };
  const about = { kind: 'edition', engagementId: opened.engagement.id, editionId: edition.id, userId: reader.id };
  await sendLetter({ to, ...letter, attachments, ...about });
}

/** An edition by its id, for those who work on its engagement. @throws {ServiceError} 404 for strangers */
export async function openEdition(actor: Actor, id: number): Promise<{ edition: Edition; opened: OpenEngagement }> {
  const edition = await Edition.findByPk(id);
  if (!edition) throw notFound();
  return { edition, opened: await openEngagementById(actor, edition.engagementId) };
}

/**
 * Mails an edition to people of the client, each with a link of their own, and shows it to them from then on.
 *
 * @throws {ServiceError} 422 where a person is none of the client's readers
 */
export async function mailEdition(
  actor: Actor,
  { edition, opened }: { edition: Edition; opened: OpenEngagement },
  input: MailEditionInput,
): Promise<EditionSummary> {
  const readers = await editionReaders(opened);
  const chosen = input.userIds.map((userId) => readers.find((reader) => reader.id === userId));
  if (chosen.some((reader) => reader === undefined)) {
    throw invalid('One of the people may not read reports of this client. Choose among those listed.');
  }
  const attachments = await inlineImages(edition.id);
  await inTx(() => edition.update({ shownAt: edition.shownAt ?? new Date() }));
  for (const reader of chosen) if (reader) await mailTo(actor, edition, opened, reader, input.greeting, attachments);
  return summary(edition);
}

/** Plans an edition can be made of, with the chosen one first. */
export async function plansForEdition(
  opened: OpenEngagement,
): Promise<{ id: number; name: string; chosen: boolean }[]> {
  const plans = await Plan.findAll({ where: { engagementId: opened.engagement.id }, order: ['id'] });
  return plans
    .map(({ id, name, chosen }) => ({ id, name, chosen }))
    .sort((one, other) => Number(other.chosen) - Number(one.chosen));
}
