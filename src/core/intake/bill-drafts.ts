import { readCell } from './bill-cells';
import { columnFor, placeOf, type DatedRow } from './bill-dates';
import type { BillFigure } from './bill-figures';
import { markUnder, type DocumentMark } from './bill-marks';
import type { BillPlan } from './bill-plan';
import { ratesOf } from './bill-rates';
import { intakeError } from './errors';
import { columnLetter } from './grid';
import { isBlankWord } from './numbers';
import type { BillCharge } from './bill-types';
import type { ColumnUse } from './column-map';
import type { ReadOptions } from './types';
import { scaled, unitMeaning } from './units';

/** A document of the file before it is settled whether it stands as a bill. */
export interface BillDraft {
  dated: DatedRow;
  /** Rows it stands in, at least one. */
  rows: number[];
  where: string;
  invoice: string;
  meter: string;
  marks: ReadonlySet<DocumentMark>;
  quantities: Record<string, number>;
  charges: BillCharge[];
  /** Where each charge stands, where charges have rows of their own. */
  places?: string[];
  total: number | null;
}

/** Everything but the figures of a document: what its first row says. */
export function headOfDraft(
  plan: BillPlan,
  rows: readonly DatedRow[],
): Omit<BillDraft, 'quantities' | 'charges' | 'total'> {
  const { grid, columns } = plan;
  const [first] = rows;
  const textOf = (role: ColumnUse['role']): string => {
    const column = columnFor(plan, role);
    return column < 0 ? '' : (rows.map(({ row }) => grid.text(row, column)).find((text) => !isBlankWord(text)) ?? '');
  };
  const marks = columns
    .filter((use) => use.role === 'read-type')
    .flatMap((use) => rows.map(({ row }) => markUnder(use.name, grid.text(row, use.index))));
  const numbers = rows.map(({ row }) => row);
  const last = Math.max(...numbers);
  return {
    dated: {
      row: Math.min(...numbers),
      from: Math.min(...rows.map(({ from }) => from)),
      to: Math.max(...rows.map(({ to }) => to)),
      days: rows.length === 1 ? (first?.days ?? Number.NaN) : Number.NaN,
    },
    rows: numbers,
    where:
      rows.length === 1
        ? placeOf(plan, last)
        : `rows ${grid.rowNumber(Math.min(...numbers))} to ${grid.rowNumber(last)}`,
    invoice: textOf('invoice').slice(0, 60),
    meter: textOf('meter').slice(0, 200),
    marks: new Set(marks.filter((mark) => mark !== null)),
  };
}

/** The document of a row. */
export function draftOf(plan: BillPlan, dated: DatedRow, options: ReadOptions): BillDraft {
  const rates = ratesOf(plan);
  const quantities: [string, number][] = [];
  const charges: BillCharge[] = [];
  let total: number | null = null;
  for (const use of plan.columns) {
    if (use.role !== 'quantity' && use.role !== 'charge' && use.role !== 'total') continue;
    const figure = figureAt(plan, dated.row, use, options);
    if (!figure) continue;
    if (use.role === 'total') total = figure.value;
    else if (use.role === 'quantity') quantities.push(quantityOf(use, figure));
    else
      charges.push({
        label: labelOf(plan, use),
        amount: figure.value,
        ...workingOf(plan, dated.row, rates.get(use.name)),
      });
  }
  return { ...headOfDraft(plan, [dated]), quantities: Object.fromEntries(quantities), charges, total };
}

const labelOf = (plan: BillPlan, use: ColumnUse): string =>
  plan.labels[use.index] || use.name || `Column ${columnLetter(use.index)}`;

/**
 * The figure of a cell times the column's factor; null if it is blank.
 * @throws {IntakeError} if it holds words.
 */
export function figureAt(plan: BillPlan, row: number, use: ColumnUse, options: ReadOptions): BillFigure | null {
  const text = plan.grid.text(row, use.index);
  if (isBlankWord(text)) return null;
  const figure = readCell(plan.grid, row, use.index, plan.decimalMark);
  if (Number.isNaN(figure.value)) {
    throw intakeError(
      `“${text.slice(0, 40)}” under “${use.name}” is no figure.`,
      `${options.fileName}, ${placeOf(plan, row)}`,
      'Correct the cell, or leave the column out in the column map.',
    );
  }
  return { ...figure, value: figure.value * (use.factor ?? 1) };
}

/** Name and figure of a quantity: in kWh, kW, kVA, kvarh, kvar; the power factor as a fraction, a leading one apart. */
export function quantityOf(use: Pick<ColumnUse, 'quantity' | 'unit'>, figure: BillFigure): [string, number] {
  const name = use.quantity ?? 'kwh';
  if (name === 'powerFactor') {
    const isPercent = figure.isPercent || use.unit === '%' || Math.abs(figure.value) > 1.5;
    const size = Math.abs(isPercent ? figure.value / 100 : figure.value);
    const isLeading = figure.sense === 'leading' || (figure.value < 0 && figure.sense === undefined);
    return [isLeading ? 'powerFactorLeading' : name, size];
  }
  return [name, scaled(figure.value, unitMeaning(figure.unit ?? use.unit ?? '')?.factor ?? 1)];
}

/** Quantity, unit and rate of a charge as printed in their columns. */
function workingOf(
  plan: BillPlan,
  row: number,
  pair: { rate: ColumnUse; times: ColumnUse } | undefined,
): Pick<BillCharge, 'quantity' | 'unit' | 'rate'> {
  if (!pair) return {};
  const [quantity, rate] = [pair.times, pair.rate].map((use) => readCell(plan.grid, row, use.index, plan.decimalMark));
  if (!quantity || !rate || Number.isNaN(quantity.value + rate.value)) return {};
  const unit = quantity.unit ?? pair.times.unit ?? (pair.times.role === 'days' ? 'days' : '');
  return {
    quantity: quantity.value,
    ...(unit ? { unit } : {}),
    rate: scaled(rate.value, pair.rate.factor ?? 1),
  };
}
