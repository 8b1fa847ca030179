import { daysBetween } from '../../schemas/bill';
import type { IntakeView } from '../../schemas/intake';
import type { BillBeside, BillsBeside, BillsOverlap } from '../../schemas/overlap';
import { formatBillName, formatCount, formatPeriod, formatSpelled } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import type { LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import type { IntakeActions } from './IntakeSheet';
import { KeepButtons } from './KeepButtons';

export interface KeepBillsOverlapProps {
  intake: IntakeView;
  overlap: BillsOverlap;
  actions: IntakeActions;
}

/** Bills of a file beside the kept ones of the same days, what differs, and which of them stand. */
export function KeepBillsOverlap({ intake, overlap, actions }: KeepBillsOverlapProps) {
  const { bills, apart } = overlap;
  const what = formatCount(bills.length + apart, 'bill');
  const same = bills.filter(({ differences }) => differences.length === 0).length;
  const joined = bills.some(({ kept }) => kept.some(({ isJoined }) => isJoined));
  return (
    <div className="stacked mt-4">
      <p className="max-w-[60em]">{meeting(bills.length, same, apart)}</p>
      <LedgerTable {...besideLedger(overlap)} label="Bills of the file beside kept ones" stack />
      <Differences bills={bills} />
      <ul className="max-w-[60em]">
        <li>
          <b>{`Keep ${what}:`}</b> those of this file take the place of the kept ones, which are put away and come back
          when {intake.fileName} is undone.
          {joined && ' A joined bill comes apart where one of its invoices is put away.'}
        </li>
        {apart > 0 && (
          <li>
            <b>Keep without what is kept already:</b> only {formatCount(apart, 'bill')} of this file{' '}
            {apart === 1 ? 'is' : 'are'} kept.
          </li>
        )}
        <li>
          <b>Give it up:</b> nothing changes.
        </li>
      </ul>
      <KeepButtons actions={actions} what={what} above around={apart > 0} />
    </div>
  );
}

function meeting(shared: number, same: number, apart: number): string {
  const beside = apart === 0 ? 'Every bill' : `${formatSpelled(shared)} of ${formatSpelled(shared + apart)} bills`;
  const share = shared === 1 || apart === 0 ? 'shares' : 'share';
  const begin = `${beside.charAt(0).toUpperCase()}${beside.slice(1)} of the file ${share} days with kept ones`;
  if (same === shared) return `${begin}: ${shared === 1 ? 'it is the same bill' : 'they are the same bills'} again.`;
  return same === 0 ? `${begin}.` : `${begin}; ${formatSpelled(same)} of them agree in everything.`;
}

const columnsOf = (currency: string): LedgerData['columns'] => [
  { key: 'which', head: 'Bill' },
  { key: 'period', head: 'Period', quiet: true },
  { key: 'days', head: 'Days', kind: 'number' },
  { key: 'invoice', head: 'Invoice' },
  { key: 'kwh', head: 'Energy', unit: 'kWh', kind: 'number' },
  { key: 'kw', head: 'Demand', unit: 'kW', kind: 'number' },
  { key: 'total', head: 'Total', kind: 'money', currency, strong: true },
];

/** The kept bill above the one that comes, pair by pair. */
function besideLedger({ bills, currency }: BillsOverlap): LedgerData {
  const rows = bills.flatMap(({ comes, kept, differences }, index): LedgerRow[] => [
    ...kept.map((bill, at) => ({
      id: `kept-${bill.id}-${index}`,
      cells: { ...cellsOf(bill), which: `kept, ${bill.fileName ?? 'typed'}` },
      group: at === 0 ? `${formatBillName(comes)}${differences.length === 0 ? ', the same bill' : ''}` : undefined,
    })),
    { id: `comes-${index}`, cells: { ...cellsOf(comes), which: `this file, ${comes.row ?? 'row unknown'}` } },
  ]);
  return { columns: columnsOf(currency), rows };
}

function cellsOf(bill: BillBeside): Record<string, LedgerValue> {
  const { from, to, invoice, isEstimated, kwh, kw, totalMinor } = bill;
  return {
    period: formatPeriod(from, to, { year: true }),
    days: daysBetween(from, to),
    invoice: { value: invoice, note: isEstimated ? 'estimated' : undefined },
    kwh,
    kw,
    total: totalMinor,
  };
}

function Differences({ bills }: { bills: BillsBeside[] }) {
  const differing = bills.filter(({ differences }) => differences.length > 0);
  if (differing.length === 0) return null;
  return (
    <ul className="max-w-[60em]">
      {differing.map(({ comes, differences }) => (
        <li key={comes.from}>
          <b>{formatBillName(comes)}:</b> {differences.join(' ')}
        </li>
      ))}
    </ul>
  );
}
