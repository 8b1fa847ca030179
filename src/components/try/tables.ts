import type { TryBill, TryLine, TryView } from '../../schemas/try-out';
import { formatMoney, formatNumber } from '../ui/format';
import type { LedgerColumn, LedgerData, LedgerValue } from '../ui/ledger';
import type { SumRow } from '../ui/ResultSums';

const factor = (pf: number) => formatNumber(pf, { decimals: pf === Math.round(pf * 100) / 100 ? 2 : 3 });

/** The lines of the bill; beside them, where the field can be raised, the same lines then. */
export function billTable({ currency, target, days }: TryView, bill: TryBill): LedgerData {
  const money = { kind: 'money', currency } as const;
  const raised: LedgerColumn[] =
    bill.targetMinor === null
      ? []
      : [
          { key: 'target', head: `At pf ${factor(target)}`, ...money },
          { key: 'change', head: 'Change', ...money, signed: true },
        ];
  return {
    columns: [
      { key: 'line', head: 'Line', wrap: true },
      { key: 'quantity', head: 'Quantity', align: 'right' },
      { key: 'unit', head: 'Unit', quiet: true },
      { key: 'rate', head: 'Rate', align: 'right' },
      { key: 'amount', head: 'This bill', ...money, strong: true },
      ...raised,
    ],
    rows: bill.lines.map((line) => ({ id: line.id, cells: cellsOf(line) })),
    total: {
      line: `Bill of ${days} days`,
      amount: bill.totalMinor,
      ...(bill.targetMinor === null
        ? {}
        : { target: bill.targetMinor, change: changeCell(bill.targetMinor - bill.totalMinor) }),
    },
  };
}

function cellsOf(line: TryLine): Record<string, LedgerValue> {
  return {
    line: line.label,
    quantity: line.quantity === null ? null : formatNumber(line.quantity, { upTo: 1 }),
    unit: line.unit || null,
    rate: line.rate === null ? null : `${formatNumber(line.rate, { upTo: 6 })}${line.isPercent ? '\u00a0%' : ''}`,
    amount: { value: line.amountMinor, why: line.why },
    ...(line.targetMinor === null || line.targetWhy === null
      ? {}
      : {
          target: { value: line.targetMinor, why: line.targetWhy },
          change: changeCell(line.targetMinor - line.amountMinor),
        }),
  };
}

const changeCell = (minor: number): LedgerValue => (minor < 0 ? { value: minor, tone: 'leading' } : minor);

/** Sums of the result column. */
export function tryRows({ currency, target, bill }: TryView): SumRow[] {
  if (!bill) return [];
  const money = (minor: number) => formatMoney(minor, currency);
  const rows: SumRow[] = [{ label: 'This bill', value: money(bill.totalMinor), kind: 'strong' }];
  if (bill.poorFactorMinor !== null) {
    rows.push({ label: 'Of it for poor pf', value: money(bill.poorFactorMinor), tone: 'lagging' });
  }
  if (bill.targetMinor === null) return rows;
  return [
    ...rows,
    { label: `At pf ${factor(target)}`, value: money(bill.targetMinor), kind: 'subtotal' },
    { label: 'Saved a month', value: money(bill.totalMinor - bill.targetMinor), kind: 'total', tone: 'leading' },
  ];
}
