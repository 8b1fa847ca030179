import { formatDateTime, formatPeriod } from '../../components/ui/format';

/** A half-open period in words, last day included: `2026-05-11, 2026-06-10` -> `11 May 2026 to 9 Jun 2026`. */
export const daysInWords = ({ from, to }: { from: string; to: string }) => formatPeriod(from, to, { year: true });

/** A span of instants in the site's time: `10 Jul 2025, 00:00 to 10 Jul 2026, 00:00`. */
export const spanInWords = (fromMs: number, toMs: number, timeZone: string) =>
  `${formatDateTime(fromMs, timeZone)} to ${formatDateTime(toMs, timeZone)}`;
