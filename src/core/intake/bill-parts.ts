import type { Settled } from './bill-documents';
import type { BillDraft } from './bill-drafts';
import type { BillCharge } from './bill-types';

const cent = 0.0051;
const sumOf = (charges: readonly BillCharge[]): number => charges.reduce((sum, charge) => sum + charge.amount, 0);

/**
 * Joins the rows of one invoice: where the tariff changes within a period an invoice may become two rows, each with the total of the
 * whole. They are known by the same number and total, or by lines that come to the total only together.
 */
export function joinParts(all: readonly Settled[]): void {
  const ordered = all.filter((one) => one.stands).sort((a, b) => a.draft.dated.from - b.draft.dated.from);
  ordered.forEach((one, at) => {
    if (one.into) return;
    const parts = [one];
    for (const next of ordered.slice(at + 1)) {
      const last = parts.at(-1);
      if (last && !next.into && isNextPart(last.draft, next.draft)) parts.push(next);
    }
    if (parts.length < 2 || !isOneInvoice(parts)) return;
    for (const part of parts) {
      const others = parts.filter((other) => other !== part).map((other) => other.draft.where);
      Object.assign(part, {
        kind: 'part',
        why: `One invoice with ${others.join(', ')}: the same total on each`,
        ...(part === one ? {} : { into: one }),
      });
    }
  });
}

const isNextPart = (last: BillDraft, next: BillDraft): boolean =>
  last.dated.to === next.dated.from &&
  last.total !== null &&
  last.total === next.total &&
  last.total !== 0 &&
  last.invoice === next.invoice &&
  last.meter === next.meter;

function isOneInvoice(parts: readonly Settled[]): boolean {
  const [first] = parts;
  if (!first) return false;
  if (first.draft.invoice !== '') return true;
  const total = first.draft.total ?? Number.NaN;
  const together = sumOf(parts.flatMap(({ draft }) => draft.charges));
  return (
    Math.abs(together - total) < cent * parts.length &&
    parts.every(({ draft }) => Math.abs(sumOf(draft.charges) - total) > cent)
  );
}

/** The bill of a document and of what is joined to it. */
export function joinedDraft(first: Settled, others: readonly Settled[]): BillDraft {
  const parts = others.filter((one) => one.kind === 'part').map((one) => one.draft);
  const credits = others.filter((one) => one.kind !== 'part').map((one) => one.draft);
  const draft = parts.reduce((whole, part) => withPart(whole, part), first.draft);
  return credits.reduce((whole, credit) => withCredit(whole, credit), draft);
}

function withPart(whole: BillDraft, part: BillDraft): BillDraft {
  const repeats = JSON.stringify(whole.charges) === JSON.stringify(part.charges);
  const names = [...new Set([...Object.keys(whole.quantities), ...Object.keys(part.quantities)])];
  const joined = names.flatMap((name): [string, number][] => {
    const figure = joinedQuantity(name, whole.quantities[name], part.quantities[name]);
    return figure === null ? [] : [[name, figure]];
  });
  return {
    ...whole,
    dated: { ...whole.dated, to: Math.max(whole.dated.to, part.dated.to), days: Number.NaN },
    rows: [...whole.rows, ...part.rows],
    where: `${whole.where} and ${part.where}`,
    quantities: Object.fromEntries(joined),
    charges: repeats ? whole.charges : [...whole.charges, ...part.charges],
    ...(whole.places && part.places && !repeats ? { places: [...whole.places, ...part.places] } : {}),
  };
}

/** Energies are added unless printed alike on both rows, highest values compared; a power factor that differs is none of the whole. */
function joinedQuantity(name: string, own: number | undefined, other: number | undefined): number | null {
  if (own === undefined || other === undefined || own === other) return own ?? other ?? null;
  if (/^powerFactor/.test(name)) return null;
  return /^(kwh|kvarh|kvah)/.test(name) ? own + other : Math.max(own, other);
}

/** A credit a person takes is a line of the bill it credits. */
function withCredit(whole: BillDraft, credit: BillDraft): BillDraft {
  const amount = credit.total ?? sumOf(credit.charges);
  const label = credit.invoice ? `Credit note ${credit.invoice}` : `Credit note, ${credit.where}`;
  return {
    ...whole,
    where: `${whole.where} and ${credit.where}`,
    charges: [...whole.charges, { label, amount }],
    total: whole.total === null ? null : Math.round((whole.total + amount) * 1000) / 1000,
  };
}
