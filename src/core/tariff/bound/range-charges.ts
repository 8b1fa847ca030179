import type { ChargeDefinition } from '../model';
import { requireKnown, lastCharge } from '../price/evaluate-charges';
import type { ChargePlan } from '../price/text-plan';
import { LineBlocks } from './line-blocks';
import {
  greater,
  hull,
  lesser,
  loosened,
  meet,
  minus,
  negated,
  over,
  plus,
  point,
  times,
  truthOf,
  widened,
  type Range,
} from './range';
import { rangeOf } from './range-formula';
import { rangeOfPlace, rangePrice } from './range-tiers';
import { roundedRange, setRange, type RangeBill, type RangeRun, type RangeState } from './range-state';

type LimitDefinition = ChargeDefinition & { kind: 'topUp' | 'cap' };
type Truth = ReturnType<typeof truthOf>;

/** A line before rounding, with what is known of it together with the lines it rests on. */
interface RawLine {
  raw: Range;
  together?: { lines: number[]; range: Range };
}

const nothing = point(0);

/** Works out the ranges of the lines from top to bottom, as `evaluateCharges` does their amounts; then that of the total. */
export function rangeCharges(run: RangeRun, bill: RangeBill): void {
  bill.blocks = new LineBlocks();
  bill.parts.length = 0;
  let sum = nothing;
  let finest = 1;
  for (let line = 0; line < bill.bill.amounts.length; line++) {
    const plan = lastCharge(bill.bill, line);
    bill.amounts[line] = undefined;
    bill.parts.push(bill.states.map(() => nothing));
    if (!plan) continue;
    const { definition, rounding, slot } = plan.charge;
    const isLimit = definition.kind === 'topUp' || definition.kind === 'cap';
    const { raw, together } = isLimit ? limitParts(bill, line) : pieceParts(run, bill, line);
    const amount = roundedRange(raw, rounding);
    scaleParts(bill, line, raw, amount, rounding.step);
    bill.amounts[line] = amount;
    for (const state of bill.states) setRange(state, slot, amount);
    if (together) bill.blocks.addWith(together.lines, line, amount, loosened(widened(together.range, rounding.step)));
    else bill.blocks.add(line, amount);
    sum = plus(sum, amount);
    finest = Math.min(finest, plan.finest);
  }
  bill.total = roundedRange(meet(sum, bill.blocks.total()), { step: finest, mode: 'nearest' });
}

/** Whether a line is charged in a piece. */
function isCharged(bill: RangeBill, state: RangeState, plan: ChargePlan): Truth {
  const { charge, whenNeeds, needs } = plan;
  requireKnown(bill.bill, state.point, plan, whenNeeds);
  const truth = charge.when ? truthOf(rangeOf(charge.when, state.values)) : 'holds';
  if (truth !== 'fails') requireKnown(bill.bill, state.point, plan, needs);
  return truth;
}

function pieceParts(run: RangeRun, bill: RangeBill, line: number): RawLine {
  const whole: Range[] = [];
  let raw = nothing;
  let together: RawLine['together'];
  for (const [p, state] of bill.states.entries()) {
    const plan = state.point.piece.text.chargeOfLine[line];
    const truth = plan ? isCharged(bill, state, plan) : 'fails';
    const price = plan && truth !== 'fails' ? priceOf(bill, state, plan) : { whole: nothing };
    const share = plan && truth !== 'fails' ? shareOf(run, bill, state, plan) : nothing;
    const unless = (range: Range): Range => (truth === 'open' ? hull(range, nothing) : range);
    const part = unless('part' in price ? price.part : times(price.whole, share));
    bill.parts[line]![p] = part;
    raw = plus(raw, part);
    if ('whole' in price) whole.push(unless(price.whole));
    if ('percent' in price && truth === 'holds' && bill.states.length === 1)
      together = { lines: plan!.ofLines, range: withPercent(price.base, price.percent) };
  }
  // Shares add up to 1, so that the line lies between the least and the greatest of what the pieces would make of all of it.
  if (whole.length === bill.states.length && whole.length > 1) raw = meet(raw, loosened(whole.reduce(hull)));
  return { raw, together };
}

type Price = { whole: Range } | { part: Range; base: Range; percent: Range };

/** What a line comes to in a piece: for all of the period, of which the piece has a share, or, a percentage, in the piece itself. */
function priceOf(bill: RangeBill, state: RangeState, plan: ChargePlan): Price {
  const { definition } = plan.charge;
  switch (definition.kind) {
    case 'amount':
      return { whole: rangeOfPlace(state, definition.amount) };
    case 'per':
      return { whole: rangePrice(state, definition.price, rangeOf(definition.per, state.values)) };
    case 'percent': {
      const percent = definition.per
        ? rangePrice(state, definition.price, rangeOf(definition.per, state.values))
        : rangeOfPlace(state, definition.price[0]!.rate);
      const base = partsOfLines(bill, state, plan);
      return { part: over(times(base, percent), point(100)), base, percent };
    }
    default:
      return { whole: nothing };
  }
}

function withPercent(base: Range, percent: Range): Range {
  return times(base, plus(point(1), over(percent, point(100))));
}

