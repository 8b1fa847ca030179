import { placeOf, type DatedRow } from './bill-dates';
import { figureAt, headOfDraft, quantityOf, type BillDraft } from './bill-drafts';
import type { BillFigure } from './bill-figures';
import { quantitiesOfLines } from './bill-item-quantities';
import type { BillPlan } from './bill-plan';
import { isBalance, isLateFee, namesTotal, quantityOf as meaningOfName } from './bill-words';
import type { BillCharge } from './bill-types';
import type { ColumnUse } from './column-map';
import type { IntakeNote, ReadOptions } from './types';
import { unitMeaning } from './units';

/** A line as its row shows it. */
interface ItemLine extends BillCharge {
  row: number;
}

/** Documents of a table with a row a line: the rows of one invoice, or of one period where none is named. */
export function itemDrafts(
  plan: BillPlan,
  dated: readonly DatedRow[],
  options: ReadOptions,
  notes: IntakeNote[],
): BillDraft[] {
  const groups = new Map<string, DatedRow[]>();
  for (const row of [...dated].sort((a, b) => a.row - b.row)) {
    const key = keyOf(plan, row);
    groups.set(key, [...(groups.get(key) ?? []), row]);
  }
  const drafts = [...groups.values()].map((rows) => draftOfRows(plan, rows, options, notes));
  return withoutGrandTotal(plan, drafts, notes).sort(
    (a, b) => a.dated.from - b.dated.from || a.dated.row - b.dated.row,
  );
}

/** Lines of one invoice may be of several stretches of its period; without an invoice the period holds them together. */
function keyOf({ grid, columns }: BillPlan, row: DatedRow): string {
  const textOf = (role: ColumnUse['role']): string =>
    columns
      .filter((use) => use.role === role)
      .map((use) => grid.text(row.row, use.index))
      .join('\n');
  const invoice = textOf('invoice');
  return [textOf('meter'), invoice, ...(invoice === '' ? [row.from, row.to, textOf('read-type')] : [])].join('\n');
}

function draftOfRows(plan: BillPlan, rows: readonly DatedRow[], options: ReadOptions, notes: IntakeNote[]): BillDraft {
  const head = headOfDraft(plan, rows);
  const lines: ItemLine[] = [];
  const totals: number[] = [];
  const quantities: [string, number][] = constantQuantities(plan, rows, options);
  const open: ItemLine[] = [];
  for (const { row } of rows) {
    const line = lineOf(plan, row, options);
    if (!line) continue;
    if (line.amount === null) quantities.push(...namedQuantity(line.label, line));
    else if (namesTotal(line.label) && line.quantity === undefined) totals.push(line.amount);
    else if (/\bsub ?-?total\b/i.test(line.label)) continue;
    else if (isBalance(line.label) || isLateFee(line.label)) open.push({ ...line, amount: line.amount });
    else lines.push({ ...line, amount: line.amount });
  }
  const sum = lines.reduce((running, line) => running + line.amount, 0);
  const total = constantTotal(plan, rows, options) ?? totals.find((one) => isSame(one, sum)) ?? totals[0] ?? null;
  const late = open.filter((line) => isLateFee(line.label));
  const belongs =
    total !== null &&
    !isSame(sum, total) &&
    isSame(
      late.reduce((running, line) => running + line.amount, sum),
      total,
    );
  noteOpen(
    plan,
    open.filter((line) => !(belongs && late.includes(line))),
    notes,
  );
  const charges = belongs ? [...lines, ...late] : lines;
  return {
    ...head,
    quantities: { ...quantitiesOfLines(charges), ...Object.fromEntries(quantities) },
    charges: charges.map(({ row: _, ...charge }) => charge),
    places: charges.map(({ row }) => placeOf(plan, row)),
    total,
  };
}

const isSame = (a: number, b: number): boolean => Math.abs(a - b) < 0.0051;

