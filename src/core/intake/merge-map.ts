import type { TableBlock } from './block';
import { IntakeError } from './errors';
import { columnLetter } from './grid';
import type { ColumnMap, ColumnUse } from './column-map';
import type { ColumnEvidence, IntakeProblem } from './types';

/** Roles that only one column can have: a column given one takes it from the column detected for it. */
const soleRoles: ReadonlySet<string> = new Set([
  'stamp', 'stamp-begin', 'stamp-end', 'date', 'time', 'interval-number', 'meter', 'channel', 'unit', 'value', 'quality',
  'active', 'export', 'reactive-lagging', 'reactive-leading', 'reactive-signed', 'apparent', 'power-factor', 'sense',
  'period-from', 'period-to', 'period', 'month', 'year', 'days', 'invoice', 'read-type', 'total',
  'line-label', 'line-quantity', 'line-unit', 'line-rate', 'line-amount',
]); // prettier-ignore

/**
 * Lays the columns a map gives over those detected. A column is found by its position and name, or by its name alone if it
 * has moved.
 * @throws {IntakeError} if the map speaks of a column the file does not have.
 */
export function mergeColumns(
  detected: readonly ColumnUse[],
  map: Partial<ColumnMap>,
  block: TableBlock,
  fileName: string,
): ColumnUse[] {
  const given = map.columns ?? [];
  if (given.length === 0) return [...detected];
  const problems: IntakeProblem[] = [];
  const placed = new Map<number, ColumnUse>();
  for (const use of given) {
    const index = placeOf(use, block.names);
    if (index >= 0) placed.set(index, { ...use, index, name: block.names[index] ?? use.name });
    else if (use.role !== 'ignore') {
      problems.push({
        message: `The column map takes “${use.name || columnLetter(use.index)}” in column ${columnLetter(use.index)} as ${use.role}, but the file has no such column.`,
        where: `${fileName}, columns: ${block.names
          .map((name, at) => name || columnLetter(at))
          .slice(0, 12)
          .join(', ')}`,
        remedy: 'Choose another column map for this file, or match its columns anew.',
      });
    }
  }
  if (problems.length > 0) throw new IntakeError(problems);
  const taken = new Set([...placed.values()].map((use) => use.role).filter((role) => soleRoles.has(role)));
  const timeGiven = [...taken].some((role) => ['stamp', 'stamp-begin', 'date'].includes(role));
  return detected.map((use) => {
    const own = placed.get(use.index);
    // A multiplier the person took out is not put back.
    if (own) return own.role === use.role ? { ...use, ...own, factor: own.factor } : own;
    const isReplacedTime =
      timeGiven && ['stamp', 'stamp-begin', 'stamp-end', 'date', 'time', 'interval-number'].includes(use.role);
    return taken.has(use.role) || isReplacedTime ? { index: use.index, name: use.name, role: 'ignore' } : use;
  });
}

function placeOf(use: ColumnUse, names: readonly string[]): number {
  const here = names[use.index];
  if (here !== undefined && (use.name === '' || here === '' || here === use.name)) return use.index;
  return use.name === '' ? -1 : names.indexOf(use.name);
}

/** Evidence with what a map gives in place of what was detected. */
export function mergeEvidence(
  evidence: readonly ColumnEvidence[],
  columns: readonly ColumnUse[],
  map: Partial<ColumnMap>,
): ColumnEvidence[] {
  const given = new Set((map.columns ?? []).map((use) => use.index));
  return evidence.map((line) => {
    const use = columns[line.index];
    if (!use) return line;
    const same = use.role === line.takenAs && (use.unit ?? '') === line.unit;
    const shown: ColumnEvidence = { ...line, takenAs: use.role, unit: use.unit ?? '' };
    if (use.measure) shown.measure = use.measure;
    if (use.quantity) shown.quantity = use.quantity;
    if (same) return shown;
    return {
      ...shown,
      isUnitAssumed: false,
      why: given.has(line.index) ? 'Given by the column map' : 'Left out: the column map gives its place to another',
      testsMet: 1,
      testsTotal: 1,
      sure: true,
    };
  });
}

/** One line for a run of like columns of a wide table. */
export function foldRuns(evidence: readonly ColumnEvidence[]): ColumnEvidence[] {
  const folded: ColumnEvidence[] = [];
  for (const line of evidence) {
    const before = folded.at(-1);
    if (
      before &&
      line.takenAs === 'day-value' &&
      before.takenAs === 'day-value' &&
      before.index + before.span === line.index
    ) {
      before.span += 1;
      before.name = `${before.name.split(' … ')[0] ?? ''} … ${line.name}`;
    } else folded.push({ ...line });
  }
  return folded;
}
