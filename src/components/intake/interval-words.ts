import { formatNumber, formatQuantity } from '../ui/format';

/** `15-minute readings`, `hourly readings`. */
export const readingsOf = (stepMinutes: number) =>
  stepMinutes === 60 ? 'hourly readings' : `${stepMinutes}-minute readings`;

/** A span in words: a year, or its days. */
export function spanInWords(fromMs: number, toMs: number): string {
  const days = Math.round((toMs - fromMs) / 86_400_000);
  if (days === 365 || days === 366) return 'One year';
  return days === 1 ? 'One day' : `${formatNumber(days)} days`;
}

/** A share of readings present, rounded down, so that all is only said where nothing is missing. */
export function presentInWords(present: number, intervals: number): string {
  if (present >= intervals) return 'all of it present';
  return `${formatQuantity(Math.floor((present / intervals) * 10_000) / 100, '%', { upTo: 2 })} of it present`;
}

/** A figure that a file may not carry: NaN does not survive JSON and comes back as null. */
export const isKnown = (value: number | null | undefined): value is number =>
  typeof value === 'number' && !Number.isNaN(value);

/** The name people give an interval: quarter-hours, half-hours, hours. */
export function intervalName(stepMinutes: number): string {
  const names: Record<number, string> = { 15: 'Quarter-hours', 30: 'Half-hours', 60: 'Hours' };
  return names[stepMinutes] ?? `Intervals of ${stepMinutes} min`;
}
