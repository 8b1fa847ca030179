import { addDays, dayNumber, isoDate } from '../../core/load';
import { fromMinorUnits, wordMoney } from '../../core/units';

const months = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');

/** Month of a local date: "Aug 2025". */
export const monthName = (date: string) => `${months[Number(date.slice(5, 7)) - 1]} ${date.slice(0, 4)}`;

/** Name of a bill: the month most of its days lie in, that of its middle day. 2 Nov to 1 Dec 2025 is "Nov 2025". */
export function billName({ from, to }: { from: string; to: string }): string {
  const first = dayNumber(from);
  const last = dayNumber(addDays(to, -1));
  return monthName(isoDate(Math.floor((first + last) / 2)));
}

/** An amount in words of the screen, with the true minus sign: "−14,144.66 USD". */
export const moneyInWords = (minor: number, currency: string) =>
  wordMoney(fromMinorUnits(minor, currency), currency).replace(/^-/, '\u2212');
