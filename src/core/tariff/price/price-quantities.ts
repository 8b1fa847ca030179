import { PriceError } from '../errors';
import type { Schedule } from '../model';
import { didYouMean } from '../nearest';
import type { PricedBill, PriceOptions, PrintedRow } from '../types';
import { writeBills } from '../words/write-bill';
import { planPeriods } from './period-plan';
import { checkNames, prepareRun, priceRun } from './pricing';
import { PrintedSource } from './printed-source';

/**
 * Prices periods from quantities printed on bills.
 *
 * @param rows  Per period, any quantities of the schedule by name; they win over `options.given`, that over the schedule's default
 * @returns bills in the order of the rows; a note marks each as priced from printed quantities
 * @throws {PriceError} where a line needs what no bill gives, naming bill, quantity and line
 */
export function priceQuantities(
  schedule: Schedule,
  rows: PrintedRow[],
  options: Omit<PriceOptions, 'periods'> = {},
): PricedBill[] {
  checkNames(schedule, options);
  checkRows(rows);
  const plans = planPeriods(schedule, rows);
  const source = new PrintedSource(rows);
  const run = prepareRun(schedule, plans, options, { source, isUnity: false, wantsNotes: true });
  const unity = prepareRun(schedule, plans, options, { source, isUnity: true, wantsNotes: true });
  for (const bill of run.bills) {
    bill.notes?.add('Priced from printed quantities, not from intervals.');
    noteStrange(schedule, rows[bill.plan.index]!, (note) => bill.notes?.add(note));
  }
  priceRun(run);
  priceRun(unity);
  return writeBills(run, unity, undefined);
}

function checkRows(rows: PrintedRow[]): void {
  for (const { from, to, quantities } of rows) {
    for (const [name, value] of Object.entries(quantities)) {
      if (typeof value !== 'number' || Number.isNaN(value) || !Number.isFinite(value)) {
        throw new PriceError(
          `"${name}" must be a number, got ${String(value)}. Leave it out where the bill does not print it.`,
          { period: { from, to }, name },
        );
      }
    }
  }
}

function noteStrange(schedule: Schedule, row: PrintedRow, note: (text: string) => void): void {
  const known = new Set(schedule.texts.flatMap(({ quantities }) => quantities.map(({ name }) => name)));
  for (const name of Object.keys(row.quantities)) {
    if (!known.has(name))
      note(`The schedule has no quantity called "${name}"; it is not used. ${didYouMean(name, known)}`.trim());
  }
}
