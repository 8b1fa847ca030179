import type { ChargeDefinition, NumberPlace, Tier } from '../model';
import type { BillState, PieceState } from './bill-state';
import { firstMissing, missingError } from './evaluate-quantities';
import { evaluateIn, roundedValue, setValue, type Run } from './run';
import type { ChargePlan } from './text-plan';

type LimitDefinition = ChargeDefinition & { kind: 'topUp' | 'cap' };

/** Works out the lines from top to bottom: per piece, blended, rounded; then the total. */
export function evaluateCharges(run: Run, bill: BillState): void {
  const count = bill.pieces.length;
  bill.total = 0;
  let finest = 1;
  for (let line = 0; line < bill.amounts.length; line++) {
    const charge = lastCharge(bill, line);
    if (!charge) continue;
    const { definition } = charge.charge;
    const raw =
      definition.kind === 'topUp' || definition.kind === 'cap'
        ? limitParts(run, bill, line)
        : pieceParts(run, bill, line);
    const amount = roundedValue(run, bill, charge.charge.name, raw, charge.charge.rounding);
    scaleParts(bill, line, count, raw, amount);
    bill.amounts[line] = amount;
    for (const state of bill.pieces) setValue(state, charge.charge.slot, amount);
    bill.total += amount;
    finest = Math.min(finest, charge.finest);
  }
  // Sums of rounded lines gather crumbs of binary arithmetic below their last digit: they are taken off.
  bill.total = roundedValue(run, bill, 'total', bill.total, { step: finest, mode: 'nearest' });
}

/** The charge of a line under the last piece that has it. */
export function lastCharge(bill: BillState, line: number): ChargePlan | undefined {
  for (let p = bill.pieces.length - 1; p >= 0; p--) {
    const charge = bill.pieces[p]!.piece.text.chargeOfLine[line];
    if (charge) return charge;
  }
  return undefined;
}

function scaleParts(bill: BillState, line: number, count: number, raw: number, amount: number): void {
  // Parts that cancel out add up already.
  const scale = raw === amount ? 1 : raw === 0 ? 0 : amount / raw;
  for (let p = 0; p < count; p++)
    bill.parts[line * count + p] = count === 1 ? amount : bill.parts[line * count + p]! * scale;
}

/** Whether a line is charged in a piece: its condition holds. Where it does not, nothing else of the line is needed. */
export function isCharged(run: Run, bill: BillState, state: PieceState, plan: ChargePlan): boolean {
  const { charge, whenNeeds, needs } = plan;
  requireKnown(bill, state, plan, whenNeeds);
  if (charge.when && evaluateIn(run, state, charge.when) === 0) return false;
  requireKnown(bill, state, plan, needs);
  return true;
}

/** @throws {PriceError} naming what a line needs and nothing gives */
export function requireKnown(
  bill: BillState,
  state: PieceState,
  { charge }: ChargePlan,
  slots: readonly number[],
): void {
  const cause = firstMissing(state, slots);
  if (cause) throw missingError(bill, cause, charge.heading, (name) => unitOf(bill, name));
}

function unitOf(bill: BillState, name: string): string {
  for (const { piece } of bill.pieces) {
    const { quantities, contract } = piece.text.text;
    const unit = [...quantities, ...contract].find((entry) => entry.name === name)?.unit;
    if (unit) return unit;
  }
  return '';
}

function pieceParts(run: Run, bill: BillState, line: number): number {
  const count = bill.pieces.length;
  let raw = 0;
  for (const state of bill.pieces) {
    const plan = state.piece.text.chargeOfLine[line];
    const isOn = plan !== undefined && isCharged(run, bill, state, plan);
    const part = isOn ? partOf(run, bill, state, plan) : 0;
    bill.parts[line * count + state.index] = part;
    raw += part;
  }
  return raw;
}

