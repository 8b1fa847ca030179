import { isoDate } from '../load';
import type { PlacedBill } from './bill-checks';
import { amountOf, type Settled } from './bill-documents';
import type { BillPlan } from './bill-plan';
import type { BillDocument } from './bill-types';
import type { BillReading, IntakeNote, IntakeReport } from './types';

/** What reading adds to the figures of the bills. */
type Findings = Pick<IntakeReport, 'notes' | 'currency' | 'documents' | 'rateFaults'>;

/** The report of a table of bills: interval fields are nought, sums and the highest demand are of what is printed. */
export function reportOfBills(
  plan: BillPlan,
  placed: readonly PlacedBill[],
  findings: Findings,
): BillReading['report'] {
  const printed = (pick: (name: string) => boolean): number[] =>
    placed.flatMap(({ bill }) =>
      Object.entries(bill.quantities)
        .filter(([name]) => pick(name))
        .map(([, figure]) => figure),
    );
  const sum = (name: string): number => {
    const figures = printed((own) => own === name);
    return figures.length === 0 ? Number.NaN : figures.reduce((running, figure) => running + figure, 0);
  };
  const highest = printed((name) => name.startsWith('maxKw'));
  const demands = highest.length > 0 ? highest : printed((name) => name.startsWith('billedKw'));
  const { currency, ...others } = findings;
  return {
    format: plan.opened.format,
    rowsRead: placed.flatMap(({ draft }) => draft.rows).length,
    intervals: 0,
    missing: 0,
    duplicates: 0,
    estimated: 0,
    firstMs: 0,
    lastMs: 0,
    totalKwh: sum('kwh'),
    totalKvarhLagging: sum('kvarh'),
    totalKvarhLeading: sum('kvarhLeading'),
    maxKw: demands.length === 0 ? Number.NaN : Math.max(...demands),
    columnMap: plan.columnMap,
    billRows: placed.map(({ draft }) => plan.grid.rowNumber(draft.dated.row)),
    ...others,
    ...(currency ? { currency } : {}),
  };
}

/** Every document of the file with the bill it stands in. */
export function documentsOf(
  plan: BillPlan,
  settled: readonly Settled[],
  placed: readonly PlacedBill[],
): BillDocument[] {
  const bills = placed.map(({ draft }) => draft.dated.row);
  return settled.map((one) => {
    const { dated, where, invoice } = one.draft;
    const isDated = !Number.isNaN(dated.from + dated.to);
    const bill = one.stands ? bills.indexOf((one.into ?? one).draft.dated.row) : -1;
    return {
      row: plan.grid.rowNumber(dated.row),
      where,
      ...(invoice ? { invoice } : {}),
      period: isDated ? { from: isoDate(dated.from), to: isoDate(dated.to) } : null,
      total: one.draft.total,
      kind: one.kind,
      bill: bill < 0 ? null : bill,
      why: one.why,
    };
  });
}

/** Notes on documents that do not stand as bills of their own. */
export function noteDocuments(settled: readonly Settled[], notes: IntakeNote[]): void {
  for (const { draft, kind, stands, into, why } of settled) {
    if (stands && !into) continue;
    const amount = amountOf(draft);
    notes.push({
      code: stands ? 'document-joined' : kind === 'no-bill' ? 'document-undated' : 'document-left-out',
      message: `${nameOf(kind)}${draft.invoice ? ` ${draft.invoice}` : ''}${amount === null ? '' : ` of ${amount.toFixed(2)}`} ${stands ? 'is joined to another' : 'is left out'}. ${why}.`,
      where: draft.where,
    });
  }
}

const nameOf = (kind: BillDocument['kind']): string =>
  ({
    bill: 'The bill',
    estimate: 'The estimated bill',
    correction: 'The correction',
    cancelled: 'The invoice',
    'credit-note': 'The credit note',
    part: 'A part of the invoice',
    repeat: 'The repeated bill',
    nought: 'The bill of noughts',
    'no-bill': 'The document',
  })[kind];
