import type { ColumnProfile } from './cells';
import { columnLetter, type Grid } from './grid';
import type { BillRole, ColumnUse, IntervalRole, Measure } from './column-map';
import type { ColumnEvidence, Guess } from './types';

/** One test of a reading of the file: whether it is met, and the finding in words. */
export type Test = [isMet: boolean, finding: string];

/** Sums up tests: findings joined, unmet ones after the met. Sure if all are met and there is at least one. */
function weigh(tests: readonly Test[]): { why: string; testsMet: number; testsTotal: number; sure: boolean } {
  const met = tests.filter(([isMet]) => isMet);
  const unmet = tests.filter(([isMet]) => !isMet);
  return {
    why: [...met, ...unmet].map(([, finding]) => finding).join('; '),
    testsMet: met.length,
    testsTotal: tests.length,
    sure: tests.length > 0 && unmet.length === 0,
  };
}

/** A guess about the whole file from its tests. */
export function guess(key: Guess['key'], takenAs: string, tests: readonly Test[]): Guess {
  return { key, takenAs, ...weigh(tests) };
}

/** What a role is called when shown beside its evidence. */
export interface RoleFinding {
  role: IntervalRole | BillRole;
  unit?: string | undefined;
  isUnitAssumed?: boolean;
  measure?: Measure | undefined;
  quantity?: string | undefined;
  tests: Test[];
}

/** The evidence line of one column. */
export function columnEvidence(
  profile: ColumnProfile,
  finding: RoleFinding,
  valuesShown: string,
  letter = columnLetter(profile.index),
): ColumnEvidence {
  return {
    index: profile.index,
    span: 1,
    letter,
    name: profile.name,
    values: valuesShown,
    takenAs: finding.role,
    unit: finding.unit ?? '',
    ...(finding.isUnitAssumed ? { isUnitAssumed: true } : {}),
    ...(finding.measure ? { measure: finding.measure } : {}),
    ...(finding.quantity ? { quantity: finding.quantity } : {}),
    ...weigh(finding.tests),
    // What is left out needs nobody's word.
    ...(finding.role === 'ignore' ? { sure: true } : {}),
  };
}

/** Range of a column of figures or the values met, as short text. */
export function valuesShown(
  grid: Grid,
  profile: ColumnProfile,
  rows: readonly number[],
  decimalMark: '.' | ',',
): string {
  const filled = profile.sampled - profile.kinds.blank;
  if (filled === 0) return 'blank';
  if (profile.kinds.number * 2 > filled && profile.distinct.size > 1) {
    let least = Infinity;
    let greatest = -Infinity;
    for (const row of rows) {
      const figure = grid.number(row, profile.index, decimalMark);
      if (Number.isNaN(figure)) continue;
      least = Math.min(least, figure);
      greatest = Math.max(greatest, figure);
    }
    if (least <= greatest) return `${least} to ${greatest}`;
  }
  if (profile.isManyValued || profile.distinct.size > 6) return `${profile.first} to ${profile.last}`;
  return [...profile.distinct.keys()].slice(0, 6).join(', ');
}

/** The column map entry of an evidence line. */
export function useOf(evidence: ColumnEvidence, extra: Partial<ColumnUse> = {}): ColumnUse {
  return {
    index: evidence.index,
    name: evidence.name,
    role: evidence.takenAs,
    ...(evidence.unit ? { unit: evidence.unit } : {}),
    ...(evidence.measure ? { measure: evidence.measure } : {}),
    ...(evidence.quantity ? { quantity: evidence.quantity } : {}),
    ...extra,
  };
}
