/** All values from `low` to `high`; `low` may be -Infinity, `high` Infinity. */
export interface Range {
  readonly low: number;
  readonly high: number;
}

/** Any value: nothing is known of it. */
export const anything: Range = { low: -Infinity, high: Infinity };
/** Answers of a condition: certainly not, certainly, either. */
export const no: Range = { low: 0, high: 0 };
export const yes: Range = { low: 1, high: 1 };
export const maybe: Range = { low: 0, high: 1 };

/** One value. */
export function point(value: number): Range {
  return { low: value, high: value };
}

/** Whether a range is one value. */
export function isPoint({ low, high }: Range): boolean {
  return low === high;
}

/** The least range that holds both. */
export function hull(a: Range, b: Range): Range {
  return { low: Math.min(a.low, b.low), high: Math.max(a.high, b.high) };
}

/** What two ranges that hold the same value have in common; where crumbs of binary arithmetic part them, the gap between. */
export function meet(a: Range, b: Range): Range {
  const low = Math.max(a.low, b.low);
  const high = Math.min(a.high, b.high);
  return low <= high ? { low, high } : { low: high, high: low };
}

/** A range with this much more on either side. */
export function widened({ low, high }: Range, by: number): Range {
  return { low: low - by, high: high + by };
}

/**
 * A range with a share of its ends' size more on either side, for what is not worked out step by step as bills do it: the order of
 * operations on doubles then changes the last digits.
 */
export function loosened(range: Range, share = 1e-12): Range {
  const by = share * Math.max(finiteSize(range.low), finiteSize(range.high));
  return by === 0 ? range : widened(range, by);
}

function finiteSize(value: number): number {
  return Number.isFinite(value) ? Math.abs(value) : 0;
}

/** Whether a condition's value certainly holds, certainly fails, or either. */
export function truthOf({ low, high }: Range): 'holds' | 'fails' | 'open' {
  if (low > 0 || high < 0) return 'holds';
  return low === 0 && high === 0 ? 'fails' : 'open';
}

// Sums, differences, products and quotients of doubles are monotone in each operand, rounding included: their extremes lie at the ends
// of the operands, and what is worked out there is exact for bills that take the same steps.

/** a + b */
export function plus(a: Range, b: Range): Range {
  return { low: a.low + b.low, high: a.high + b.high };
}

/** -a */
export function negated({ low, high }: Range): Range {
  return { low: -high, high: -low };
}

/** a - b */
export function minus(a: Range, b: Range): Range {
  return { low: a.low - b.high, high: a.high - b.low };
}

function product(a: number, b: number): number {
  return a === 0 || b === 0 ? 0 : a * b;
}

/** a x b */
export function times(a: Range, b: Range): Range {
  const [p, q, r, s] = [
    product(a.low, b.low),
    product(a.low, b.high),
    product(a.high, b.low),
    product(a.high, b.high),
  ] as const;
  return { low: Math.min(p, q, r, s), high: Math.max(p, q, r, s) };
}

/** a / b, where b is not 0; anything where nothing is left. */
export function over(a: Range, b: Range): Range {
  if (b.low > 0 || b.high < 0) {
    const [p, q, r, s] = [
      quotient(a.low, b.low),
      quotient(a.low, b.high),
      quotient(a.high, b.low),
      quotient(a.high, b.high),
    ] as const;
    return { low: Math.min(p, q, r, s), high: Math.max(p, q, r, s) };
  }
  if (b.low < 0 && b.high > 0) return anything;
  if (b.low === 0 && b.high === 0) return anything;
  if (b.high <= 0) return over(negated(a), negated(b));
  return {
    low: a.low >= 0 ? quotient(a.low, b.high) : -Infinity,
    high: a.high <= 0 ? quotient(a.high, b.high) : Infinity,
  };
}

function quotient(a: number, b: number): number {
  if (!Number.isFinite(b)) return Number.isFinite(a) ? 0 : a > 0 === b > 0 ? Infinity : -Infinity;
  return a / b;
}

/** Size of a value. */
export function sizeOfRange({ low, high }: Range): Range {
  if (low >= 0) return { low, high };
  if (high <= 0) return { low: -high, high: -low };
  return { low: 0, high: Math.max(-low, high) };
}

/** The lesser of two values. */
export function lesser(a: Range, b: Range): Range {
  return { low: Math.min(a.low, b.low), high: Math.min(a.high, b.high) };
}

/** The greater of two values. */
export function greater(a: Range, b: Range): Range {
  return { low: Math.max(a.low, b.low), high: Math.max(a.high, b.high) };
}
