/** Words for kinds of days and their bits. `mon` ... `sun` and `weekdays` hold on no holiday; `weekends` on holidays too. */
export const dayTokens: ReadonlyMap<string, number> = new Map([
  ['every day', 1],
  ['weekdays', 2],
  ['weekends', 4],
  ['holidays', 8],
  ['sun', 16],
  ['mon', 32],
  ['tue', 64],
  ['wed', 128],
  ['thu', 256],
  ['fri', 512],
  ['sat', 1024],
]);

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
