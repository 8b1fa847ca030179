import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { ApiError } from '../../client/api';
import { matchLine } from '../../client/tariff';
import { noLine } from '../../schemas/tariff';
import type { PairView, SheetRow, TariffSheetView } from '../../schemas/tariff-sheet';
import { SelectField } from '../ui/Field';
import { formatAmount, formatNumber } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import type { LedgerColumn, LedgerRow } from '../ui/ledger';
import { Notice } from '../ui/Notice';

const matchWords: Record<PairView['matchedBy'], string> = {
  person: 'matched by hand',
  label: 'by its name',
  amount: 'by its amount',
  group: 'by its group',
  none: 'no match',
};

const matchNote = ({ lineId, matchedBy, remembered }: PairView) =>
  remembered ?? (lineId === null ? undefined : matchWords[matchedBy]);

/** A rate with the decimals it is written with; one without a unit is a percentage of other lines. */
function rateText({ rate, unit }: PairView): string | null {
  if (rate === null) return null;
  const text = formatNumber(rate, { upTo: 6 });
  return unit ? text : `${text} %`;
}

function ledgerRow(pair: PairView): LedgerRow {
  const printed = pair.billed.map((line) => line.label).join(' + ');
  return {
    id: pair.key,
    finding: pair.finding ?? undefined,
    kind: pair.finding ? 'chosen' : 'plain',
    cells: {
      line: pair.lineId === null ? { value: 'not in the schedule', tone: 'quiet' } : pair.label,
      clause: pair.clause,
      quantity: pair.quantity,
      unit: pair.unit,
      rate: rateText(pair),
      priced: pair.pricedMinor ?? { value: 'not priced', tone: 'quiet' },
      printed: printed ? { value: printed, note: matchNote(pair) } : { value: 'not on the bill', tone: 'quiet' },
      billed: pair.billedMinor,
      difference: { value: pair.differenceMinor, strong: pair.finding !== null },
    },
  };
}

function columnsFor(currency: string): LedgerColumn[] {
  const money = { kind: 'money', currency } as const;
  return [
    { key: 'line', head: 'Line of the schedule' },
    { key: 'clause', head: 'Clause' },
    { key: 'quantity', head: 'Quantity', kind: 'number', decimals: 2 },
    { key: 'unit', head: 'Unit', headUnseen: true, quiet: true },
    { key: 'rate', head: 'Rate', unit: `${currency} a unit`, align: 'right' },
    { key: 'priced', head: 'Priced', ...money, strong: true },
    { key: 'printed', head: 'Line of the bill' },
    { key: 'billed', head: 'Billed', ...money },
    { key: 'difference', head: 'Difference', ...money, signed: true },
  ];
}

/** Corrects which line of the schedule a printed label means; kept for all bills of the engagement. */
function MatchCorrection({ sheet, row }: { sheet: TariffSheetView; row: SheetRow }) {
  const labels = row.pairs.flatMap((pair) => pair.billed.map((line) => ({ label: line.label, lineId: pair.lineId })));
  const [label, setLabel] = useState(labels[0]?.label ?? '');
  const current = labels.find((one) => one.label === label)?.lineId ?? noLine;
  const save = useMutation({
    mutationFn: (lineId: string | null) => matchLine(sheet.code, { label, lineId, version: sheet.choiceVersion }),
    onSuccess: () => location.reload(),
  });
  if (labels.length === 0) return null;
  const options = [
    ...sheet.lines.map((line) => ({ value: line.id, label: line.label })),
    { value: noLine, label: 'no line of the schedule' },
  ];
  return (
    <details className="match-correction">
      <summary>A line is matched wrongly</summary>
      <div className="form-grid">
        <SelectField
          label="Line of the bill"
          size="small"
          value={label}
          onChange={(event) => setLabel(event.target.value)}
          options={labels.map((one) => ({ value: one.label, label: one.label }))}
        />
        <SelectField
          label="means"
          size="small"
          value={current}
          onChange={(event) => save.mutate(event.target.value)}
          options={options}
          hint="Remembered for every bill here, and for the next engagement with this utility."
        />
      </div>
      {save.error instanceof ApiError && (
        <Notice kind="fault" title="The match was not kept.">{` ${save.error.message}`}</Notice>
      )}
    </details>
  );
}

/** One bill opened: its lines as priced beside the lines as printed. */
export function PairsTable({ sheet, row }: { sheet: TariffSheetView; row: SheetRow }) {
  const difference = row.differenceMinor;
  return (
    <div className="pairs">
      <LedgerTable
        label={`Bill of ${row.name}, line by line`}
        columns={columnsFor(sheet.currency)}
        rows={row.pairs.map(ledgerRow)}
        total={{
          line: 'Total',
          priced: row.pricedMinor,
          billed: row.billedMinor,
          difference: difference === null ? 'no total' : formatAmount(difference, sheet.currency, { signed: true }),
        }}
      />
      {row.notes.length > 0 && (
        <ul className="hint mt-3">
          {row.notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
        </ul>
      )}
      <MatchCorrection sheet={sheet} row={row} />
    </div>
  );
}
