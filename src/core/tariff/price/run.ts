import { PriceError } from '../errors';
import { FormulaFault } from '../formula/compile';
import type { Expression, QuantityEntry, Schedule } from '../model';
import type { Rounding } from '../../units';
import { roundToStep } from '../../units';
import type { BillState, PieceState } from './bill-state';
import type { HistoryRecord } from './history';
import { wordPeriod } from './period-plan';

/** Where measured quantities come from: intervals, or the figures bills print. */
export interface QuantitySource {
  /** What the bill prints for a quantity; nothing when priced from intervals. */
  printed(bill: BillState, quantity: QuantityEntry): number | undefined;
  /** Sets a measure's or a value's result in the piece's state, or notes why it is missing. */
  measure(run: Run, bill: BillState, state: PieceState, quantity: QuantityEntry, needs: readonly number[]): void;
  /** Whether measures have their sums in each piece, by which lines can be shared. */
  readonly hasIntervals: boolean;
}

/** One run over all periods in order: as metered, or at unity power factor. */
export interface Run {
  schedule: Schedule;
  source: QuantitySource;
  isUnity: boolean;
  /** Months told by the caller, oldest first. */
  told: HistoryRecord[];
  /** Bills of this run, filled in order. */
  bills: BillState[];
  contract: (Record<string, number> | undefined)[];
  given: (Record<string, number> | undefined)[];
  /** The formula at work, for messages. */
  at: Expression | undefined;
}

/** Evaluates a formula on a piece's values, remembering it for messages. */
export function evaluateIn(run: Run, state: PieceState, expression: Expression): number {
  run.at = expression;
  return expression.evaluate(state.values);
}

/** Sets a value known for certain. */
export function setValue(state: PieceState, slot: number, value: number): void {
  state.values[slot] = value;
  state.known[slot] = 1;
  for (const sample of state.samples ?? []) sample[slot] = value;
}

/** Sets a quantity's value after its rounding. */
export function setRounded(run: Run, bill: BillState, state: PieceState, quantity: QuantityEntry, value: number): void {
  setValue(state, quantity.slot, roundedValue(run, bill, quantity.name, value, quantity.rounding));
}

/** A value rounded; refuses what is no finite number. */
export function roundedValue(
  run: Run,
  bill: BillState,
  name: string,
  value: number,
  rounding: Rounding | undefined,
): number {
  if (!Number.isFinite(value)) {
    const where = run.at ? ` (${run.at.path})` : '';
    throw new PriceError(
      `${wordPeriod(bill.plan.period)}: "${name}" has no finite value${where}. Check the series for values that are no numbers.`,
      {
        period: bill.plan.period,
        name,
      },
    );
  }
  return rounding ? roundToStep(value, rounding) : value;
}

/** Turns an impossible step of arithmetic into an error that names bill and formula. */
export function withPlace<T>(run: Run, bill: BillState, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof FormulaFault)) throw error;
    const path = run.at?.path ?? '';
    throw new PriceError(
      `${wordPeriod(bill.plan.period)}${run.isUnity ? ', at unity power factor' : ''}: ${path}: the formula ${error.message} (characters ${error.start + 1} to ${error.end}).`,
      {
        period: bill.plan.period,
        name: path.split('.')[1] ?? path,
      },
    );
  }
}
