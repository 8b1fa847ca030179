import { isSame } from '../formula/functions';
import type { GivenDefinition, PickDefinition, QuantityEntry } from '../model';
import { enterPiece, firstMissing } from '../price/evaluate-quantities';
import { hull, point, type Range } from './range';
import { rangeOf, type RangeValues } from './range-formula';
import { rangePast } from './range-past';
import { roundedRange, setRange, takePoints, type RangeBill, type RangeRun, type RangeState } from './range-state';

/** Works out the range of every value of a piece's text, from top to bottom as `evaluateQuantities` does its values. */
export function rangeQuantities(run: RangeRun, bill: RangeBill, state: RangeState): void {
  enterPiece(run.run, bill.bill, state.point);
  takePoints(state);
  state.sums.clear();
  for (const { quantity, needs } of state.point.piece.text.quantities) settle(run, bill, state, quantity, needs);
}

function settle(run: RangeRun, bill: RangeBill, state: RangeState, quantity: QuantityEntry, needs: number[]): void {
  const { definition, slot, rounding } = quantity;
  const set = (range: Range): void => setRange(state, slot, roundedRange(range, rounding));
  const printed = run.source.printed(bill, quantity);
  if (printed !== undefined) {
    set(printed);
    return;
  }
  switch (definition.kind) {
    case 'measure':
    case 'value':
      run.source.measure(run, bill, state, quantity, needs);
      return;
    case 'given':
      settleGiven(run, bill, state, quantity, definition);
      return;
    case 'past':
      set(rangePast(run, bill, state, definition));
      return;
    default: {
      const cause = firstMissing(state.point, needs);
      if (cause) state.point.missing[slot] = cause;
      else
        set(
          definition.kind === 'pick' ? picked(definition, state.values) : rangeOf(definition.expression, state.values),
        );
    }
  }
}

function settleGiven(
  { run }: RangeRun,
  { bill }: RangeBill,
  state: RangeState,
  { name, slot, unit, rounding }: QuantityEntry,
  { default: standard }: GivenDefinition,
): void {
  const given = run.given[bill.plan.index];
  const value = given && Object.hasOwn(given, name) ? given[name] : standard;
  if (value === undefined) state.point.missing[slot] = { name, kind: 'given', detail: unit };
  else setRange(state, slot, roundedRange(point(value), rounding));
}

/** A pick: of every step that may be the highest one reached. */
function picked({ of, steps, otherwise }: PickDefinition, values: RangeValues): Range {
  const at = rangeOf(of, values);
  let found: Range | undefined;
  const take = (value: Range): Range => (found = found ? hull(found, value) : value);
  for (const step of steps) {
    if (reaches(at.low, step.from)) return take(rangeOf(step.value, values));
    if (reaches(at.high, step.from)) take(rangeOf(step.value, values));
  }
  return take(rangeOf(otherwise, values));
}

function reaches(value: number, from: number): boolean {
  return value >= from || (Number.isFinite(value) && isSame(value, from));
}
