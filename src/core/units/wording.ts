import { decimalsOf, roundToStep } from './rounding';
import { minorUnitDecimals, roundToMinorUnit } from './currency';

/**
 * A number as explanations write it: thousands commas, a decimal point, no exponent.
 *
 * @param value  Any finite number
 * @param step  Rounding step of the value; its decimals are all written. Without it up to six decimals are written (three from
 *   1,000 on, six significant ones below 1) and closing zeros left away
 */
export function wordNumber(value: number, step?: number): string {
  if (!Number.isFinite(value)) return 'unknown';
  if (step !== undefined) return withCommas(value.toFixed(Math.min(20, decimalsOf(step))));
  const size = Math.abs(value);
  if (size === 0) return '0';
  const decimals = size >= 1000 ? 3 : size >= 1 ? 6 : Math.min(18, 5 - Math.floor(Math.log10(size)));
  const rounded = roundToStep(value, { step: Number(`1e-${decimals}`), mode: 'nearest' });
  return withCommas(rounded.toFixed(decimals).replace(/\.?0+$/, ''));
}

/** An amount in its currency's minor units followed by the code: `27,600.00 EUR`. */
export function wordMoney(amount: number, currency: string): string {
  return `${withCommas(roundToMinorUnit(amount, currency).toFixed(minorUnitDecimals(currency)))} ${currency}`;
}

function withCommas(text: string): string {
  const [whole = '', fraction] = text.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ',');
  const digits = fraction === undefined ? grouped : `${grouped}.${fraction}`;
  return /^-[0.,]*$/.test(digits) ? digits.slice(1) : digits;
}

/** A whole number as a rank: 3rd, 5th, 11th, 13th, 21st. */
export function wordOrdinal(count: number): string {
  const teens = count % 100 >= 11 && count % 100 <= 13;
  return `${count}${(!teens && { 1: 'st', 2: 'nd', 3: 'rd' }[count % 10]) || 'th'}`;
}
