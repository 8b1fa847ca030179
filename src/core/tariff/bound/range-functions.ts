import { between, comparisons, excess, hypot2, powerFactorOf, ratioOf, tangentOf } from '../formula/functions';
import { anything, hull, isPoint, loosened, maybe, no, over, point, sizeOfRange, yes, type Range } from './range';

// The functions of formulas over ranges. Each comment says why the result holds every value; where ends meet in one value, the function
// itself gives it, so that what is certain stays exact.

/** Quotient of infinite ends: 0 times Infinity and the like have no place in a range. */
const isFinitePair = (a: number, b: number): boolean => Number.isFinite(a) && Number.isFinite(b);

/** excess with infinite ends: the slack for ties would swallow them. */
function beyond(a: number, b: number): number {
  return isFinitePair(a, b) ? excess(a, b) : Math.max(0, a - b);
}

/** excess(a; b) rises with a and falls with b. */
export function excessRange(a: Range, b: Range): Range {
  return { low: beyond(a.low, b.high), high: beyond(a.high, b.low) };
}

/** between(q; a; b) rises with q and b; it falls with a, both below b and, staying 0, above. */
export function betweenRange(q: Range, a: Range, b: Range): Range {
  const part = (of: number, from: number, to: number): number =>
    isFinitePair(of, from) && Number.isFinite(to)
      ? between(of, from, to)
      : Math.max(0, Math.min(of, Math.max(from, to)) - from || 0);
  return { low: part(q.low, a.high, b.low), high: part(q.high, a.low, b.high) };
}

/** hypot(a; b) rises with both sizes. */
export function hypotRange(a: Range, b: Range): Range {
  const [x, y] = [sizeOfRange(a), sizeOfRange(b)];
  return { low: hypot2(x.low, y.low), high: hypot2(x.high, y.high) };
}

/** Root of what is not negative; a negative value has none. */
export function rootRange({ low, high }: Range): Range {
  if (high < 0) return anything;
  return { low: Math.sqrt(Math.max(0, low)), high: Math.sqrt(high) };
}

/** tanOf(pf) falls on (0, 1]; elsewhere it has no value. */
export function tangentRange({ low, high }: Range): Range {
  if (high <= 0 || low > 1) return anything;
  return { low: tangentOf(Math.min(1, high)), high: low > 0 ? tangentOf(low) : Infinity };
}

/** pf(active; reactive) rises with the active size and falls with the reactive one; at 0 active stands the rule. */
export function powerFactorRange(active: Range, reactive: Range, zeroRule: number): Range {
  if (isPoint(active) && isPoint(reactive)) return point(powerFactorOf(active.low, reactive.low, zeroRule));
  const [p, q] = [sizeOfRange(active), sizeOfRange(reactive)];
  const factor = (a: number, b: number): number => {
    if (b === 0) return 1;
    if (a === 0 || b === Infinity) return 0;
    return a === Infinity ? 1 : a / hypot2(a, b);
  };
  const inside = loosened({ low: factor(p.low, q.high), high: factor(p.high, q.low) }, 1e-15);
  const kept = { low: Math.max(0, inside.low), high: Math.min(1, inside.high) };
  if (p.low > 0) return kept;
  return p.high === 0 ? point(zeroRule) : hull(kept, point(zeroRule));
}

/** ratio(reactive; active): a quotient; at 0 active stands the rule. */
export function ratioRange(reactive: Range, active: Range, zeroRule: number): Range {
  if (isPoint(active) && isPoint(reactive)) return point(ratioOf(reactive.low, active.low, zeroRule));
  if (active.low > 0 || active.high < 0) return over(reactive, active);
  return isPoint(active) ? point(zeroRule) : hull(over(reactive, active), point(zeroRule));
}

/**
 * Power with a base that is not negative: monotone in base and exponent, so that its extremes lie at the corners; with a negative base
 * only whole exponents, known for certain, are followed.
 */
export function powerRange(base: Range, exponent: Range): Range {
  if (isPoint(base) && isPoint(exponent)) {
    const value = base.low ** exponent.low;
    return Number.isFinite(value) ? point(value) : anything;
  }
  if (base.low > 0 || (base.low === 0 && exponent.low > 0)) {
    return atCorners(base, exponent);
  }
  const n = exponent.low;
  if (!isPoint(exponent) || !Number.isInteger(n) || n <= 0) return anything;
  return n % 2 === 0 ? atCorners(sizeOfRange(base), exponent) : atCorners(base, exponent);
}

function atCorners(base: Range, exponent: Range): Range {
  const corners = [base.low, base.high].flatMap((b) => [exponent.low, exponent.high].map((e) => b ** e));
  if (corners.some((corner) => Number.isNaN(corner))) return anything;
  return loosened({ low: Math.min(...corners), high: Math.max(...corners) }, 1e-14);
}

/** Whether a value reaches a step's beginning, to 1e-12; infinite ends included. */
function compareEnds(operator: keyof typeof comparisons, a: number, b: number): boolean {
  if (isFinitePair(a, b)) return comparisons[operator](a, b);
  return operator === '<' || operator === '<=' ? a < b : a > b;
}

/** Comparisons as formulas make them: certain only where they come out the same at every pair of ends. */
export function compareRange(operator: keyof typeof comparisons, a: Range, b: Range): Range {
  switch (operator) {
    case '<':
    case '<=':
      if (compareEnds(operator, a.high, b.low)) return yes;
      return compareEnds(operator, a.low, b.high) ? maybe : no;
    case '>':
    case '>=':
      if (compareEnds(operator, a.low, b.high)) return yes;
      return compareEnds(operator, a.high, b.low) ? maybe : no;
    case '=':
      if (isPoint(a) && isPoint(b)) return comparisons['='](a.low, b.low) ? yes : no;
      return compareEnds('<', a.high, b.low) || compareEnds('>', a.low, b.high) ? no : maybe;
    case '!=':
      return notRange(compareRange('=', a, b));
  }
}

/** not(a) of an answer. */
export function notRange(answer: Range): Range {
  return { low: 1 - answer.high, high: 1 - answer.low };
}
