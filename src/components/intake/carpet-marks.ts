import type { CarpetMark } from '../charts/carpet';
import { formatDate, formatDateTime, formatTime } from '../ui/format';
import type { ReadingGap } from '../../schemas/intervals';

/** Gaps with a number on the picture and a slip beside it. */
export const numberedGaps = 6;

const minuteOfDay = (ms: number, timeZone: string) => {
  const [hour = 0, minute = 0] = formatTime(ms, timeZone).split(':').map(Number);
  return hour * 60 + minute;
};

const dateOf = (ms: number, timeZone: string) =>
  new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(ms);

/** The longest gaps, in order of time. */
export function longestGaps(gaps: ReadingGap[]): ReadingGap[] {
  return [...gaps]
    .sort((a, b) => b.intervals - a.intervals)
    .slice(0, numberedGaps)
    .sort((a, b) => a.fromMs - b.fromMs);
}

/** Where a stretch stands on the picture; one over several days is marked where it begins. */
export function markOf({ fromMs, toMs }: { fromMs: number; toMs: number }, timeZone: string) {
  const fromMinute = minuteOfDay(fromMs, timeZone);
  return {
    date: dateOf(fromMs, timeZone),
    fromMinute,
    toMinute: Math.min(1440, fromMinute + (toMs - fromMs) / 60_000),
  };
}

/** The longest gaps as numbered marks. */
export function gapMarks(gaps: ReadingGap[], timeZone: string): CarpetMark[] {
  return longestGaps(gaps).map((gap, index) => ({
    label: String(index + 1),
    ...markOf(gap, timeZone),
    kind: 'missing',
  }));
}

/** `4 Sep 2025, 10:00 to 17:30`, or with both days where the gap runs over midnight. */
export function gapInWords({ fromMs, toMs }: { fromMs: number; toMs: number }, timeZone: string): string {
  const sameDay = dateOf(fromMs, timeZone) === dateOf(toMs - 1, timeZone);
  const end = formatTime(toMs, timeZone);
  if (!sameDay) return `${formatDateTime(fromMs, timeZone)} to ${formatDateTime(toMs, timeZone)}`;
  return `${formatDate(fromMs, timeZone)}, ${formatTime(fromMs, timeZone)} to ${end === '00:00' ? '24:00' : end}`;
}
