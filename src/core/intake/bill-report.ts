import type { DatedRow } from './bill-dates';
import type { BillPlan } from './bill-plan';
import type { BillReading, BillRecord, IntakeNote } from './types';

/** The report of a table of bills: interval fields are nought, sums and the highest demand are of what is printed. */
export function reportOfBills(
  plan: BillPlan,
  rows: readonly DatedRow[],
  bills: readonly BillRecord[],
  notes: IntakeNote[],
): BillReading['report'] {
  const printed = (pick: (name: string) => boolean): number[] =>
    bills.flatMap((bill) =>
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
  const currency = currencyOf(plan);
  return {
    format: plan.opened.format,
    rowsRead: bills.length,
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
    notes,
    columnMap: plan.columnMap,
    billRows: rows.map((row) => plan.grid.rowNumber(row.row)),
    ...(currency ? { currency } : {}),
  };
}

/** A code, or a sign that stands for one currency only, in a header or the first bill. */
function currencyOf(plan: BillPlan): string | undefined {
  const money = plan.columns.filter((use) => use.role === 'charge' || use.role === 'total');
  const texts = money.flatMap((use) => [use.name, plan.grid.text(plan.block.firstRow, use.index)]);
  for (const text of texts) {
    const code = /\b(USD|EUR|GBP|CAD|AUD|CHF|INR|ZAR|PLN|SEK|NOK|DKK|CZK|JPY|KRW|MXN|BRL|NZD)\b/.exec(text)?.[1];
    if (code) return code;
    if (text.includes('€')) return 'EUR';
    if (text.includes('£')) return 'GBP';
  }
  return undefined;
}
