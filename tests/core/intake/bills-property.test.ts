import { describe, expect, it } from 'vitest';
import type { BillRecord } from '@/core/intake';
import { bytesOf, workbook } from './files';
import { csv, readTable, type Rows } from './bill-tables';

/** A true year of an invented plant: twelve calendar months, amounts in whole cents that add up, one of them below nought. */
interface TrueBill {
  year: number;
  month: number;
  kwh: number;
  maxKw: number;
  kvarh: number;
  pfPercent: number;
  cents: { energy: number; demand: number; reactive: number; tax: number };
}

const names = {
  energy: 'Energy charge',
  demand: 'Demand charge',
  reactive: 'Reactive charge',
  tax: 'Sales tax',
} as const;
const lineNames = ['energy', 'demand', 'reactive', 'tax'] as const;

const trueYear: TrueBill[] = Array.from({ length: 12 }, (_, at) => {
  const kwh = 120_345 + ((at * 7919) % 40_000);
  const maxKw = 410 + ((at * 13) % 47);
  const energy = kwh * 5; // 0.05 a kWh, so quantity times rate is the amount to the cent
  const demand = maxKw * 1250;
  const reactive = at === 4 ? -12_345 : 30_000 + at * 117;
  return {
    year: at < 6 ? 2024 : 2025,
    month: ((at + 6) % 12) + 1,
    kwh,
    maxKw,
    kvarh: 80_211 + at * 1013,
    pfPercent: 78 + (at % 9),
    cents: { energy, demand, reactive, tax: Math.round((energy + demand + reactive) * 0.02) },
  };
});

const totalOf = ({ cents }: TrueBill): number => cents.energy + cents.demand + cents.reactive + cents.tax;
const two = (figure: number): string => String(figure).padStart(2, '0');
const isoOf = (bill: TrueBill, day: number): string =>
  new Date(Date.UTC(bill.year, bill.month - 1, day)).toISOString().slice(0, 10);
const lastDay = (bill: TrueBill): number => new Date(Date.UTC(bill.year, bill.month, 0)).getUTCDate();

/** How figures are written: `money` of cents, `count` of whole numbers. */
interface NumberStyle {
  name: string;
  isComma: boolean;
  money: (cents: number) => string;
  count: (whole: number) => string;
}

const grouped = (whole: number, mark: string): string => String(Math.abs(whole)).replace(/\B(?=(\d{3})+(?!\d))/g, mark);
const writtenMoney = (cents: number, thousands: string, decimal: string): string =>
  `${grouped(Math.trunc(Math.abs(cents) / 100), thousands)}${decimal}${two(Math.abs(cents) % 100)}`;
const style = (
  name: string,
  thousands: string,
  decimal: string,
  wrap: (text: string, isBelow: boolean) => string,
): NumberStyle => ({
  name,
  isComma: decimal === ',',
  money: (cents) => wrap(writtenMoney(cents, thousands, decimal), cents < 0),
  count: (whole) => grouped(whole, thousands),
});

const numberStyles: NumberStyle[] = [
  style('1234.56', '', '.', (text, isBelow) => (isBelow ? `-${text}` : text)),
  style('$1,234.56 and ($1.00)', ',', '.', (text, isBelow) => (isBelow ? `($${text})` : `$${text}`)),
  style('1,234.56 CR', ',', '.', (text, isBelow) => (isBelow ? `${text} CR` : text)),
  style('1.234,56 €', '.', ',', (text, isBelow) => `${isBelow ? '-' : ''}${text} €`),
  style('1 234,56-', '\u00a0', ',', (text, isBelow) => (isBelow ? `${text}-` : text)),
  style("CHF 1'234.56", "'", '.', (text, isBelow) => `CHF ${isBelow ? '-' : ''}${text}`),
];

interface DateStyle {
  name: string;
  timeZone: string;
  write: (iso: string) => string;
}

const monthsShort = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const parts = (iso: string): [number, number, number] => iso.split('-').map(Number) as [number, number, number];

const dateStyles: DateStyle[] = [
  { name: '2025-01-31', timeZone: 'UTC', write: (iso) => iso },
  { name: '1/31/2025', timeZone: 'America/Chicago', write: (iso) => { const [y, m, d] = parts(iso); return `${m}/${d}/${y}`; } },
  { name: '31.01.2025', timeZone: 'Europe/Berlin', write: (iso) => { const [y, m, d] = parts(iso); return `${two(d)}.${two(m)}.${y}`; } },
  { name: '31-Jan-25', timeZone: 'Asia/Kolkata', write: (iso) => { const [y, m, d] = parts(iso); return `${two(d)}-${monthsShort[m - 1]}-${y % 100}`; } },
  { name: 'Jan 31, 2025', timeZone: 'Australia/Lord_Howe', write: (iso) => { const [y, m, d] = parts(iso); return `${monthsShort[m - 1]} ${d}, ${y}`; } },
]; // prettier-ignore