/** Sum of the parts that the lines a charge takes have in a piece. */
function partsOfLines(bill: RangeBill, { point: { index } }: RangeState, { ofLines }: ChargePlan): Range {
  const apart = ofLines.reduce((sum, line) => plus(sum, bill.parts[line]![index]!), nothing);
  const together = bill.states.length === 1 ? bill.blocks.sumOf(ofLines) : undefined;
  return together ? meet(apart, together) : apart;
}

/** Share of a line that falls into a piece: by days, or by the measures it rests on. */
function shareOf({ run, source }: RangeRun, bill: RangeBill, state: RangeState, plan: ChargePlan): Range {
  const { share } = state.point.piece;
  if (bill.states.length === 1) return point(1);
  const isShared =
    run.schedule.division === 'intervals' && source.hasIntervals && plan.charge.definition.kind === 'per';
  if (!isShared || plan.shareBy.length === 0) return point(share);
  let part = nothing;
  let rest = nothing;
  for (const slot of plan.shareBy) {
    for (const [p, sum] of (state.sums.get(slot) ?? []).entries()) {
      if (p === state.point.index) part = plus(part, sum);
      else rest = plus(rest, sum);
    }
  }
  if (part.low < 0 || rest.low < 0) return { low: -Infinity, high: Infinity };
  const whole = (a: number, b: number): number => (a === 0 ? 0 : a / (a + b));
  const byMeasure = { low: whole(part.low, rest.high), high: Math.min(1, whole(part.high, rest.low)) };
  const shared = loosened(
    Number.isNaN(byMeasure.low) || Number.isNaN(byMeasure.high) ? { low: 0, high: 1 } : byMeasure,
  );
  return part.low + rest.low === 0 ? hull(shared, point(share)) : shared;
}

/** A top-up or cap compares whole lines with its limit weighted by days; its parts go by days. */
function limitParts(bill: RangeBill, line: number): RawLine {
  let base = nothing;
  let limit = nothing;
  let days = 0;
  let isTopUp = false;
  let isSure = true;
  const lines = new Set<string>();
  const truths = bill.states.map((state): Truth => {
    const plan = state.point.piece.text.chargeOfLine[line];
    const truth = plan ? isCharged(bill, state, plan) : 'fails';
    if (truth !== 'holds') isSure = false;
    if (!plan || truth === 'fails') return 'fails';
    const definition = plan.charge.definition as LimitDefinition;
    const { share } = state.point.piece;
    const unless = (range: Range): Range => (truth === 'open' ? hull(range, nothing) : range);
    isTopUp = definition.kind === 'topUp';
    base = plus(base, unless(partsOfLines(bill, state, plan)));
    limit = plus(limit, unless(times(rangeOfPlace(state, definition.to), point(share))));
    if (truth === 'holds') days += share;
    lines.add(plan.ofLines.join());
    return truth;
  });
  const ofLines = [...lines][0]?.split(',').map(Number) ?? [];
  const sameLines = isSure && lines.size === 1 && ofLines.every((one) => bill.amounts[one] !== undefined);
  if (sameLines) base = meet(base, loosened(bill.blocks.sumOf(ofLines) ?? base));
  const raw = isTopUp ? greater(nothing, minus(limit, base)) : negated(greater(nothing, minus(base, limit)));
  for (const [
    p,
    {
      point: { piece },
    },
  ] of bill.states.entries()) {
    if (truths[p] === 'fails') bill.parts[line]![p] = nothing;
    else if (truths[p] === 'open') bill.parts[line]![p] = hull(raw, nothing);
    else {
      // Where it is not certain which other pieces have the line, this one has between its share of all and all of it.
      const share = { low: piece.share, high: isSure ? piece.share / days : 1 };
      bill.parts[line]![p] = times(raw, isSure ? point(share.high) : share);
    }
  }
  if (!sameLines) return { raw };
  return { raw, together: { lines: ofLines, range: isTopUp ? greater(base, limit) : lesser(base, limit) } };
}

/**
 * Parts after rounding, scaled to add up to the amount. Parts of one sign each take their share of what rounding changed, which is at
 * most a step; parts that cancel out may be scaled by anything.
 */
function scaleParts(bill: RangeBill, line: number, raw: Range, amount: Range, step: number): void {
  const parts = bill.parts[line]!;
  if (parts.length === 1) {
    parts[0] = amount;
    return;
  }
  const isOfOneSign = parts.every(({ low }) => low >= 0) || parts.every(({ high }) => high <= 0);
  const isUnrounded = raw.low === amount.low && raw.high === amount.high && raw.low === raw.high;
  if (isUnrounded) return;
  const scale = raw.low > 0 || raw.high < 0 ? over(amount, raw) : { low: -Infinity, high: Infinity };
  for (const [p, part] of parts.entries()) {
    if (part.low === 0 && part.high === 0) continue;
    const bySize = isOfOneSign ? loosened(widened(part, step)) : { low: -Infinity, high: Infinity };
    parts[p] = meet(bySize, loosened(times(part, scale)));
  }
}
