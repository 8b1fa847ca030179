import { splitDelimited } from './csv';
import { voteDelimiter, type DelimiterVote } from './dialect';
import { intakeError } from './errors';
import type { Container } from './format';
import type { Grid } from './grid';
import { openWorkbook } from './sheet';
import { decodeText } from './text';
import type { ColumnMap } from './column-map';
import type { Dialect, IntakeFormat, IntakeNote } from './types';

/** A file opened as a table of raw cells. */
export interface OpenedTable {
  grid: Grid;
  format: IntakeFormat;
  dialect: Dialect;
  vote: DelimiterVote | null;
  /** Sheets of a workbook that seem to hold a table too and are not read. */
  otherSheets: readonly string[];
  /** What a workbook hides or works out. */
  sheetNotes: readonly IntakeNote[];
}

/**
 * Opens delimited text or a workbook as a grid.
 * @throws {IntakeError} if the bytes cannot be opened as what they seem to be.
 */
export function openTable(
  bytes: Uint8Array,
  container: Container,
  fileName: string,
  map: Partial<ColumnMap>,
): OpenedTable {
  if (container === 'workbook-zip' || container === 'workbook-ole') {
    const { grid, sheet, sheets, others, notes } = openWorkbook(bytes, fileName, map.sheet);
    return {
      grid,
      format: 'spreadsheet',
      dialect: { sheet, sheets },
      vote: null,
      otherSheets: others,
      sheetNotes: notes,
    };
  }
  const { text, encoding } = decodeText(bytes, fileName);
  if (text.trim() === '')
    throw intakeError(
      'The file holds nothing but blanks.',
      fileName,
      'Export the file again and look into it before bringing it in.',
    );
  const vote = voteDelimiter(text);
  const delimiter = map.delimiter ?? vote.delimiter;
  return {
    grid: splitDelimited(text, delimiter, fileName),
    format: 'delimited',
    dialect: { encoding, delimiter },
    vote,
    otherSheets: [],
    sheetNotes: [],
  };
}
