import { addDays } from '../../core/load';

const months = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');

/** Name of a bill by the month its last day lies in: a period to 11 Aug 2025 (exclusive) is "Aug 2025". */
export function billName(periodTo: string): string {
  return monthName(addDays(periodTo, -1));
}

/** Month of a local date: "Aug 2025". */
export const monthName = (date: string) => `${months[Number(date.slice(5, 7)) - 1]} ${date.slice(0, 4)}`;
