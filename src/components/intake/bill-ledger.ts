import { intakePage } from '../../client/intake';
import type { BillRecord } from '../../core/intake';
import { toMinorUnits } from '../../core/units';
import {
  billQuantities,
  billQuantity,
  daysBetween,
  lineLabel,
  type BillQuantity,
  type BillView,
} from '../../schemas/bill';
import { formatAmount, formatBillName, formatMoney, formatPeriod, formatQuantity, formatSpelled } from '../ui/format';
import type { LedgerCell, LedgerColumn, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import type { WhyContent, WhyStep } from '../ui/why';

/** A bill as the table shows it, kept or about to be. */
export interface LedgerBill {
  id: string;
  from: string;
  to: string;
  quantities: Record<string, number>;
  lines: { label: string; amountMinor: number }[];
  totalMinor: number | null;
  invoice?: string | null;
  isEstimated?: boolean;
  /** How many invoices are joined to it; 1 where it is one. */
  invoices?: number;
  source: string;
  /** Where the rows of the file can be seen. */
  sourceHref?: string;
}

const mostQuantities = 2;
const mostLines = 8;

/** A kept bill for the table. */
export function keptBill(bill: BillView, code?: string): LedgerBill {
  const { id, from, to, quantities, lines, totalMinor, invoice, estimated, parts, source } = bill;
  const invoices = parts?.length ?? 1;
  const base = { id: String(id), from, to, quantities, lines, totalMinor, invoice, isEstimated: estimated, invoices };
  if (source) return { ...base, source: sourceWords(bill), sourceHref: code && intakePage(code, source.intakeId) };
  return { ...base, source: sourceWords(bill) };
}

/** Where a bill came from, short: `row 3`, `PDF`, `2 PDF`, `typed`. */
function sourceWords({ source, pages, parts }: BillView): string {
  const kind = pages?.[0]?.kind;
  if (parts && parts.length > 1) {
    const words = [...new Set(parts.map(sourceWords))];
    if (words.length > 1) return words.join(', ');
    return /^row/.test(words[0] ?? '') ? 'rows' : `${parts.length} ${words[0]}`;
  }
  return source ? (source.row ?? 'file') : (kind ?? 'typed');
}

/** A bill as the file has it, before it is kept. */
export function readBill(bill: BillRecord, index: number, currency: string, row: number | undefined): LedgerBill {
  return {
    id: String(index),
    ...bill.period,
    quantities: bill.quantities,
    lines: bill.charges.map(({ label, amount }) => ({
      label: lineLabel(label, currency),
      amountMinor: toMinorUnits(amount, currency),
    })),
    totalMinor: bill.total === null ? null : toMinorUnits(bill.total, currency),
    invoice: bill.invoice,
    isEstimated: bill.isEstimated,
    source: row === undefined ? '' : `row ${row}`,
  };
}

const sumOf = (lines: { amountMinor: number }[]) => lines.reduce((sum, line) => sum + line.amountMinor, 0);

/** Sum of the lines less the printed total; null where one of them is not there. */
export const lessTotal = (bill: LedgerBill) =>
  bill.totalMinor === null || bill.lines.length === 0 ? null : sumOf(bill.lines) - bill.totalMinor;

/** What the bill asks for: the printed total, or the sum of its lines where none is printed. */
export const billedMinor = (bill: LedgerBill) => bill.totalMinor ?? sumOf(bill.lines);

/** The quantities worth a column: the usual ones first, those that most bills print. */
function quantitiesOf(bills: LedgerBill[]): BillQuantity[] {
  const names = new Set(bills.flatMap((bill) => Object.keys(bill.quantities)));
  const order = billQuantities.map((quantity) => quantity.name);
  const rank = (name: string) => (order.includes(name) ? order.indexOf(name) : order.length);
  const first = ['kwh', 'billedKw', 'billedKva', 'maxKw', 'maxKva', 'kvarh', 'powerFactor'].filter((name) =>
    names.has(name),
  );
  const others = [...names].filter((name) => !first.includes(name)).sort((a, b) => rank(a) - rank(b));
  return [...first, ...others]
    .slice(0, mostQuantities)
    .map(billQuantity)
    .sort((a, b) => rank(a.name) - rank(b.name));
}

/** Labels of lines in the order they are met, with their sums over all bills. */
export function lineSums(bills: LedgerBill[]): { label: string; amountMinor: number }[] {
  const sums = new Map<string, number>();
  for (const bill of bills) {
    for (const { label, amountMinor } of bill.lines) sums.set(label, (sums.get(label) ?? 0) + amountMinor);
  }
  return [...sums].map(([label, amountMinor]) => ({ label, amountMinor }));
}

/** Lines with a column of their own; the smallest share one where there are too many. */
function shownLines(bills: LedgerBill[]): { labels: string[]; others: boolean } {
  const sums = lineSums(bills);
  if (sums.length <= mostLines) return { labels: sums.map((sum) => sum.label), others: false };
  const largest = [...sums].sort((a, b) => Math.abs(b.amountMinor) - Math.abs(a.amountMinor)).slice(0, mostLines - 1);
  return { labels: sums.filter((sum) => largest.includes(sum)).map((sum) => sum.label), others: true };
}

const lineKey = (label: string) => `line:${label}`;
const quantityKey = (name: string) => `quantity:${name}`;

function lineOf(bill: LedgerBill, label: string): number | null {
  const lines = bill.lines.filter((line) => line.label === label);
  return lines.length === 0 ? null : sumOf(lines);
}

/** The reasoning behind a total: every line, every quantity, the sum against what is printed. */
function whyTotal(bill: LedgerBill, currency: string): WhyContent {
  const amount = (minor: number) => formatAmount(minor, currency);
  const lines: WhyStep[] = bill.lines.map((line) => ({ label: line.label, result: amount(line.amountMinor) }));
  const quantities: WhyStep[] = Object.entries(bill.quantities).map(([name, value]) => {
    const { label, unit, decimals } = billQuantity(name);
    return { label, working: 'as printed', result: formatQuantity(value, unit, { upTo: Math.max(decimals, 3) }) };
  });
  const difference = lessTotal(bill);
  const closing: WhyStep[] = [
    { label: 'Sum of the lines', result: amount(sumOf(bill.lines)), kind: 'equals' },
    { label: 'Printed total', result: bill.totalMinor === null ? 'none printed' : amount(bill.totalMinor) },
  ];
  if (difference !== null) {
    closing.push({
      label: 'Lines less total',
      result: formatAmount(difference, currency, { signed: true }),
      kind: difference === 0 ? 'equals' : 'fault',
    });
  }
  return {
    title: `Bill of ${formatPeriod(bill.from, bill.to, { year: true })}, amounts in ${currency}`,
    steps: [...quantities, ...lines, ...closing],
    source: bill.source === 'typed' ? 'typed by hand' : bill.source || undefined,
    sourceHref: bill.sourceHref,
  };
}

function columnsOf(bills: LedgerBill[], currency: string): LedgerColumn[] {
  const { labels, others } = shownLines(bills);
  const money = (key: string, head: string): LedgerColumn => ({
    key,
    head,
    kind: 'money',
    currency,
    unit: currency,
    wrap: false,
  });
  return [
    { key: 'name', head: 'Bill of' },
    { key: 'period', head: 'Period', quiet: true },
    { key: 'days', head: 'Days', kind: 'number', spare: true },
    ...(bills.some(({ invoice, invoices = 1 }) => invoice || invoices > 1)
      ? [{ key: 'invoice', head: 'Invoice' }]
      : []),
    ...quantitiesOf(bills).map(({ name, label, unit, decimals }): LedgerColumn => ({
      key: quantityKey(name),
      head: label,
      unit: unit || undefined,
      kind: 'number',
      decimals: decimals === 0 ? 0 : 3,
    })),
    ...labels.map((label) => ({ ...money(lineKey(label), label), spare: true })),
    ...(others ? [{ ...money('others', 'Other lines'), spare: true }] : []),
    { ...money('total', 'Printed total'), strong: true },
    { key: 'less', head: 'Lines less total', kind: 'money', currency, unit: currency, signed: true },
    { key: 'source', head: 'Source', quiet: true },
  ];
}

function rowOf(bill: LedgerBill, columns: LedgerColumn[], currency: string, flaws: Set<string>): LedgerRow {
  const { labels } = shownLinesOf(columns);
  const difference = lessTotal(bill);
  const unshown = bill.lines.filter((line) => !labels.has(line.label));
  const cells: Record<string, LedgerValue> = {
    name: formatBillName(bill),
    period: formatPeriod(bill.from, bill.to),
    days: daysBetween(bill.from, bill.to),
    invoice: invoiceCell(bill),
    source: { value: bill.source, href: bill.sourceHref },
    others: unshown.length > 0 ? sumOf(unshown) : null,
    total: totalCell(bill, currency),
    less: difference === null ? null : { value: difference, tone: difference === 0 ? undefined : 'fault' },
  };
  for (const [name, value] of Object.entries(bill.quantities)) cells[quantityKey(name)] = value;
  for (const label of labels) cells[lineKey(label)] = lineOf(bill, label);
  return { id: bill.id, cells, kind: flaws.has(bill.id) ? 'asks' : 'plain' };
}

/** Its number; how many where several are joined, opening them; and whether the reading was estimated. */
function invoiceCell({ invoice, invoices = 1, isEstimated }: LedgerBill): LedgerCell {
  const note = isEstimated ? 'estimated' : undefined;
  if (invoices > 1) return { value: `${formatSpelled(invoices)} invoices`, opens: true, note };
  return { value: invoice ?? null, note };
}

function totalCell(bill: LedgerBill, currency: string): LedgerCell {
  const why = whyTotal(bill, currency);
  return bill.totalMinor === null ? { value: 'none printed', tone: 'warn', why } : { value: bill.totalMinor, why };
}

function shownLinesOf(columns: LedgerColumn[]): { labels: Set<string> } {
  const keys = columns.map((column) => column.key).filter((key) => key.startsWith('line:'));
  return { labels: new Set(keys.map((key) => key.slice('line:'.length))) };
}

function totalsOf(bills: LedgerBill[], columns: LedgerColumn[]): Record<string, LedgerValue> {
  const days = bills.reduce((sum, bill) => sum + daysBetween(bill.from, bill.to), 0);
  const total: Record<string, LedgerValue> = { name: 'Together', days };
  const { labels } = shownLinesOf(columns);
  for (const { label, amountMinor } of lineSums(bills)) if (labels.has(label)) total[lineKey(label)] = amountMinor;
  total.others = sumOf(bills.flatMap((bill) => bill.lines.filter((line) => !labels.has(line.label))));
  total.total = bills.some((bill) => bill.totalMinor === null)
    ? null
    : bills.reduce((sum, bill) => sum + (bill.totalMinor ?? 0), 0);
  total.less = bills.reduce((sum, bill) => sum + (lessTotal(bill) ?? 0), 0);
  for (const name of ['kwh', 'kvarh', 'kvarhLeading', 'kwhPeak', 'kwhShoulder', 'kwhOffPeak']) {
    if (bills.every((bill) => bill.quantities[name] !== undefined)) {
      total[quantityKey(name)] = bills.reduce((sum, bill) => sum + (bill.quantities[name] ?? 0), 0);
    }
  }
  return total;
}

/** The bills line by line, as billed; `flaws` are rows whose period wants a look. */
export function billLedger(bills: LedgerBill[], currency: string, flaws: Set<string> = new Set()): LedgerData {
  const columns = columnsOf(bills, currency);
  return {
    columns,
    rows: bills.map((bill) => rowOf(bill, columns, currency, flaws)),
    total: bills.length > 1 ? totalsOf(bills, columns) : undefined,
  };
}

/** The invoices of a joined bill under it: the same lines, their sum the bill itself. */
export function partsLedger(bill: BillView, currency: string, code: string): LedgerData {
  const parts = (bill.parts ?? []).map((part) => keptBill(part, code));
  const columns = columnsOf([keptBill(bill), ...parts], currency)
    .filter(({ key }) => !['name', 'less'].includes(key))
    .sort((a, b) => Number(b.key === 'invoice') - Number(a.key === 'invoice'));
  const named = (part: LedgerBill) => ({ ...part, invoice: part.invoice ?? 'no number' });
  const rows = parts.map((part) => rowOf(named(part), columns, currency, new Set()));
  const { cells } = rowOf(keptBill(bill), columns, currency, new Set());
  return { columns, rows, total: { ...cells, invoice: 'One bill', source: null } };
}

/** Bills whose lines do not come to the printed total, in words; null where all do. */
export function oddSumsInWords(bills: LedgerBill[], currency: string): string | null {
  const off = bills.filter((bill) => (lessTotal(bill) ?? 0) !== 0);
  if (off.length === 0) return null;
  const worst = off.reduce((a, b) => (Math.abs(lessTotal(b) ?? 0) > Math.abs(lessTotal(a) ?? 0) ? b : a));
  const amount = formatMoney(Math.abs(lessTotal(worst) ?? 0), currency);
  if (off.length === 1) return `${formatBillName(worst)} does not add up, by ${amount}`;
  return `${formatSpelled(off.length)} do not add up, ${formatBillName(worst)} by ${amount}`;
}
