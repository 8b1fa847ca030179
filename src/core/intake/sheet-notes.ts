import type XLSX from 'xlsx';
import { columnLetter } from './grid';
import type { SheetCell } from './sheet';
import type { IntakeNote } from './types';

/** What a person should know of the sheet that is read: values kept by formulas, and what the sheet or workbook hides. */
export function sheetNotes(
  read: { sheet: string; isHidden: boolean },
  sheet: XLSX.WorkSheet | undefined,
  hiddenSheets: readonly string[],
): IntakeNote[] {
  const notes = sheet ? [...formulaNotes(sheet, read.sheet), ...hiddenNotes(sheet, read.sheet)] : [];
  if (read.isHidden)
    notes.push({ code: 'sheets-hidden', message: `The sheet “${read.sheet}” is hidden in the workbook and is read.` });
  if (hiddenSheets.length > 0)
    notes.push({
      code: 'sheets-hidden',
      message: `Hidden sheets are not read: ${hiddenSheets.slice(0, 12).join(', ')}.`,
    });
  return notes;
}

function formulaNotes(sheet: XLSX.WorkSheet, name: string): IntakeNote[] {
  const kept: string[] = [];
  const empty: string[] = [];
  const rows = (Array.isArray(sheet) ? sheet : []) as (SheetCell | undefined)[][];
  rows.forEach((row, at) =>
    row.forEach((cell, column) => {
      if (cell?.f !== undefined) (cell.v === undefined ? empty : kept).push(`${columnLetter(column)}${at + 1}`);
    }),
  );
  const where = (cells: string[]): string =>
    `sheet “${name}”, ${cells.slice(0, 6).join(', ')}${cells.length > 6 ? ' …' : ''}`;
  const notes: IntakeNote[] = [];
  if (kept.length > 0)
    notes.push({
      code: 'formula-values',
      message: `${kept.length} cells hold formulas: the values kept when the workbook was last saved are read.`,
      where: where(kept),
    });
  if (empty.length > 0)
    notes.push({
      code: 'formula-empty',
      message: `${empty.length} cells hold formulas without a kept value and count as blank. Open the workbook in a spreadsheet program and save it to fill them.`,
      where: where(empty),
    });
  return notes;
}

function hiddenNotes(sheet: XLSX.WorkSheet, name: string): IntakeNote[] {
  const rows = (sheet['!rows'] ?? []).flatMap((row, at) => (row?.hidden ? [String(at + 1)] : []));
  const columns = (sheet['!cols'] ?? []).flatMap((column, at) => (column?.hidden ? [columnLetter(at)] : []));
  const words = (kind: string, names: string[]): string[] =>
    names.length === 0 ? [] : [`${kind} ${names.slice(0, 6).join(', ')}${names.length > 6 ? ' …' : ''}`];
  const where = [...words('rows', rows), ...words('columns', columns)];
  if (where.length === 0) return [];
  return [
    {
      code: 'hidden-cells',
      message: `The sheet hides ${[rows.length > 0 ? `${rows.length} rows` : '', columns.length > 0 ? `${columns.length} columns` : ''].filter((part) => part !== '').join(' and ')}; they are read like the others.`,
      where: `sheet “${name}”, ${where.join('; ')}`,
    },
  ];
}
