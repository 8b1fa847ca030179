import { addDays } from '../../core/load';
import { toMinorUnits } from '../../core/units';
import type { PricedBillView } from '../../schemas/plan';
import type { LedgerData, LedgerValue } from '../ui/ledger';
import { formatAmount, formatBillName, formatDay } from '../ui/format';

/** One bill line by line, before and after; each figure can be asked why. */
export function billLines(
  before: PricedBillView,
  after: PricedBillView,
  currency: string,
  planName: string,
): LedgerData {
  const minor = (amount: number) => toMinorUnits(amount, currency);
  const ids = [...new Set([...before.lines, ...after.lines].map((line) => line.id))];
  const cellOf = (bill: PricedBillView, id: string): LedgerValue => {
    const line = bill.lines.find((one) => one.id === id);
    if (!line) return null;
    return {
      value: minor(line.amount),
      why: {
        title: `Why ${formatAmount(minor(line.amount), currency)} ${currency}: ${line.label}, bill of ${formatBillName(bill)}`,
        steps: [
          {
            label: line.explanation,
            result: formatAmount(minor(line.amount), currency),
            kind: 'equals',
            source: line.clause ? `Clause ${line.clause}` : undefined,
          },
        ],
      },
    };
  };
  const amountOf = (bill: PricedBillView, id: string) => bill.lines.find((line) => line.id === id)?.amount ?? 0;
  const money = { kind: 'money' as const, currency };
  return {
    columns: [
      { key: 'line', head: 'Line' },
      { key: 'before', head: 'Standing', ...money },
      { key: 'after', head: planName, ...money },
      { key: 'change', head: 'Change', ...money, signed: true, strong: true },
    ],
    rows: ids.map((id) => ({
      id,
      cells: {
        line: (after.lines.find((line) => line.id === id) ?? before.lines.find((line) => line.id === id))?.label ?? id,
        before: cellOf(before, id),
        after: cellOf(after, id),
        change: minor(amountOf(after, id) - amountOf(before, id)),
      },
    })),
    total: {
      line: `Bill of ${formatDay(before.from)} to ${formatDay(addDays(before.to, -1))}`,
      before: minor(before.total),
      after: minor(after.total),
      change: minor(after.total - before.total),
    },
  };
}
