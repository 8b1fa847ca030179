import { isCalendarDate } from '../../../core/load';
import { typedNumber } from '../../ui/typed-number';

/** A number or a date as it stands on a page. */
export interface Printed {
  kind: 'number' | 'date';
  text: string;
}

/** How a page writes: which sign begins the decimals, and whether the day or the month comes first. */
export interface PageStyle {
  decimal: 'point' | 'comma';
  dates: 'day' | 'month';
}

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];
const figureDate = /^(\d{1,2})[/.-](\d{1,2})[/.-](\d{4}|\d{2})$/;
const dayName = /^(\d{1,2})\.?[ -]([a-z]{3})[a-z]*\.?,?[ -](\d{4})$/i;
const nameDay = /^([a-z]{3})[a-z]*\.? (\d{1,2}),? (\d{4})$/i;

/** Which decimal sign and which order of dates a page shows beyond doubt; null where nothing on it tells. */
export function styleShown(printed: readonly Printed[]): { [Key in keyof PageStyle]: PageStyle[Key] | null } {
  const count = (pattern: RegExp, kind: Printed['kind'] = 'number') =>
    printed.filter((one) => one.kind === kind && pattern.test(bareNumber(one.text))).length;
  // Three digits behind a single sign may be thousands or decimals; any other number of them are decimals.
  const points = count(/,\d{3}\.\d+$|(?<![.\d])\d+\.(\d{1,2}|\d{4,})$/);
  const commas = count(/\.\d{3},\d+$|(?<![,\d])\d+,(\d{1,2}|\d{4,})$/);
  const dates = printed.flatMap(({ kind, text }) => (kind === 'date' && figureDate.exec(text)) || []);
  const figures = printed.flatMap(({ kind, text }) => {
    const found = kind === 'date' ? figureDate.exec(text) : null;
    return found ? [{ first: Number(found[1]), second: Number(found[2]) }] : [];
  });
  const dayFirst = figures.some(({ first }) => first > 12);
  const monthFirst = figures.some(({ second }) => second > 12);
  return {
    decimal: points === commas ? null : points > commas ? 'point' : 'comma',
    dates: dates.length === 0 || dayFirst === monthFirst ? null : dayFirst ? 'day' : 'month',
  };
}

/** Sign of the currency, brackets, minus and credit marks taken off. */
const bareNumber = (text: string) => text.replace(/[^\d.,'\u2019 \u00a0\u202f]/g, '').trim();

/** A credit stands in brackets, behind a minus or before the letters CR. */
const isNegative = (text: string) => /^\(.*\)$|^[-\u2212]|[-\u2212]$|\bCR\b/i.test(text.trim());

/**
 * A number as it is typed into the form, with grouping commas and a decimal point; null where it is none in this style.
 *
 * @example numberTyped('(1.234,50)', 'comma') // => '-1,234.50'
 */
export function numberTyped(text: string, decimal: PageStyle['decimal']): string | null {
  const groups = decimal === 'point' ? /[,'\u2019\s]/g : /[.'\u2019\s]/g;
  const plain = bareNumber(text).replace(groups, '').replace(',', '.');
  const read = typedNumber(plain);
  if (read === undefined || Number.isNaN(read)) return null;
  const [whole = '', fraction] = plain.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ',');
  return `${isNegative(text) ? '-' : ''}${grouped || '0'}${fraction === undefined ? '' : `.${fraction}`}`;
}

function iso(year: string, month: number, day: string): string | null {
  const full = year.length === 2 ? `20${year}` : year;
  const date = `${full}-${String(month).padStart(2, '0')}-${day.padStart(2, '0')}`;
  return isCalendarDate(date) ? date : null;
}

/**
 * A date as a field for dates takes it; null where the calendar has no such day.
 *
 * @example dateTyped('05/11/2026', 'month') // => '2026-05-11'
 */
export function dateTyped(text: string, order: PageStyle['dates']): string | null {
  if (/^\d{4}-\d{2}-\d{2}$/.test(text)) return isCalendarDate(text) ? text : null;
  const figures = figureDate.exec(text);
  if (figures) {
    const [, first = '', second = '', year = ''] = figures;
    return order === 'day' ? iso(year, Number(second), first) : iso(year, Number(first), second);
  }
  const named = dayName.exec(text);
  if (named) return iso(named[3] ?? '', months.indexOf((named[2] ?? '').toLowerCase()) + 1, named[1] ?? '');
  const turned = nameDay.exec(text);
  return turned ? iso(turned[3] ?? '', months.indexOf((turned[1] ?? '').toLowerCase()) + 1, turned[2] ?? '') : null;
}

/** What a number or date of a page is taken as. */
export function typedAs({ kind, text }: Printed, style: PageStyle): string | null {
  return kind === 'date' ? dateTyped(text, style.dates) : numberTyped(text, style.decimal);
}

/** Whether what stands in a field can be what the page says, in either style: figures by their value, words by their letters. */
export function saysTheSame(field: string, text: string): boolean {
  if (field.trim() === '') return false;
  if (field.trim() === text.trim()) return true;
  const readings = [
    numberTyped(text, 'point'),
    numberTyped(text, 'comma'),
    dateTyped(text, 'day'),
    dateTyped(text, 'month'),
  ].filter((reading) => reading !== null);
  const value = typedNumber(field);
  return readings.some((reading) => reading === field || (value !== undefined && typedNumber(reading) === value));
}
