import XLSX from 'xlsx';
import { addDays } from '../../../src/core/load';
import type { PricedBill } from '../../../src/core/tariff';

/** A bill as the utility prints it: quantities, lines, total. */
export interface PrintedBill {
  invoice: number;
  from: string;
  lastDay: string;
  quantities: Record<string, number>;
  lines: { label: string; amount: number }[];
}

/** Quantities the utility prints, by the schedule's name, in the order of its columns. */
const printedQuantities: [name: string, head: string, decimals: number][] = [
  ['allKwh', 'Energy kWh', 0],
  ['kwhOnPeak', 'On-peak kWh', 0],
  ['kwhOffPeak', 'Off-peak kWh', 0],
  ['kvarh', 'kVARh lagging', 0],
  ['maxKw', 'Peak kW', 1],
  ['powerFactor', 'Power factor', 3],
  ['billedKw', 'Billed kW', 1],
];

const round = (value: number, decimals: number) => Number(value.toFixed(decimals));

/** The bill a correct utility would print. */
export function printedBill(priced: PricedBill, invoice: number): PrintedBill {
  const quantities = printedQuantities.flatMap(([name, head, decimals]) => {
    const quantity = priced.quantities[name];
    return quantity ? [[head, round(quantity.value, decimals)] as const] : [];
  });
  return {
    invoice,
    from: priced.period.from,
    lastDay: addDays(priced.period.to, -1),
    quantities: Object.fromEntries(quantities),
    lines: priced.lines.map(({ label, amount }) => ({ label, amount })),
  };
}

/** A date as a spreadsheet holds it: days since the last day of 1899, wall clock. */
const serial = (date: string) => Date.parse(date) / 86_400_000 + 25_569;
const dateFormat = 'm/d/yyyy';
const moneyFormat = '#,##0.00';

/** The utility's workbook: one row a bill, a column a line, a row of totals. */
export function billsWorkbook(bills: readonly PrintedBill[], preamble: string[]): Uint8Array {
  const quantityHeads = Object.keys(bills[0]?.quantities ?? {});
  const lineHeads = bills[0]?.lines.map((line) => line.label) ?? [];
  const head = ['Invoice', 'Service from', 'Service to', 'Days', ...quantityHeads, ...lineHeads, 'Total due'];
  const totalOf = (bill: PrintedBill) =>
    round(
      bill.lines.reduce((sum, line) => sum + line.amount, 0),
      2,
    );
  const date = (value: string) => ({ t: 'n', v: serial(value), z: dateFormat });
  const money = (value: number) => ({ t: 'n', v: value, z: moneyFormat });
  const rows = bills.map((bill) => [
    bill.invoice,
    date(bill.from),
    date(bill.lastDay),
    (Date.parse(bill.lastDay) - Date.parse(bill.from)) / 86_400_000 + 1,
    ...quantityHeads.map((name) => bill.quantities[name] ?? null),
    ...lineHeads.map((_, index) => money(bill.lines[index]?.amount ?? 0)),
    money(totalOf(bill)),
  ]);
  const sums = lineHeads.map((_, index) =>
    money(
      round(
        bills.reduce((sum, bill) => sum + (bill.lines[index]?.amount ?? 0), 0),
        2,
      ),
    ),
  );
  const year = money(
    round(
      bills.reduce((sum, bill) => sum + totalOf(bill), 0),
      2,
    ),
  );
  const totals = ['Total', null, null, null, ...quantityHeads.map(() => null), ...sums, year];
  const sheet = XLSX.utils.aoa_to_sheet([...preamble.map((line) => [line]), [], head, ...rows, totals]);
  const workbook = XLSX.utils.book_new();
  XLSX.utils.book_append_sheet(workbook, sheet, 'Bills');
  return new Uint8Array(XLSX.write(workbook, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
}