function partOf(run: Run, bill: BillState, state: PieceState, plan: ChargePlan): number {
  const { definition } = plan.charge;
  switch (definition.kind) {
    case 'amount':
      return placeValue(run, state, definition.amount) * state.piece.share;
    case 'per':
      return (
        tieredPrice(run, state, definition.price, evaluateIn(run, state, definition.per)) *
        shareOf(run, bill, state, plan)
      );
    case 'percent': {
      const percent = definition.per
        ? tieredPrice(run, state, definition.price, evaluateIn(run, state, definition.per))
        : placeValue(run, state, definition.price[0]!.rate);
      return (partsOfLines(bill, state, plan) * percent) / 100;
    }
    default:
      return 0;
  }
}

/** Sum of the parts that the lines a charge takes have in a piece. */
export function partsOfLines(bill: BillState, state: PieceState, { ofLines }: ChargePlan): number {
  const count = bill.pieces.length;
  let sum = 0;
  for (const line of ofLines) sum += bill.parts[line * count + state.index]!;
  return sum;
}

/** A number under a piece's season. Months stand under rates only. */
export function placeValue(run: Run, state: PieceState, place: NumberPlace): number {
  const expression =
    place.kind === 'same'
      ? place.expression
      : place.kind === 'seasons'
        ? place.bySeason[state.piece.season]
        : place.byMonth.get(state.piece.month);
  if (!expression) throw new RangeError(`season must be one of the text's, got ${state.piece.season}`);
  return evaluateIn(run, state, expression);
}

/** Price of a quantity by marginal tiers; a negative quantity is priced at the first rate. */
export function tieredPrice(run: Run, state: PieceState, price: Tier[], quantity: number): number {
  let below = 0;
  let sum = 0;
  for (const { to, rate } of price) {
    const limit = to ? Math.max(below, evaluateIn(run, state, to)) : Infinity;
    const inTier = quantity < 0 ? (below === 0 ? quantity : 0) : Math.max(0, Math.min(quantity, limit) - below);
    if (inTier !== 0) sum += inTier * placeValue(run, state, rate);
    if (quantity <= limit) break;
    below = limit;
  }
  return sum;
}

/** Share of a `per` line that falls into a piece: by the measures it rests on, or by days. */
export function shareOf(run: Run, bill: BillState, state: PieceState, plan: ChargePlan): number {
  const count = bill.pieces.length;
  if (count === 1) return 1;
  if (run.schedule.division !== 'intervals') return state.piece.share;
  if (!run.source.hasIntervals) {
    if (plan.shareBy.length > 0)
      bill.notes?.add(
        'Lines of energy are shared by days: printed figures do not say what fell into each part of the period.',
      );
    return state.piece.share;
  }
  let whole = 0;
  let part = 0;
  for (const slot of plan.shareBy) {
    for (let p = 0; p < count; p++) whole += state.sums[slot * count + p]!;
    part += state.sums[slot * count + state.index]!;
  }
  return whole === 0 ? state.piece.share : part / whole;
}

/** A top-up or cap compares whole lines with its limit weighted by days; its parts go by days. */
function limitParts(run: Run, bill: BillState, line: number): number {
  const count = bill.pieces.length;
  let base = 0;
  let limit = 0;
  let share = 0;
  let isTopUp = false;
  const isOn = bill.pieces.map((state) => {
    const plan = state.piece.text.chargeOfLine[line];
    if (!plan || !isCharged(run, bill, state, plan)) return false;
    const definition = plan.charge.definition as LimitDefinition;
    isTopUp = definition.kind === 'topUp';
    base += partsOfLines(bill, state, plan);
    limit += placeValue(run, state, definition.to) * state.piece.share;
    share += state.piece.share;
    return true;
  });
  const raw = isTopUp ? Math.max(0, limit - base) : -Math.max(0, base - limit);
  for (const state of bill.pieces) {
    bill.parts[line * count + state.index] = isOn[state.index] ? (raw * state.piece.share) / share : 0;
  }
  return raw === 0 ? 0 : raw;
}
