import { guess } from './evidence';
import type { OpenedTable } from './open';
import type { ColumnMap, Guess } from './types';

const delimiterNames: Record<string, string> = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'bar' };

/** The delimiter with what speaks for it; none for a workbook. */
export function delimiterGuesses(opened: OpenedTable, map: Partial<ColumnMap>): Guess[] {
  const { vote, dialect } = opened;
  if (!vote || dialect.delimiter === undefined) return [];
  const name = delimiterNames[dialect.delimiter] ?? dialect.delimiter;
  if (map.delimiter && map.delimiter !== vote.delimiter)
    return [guess('delimiter', name, [[true, 'Given by the column map']])];
  const tests: [boolean, string][] = [
    [
      vote.linesAgreeing * 2 > vote.linesTried,
      `${vote.linesAgreeing} of the first ${vote.linesTried} lines have ${vote.columns} cells`,
    ],
  ];
  return [guess('delimiter', name, tests)];
}
