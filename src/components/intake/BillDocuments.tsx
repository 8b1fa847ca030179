import { useState } from 'react';
import type { BillDocument, BillPreview, DocumentChoice } from '../../core/intake';
import { toMinorUnits } from '../../core/units';
import type { IntakeView } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { formatAmount, formatBillName, formatCount, formatPeriod, formatQuantity } from '../ui/format';
import type { LedgerColumn, LedgerRow } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import type { IntakeActions } from './IntakeSheet';

interface BillDocumentsProps {
  intake: IntakeView;
  preview: BillPreview;
  actions: IntakeActions;
}

const kinds: Record<BillDocument['kind'], string> = {
  bill: 'Bill',
  estimate: 'Estimate',
  correction: 'Correction',
  cancelled: 'Cancelled',
  'credit-note': 'Credit note',
  part: 'Part of an invoice',
  repeat: 'Repeat',
  nought: 'All noughts',
  'no-bill': 'One date only',
};

const isPlain = (document: BillDocument) => document.kind === 'bill' && document.bill !== null;

/** What became of each document of the file; a person can decide otherwise, and the file is read again. */
export function BillDocuments({ intake, preview, actions }: BillDocumentsProps) {
  const { documents } = preview;
  const [all, setAll] = useState(false);
  const told = preview.problems.length > 0 || all ? documents : documents.filter((document) => !isPlain(document));
  const plain = documents.length - told.length;
  const fixed = intake.state !== 'read';
  const { currency } = intake.engagement;
  return (
    <div>
      <h3>What became of each document</h3>
      {told.length > 0 && (
        <LedgerTable
          label="Documents of the file"
          columns={columnsOf(currency)}
          rows={told.map((document) => rowOf(document, preview, currency))}
          roomy
          stack
          renderActions={
            fixed
              ? undefined
              : ({ id }) => {
                  const document = told.find((one) => String(one.row) === id);
                  return document && <Choose document={document} preview={preview} actions={actions} />;
                }
          }
        />
      )}
      {plain > 0 && (
        <p className="section-lead">
          {documents.every(isPlain)
            ? `Each of the ${formatCount(plain, 'document')} of the file is a bill of its own. `
            : `The other ${formatCount(plain, 'document')} of the file ${plain === 1 ? 'is a bill' : 'are bills'} of ${plain === 1 ? 'its' : 'their'} own. `}
          <Button kind="quiet" onClick={() => setAll(true)}>
            Show {plain === 1 ? 'it' : 'them'}
          </Button>
        </p>
      )}
    </div>
  );
}

function Choose({ document, preview, actions }: Omit<BillDocumentsProps, 'intake'> & { document: BillDocument }) {
  if (document.period === null) return null;
  const left = document.bill === null;
  const choose = (take: boolean) =>
    actions.match({ ...preview.columnMap, documents: choicesWith(preview, document, take) });
  return (
    <Button
      kind="quiet"
      busy={actions.busy}
      onClick={() => choose(left)}
      aria-label={`${left ? 'Take' : 'Leave out'} the document in ${document.where}`}
    >
      {left ? 'Take it' : 'Leave out'}
    </Button>
  );
}

/** The choices with one more; what is taken displaces the bills of its days. */
export function choicesWith(
  { documents, columnMap }: Pick<BillPreview, 'documents' | 'columnMap'>,
  chosen: BillDocument,
  isTaken: boolean,
): DocumentChoice[] {
  const displaced = documents.filter(
    (one) =>
      isTaken && (chosen.total ?? 0) >= 0 && one.row !== chosen.row && one.bill !== null && sharesDays(one, chosen),
  );
  const fresh = [
    { row: chosen.row, total: chosen.total, isTaken },
    ...displaced.map(({ row, total }) => ({ row, total, isTaken: false })),
  ];
  return [...(columnMap.documents ?? []).filter((old) => !fresh.some((one) => one.row === old.row)), ...fresh];
}

const sharesDays = (one: BillDocument, other: BillDocument) =>
  one.period !== null &&
  other.period !== null &&
  one.period.from < other.period.to &&
  other.period.from < one.period.to;

const columnsOf = (currency: string): LedgerColumn[] => [
  { key: 'document', head: 'Document' },
  { key: 'where', head: 'Where', quiet: true },
  { key: 'period', head: 'Period', quiet: true },
  { key: 'total', head: 'Total', kind: 'money', currency, unit: currency },
  { key: 'kind', head: 'Kind' },
  { key: 'became', head: 'What became of it', wrap: true },
];

function rowOf(document: BillDocument, preview: BillPreview, currency: string): LedgerRow {
  const { row, where, invoice, period, total, kind, bill, why } = document;
  const stands = bill === null ? undefined : preview.bills[bill];
  const became = stands
    ? `Bill of ${formatBillName(stands.period)}. ${why}.`
    : `${bill === null ? 'Left out. ' : ''}${why}.`;
  return {
    id: String(row),
    cells: {
      document: invoice ?? kinds[kind],
      where,
      period: period ? formatPeriod(period.from, period.to, { year: true }) : null,
      total: total === null ? null : toMinorUnits(total, currency),
      kind: kinds[kind],
      became,
    },
  };
}

/** Words of one fault of quantity and rate. */
export function rateFaultInWords(
  { quantity, unit, rate, amount }: { quantity: number; unit: string; rate: number; amount: number },
  currency: string,
): string {
  const product = toMinorUnits(quantity * rate, currency);
  const printed = toMinorUnits(amount, currency);
  const difference = formatAmount(printed - product, currency, { signed: true });
  return `${formatQuantity(quantity, unit, { upTo: 3 })} at ${rate} make ${formatAmount(product, currency)} ${currency}; printed are ${formatAmount(printed, currency)}, ${difference}. The line is kept as printed.`;
}
