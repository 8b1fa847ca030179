import { currencySign, currencyCodes, readFigure } from './bill-figures';
import { placeOf } from './bill-dates';
import type { BillPlan } from './bill-plan';
import { intakeError } from './errors';
import type { ReadOptions } from './types';

/** Codes a sign may stand for; a sign of many stands for any of them. */
const meanings: Record<string, string[]> = {
  $: ['USD', 'CAD', 'AUD', 'NZD', 'MXN', 'CLP', 'COP', 'ARS', 'SGD', 'HKD', 'UYU'],
  US$: ['USD'], C$: ['CAD'], CA$: ['CAD'], A$: ['AUD'], AU$: ['AUD'], NZ$: ['NZD'], HK$: ['HKD'], S$: ['SGD'], R$: ['BRL'],
  '€': ['EUR'], '£': ['GBP', 'EGP'], '¥': ['JPY', 'CNY'], '₹': ['INR'], RS: ['INR'], 'RS.': ['INR'], '₩': ['KRW'],
  '₺': ['TRY'], '₪': ['ILS'], '฿': ['THB'], '₫': ['VND'], ZŁ: ['PLN'], KČ: ['CZK'],
}; // prettier-ignore

const codesOf = (sign: string): string[] => {
  const upper = sign.toUpperCase();
  return currencyCodes.has(upper) ? [upper] : (meanings[upper] ?? []);
};

interface Seen {
  sign: string;
  codes: string[];
  place: string;
}

/**
 * The currency the amounts are in, by signs and codes in names and cells; undefined where none or only a sign of several is met.
 * @throws {IntakeError} if amounts are in more than one.
 */
export function currencyOf(plan: BillPlan, rows: readonly number[], options: ReadOptions): string | undefined {
  const seen = signsOf(plan, rows);
  let codes: string[] | null = null;
  for (const [at, one] of seen.entries()) {
    const rest: string[] = codes === null ? one.codes : codes.filter((code) => one.codes.includes(code));
    const before = seen.slice(0, at).find((other) => !other.codes.some((code) => one.codes.includes(code))) ?? seen[0];
    if (rest.length === 0 && before)
      throw intakeError(
        `The amounts are in more than one currency: ${before.sign} in ${before.place}, ${one.sign} in ${one.place}.`,
        options.fileName,
        'Bring in the bills of one currency at a time.',
      );
    codes = rest;
  }
  if (codes?.includes('GBP')) return 'GBP';
  return codes?.length === 1 ? codes[0] : undefined;
}

function signsOf(plan: BillPlan, rows: readonly number[]): Seen[] {
  const { grid, columns, decimalMark, block } = plan;
  const money = columns.filter((use) => ['charge', 'total', 'line-amount'].includes(use.role));
  const named = columns.filter((use) => /^(currency|curr|ccy|w[aä]hrung|moneda|valuta|devise)$/i.test(use.name.trim()));
  const seen: Seen[] = [];
  const note = (sign: string, place: string): void => {
    const codes = codesOf(sign);
    if (sign !== '' && codes.length > 0 && !seen.some((one) => one.sign === sign)) seen.push({ sign, codes, place });
  };
  for (const use of money) note(currencySign.exec(use.name)?.[0] ?? '', `“${use.name}”`);
  for (const row of rows) {
    for (const use of money)
      note(readFigure(grid.figureText(row, use.index), decimalMark).currency ?? '', placeOf(plan, row));
    for (const use of named) note(currencySign.exec(grid.text(row, use.index))?.[0] ?? '', placeOf(plan, row));
  }
  if (seen.length > 0) return seen;
  for (let row = 0; row < Math.min(block.firstRow, 40); row += 1) {
    const text = Array.from({ length: Math.min(grid.width(row), 60) }, (_, column) => grid.text(row, column)).join(' ');
    const code = /\b(?:in|amounts?|currency|betr[aä]ge|importes)\b.*?\b([A-Z]{3})\b/.exec(text)?.[1] ?? '';
    if (currencyCodes.has(code)) note(code, placeOf(plan, row));
  }
  return seen;
}
