import type { Test } from './evidence';
import type { Grid } from './grid';
import { StampScanner } from './stamps';
import type { DateOrder } from './column-map';

/** Order of day, month and year, with what speaks for it. */
export interface OrderFinding {
  order: DateOrder;
  tests: Test[];
}

const candidates: DateOrder[] = ['DMY', 'MDY', 'YMD'];
const orderWords: Record<DateOrder, string> = {
  DMY: 'day, month, year',
  MDY: 'month, day, year',
  YMD: 'year, month, day',
  serial: 'days since 1899-12-30',
  epoch: 'time since 1970 in UTC',
};

/** The order in words. */
export function orderInWords(order: DateOrder): string {
  return orderWords[order];
}

/**
 * Decides the order of a date column: a year in front or a month's name settle it; else a number above 12 tells which
 * part is the day; else the order whose rows follow each other evenly; else the zone's custom, to be confirmed.
 */
export function findDateOrder(grid: Grid, column: number, rows: readonly number[], timeZone: string): OrderFinding {
  const scanner = new StampScanner();
  const fits = new Map<DateOrder, { valid: number; even: number; days: number[] }>(
    candidates.map((order) => [order, { valid: 0, even: 0, days: [] }]),
  );
  let read = 0;
  let settled = '';
  let greatest = [0, 0];
  for (const row of rows) {
    if (!grid.scan(row, column, scanner) || !scanner.hasDate) continue;
    read += 1;
    if (scanner.isCompact || scanner.dateField(0).length === 4) settled = 'The year stands in front';
    else if (scanner.hasMonthWord) settled = 'The month is written as a word';
    greatest = greatest.map((most, part) => Math.max(most, scanner.dateField(part).value));
    for (const order of candidates) {
      const fit = fits.get(order);
      if (fit && scanner.resolve(order)) {
        fit.valid += 1;
        fit.days.push(scanner.day);
      }
    }
  }
  if (settled !== '') return { order: settled.includes('word') ? 'DMY' : 'YMD', tests: [[true, settled]] };
  const valid = candidates.filter((order) => (fits.get(order)?.valid ?? 0) >= read * 0.98 && read > 0);
  const scored = (valid.length > 0 ? valid : candidates)
    .map((order) => ({ order, jumps: jumpsOf(fits.get(order)?.days ?? []), valid: fits.get(order)?.valid ?? 0 }))
    .sort((a, b) => b.valid - a.valid || a.jumps - b.jumps);
  const [best, second] = scored;
  if (!best) return { order: 'DMY', tests: [[false, 'No date could be read']] };
  const ranges: Test = [valid.length === 1, `First part runs to ${greatest[0]}, second to ${greatest[1]}`];
  if (valid.length === 1 || !second || second.valid < best.valid) return { order: best.order, tests: [ranges] };
  const custom: DateOrder = /^(America\/(?!.*(Argentina|Sao|Bogota|Lima|Santiago))|US\/)/.test(timeZone)
    ? 'MDY'
    : 'DMY';
  if (best.jumps * 1.5 < second.jumps) {
    return {
      order: best.order,
      tests: [[true, `Only as ${orderWords[best.order]} do the days follow each other without a jump`]],
    };
  }
  const chosen = valid.includes(custom) ? custom : best.order;
  return {
    order: chosen,
    tests: [[false, `No day above 12 tells; ${orderWords[chosen]} is the custom where the site lies`]],
  };
}

/** Sum of leaps between neighbouring days beyond one, so that a calendar in the right order scores least. */
function jumpsOf(days: readonly number[]): number {
  let jumps = 0;
  for (let at = 1; at < days.length; at += 1) {
    const leap = Math.abs((days[at] ?? 0) - (days[at - 1] ?? 0));
    if (leap > 1) jumps += leap - 1;
  }
  return jumps;
}