interface Layout {
  name: string;
  /** Quantities the layout carries; all without a word. */
  carries?: string[];
  write: (n: NumberStyle, d: DateStyle) => Rows;
}

const figures = (bill: TrueBill, n: NumberStyle): string[] => [
  n.count(bill.kwh),
  n.count(bill.maxKw),
  n.count(bill.kvarh),
  (bill.pfPercent / 100).toFixed(2).replace('.', n.isComma ? ',' : '.'),
  ...lineNames.map((line) => n.money(bill.cents[line])),
  n.money(totalOf(bill)),
];
const heads = ['kWh', 'Max kW', 'kVARh', 'Power factor', ...lineNames.map((line) => names[line]), 'Total charges'];
const inclusive = (bill: TrueBill, d: DateStyle): [string, string] => [
  d.write(isoOf(bill, 1)),
  d.write(isoOf(bill, lastDay(bill))),
];
const exclusive = (bill: TrueBill, d: DateStyle): [string, string] => [
  d.write(isoOf(bill, 1)),
  d.write(isoOf(bill, lastDay(bill) + 1)),
];
const turned = (rows: Rows): Rows => (rows[0] ?? []).map((_, column) => rows.map((row) => row[column] ?? null));
const monthName = (bill: TrueBill): string => `${monthsShort[bill.month - 1]} ${bill.year}`;

const itemRows = (bill: TrueBill, at: number, n: NumberStyle, d: DateStyle): Rows => {
  const head = [`IN-${100 + at}`, ...inclusive(bill, d)];
  const rate = (text: string): string => (n.isComma ? text.replace('.', ',') : text);
  return [
    [...head, 'Maximum demand', n.count(bill.maxKw), 'kW', null, null],
    [...head, 'Reactive energy', n.count(bill.kvarh), 'kvarh', null, null],
    [...head, 'Power factor', rate((bill.pfPercent / 100).toFixed(2)), null, null, null],
    [...head, names.energy, n.count(bill.kwh), 'kWh', rate('0.05'), n.money(bill.cents.energy)],
    [...head, names.demand, n.count(bill.maxKw), 'kW', rate('12.50'), n.money(bill.cents.demand)],
    [...head, names.reactive, null, null, null, n.money(bill.cents.reactive)],
    [...head, names.tax, null, null, null, n.money(bill.cents.tax)],
    [...head, 'Total', null, null, null, n.money(totalOf(bill))],
  ];
};
const itemHeads = ['Invoice no', 'From', 'To', 'Description', 'Quantity', 'Unit', 'Rate', 'Amount'];

