import { columnFor, type DatedRow } from './bill-dates';
import { namesMeter } from './bill-labels';
import type { BillPlan } from './bill-plan';
import { intakeError } from './errors';
import { isBlankWord } from './numbers';
import type { IntakeNote, ReadOptions } from './types';

const mostMeters = 200;

/** Accounts or meters the table holds bills of, in its order. */
export function metersOf(plan: BillPlan): string[] {
  const column = columnFor(plan, 'meter');
  if (column < 0) return [];
  const meters = new Set<string>();
  for (let row = plan.block.firstRow; row <= plan.block.lastRow && meters.size < mostMeters; row += 1) {
    const meter = plan.grid.text(row, column).slice(0, 200);
    if (!isBlankWord(meter) && plan.grid.width(row) > 1 && !/^(grand )?(sub-?)?total/i.test(meter)) meters.add(meter);
  }
  return [...meters];
}

/** Bills of several meters cannot be one series: the file's are listed for the person to pick. */
export function checkMeters({ columnMap }: BillPlan, meters: readonly string[], options: ReadOptions): void {
  const { meter } = columnMap;
  const listed = `${meters.slice(0, 20).join(', ')}${meters.length > 20 ? ' …' : ''}`;
  if (meters.length > 1 && meter === undefined) {
    throw intakeError(
      `The file holds bills of ${meters.length} accounts or meters: ${listed}.`,
      options.fileName,
      'Pick one of them in the column map, then bring the file in again for the next.',
    );
  }
  if (meter !== undefined && meters.length > 0 && !meters.includes(meter)) {
    throw intakeError(
      `The column map picks “${meter}”, of which the file holds no bill.`,
      `${options.fileName}, accounts or meters: ${listed}`,
      'Pick one of those in the file.',
    );
  }
}

/** A meter that changes from one bill to the next is one series; the exchange is noted. */
export function noteMeters(plan: BillPlan, rows: readonly DatedRow[], notes: IntakeNote[]): void {
  for (const use of plan.columns) {
    if (use.role !== 'ignore' || !namesMeter(use.name)) continue;
    const met = [
      ...new Set(rows.map(({ row }) => plan.grid.text(row, use.index)).filter((text) => !isBlankWord(text))),
    ];
    if (met.length < 2 || met.length > 6) continue;
    notes.push({
      code: 'meter-changes',
      message: `“${use.name}” changes from ${met.slice(0, 3).join(' to ')}. Their days follow each other, so the bills are read as one series.`,
    });
  }
}
