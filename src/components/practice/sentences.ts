import type { PracticeView } from '../../schemas/practice';
import { formatHours, formatMoney, formatSpelled } from '../ui/format';

/** The finding: what the hours are worth that nobody has billed, and where the oldest lie. */
export function practiceHeading({ totals, progress }: PracticeView): string {
  const worked = totals.filter((total) => total.minutes > 0);
  if (worked.length === 0) return 'No hours are logged yet, so there is no work in progress.';
  const sums = worked.filter((total) => total.amountMinor > 0).map((t) => formatMoney(t.amountMinor, t.currency));
  const hours = formatHours(worked.reduce((sum, total) => sum + total.minutes, 0));
  const amount = sums.length > 0 ? `${sums.join(' and ')} of work is in progress` : `${hours} hours are in progress`;
  const oldest = [...progress].sort((a, b) => (b.oldestDays ?? -1) - (a.oldestDays ?? -1))[0];
  const age = oldest?.oldestDays ? `; the oldest hours, ${oldest.oldestDays} days, lie on ${oldest.code}` : '';
  return `${amount}${age}.`;
}

/** The line below: hours, engagements, what has no rate. */
export function practiceLead({ name, totals, progress, utilisation }: PracticeView, date: string): string {
  const minutes = totals.reduce((sum, total) => sum + total.minutes, 0);
  const unrated = totals.reduce((sum, total) => sum + total.unratedMinutes, 0);
  const people = utilisation.length;
  const parts = [
    `${date}. ${name}: ${formatSpelled(people)} ${people === 1 ? 'person' : 'people'}`,
    `${formatSpelled(progress.length)} ${progress.length === 1 ? 'engagement' : 'engagements'}`,
    `${formatHours(minutes)} hours logged`,
  ];
  const gap = unrated > 0 ? ` ${formatHours(unrated)} billable hours have no rate and are worth nothing here.` : '';
  return `${parts.join(', ')}.${gap}`;
}
