import { guess } from './evidence';
import type { OpenedTable } from './open';
import type { ColumnMap } from './column-map';
import type { Guess, IntakeNote } from './types';

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

/** Notes on decisions about the whole file that nothing in it settles, and on sheets that are not read. */
export function openNotes(guesses: readonly Guess[], opened: OpenedTable): IntakeNote[] {
  const notes = guesses
    .filter((one) => !one.sure && (one.key === 'decimal-mark' || one.key === 'date-order'))
    .map((one): IntakeNote => ({
      code: `${one.key}-assumed`,
      message: `The ${one.key === 'decimal-mark' ? 'decimal mark' : 'order of dates'} is taken as ${one.takenAs}: ${one.why}.`,
    }));
  if (opened.otherSheets.length > 0) {
    notes.push({
      code: 'sheets-left-out',
      message: `The sheet “${opened.dialect.sheet ?? ''}” is read; others may hold tables too: ${opened.otherSheets.slice(0, 12).join(', ')}.`,
    });
  }
  return [...notes, ...opened.sheetNotes];
}
