import { loadOf } from './load-of';
import { reportOf } from './report';
import { differenceRegisters, gridChannels, type PlacedStrand, type RowNumbers } from './series';
import type { ColumnMap, IntakeFormat, IntakeNote, IntervalReading } from './types';

interface AssemblyInput {
  format: IntakeFormat;
  fileName: string;
  /** Records of the file used as data. */
  rowsRead: number;
  rows: RowNumbers;
  /** Notes made before. */
  notes: readonly IntakeNote[];
  columnMap: ColumnMap;
}

/**
 * Strands with their place in time, whatever file they came from, become one load and its report.
 * @throws {IntakeError} if they do not fit one regular series.
 */
export function assemble(placed: readonly PlacedStrand[], input: AssemblyInput): IntervalReading {
  const isRegister = placed.every(({ strand }) => strand.channels.every((channel) => channel.measure === 'register'));
  const gridded = gridChannels(placed, input.rows, input.fileName);
  const { load, notes, negative } = loadOf(isRegister ? differenceRegisters(gridded) : gridded);
  const report = reportOf(load, {
    format: input.format,
    rowsRead: input.rowsRead,
    duplicates: gridded.duplicates,
    notes: [...input.notes, ...uniqueNotes(placed.flatMap(({ timeline }) => timeline.notes)), ...notes],
  });
  return { load, report: { ...report, negative, columnMap: input.columnMap } };
}

/** Strands of one file often say the same. */
function uniqueNotes(notes: IntakeNote[]): IntakeNote[] {
  const isSame = (one: IntakeNote, other: IntakeNote): boolean =>
    one.code === other.code && one.where === other.where && one.message === other.message;
  return notes.filter((note, at) => notes.findIndex((other) => isSame(note, other)) === at);
}
