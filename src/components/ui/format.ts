/**
 * The only place where numbers, money and dates become text: grouping as in 1,234.5, the true minus sign,
 * no-break spaces before units, days as 10 Jul 2025. Nothing here converts between units.
 */
import { TZDate } from '@date-fns/tz';
import { addDays, differenceInCalendarDays, format, parseISO } from 'date-fns';
import { minorUnitDecimals } from '../../core/units';

const noBreak = '\u00a0';
const minus = '\u2212';

const formatters = new Map<string, Intl.NumberFormat>();
function numberFormat(minimum: number, maximum: number): Intl.NumberFormat {
  const key = `${minimum}/${maximum}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.NumberFormat('en-US', { minimumFractionDigits: minimum, maximumFractionDigits: maximum });
  formatters.set(key, made);
  return made;
}

export interface NumberStyle {
  /** Decimals, always shown. Default 0. */
  decimals?: number;
  /** Decimals at most; trailing noughts are dropped. Overrules `decimals`. */
  upTo?: number;
  /** A plus sign before positive values. */
  signed?: boolean;
}

/** `-1234.5` -> `−1,234.5`. A value that rounds to nought carries no sign. */
export function formatNumber(value: number, style: NumberStyle = {}): string {
  const { decimals = 0, upTo, signed = false } = style;
  const digits = numberFormat(upTo === undefined ? decimals : 0, upTo ?? decimals).format(Math.abs(value));
  const isNought = !/[1-9]/.test(digits);
  if (isNought || Number.isNaN(value)) return digits;
  if (value < 0) return `${minus}${digits}`;
  return signed ? `+${digits}` : digits;
}

/** `1334, 'kvar'` -> `1,334 kvar`, held together by a no-break space. */
export function formatQuantity(value: number, unit: string, style: NumberStyle = {}): string {
  return `${formatNumber(value, style)}${noBreak}${unit}`;
}

/** Reactive power without a bare sign: `637` -> `637 delivered`, `-382` -> `382 absorbed`. */
export function formatDelivered(kvarDelivered: number): string {
  return `${formatNumber(Math.abs(kvarDelivered))} ${kvarDelivered < 0 ? 'absorbed' : 'delivered'}`;
}

/** The same as what a motor does: `637` -> `delivers 637 kvar`, `-382` -> `absorbs 382 kvar`. */
export function formatDelivers(kvarDelivered: number): string {
  return `${kvarDelivered < 0 ? 'absorbs' : 'delivers'} ${formatQuantity(Math.abs(kvarDelivered), 'kvar')}`;
}

/** A fraction as per cent: `0.9991, 2` -> `99.91 %`. */
export function formatPercent(fraction: number, decimals = 0): string {
  return formatQuantity(fraction * 100, '%', { decimals });
}

/** Decimals of a currency: 2 for USD, 0 for JPY, 3 for KWD. */
export const currencyDecimals = (currency: string): number => minorUnitDecimals(currency);

export interface MoneyStyle {
  /** Whole units only, for sentences and charts: `71,884 USD`. */
  whole?: boolean;
  signed?: boolean;
}

/** Minor units without the currency, for columns whose head names it: `1552491, 'USD'` -> `15,524.91`. */
export function formatAmount(amountMinor: number, currency: string, style: MoneyStyle = {}): string {
  const places = currencyDecimals(currency);
  return formatNumber(amountMinor / 10 ** places, { decimals: style.whole ? 0 : places, signed: style.signed });
}

/** Minor units with the currency: `1552491, 'USD'` -> `15,524.91 USD`. */
export function formatMoney(amountMinor: number, currency: string, style: MoneyStyle = {}): string {
  return `${formatAmount(amountMinor, currency, style)}${noBreak}${currency}`;
}

/** Major units, as the core gives them, with the currency: `71884.36, 'USD', { whole: true }` -> `71,884 USD`. */
export function formatMajor(amount: number, currency: string, style: MoneyStyle = {}): string {
  const decimals = style.whole ? 0 : currencyDecimals(currency);
  return `${formatNumber(amount, { decimals, signed: style.signed })}${noBreak}${currency}`;
}

/** A local date `YYYY-MM-DD` or an instant in ms with its zone. */
export type Moment = string | number;

function dateOf(moment: Moment, timeZone = 'UTC'): Date {
  if (typeof moment === 'number') return new TZDate(moment, timeZone);
  return /^\d{4}-\d{2}-\d{2}$/.test(moment) ? parseISO(moment) : new TZDate(Date.parse(moment), timeZone);
}

/** `2025-07-10` -> `10 Jul 2025`. */
export function formatDate(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'd MMM yyyy');
}

/** `2025-07-10` -> `10 Jul`. */
export function formatDay(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'd MMM');
}

/** `2026-12-18` -> `Fri 18 Dec`. */
export function formatWeekday(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'EEE d MMM');
}

/** `2026-12-18` -> `Fri 18 Dec 2026`. */
export function formatLongDate(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'EEE d MMM yyyy');
}

/** `2025-07-10` -> `Jul 2025`. */
export function formatMonth(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'MMM yyyy');
}

/** A half-open period as people write it, last day included: `2025-07-10, 2025-08-11` -> `10 Jul – 10 Aug`. */
export function formatPeriod(from: string, to: string, style: { year?: boolean } = {}): string {
  const last = addDays(parseISO(to), -1);
  if (!style.year) return `${formatDay(from)} – ${format(last, 'd MMM')}`;
  return `${formatDate(from)} to ${format(last, 'd MMM yyyy')}`;
}

/** What people call a bill: the month of its middle day. 2 Nov to 1 Dec 2025 is `Nov 2025`. */
export function formatBillName({ from, to }: { from: string; to: string }): string {
  const first = parseISO(from);
  return format(addDays(first, Math.floor((differenceInCalendarDays(parseISO(to), first) - 1) / 2)), 'MMM yyyy');
}

/** An instant as local time: `17:15`. */
export function formatTime(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'HH:mm');
}

/** An instant as local date and time: `4 Aug 2025, 17:15`. */
export function formatDateTime(moment: Moment, timeZone?: string): string {
  return format(dateOf(moment, timeZone), 'd MMM yyyy, HH:mm');
}

/** Minutes as decimal hours: `105` -> `1.75`. */
export function formatHours(minutes: number): string {
  return formatNumber(minutes / 60, { decimals: 2 });
}

/** Minutes as a clock: `102` -> `1:42`. */
export function formatClock(minutes: number): string {
  return `${Math.floor(minutes / 60)}:${String(Math.round(minutes % 60)).padStart(2, '0')}`;
}

/** A payback: `1.65` years -> `20 months`, a month at least; `0` -> `at once`; `null` -> `never`. */
export function formatPayback(years: number | null): string {
  if (years === null) return 'never';
  if (years === 0) return 'at once';
  const months = Math.max(1, Math.round(years * 12));
  return `${formatNumber(months)} ${months === 1 ? 'month' : 'months'}`;
}

/** Time left of a long job, in words that do not pretend to be exact: `about 20 s`, `about 3 min`. */
export function formatTimeLeft(seconds: number): string {
  if (seconds < 90) return `about ${Math.max(1, Math.round(seconds))}${noBreak}s`;
  return `about ${Math.round(seconds / 60)}${noBreak}min`;
}

/** Size of a file: `1_900_000` -> `1.9 MB`. */
export function formatBytes(bytes: number): string {
  if (bytes < 1000) return formatQuantity(bytes, 'B');
  if (bytes < 1_000_000) return formatQuantity(bytes / 1000, 'kB');
  return formatQuantity(bytes / 1_000_000, 'MB', { decimals: 1 });
}

/** `2, 'finding'` -> `2 findings`; an irregular plural is given. */
export function formatCount(count: number, singular: string, plural = `${singular}s`): string {
  return `${formatNumber(count)} ${count === 1 ? singular : plural}`;
}

/** The first letter made a capital, for the beginning of a sentence. */
export const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

const conjunction = new Intl.ListFormat('en', { type: 'conjunction' });

/** Several in a sentence: `M-1 and M-2`, `A, B, and C`. */
export const formatList = (words: readonly string[]) => conjunction.format(words);

/** Numbers below thirteen in words, for sentences: `12` -> `twelve`. */
export function formatSpelled(count: number): string {
  const words = 'no one two three four five six seven eight nine ten eleven twelve'.split(' ');
  return words[count] ?? formatNumber(count);
}
