import { addMonths } from './dates';
import { quality as grades, type LoadSeries } from './series';
import { localDateOf, localDateStartMs } from './zone';

const minuteMs = 60_000;
const compared = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** Beyond what adding and dividing of doubles does to a printed figure; a choice of ours, far below any meter's last digit. */
const sameFraction = 1e-9;

/** Two series beside each other over a stretch. */
export interface LoadsBeside {
  /** Local date of the first day. */
  from: string;
  /** Intervals for which both have a reading of a common channel, and of these how many agree in all of them. */
  inCommon: number;
  equal: number;
  /** Active energy of the intervals in common in each; null where one of them carries none. [kWh] */
  firstKwh: number | null;
  secondKwh: number | null;
  /** The interval whose mean power differs most, over all channels [kW or kvar]; null where all agree. */
  greatest: { ms: number; channel: (typeof compared)[number]; difference: number } | null;
  /** Intervals that only one of them has. */
  onlyFirst: number;
  onlySecond: number;
}

/**
 * Compares two series of the same grid by calendar months of a zone.
 *
 * @param first  One series
 * @param second  The other, of the same beginning, step and length
 * @param timeZone  IANA zone of the months
 * @returns The months in order, those without a reading of either left out
 * @throws {RangeError} if the grids differ
 */
export function compareLoads(first: LoadSeries, second: LoadSeries, timeZone: string): LoadsBeside[] {
  if (first.startMs !== second.startMs || first.stepMinutes !== second.stepMinutes) {
    throw new RangeError('second must lie on the grid of first');
  }
  const stepMs = first.stepMinutes * minuteMs;
  const count = Math.min(first.kwh.length, second.kwh.length);
  const months: LoadsBeside[] = [];
  for (let at = 0; at < count;) {
    const from = localDateOf(first.startMs + at * stepMs, timeZone);
    const nextMs = localDateStartMs(addMonths(`${from.slice(0, 7)}-01`, 1), timeZone);
    const end = Math.min(count, Math.max(at + 1, Math.ceil((nextMs - first.startMs) / stepMs)));
    const month = compareStretch(first, second, { from, at, end });
    if (month.inCommon + month.onlyFirst + month.onlySecond > 0) months.push(month);
    at = end;
  }
  return months;
}

interface Stretch {
  from: string;
  at: number;
  end: number;
}

function compareStretch(first: LoadSeries, second: LoadSeries, { from, at, end }: Stretch): LoadsBeside {
  const beside: LoadsBeside = {
    from,
    inCommon: 0,
    equal: 0,
    firstKwh: null,
    secondKwh: null,
    greatest: null,
    onlyFirst: 0,
    onlySecond: 0,
  };
  for (let index = at; index < end; index++) {
    const has = [first.quality[index] !== grades.missing, second.quality[index] !== grades.missing];
    if (has[0] && has[1]) compareInterval(beside, first, second, index);
    else if (has[0]) beside.onlyFirst++;
    else if (has[1]) beside.onlySecond++;
  }
  return beside;
}

function compareInterval(beside: LoadsBeside, first: LoadSeries, second: LoadSeries, index: number): void {
  let channels = 0;
  let differing = 0;
  for (const channel of compared) {
    const [a, b] = [first[channel][index]!, second[channel][index]!];
    if (Number.isNaN(a) || Number.isNaN(b)) continue;
    channels++;
    if (channel === 'kwh') {
      beside.firstKwh = (beside.firstKwh ?? 0) + a;
      beside.secondKwh = (beside.secondKwh ?? 0) + b;
    }
    if (Math.abs(a - b) <= sameFraction * Math.max(Math.abs(a), Math.abs(b))) continue;
    differing++;
    const difference = ((b - a) * 60) / first.stepMinutes;
    if (beside.greatest && Math.abs(difference) <= Math.abs(beside.greatest.difference)) continue;
    const ms = first.startMs + index * first.stepMinutes * minuteMs;
    beside.greatest = { ms, channel, difference };
  }
  if (channels === 0) return;
  beside.inCommon++;
  if (differing === 0) beside.equal++;
}
