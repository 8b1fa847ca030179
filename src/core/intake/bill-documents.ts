import type { BillDraft } from './bill-drafts';
import { joinParts } from './bill-parts';
import type { DocumentChoice, DocumentKind } from './bill-types';

/** A document and what becomes of it. */
export interface Settled {
  draft: BillDraft;
  kind: DocumentKind;
  stands: boolean;
  why: string;
  /** The document whose bill it is part of. */
  into?: Settled;
}

const cent = 0.0051;

/** What a document comes to: its printed total, else the sum of its lines; null where it has neither. */
export const amountOf = ({ total, charges }: BillDraft): number | null =>
  total ?? (charges.length === 0 ? null : charges.reduce((sum, charge) => sum + charge.amount, 0));

const isSamePeriod = (a: Settled, b: Settled): boolean =>
  a.draft.dated.from === b.draft.dated.from && a.draft.dated.to === b.draft.dated.to;
const covers = (whole: Settled, part: Settled): boolean =>
  whole.draft.dated.from <= part.draft.dated.from && whole.draft.dated.to >= part.draft.dated.to;
const overlap = (a: Settled, b: Settled): boolean =>
  a.draft.dated.from < b.draft.dated.to && b.draft.dated.from < a.draft.dated.to;

function leaveOut(one: Settled, kind: DocumentKind, why: string): void {
  Object.assign(one, { kind, stands: false, why });
}

/**
 * Which documents stand as bills: repeats, estimates with a correction, cancelled invoices with their credit notes and noughts
 * beside a bill are left out; parts of one invoice are joined. A person's word overrules. Documents of the same days that nothing
 * tells apart all stand, for the overlap to be refused.
 */
export function settleDocuments(
  drafts: readonly BillDraft[],
  choices: readonly DocumentChoice[],
  rowOf: (draft: BillDraft) => number,
): Settled[] {
  const all = drafts
    .map((draft): Settled => ({ draft, kind: 'bill', stands: true, why: 'A bill of its own' }))
    .sort((a, b) => a.draft.dated.row - b.draft.dated.row);
  for (const one of all)
    if (Number.isNaN(one.draft.dated.from + one.draft.dated.to))
      leaveOut(one, 'no-bill', 'Only one end of its period is known');
  leaveOutRepeats(all);
  joinParts(all);
  leaveOutCredits(all);
  leaveOutCorrected(all);
  leaveOutNoughts(all);
  for (const one of all) {
    const choice = choices.find(({ row, total }) => row === rowOf(one.draft) && total === one.draft.total);
    if (choice && !Number.isNaN(one.draft.dated.from + one.draft.dated.to)) choose(all, one, choice.isTaken);
  }
  return all;
}

function choose(all: readonly Settled[], one: Settled, isTaken: boolean): void {
  const own = amountOf(one.draft) ?? 0;
  if (!isTaken) {
    if (one.stands) Object.assign(one, { stands: false, into: undefined, why: 'A person chose so' });
    return;
  }
  const bill = all.find((other) => other !== one && other.stands && !other.into && covers(other, one));
  Object.assign(one, { stands: true, why: 'A person chose so' });
  if (own < 0 && bill)
    Object.assign(one, {
      into: bill,
      why: `A person chose so: its amount is a line of the bill in ${bill.draft.where}`,
    });
}

const standing = (all: readonly Settled[]): Settled[] => all.filter((one) => one.stands);

function leaveOutRepeats(all: readonly Settled[]): void {
  const seen = new Map<string, Settled>();
  for (const one of standing(all)) {
    const { dated, invoice, meter, quantities, charges, total } = one.draft;
    const key = JSON.stringify([
      dated.from,
      dated.to,
      invoice,
      meter,
      quantities,
      charges,
      total,
      [...one.draft.marks],
    ]);
    const first = seen.get(key);
    if (first) leaveOut(one, 'repeat', `The same to the cent as ${first.draft.where}`);
    else seen.set(key, one);
  }
}

/** A credit note of the whole amount cancels its invoice; one of a part is shown and left out, as the bill was issued without it. */
function leaveOutCredits(all: readonly Settled[]): void {
  for (const credit of standing(all)) {
    const amount = amountOf(credit.draft);
    const isNamed = credit.draft.marks.has('credit');
    if (!(amount !== null && amount < 0) && !isNamed) continue;
    const others = standing(all).filter(
      (one) => one !== credit && !one.draft.marks.has('credit') && (amountOf(one.draft) ?? 0) > 0,
    );
    const cancelled = others.find(
      (one) => isSamePeriod(one, credit) && Math.abs(Math.abs(amount ?? 0) - (amountOf(one.draft) ?? 0)) < cent,
    );
    const credited = others.find((one) => covers(one, credit) || covers(credit, one));
    if (cancelled) {
      leaveOut(cancelled, 'cancelled', `Cancelled by the credit note in ${credit.draft.where}`);
      leaveOut(credit, 'credit-note', `Cancels the invoice in ${cancelled.draft.where}`);
    } else if (credited)
      leaveOut(credit, 'credit-note', `Credits a part of ${credited.draft.where}, which stands as it was issued`);
    else if (isNamed) leaveOut(credit, 'credit-note', 'The file holds no invoice of its days');
  }
}

/** The correction of an estimate, or of a bill, stands in its place. */
function leaveOutCorrected(all: readonly Settled[]): void {
  for (const one of standing(all))
    if (one.draft.marks.has('cancelled')) leaveOut(one, 'cancelled', 'The file says that it was cancelled');
  const hasCorrections = all.some((one) => one.draft.marks.has('corrected'));
  for (const former of standing(all)) {
    const isEstimate = former.draft.marks.has('estimated') && !former.draft.marks.has('corrected');
    const later =
      (isEstimate || hasCorrections) &&
      standing(all).find((one) => one !== former && replaces(one, former, isEstimate));
    if (!later) continue;
    leaveOut(
      former,
      isEstimate ? 'estimate' : 'cancelled',
      `${isEstimate ? 'An estimate' : 'A bill'} that ${later.draft.where} corrects`,
    );
    Object.assign(later, { kind: 'correction', why: `Stands in place of ${former.draft.where}` });
  }
}

function replaces(one: Settled, former: Settled, isEstimate: boolean): boolean {
  if (!overlap(one, former) || !covers(one, former)) return false;
  if (isEstimate) return !one.draft.marks.has('estimated') || one.draft.marks.has('corrected');
  return one.draft.marks.has('corrected') && !former.draft.marks.has('corrected') && isSamePeriod(one, former);
}

export const isNought = (draft: BillDraft): boolean =>
  (amountOf(draft) ?? 0) === 0 && Object.values(draft.quantities).every((figure) => figure === 0);

function leaveOutNoughts(all: readonly Settled[]): void {
  for (const one of standing(all)) {
    const other = isNought(one.draft) && standing(all).find((bill) => bill !== one && overlap(bill, one));
    if (other) leaveOut(one, 'nought', `All noughts, and ${other.draft.where} bills the same days`);
  }
}