const layouts: Layout[] = [
  { name: 'last day included', write: (n, d) => [['From', 'To', ...heads], ...trueYear.map((bill) => [...inclusive(bill, d), ...figures(bill, n)])] },
  { name: 'last day not included', write: (n, d) => [['Start date', 'End date', ...heads], ...trueYear.map((bill) => [...exclusive(bill, d), ...figures(bill, n)])] },
  { name: 'newest first', write: (n, d) => [['From', 'To', ...heads], ...[...trueYear].reverse().map((bill) => [...inclusive(bill, d), ...figures(bill, n)])] },
  { name: 'read date and days', write: (n, d) => [['Read date', 'Days', ...heads], ...trueYear.map((bill) => [exclusive(bill, d)[1], String(lastDay(bill)), ...figures(bill, n)])] },
  { name: 'both days in a cell', write: (n, d) => [['Billing period', ...heads], ...trueYear.map((bill) => [inclusive(bill, d).join(' to '), ...figures(bill, n)])] },
  { name: 'months', write: (n) => [['Month', ...heads], ...trueYear.map((bill) => [monthName(bill), ...figures(bill, n)])] },
  { name: 'year and month', write: (n) => [['Year', 'Month', ...heads], ...trueYear.map((bill) => [String(bill.year), monthsShort[bill.month - 1] ?? '', ...figures(bill, n)])] },
  { name: 'months under a title with the years', write: (n) => [['Electricity 2024/25'], ['Month', ...heads], ...trueYear.map((bill) => [monthsShort[bill.month - 1] ?? '', ...figures(bill, n)])] },
  { name: 'a column a month', write: (n) => turned([['Item', ...heads], ...trueYear.map((bill) => [monthName(bill), ...figures(bill, n)])]) },
  { name: 'a column a bill with both days', write: (n, d) => turned([['From', 'To', ...heads], ...trueYear.map((bill) => [...inclusive(bill, d), ...figures(bill, n)])]) },
  { name: 'preamble, accounts and a row of sums', write: (n, d) => [
      ['Account:', '88-1'], ['Brackwater Electric'], [null],
      ['Account', 'Rate class', 'Invoice date', 'From', 'To', ...heads],
      ...trueYear.map((bill) => ['88-1', 'LP-4', exclusive(bill, d)[1], ...inclusive(bill, d), ...figures(bill, n)]),
      ['Total', null, null, null, null, n.count(trueYear.reduce((sum, { kwh }) => sum + kwh, 0)), null, null, null, null, null, null, null, n.money(trueYear.reduce((sum, bill) => sum + totalOf(bill), 0))],
    ] },
  { name: 'groups, names and units in three rows', write: (n, d) => [
      ['Billing period', null, 'Usage', null, null, null, 'Charges', null, null, null, null],
      ['From', 'To', 'Energy', 'Demand', 'Reactive', 'Power factor', ...lineNames.map((line) => names[line]), 'Total'],
      [null, null, 'kWh', 'kW', 'kvarh', null, 'EUR', 'EUR', 'EUR', 'EUR', 'EUR'],
      ...trueYear.map((bill) => [...inclusive(bill, d), ...figures(bill, n).map((text) => text.replace(/[$]|CHF /g, ''))]),
    ] },
  { name: 'units in the cells and pf in percent', write: (n, d) => [
      ['From', 'To', 'Consumption', 'Demand', 'Reactive', 'PF', ...lineNames.map((line) => names[line]), 'Total charges'],
      ...trueYear.map((bill) => [...inclusive(bill, d), `${n.count(bill.kwh)} kWh`, `${n.count(bill.maxKw)} kW`, `${n.count(bill.kvarh)} kvarh`, `${bill.pfPercent} %`, ...figures(bill, n).slice(4)]),
    ] },
  { name: 'rates beside the charges', write: (n, d) => [
      ['From', 'To', 'kWh', 'Energy rate', names.energy, 'Max kW', 'Demand rate', names.demand, 'kVARh', 'Power factor', names.reactive, names.tax, 'Total charges'],
      ...trueYear.map((bill) => {
        const [kwh = '', kw = '', kvarh = '', pf = '', energy = '', demand = '', reactive = '', tax = '', total = ''] = figures(bill, n);
        const rate = (text: string): string => (n.isComma ? text.replace('.', ',') : text);
        return [...inclusive(bill, d), kwh, rate('0.05'), energy, kw, rate('12.50'), demand, kvarh, pf, reactive, tax, total];
      }),
    ] },
  { name: 'a row a line', write: (n, d) => [itemHeads, ...trueYear.flatMap((bill, at) => itemRows(bill, at, n, d))] },
  { name: 'a row a line, the invoice in the first alone', write: (n, d) => [
      itemHeads,
      ...trueYear.flatMap((bill, at) => itemRows(bill, at, n, d).map((row, line) => (line === 0 ? row : [null, null, null, ...row.slice(3)]))),
    ] },
]; // prettier-ignore

/** A bill as its layout prints it, without what only some layouts carry: invoice, quantities and rates of lines. */
const plain = ({ period, quantities, charges, total }: BillRecord) => {
  const { kwh, maxKw, kvarh, powerFactor } = quantities;
  return {
    period,
    quantities: { kwh, maxKw, kvarh, powerFactor },
    charges: charges.map(({ label, amount }) => ({ label, amount })),
    total,
  };
};

const expected = trueYear.map((bill) => ({
  period: { from: isoOf(bill, 1), to: isoOf(bill, lastDay(bill) + 1) },
  quantities: { kwh: bill.kwh, maxKw: bill.maxKw, kvarh: bill.kvarh, powerFactor: bill.pfPercent / 100 },
  charges: lineNames.map((line) => ({ label: names[line], amount: bill.cents[line] / 100 })),
  total: totalOf(bill) / 100,
}));

describe.each(layouts)('a year of bills with $name', ({ write }) => {
  it.each(numberStyles)('is read back from figures like $name, in every style of dates', async (numbers) => {
    for (const dates of dateStyles) {
      const rows = write(numbers, dates);
      const where = `${dates.name}, ${numbers.name}`;
      const { bills, report } = await readTable(bytesOf(csv(rows, numbers.isComma ? ';' : ',')), {
        timeZone: dates.timeZone,
      });
      expect(bills.map(plain), where).toEqual(expected);
      expect(
        report.notes.filter((note) => ['sum-differs', 'rate-differs', 'period-gap'].includes(note.code)),
        where,
      ).toEqual([]);
    }
  });

  it.each(['xlsx', 'ods'] as const)('is read back from %s', async (bookType) => {
    for (const [at, numbers] of numberStyles.entries()) {
      const dates = dateStyles[at % dateStyles.length] ?? dateStyles[0];
      if (!dates) continue;
      const { bills } = await readTable(workbook(write(numbers, dates), { bookType }), { timeZone: dates.timeZone });
      expect(bills.map(plain), `${dates.name}, ${numbers.name}`).toEqual(expected);
    }
  });
});
