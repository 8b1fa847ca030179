import type { EngagementRowView } from '../../schemas/engagement';
import { capital, formatSpelled } from '../ui/format';

/** How many are under way and where they stand: "Two engagements are under way: one at Bills, one at Intervals." */
export function engagementsHeading(rows: EngagementRowView[]): string {
  if (rows.length === 0) return 'No engagement is under way.';
  const at = new Map<string, number>();
  for (const { standsAt } of rows) at.set(standsAt.label, (at.get(standsAt.label) ?? 0) + 1);
  const places = [...at].sort((a, b) => b[1] - a[1]).map(([label, count]) => `${formatSpelled(count)} at ${label}`);
  const subject = rows.length === 1 ? 'One engagement is' : `${capital(formatSpelled(rows.length))} engagements are`;
  return `${subject} under way: ${places.join(', ')}.`;
}
