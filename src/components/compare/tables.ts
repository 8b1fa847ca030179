import type { ChargeGroup } from '../../core/tariff';
import type { CompareColumn, CompareView } from '../../schemas/compare';
import { formatAmount, formatNumber } from '../ui/format';
import type { LedgerColumn, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';

/** A month a row, a schedule a column, and beside each but the standing one its difference to it. */
export function monthsTable(view: CompareView): LedgerData {
  const { currency, columns, months } = view;
  const [standing] = columns;
  const money = (key: string, head: string): LedgerColumn => ({ key, head, kind: 'money', currency });
  const cells = (of: (column: CompareColumn) => number): Record<string, LedgerValue> =>
    Object.fromEntries(
      columns.flatMap((column): [string, LedgerValue][] => {
        const own: [string, LedgerValue] = [column.id, of(column)];
        return column.isStanding ? [own] : [own, [`${column.id}-less`, differenceCell(of(column) - of(standing!))]];
      }),
    );
  return {
    columns: [
      { key: 'month', head: 'Bill of' },
      ...columns.flatMap(({ id, name, isStanding }): LedgerColumn[] =>
        isStanding
          ? [money(id, name)]
          : [money(id, name), { ...money(`${id}-less`, 'difference'), signed: true, strong: true }],
      ),
    ],
    rows: months.map(({ name, from }, index) => ({
      id: from,
      cells: { month: name, ...cells((column) => column.months[index]!.totalMinor) },
    })),
    total: { month: 'Year', ...cells((column) => column.totalMinor) },
  };
}

const differenceCell = (minor: number): LedgerValue => (minor < 0 ? { value: minor, tone: 'leading' } : minor);

const groups: [ChargeGroup, string][] = [
  ['energy', 'Energy'],
  ['demand', 'Demand'],
  ['reactive', 'Reactive'],
  ['fixed', 'Fixed'],
  ['adjustment', 'Adjustments'],
  ['tax', 'Tax'],
];

interface Entry {
  label: string;
  unit: string;
  cell: (column: CompareColumn) => LedgerValue;
  kind?: LedgerRow['kind'];
}

/** The year's groups of charges, its total, the price of a kWh and what poor power factor costs. */
export function groupsTable({ columns, currency }: CompareView): LedgerData {
  const amount = (minor: number) => formatAmount(minor, currency);
  const entries: Entry[] = [
    ...groups
      .filter(([group]) => columns.some((column) => column.groups[group] !== 0))
      .map(([group, label]): Entry => ({ label, unit: currency, cell: (column) => amount(column.groups[group]) })),
    { label: 'Bills of the year', unit: currency, cell: (column) => amount(column.totalMinor), kind: 'total' },
    {
      label: 'Average price',
      unit: `${currency}/kWh`,
      cell: ({ perKwh }) => (perKwh === null ? 'energy not told' : formatNumber(perKwh, { decimals: 4 })),
    },
    { label: 'Of it for poor power factor', unit: currency, cell: (column) => amount(column.reactiveMinor) },
  ];
  return {
    columns: [
      { key: 'entry', head: 'Entry', headUnseen: true, wrap: true },
      { key: 'unit', head: 'Unit', quiet: true },
      ...columns.map(({ id, name, isStanding }): LedgerColumn => ({
        key: id,
        head: name,
        unit: isStanding ? 'standing' : 'instead',
        align: 'right',
      })),
    ],
    rows: entries.map(({ label, unit, cell, kind }) => ({
      id: label,
      kind,
      cells: { entry: label, unit, ...Object.fromEntries(columns.map((column) => [column.id, cell(column)])) },
    })),
  };
}
