import { loadOf } from './load-of';
import { reportOf } from './report';
import { gridChannels, type PlacedStrand, type RowNumbers } from './series';
import type { ColumnMap } from './column-map';
import type { IntakeFormat, IntakeNote, IntervalReading } from './types';

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
  const isTable = input.format === 'delimited' || input.format === 'spreadsheet';
  const gridded = gridChannels(placed, { rows: input.rows, fileName: input.fileName, isTable });
  const { load, notes, negative } = loadOf(gridded);
  const report = reportOf(load, {
    format: input.format,
    rowsRead: input.rowsRead,
    duplicates: gridded.duplicates,
    notes: [
      ...input.notes,
      ...uniqueNotes(placed.flatMap(({ timeline }) => timeline.notes)),
      ...registerNotes(placed, gridded.falls),
      ...notes,
    ],
  });
  return { load, report: { ...report, negative, columnMap: input.columnMap } };
}

function registerNotes(placed: readonly PlacedStrand[], falls: number): IntakeNote[] {
  const channels = placed.flatMap(({ strand }) => strand.channels);
  const registers = channels.filter((channel) => channel.measure === 'register');
  if (registers.length === 0) return [];
  const names = [...new Set(registers.map((channel) => channel.name))].filter((name) => name !== '').join(', ');
  const which = registers.length === channels.length || names === '' ? 'The figures are' : `${names}: the figures are`;
  const notes: IntakeNote[] = [
    {
      code: 'register-differences',
      message: `${which} register readings: each interval is the difference of two of them.`,
    },
  ];
  if (falls > 0)
    notes.push({
      code: 'register-falls',
      message: `A register falls ${falls} ${falls === 1 ? 'time' : 'times'}: a roll-over is carried on, a reset leaves its interval missing.`,
    });
  return notes;
}

/** Strands of one file often say the same. */
function uniqueNotes(notes: IntakeNote[]): IntakeNote[] {
  const isSame = (one: IntakeNote, other: IntakeNote): boolean =>
    one.code === other.code && one.where === other.where && one.message === other.message;
  return notes.filter((note, at) => notes.findIndex((other) => isSame(note, other)) === at);
}
