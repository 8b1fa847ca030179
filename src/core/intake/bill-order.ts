import { shareOf, type ColumnProfile } from './cells';
import type { Grid } from './grid';
import { findDateOrder, orderInWords, type OrderFinding } from './stamp-order';
import { StampScanner } from './stamps';
import type { DateOrder } from './column-map';

/** Columns of dates whose order is looked for. */
export interface OrderInput {
  grid: Grid;
  rows: readonly number[];
  timeZone: string;
  from: ColumnProfile | undefined;
  to: ColumnProfile | undefined;
  days: ColumnProfile | undefined;
}

/** Longest billing period that speaks for an order of dates. [d] */
const longestPeriod = 100;

/**
 * Order of the dates of billing periods: what `findDateOrder` settles outright stands; else the order in which periods have
 * the length of a month or two, meet each other and have the days printed; else the custom of the zone.
 */
export function findPeriodOrder(input: OrderInput): OrderFinding {
  const dated = input.from ?? input.to;
  if (!dated) return { order: 'YMD', tests: [[true, 'Months are named']] };
  if (shareOf(dated, 'number') > 0.5)
    return { order: 'serial', tests: [[true, 'Figures of the size of spreadsheet dates']] };
  const plain = findDateOrder(input.grid, dated.index, input.rows, input.timeZone);
  if (plain.tests.some(([isMet, why]) => isMet && !why.includes('jump'))) return plain;
  const scored = (['DMY', 'MDY', 'YMD'] as DateOrder[])
    .map((order) => ({ order, score: scoreOf(input, order) }))
    .sort((a, b) => b.score - a.score);
  const [best, second] = scored;
  if (!best || !second || best.score === second.score)
    return { ...plain, tests: [[false, `Periods fit more than one order; ${orderInWords(plain.order)} is taken`]] };
  return {
    order: best.order,
    tests: [[true, `As ${orderInWords(best.order)} the periods are of a month's length and follow each other`]],
  };
}

function scoreOf(input: OrderInput, order: DateOrder): number {
  const scanner = new StampScanner();
  const dayOf = (row: number, column: ColumnProfile | undefined): number =>
    column && input.grid.scan(row, column.index, scanner) && scanner.resolve(order) ? scanner.day : Number.NaN;
  const periods = input.rows
    .map((row) => ({
      from: dayOf(row, input.from),
      to: dayOf(row, input.to),
      days: input.days ? input.grid.number(row, input.days.index, '.') : Number.NaN,
    }))
    // Lines of one bill repeat its dates.
    .filter(({ from, to }, at, all) => !(from === all[at - 1]?.from && to === all[at - 1]?.to));
  let score = 0;
  periods.forEach((period, at) => {
    const length = period.to - period.from;
    if (length > 0 && length <= longestPeriod) score += 1;
    if (Math.abs(length - period.days) <= 1) score += 1;
    const next = periods[at + 1];
    if (!next) return;
    const isMeeting = [0, 1].includes(next.from - period.to) || [0, 1].includes(period.from - next.to);
    const leap = Math.abs(input.from ? next.from - period.from : next.to - period.to);
    if (isMeeting || (!(input.from && input.to) && leap >= 20 && leap <= longestPeriod)) score += 1;
  });
  return score;
}
