import { dayWords } from '../grammar/words';

/** Words for kinds of days and their bits. */
export const dayTokens: ReadonlyMap<string, number> = new Map(dayWords.map((word, i) => [word, 1 << i]));

/**
 * Bits of {@link dayTokens} that hold on a day.
 *
 * @param weekday  0 Sunday ... 6 Saturday
 */
export function dayKindsOf(weekday: number, isHoliday: boolean): number {
  const isWeekend = weekday === 0 || weekday === 6;
  let kinds = 1;
  if (!isWeekend && !isHoliday) kinds |= 2;
  if (isWeekend) kinds |= 4;
  if (isHoliday) kinds |= 8;
  else kinds |= 16 << weekday;
  return kinds;
}
