import type { TrailView } from '../../schemas/trail';
import { formatCount, formatDate } from '../ui/format';

/** A kind of row in words: `TariffChoice` -> "tariff choice". */
export function subjectWords(subject: string): string {
  const words = subject.replace(/Row$/, '').replace(/([a-z])([A-Z])/g, '$1 $2');
  return words.toLowerCase();
}

/** How many changes there are and when the newest was. */
export function trailHeading({ count, rows, filter, people }: TrailView): string {
  if (count === 0) return 'Nothing was changed that fits this.';
  const who = filter.who === 0 ? ' by the system' : '';
  const name = filter.who ? people.find((person) => person.id === filter.who)?.name : undefined;
  const what = filter.subject ? ` of ${subjectWords(filter.subject)}${filter.row ? ` ${filter.row}` : ''}` : '';
  const newest = rows[0] ? `; the newest of them on this page on ${formatDate(rows[0].at.slice(0, 10))}` : '';
  return `${formatCount(count, 'change')}${what}${name ? ` by ${name}` : who}${newest}.`;
}
