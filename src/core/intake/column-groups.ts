import { valueRoles, type ColumnPlan } from './extract';
import type { ColumnUse } from './column-map';

const openers: ReadonlySet<string> = new Set(['stamp', 'stamp-begin', 'date']);

/**
 * The columns of each of several tables side by side: every stamp beyond the first opens the next. Columns before the first
 * stamp belong to all of them.
 */
export function columnGroups({ columns, block }: Pick<ColumnPlan, 'columns' | 'block'>): ColumnUse[][] {
  const inOrder = [...columns].sort((a, b) => a.index - b.index);
  const opening = inOrder.filter((use) => openers.has(use.role)).map((use) => use.index);
  const starts = block.sections ?? opening;
  if (starts.length < 2) return [columns];
  const shared = block.sections ? [] : inOrder.filter((use) => use.index < (starts[0] ?? 0));
  const groups = starts.map((start, at) => [
    ...shared,
    ...inOrder.filter((use) => use.index >= start && use.index < (starts[at + 1] ?? Infinity)),
  ]);
  const kept = groups.filter((group) => group.some((use) => valueRoles.has(use.role) || use.role === 'value'));
  return kept.length > 0 ? kept : [columns];
}
