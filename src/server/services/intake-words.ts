import { TZDate } from '@date-fns/tz';
import { addDays, format, parseISO } from 'date-fns';

/** A half-open period in words, last day included: `2026-05-11, 2026-06-10` -> `11 May 2026 to 9 Jun 2026`. */
export function wordDays({ from, to }: { from: string; to: string }): string {
  return `${format(parseISO(from), 'd MMM yyyy')} to ${format(addDays(parseISO(to), -1), 'd MMM yyyy')}`;
}

/** A span of instants in the site's time: `10 Jul 2025 00:00 to 10 Jul 2026 00:00`. */
export function wordSpan(fromMs: number, toMs: number, timeZone: string): string {
  const word = (ms: number) => format(new TZDate(ms, timeZone), 'd MMM yyyy HH:mm');
  return `${word(fromMs)} to ${word(toMs)}`;
}
