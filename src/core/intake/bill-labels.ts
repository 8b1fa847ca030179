import { markFinding } from './bill-marks';
import type { ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import type { Grid } from './grid';
import { isBlankWord } from './numbers';
import { unitOfHeader } from './units';
import { mentions } from './words';

interface LabelInput {
  grid: Grid;
  rows: readonly number[];
  profiles: readonly ColumnProfile[];
  findings: Map<number, RoleFinding>;
}

const invoiceWords =
  /\b(invoice|bill|document|statement|rechnungs?|beleg|factura|facture|fattura|voucher)\s*(no|nr|n°|num|number|id|nummer|#|ref|reference)?\b\.?\s*#?$|^(rechnungsnummer|belegnummer)$|^(n[°ºo.]|num[eé]ro|number|no\.?)\s*(of|de|d[ei])?\s*(invoice|bill|factura|facture|fattura)/i;

const moneyOrDate = /\b(total|amount|charges?|costs?|due|dates?|days|k?wh|kw|kva)\b|[$€£]/i;

/** Names of columns that tell accounts and meters apart, the finest first. */
const meterNames = [
  /\b(meter|serial|nmi|mpan|pod|cups|ean|z[aä]hler\w*|compteur|contatore|contador|prm|pdl|esi)\b/i,
  /\b(service|supply|usage|delivery)\s*(point|id|agreement|address)|\bpremises?\b|\bspid\b/i,
  /\b(account|customer|contract)\b/i,
  /\b(site|location|building|address|plant|facility)\b/i,
];

/** Columns of words: number of the invoice, kind of the document, accounts and meters. */
export function findLabels(input: LabelInput): void {
  const { profiles, findings } = input;
  for (const profile of profiles) {
    if (findings.has(profile.index) || profile.kinds.blank === profile.sampled) continue;
    const name = profile.name.replaceAll('_', ' ').trim();
    const isInvoice = invoiceWords.test(name) && !moneyOrDate.test(name) && namesThings(profile);
    const finding = isInvoice
      ? ({ role: 'invoice', tests: [[true, 'Named as the number of the invoice']] } satisfies RoleFinding)
      : markFinding(profile);
    if (finding && !(isInvoice && [...findings.values()].some((other) => other.role === 'invoice')))
      findings.set(profile.index, finding);
  }
  findMeters(input);
}

/** Numbers of invoices carry no decimals and no thousands marks. */
const namesThings = (profile: ColumnProfile): boolean =>
  [...profile.distinct.keys()].every((text) => !/\d[.,]\d|[$€£%()]/.test(text));

/** A column that tells apart documents of the same days: accounts or meters, of which one is read. */
function findMeters(input: LabelInput): void {
  const { profiles, findings } = input;
  const named = profiles.flatMap((profile) => {
    const rank = meterNames.findIndex((pattern) => pattern.test(profile.name.replaceAll('_', ' ')));
    const isOpen = !findings.has(profile.index) && profile.distinct.size > 1 && !unitOfHeader(profile.name);
    return rank >= 0 && isOpen && namesThings(profile)
      ? [{ profile, rank, shared: sharedPeriods(input, profile) }]
      : [];
  });
  const [best] = named
    .filter(({ shared }) => shared > 0)
    .sort((a, b) => b.shared - a.shared || a.rank - b.rank || a.profile.index - b.profile.index);
  if (!best) return;
  findings.set(best.profile.index, {
    role: 'meter',
    tests: [[true, `${best.profile.distinct.size} of them have bills of the same days`]],
  });
}

/** Periods that stand beside more than one of the names, counted once for each further name. */
function sharedPeriods({ grid, rows, findings }: LabelInput, profile: ColumnProfile): number {
  const columns = [...findings].filter(([, { role }]) =>
    ['period-from', 'period-to', 'period', 'month', 'year'].includes(role),
  );
  const seen = new Map<string, Set<string>>();
  for (const row of rows) {
    const period = columns.map(([index]) => grid.text(row, index)).join('\n');
    const name = grid.text(row, profile.index);
    if (period.trim() === '' || isBlankWord(name)) continue;
    seen.set(period, (seen.get(period) ?? new Set()).add(name));
  }
  return [...seen.values()].reduce((sum, names) => sum + names.size - 1, 0);
}

/** Whether a column is named as an account, a meter or a site. */
export const namesMeter = (name: string): boolean =>
  meterNames.some((pattern) => pattern.test(name.replaceAll('_', ' '))) || mentions(name, 'meter');
