import { addDays } from '../../core/load';
import { toMinorUnits } from '../../core/units';
import type { PricedBillView, PlanView, YearView } from '../../schemas/plan';
import type { LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { formatAmount, formatBillName, formatDay } from '../ui/format';
import { groupNames } from './words';

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

/** From standing to the plan by groups of charges: what it takes away, what its losses take back. */
export function changeTable(year: YearView, plan: PlanView): LedgerData {
  const minor = (amount: number) => toMinorUnits(amount, year.currency);
  const money = { kind: 'money' as const, currency: year.currency };
  const changes = groupNames
    .map(([group, label]) => ({ label, change: plan.groupTotals[group] - year.standing.groupTotals[group] }))
    .filter(({ change }) => Math.abs(change) >= 0.005);
  return {
    columns: [
      { key: 'group', head: `From standing to ${plan.name}` },
      { key: 'change', head: 'Change a year', ...money, signed: true },
    ],
    rows: [
      {
        id: 'standing',
        kind: 'subtotal',
        cells: { group: 'Standing', change: formatAmount(minor(year.standing.yearTotal), year.currency) },
      },
      ...changes.map(({ label, change }): LedgerRow => ({
        id: label,
        cells: { group: label, change: { value: minor(change), tone: change < 0 ? 'leading' : undefined } },
      })),
    ],
    total: { group: plan.name, change: formatAmount(minor(plan.yearTotal), year.currency) },
  };
}
