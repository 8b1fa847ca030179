import { isBlankWord, parseNumberText } from './numbers';
import { unitMeaning } from './units';

/** A figure of a bill as its cell shows it. */
export interface BillFigure {
  /** NaN if the cell holds no figure. */
  value: number;
  /** Unit of energy, power or reactive power written in the cell. */
  unit?: string;
  /** Sign or code of a currency as written. */
  currency?: string;
  /** A price: what it is asked for, as in `$/kWh`. */
  per?: string;
  /** Written in cents or pence. */
  isMinor?: boolean;
  isPercent?: boolean;
  /** Sense of a power factor. */
  sense?: 'lagging' | 'leading';
}

const codes =
  'USD|EUR|GBP|CAD|AUD|NZD|CHF|INR|ZAR|PLN|SEK|NOK|DKK|CZK|HUF|RON|BGN|TRY|ILS|JPY|CNY|KRW|THB|MYR|SGD|HKD|IDR|PHP|VND|MXN|BRL|CLP|COP|PEN|ARS|UYU|EGP|KES|GHS|NGN|MAD|AED|SAR|KWD';

/** ISO codes of currencies met in bills. */
export const currencyCodes: ReadonlySet<string> = new Set(codes.split('|'));

/** A sign or code of a currency. */
export const currencySign = new RegExp(
  `US\\$|CA\\$|C\\$|AU\\$|A\\$|NZ\\$|HK\\$|S\\$|R\\$|[$€£¥₹₩₺₪฿₫]|(?<![A-Z])(?:${codes})(?![A-Z])|(?<![A-Za-z])Rs\\.?(?![A-Za-z])|zł|Kč`,
  'i',
);

const core = /^([^\d]*?)([.,]?\d(?:[\d.,'’\s]*\d)?[.,]?(?:e[+-]?\d+)?)([^\d]*)$/i;
const lagWord = /(?<![a-z])(lag(ging|g)?|ind(uctive|uktiv|uctivo|uttivo)?\.?|l|i)(?![a-z])/i;
const leadWord = /(?<![a-z])(lead(ing)?|cap(acitive|acitivo|acitif)?\.?|kap(azitiv)?\.?|c)(?![a-z])/i;

/** Words around a figure, taken away one by one; what is left over makes the cell no figure. */
class Affix {
  constructor(public text: string) {}

  take(pattern: RegExp): string {
    const found = pattern.exec(this.text)?.[0] ?? '';
    if (found !== '') this.text = this.text.replace(found, ' ');
    return found.trim();
  }
}

/**
 * Reads a cell of a bill: signs and codes of currencies, brackets, a trailing minus, CR and DR, per cent, units, the sense of
 * a power factor, prices such as `$0.08/kWh`. CR is a credit to the customer: below nought.
 */
export function readFigure(text: string, decimalMark: '.' | ','): BillFigure {
  // A line feed parts what stands before the figure from what stands after it.
  const cell = text.trim().replaceAll('\n', ' ');
  if (cell.length > 60 || isBlankWord(cell)) return { value: Number.NaN };
  const parts = core.exec(cell.replace(/^'/, ''));
  if (!parts) return { value: parseNumberText(cell, decimalMark) };
  const affix = new Affix(`${parts[1] ?? ''}\n${parts[3] ?? ''}`);
  const per = affix.take(/(\/|\bper\b)\s*[a-z]+/i).replace(/^(\/|per)\s*/i, '');
  const figure: BillFigure = { value: Number.NaN, ...(per ? { per } : {}) };
  const currency = affix.take(currencySign);
  if (currency) figure.currency = currency;
  if (affix.take(/(?<![a-z])(cents?|cts?|pence|¢)(?![a-z])/i) || (per && affix.take(/(?<![a-z])[cp](?![a-z])/i)))
    figure.isMinor = true;
  const credit = affix.take(/(?<![a-z])(cr|dr|credit|debit)\.?(?![a-z])/i);
  if (affix.take(/%|(?<![a-z])percent(?![a-z])/i)) figure.isPercent = true;
  affix.take(/(?<![a-z])(cos\s*(phi|fi|φ|ϕ)?|pf|power factor)(?![a-z])\s*[:=]?/i);
  takeUnit(affix, figure);
  const brackets = affix.take(/^[^\n]*\(/) !== '' && affix.take(/\)/) !== '';
  const sign = affix.take(/[-−–]/);
  affix.take(/\+/);
  if (!/^[\s\n.:]*$/.test(affix.text)) return { value: parseNumberText(cell, decimalMark) };
  const size = parseNumberText((parts[2] ?? '').replace(/[.,]$/, ''), decimalMark);
  const isBelow = (brackets !== (sign !== '')) !== /^c/i.test(credit);
  return { ...figure, value: isBelow ? 0 - size : size };
}

function takeUnit(affix: Affix, figure: BillFigure): void {
  const suffix = affix.text.split('\n')[1] ?? '';
  const word = (suffix.match(/[a-z]+/gi) ?? []).find((one) => one.length > 1 && unitMeaning(one) !== null);
  if (word) {
    affix.take(new RegExp(`(?<![a-z])${word}(?![a-z])\\.?`, 'i'));
    figure.unit = unitMeaning(word)?.unit ?? word;
  } else if (affix.take(leadWord)) figure.sense = 'leading';
  else if (affix.take(lagWord)) figure.sense = 'lagging';
}

/** Whether a cell holds a figure with either decimal mark. */
export function isFigure(text: string): boolean {
  return /\d/.test(text) && (!Number.isNaN(readFigure(text, '.').value) || !Number.isNaN(readFigure(text, ',').value));
}

/** The digits and marks of a cell alone, for telling the decimal mark; '' where it is no figure. */
export function figureDigits(text: string): string {
  return isFigure(text) ? (core.exec(text.trim().replace(/^'/, ''))?.[2] ?? '') : '';
}
