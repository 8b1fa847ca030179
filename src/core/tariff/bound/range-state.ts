import type { Rounding } from '../../units';
import { roundToStep } from '../../units';
import { place } from '../formula/compile';
import type { QuantityEntry, Schedule } from '../model';
import { sizeOf, type BillState, type PieceState } from '../price/bill-state';
import type { Run } from '../price/run';
import type { LineBlocks } from './line-blocks';
import type { Range } from './range';
import type { RangeValues } from './range-formula';

/** Values of one piece over ranges. What no load changes is worked out in `point`: facts, contract, rates, and what is known. */
export interface RangeState {
  point: PieceState;
  values: RangeValues;
  /** Sums of a measure in each piece: place x pieces + piece. */
  sums: Map<number, Range[]>;
}

/** A bill worked out over ranges. */
export interface RangeBill {
  bill: BillState;
  states: RangeState[];
  /** Rounded amounts and their parts in each piece, by line; absent where the bill has no such line. */
  amounts: (Range | undefined)[];
  parts: Range[][];
  blocks: LineBlocks;
  total: Range;
}

/** Where measured quantities have their ranges from. */
export interface RangeSource {
  /** What the bill prints; nothing where all is measured. */
  printed(bill: RangeBill, quantity: QuantityEntry): Range | undefined;
  /** Sets a measure's or a value's range, or notes why it is missing. */
  measure(run: RangeRun, bill: RangeBill, state: RangeState, quantity: QuantityEntry, needs: readonly number[]): void;
  readonly hasIntervals: boolean;
}

/** All periods over ranges, in order. */
export interface RangeRun {
  run: Run;
  source: RangeSource;
  bills: RangeBill[];
}

/** Room for a piece's values. */
export function rangeState(schedule: Schedule, point: PieceState): RangeState {
  const size = sizeOf(schedule);
  return { point, values: { low: new Float64Array(size), high: new Float64Array(size) }, sums: new Map() };
}

/** Takes facts, contract inputs and rates over from the piece where they are worked out once. */
export function takePoints({ point, values }: RangeState): void {
  const from = place.days;
  values.low.set(point.values.subarray(from), from);
  values.high.set(point.values.subarray(from), from);
}

/** Sets a known value. */
export function setRange({ point, values }: RangeState, slot: number, { low, high }: Range): void {
  values.low[slot] = low;
  values.high[slot] = high;
  point.known[slot] = 1;
}

/** Rounds both ends: rounding to a step never turns two values round. */
export function roundedRange({ low, high }: Range, rounding: Rounding | undefined): Range {
  if (!rounding) return { low, high };
  const round = (value: number): number => (Number.isFinite(value) ? roundToStep(value, rounding) : value);
  return { low: round(low), high: round(high) };
}