function noteOpen(plan: BillPlan, left: readonly ItemLine[], notes: IntakeNote[]): void {
  for (const line of left)
    notes.push({
      code: 'line-left-out',
      message: `“${line.label}”, ${line.amount.toFixed(2)}, is what was owed, paid or asked for paying late: no line of the bill.`,
      where: placeOf(plan, line.row),
    });
}

/** A line of the bill; amount null where its row gives a quantity alone. Null for a row that gives neither. */
function lineOf(
  plan: BillPlan,
  row: number,
  options: ReadOptions,
): (Omit<ItemLine, 'amount'> & { amount: number | null }) | null {
  const useOf = (role: ColumnUse['role']): ColumnUse | undefined => plan.columns.find((use) => use.role === role);
  const figureOf = (use: ColumnUse | undefined): BillFigure | null => (use ? figureAt(plan, row, use, options) : null);
  const textOf = (use: ColumnUse | undefined): string => (use ? plan.grid.text(row, use.index) : '');
  const quantityUse = useOf('line-quantity');
  const [amount, quantity, rate] = [
    figureOf(useOf('line-amount')),
    figureOf(quantityUse),
    figureOf(useOf('line-rate')),
  ];
  if (!amount && !quantity) return null;
  const label = textOf(useOf('line-label')) || 'Line without a name';
  const word = textOf(useOf('line-unit'));
  const unit = quantity?.unit ?? (unitMeaning(word)?.unit || word || quantityUse?.unit || rate?.per || '');
  return {
    row,
    label: label.slice(0, 120),
    amount: amount?.value ?? null,
    ...(quantity ? { quantity: quantity.value } : {}),
    ...(quantity && unit ? { unit: unit.slice(0, 20) } : {}),
    ...(rate ? { rate: rate.isMinor ? rate.value / 100 : rate.value } : {}),
  };
}

/** The quantity a line without an amount tells. */
function namedQuantity(label: string, line: Pick<BillCharge, 'quantity' | 'unit'>): [string, number][] {
  const meaning = meaningOfName(line.unit ? `${label} (${line.unit})` : label);
  if (!meaning || line.quantity === undefined) return [];
  return [quantityOf({ quantity: meaning.quantity, unit: line.unit ?? meaning.unit }, { value: line.quantity })];
}

/** Figures that are the same in every row of the bill. */
function constantQuantities(plan: BillPlan, rows: readonly DatedRow[], options: ReadOptions): [string, number][] {
  return plan.columns
    .filter((use) => use.role === 'quantity')
    .flatMap((use) => {
      const figure = firstFigure(plan, rows, use, options);
      return figure ? [quantityOf(use, figure)] : [];
    });
}

function constantTotal(plan: BillPlan, rows: readonly DatedRow[], options: ReadOptions): number | null {
  const use = plan.columns.find((one) => one.role === 'total');
  return use ? (firstFigure(plan, rows, use, options)?.value ?? null) : null;
}

function firstFigure(
  plan: BillPlan,
  rows: readonly DatedRow[],
  use: ColumnUse,
  options: ReadOptions,
): BillFigure | null {
  for (const { row } of rows) {
    const figure = figureAt(plan, row, use, options);
    if (figure) return figure;
  }
  return null;
}

/** A last row that sums the whole table is no total of the last bill. */
function withoutGrandTotal(plan: BillPlan, drafts: BillDraft[], notes: IntakeNote[]): BillDraft[] {
  const ordered = [...drafts].sort((a, b) => a.dated.row - b.dated.row);
  const last = ordered.at(-1);
  if (!last || drafts.length < 2 || last.total === null) return drafts;
  const all = drafts.flatMap((draft) => draft.charges).reduce((sum, charge) => sum + charge.amount, 0);
  const own = last.charges.reduce((sum, charge) => sum + charge.amount, 0);
  if (!isSame(last.total, all) || isSame(last.total, own)) return drafts;
  notes.push({
    code: 'rows-left-out',
    message: 'The last total is that of the whole table, of no bill.',
    where: placeOf(plan, Math.max(...last.rows)),
  });
  return drafts.map((draft) => (draft === last ? { ...draft, total: null } : draft));
}
