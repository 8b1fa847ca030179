/** A stretch of the range over which one of two costs is the lesser. */
export interface CheaperStretch {
  from: number;
  to: number;
  cheaper: 'first' | 'second' | 'neither';
}

/** A place where the cheaper of the two changes. */
export interface BreakEven {
  at: number;
  cheaperBelow: CheaperStretch['cheaper'];
  cheaperAbove: CheaperStretch['cheaper'];
  /** Difference (first minus second) just below and just above: both about 0 where the costs meet, else one jumps past the other. */
  differenceBelow: number;
  differenceAbove: number;
  isJump: boolean;
}

/** What is known of two costs over a range. */
export interface BreakEvens {
  /** In order, covering the range without gaps. */
  stretches: CheaperStretch[];
  /** Places between the stretches, one less than these. */
  breakEvens: BreakEven[];
}

/** Share of the range to which a break-even is found. [unitless] */
const placeTolerance = 1e-6;

/** Share of the greatest difference at the ends below which what is left at a break-even is rounding, not a jump. */
const jumpShare = 1e-3;

/**
 * Where two costs are equal over a range.
 *
 * Bills have cliffs (steps of a power factor, minimum bills, rounding), so no crossing is taken for granted: the difference is looked at on a
 * grid, and every change of its sign is narrowed down by bisection. Two changes inside one step of the grid are not seen; the costs count as
 * equal over a stretch only where neighbouring places of the grid say so.
 *
 * @param input.difference  First cost minus second at a place of the range. [currency]
 * @param input.low  Lower end of the range. [as the place], < high
 * @param input.high  Upper end.
 * @param input.steps  Steps of the grid. [unitless], integer, >= 1
 * @param input.equalWithin  Amounts up to this count as equal. [currency], >= 0
 * @throws {RangeError} `high must be above low, got 1 and 1`
 * @source Bisection on a bracketed change of sign, common practice.
 */
export function breakEvens(input: DifferenceOverRange): BreakEvens {
  const { low, high, steps } = input;
  if (!(high > low)) throw new RangeError(`high must be above low, got ${low} and ${high}`);
  if (!Number.isInteger(steps) || steps < 1) throw new RangeError(`steps must be an integer from 1 on, got ${steps}`);
  const points = signedPoints(input);
  const stretches: CheaperStretch[] = [];
  const found: BreakEven[] = [];
  let from = low;
  let last = points[0]!;
  for (const point of points.slice(1)) {
    if (point.sign !== last.sign) {
      const breakEven = narrow(input, last, point);
      stretches.push({ from, to: breakEven.at, cheaper: cheaperOf(last.sign) });
      found.push(breakEven);
      from = breakEven.at;
    }
    last = point;
  }
  stretches.push({ from, to: high, cheaper: cheaperOf(last.sign) });
  return { stretches, breakEvens: found };
}

interface DifferenceOverRange {
  difference: (place: number) => number;
  low: number;
  high: number;
  steps: number;
  equalWithin: number;
}

interface SignedPoint {
  place: number;
  sign: number;
}

/** The places of the grid with the sign there; a single equal place between unequal ones is left out, as no stretch of equality. */
function signedPoints({ difference, low, high, steps, equalWithin }: DifferenceOverRange): SignedPoint[] {
  const all = Array.from({ length: steps + 1 }, (_, step): SignedPoint => {
    const place = step === steps ? high : low + ((high - low) * step) / steps;
    return { place, sign: signOf(difference(place), equalWithin) };
  });
  const isAlone = (_: SignedPoint, index: number) =>
    all[index]!.sign === 0 && all[index - 1]?.sign !== 0 && all[index + 1]?.sign !== 0;
  const kept = all.filter((point, index) => !isAlone(point, index));
  return kept.length > 0 ? kept : all;
}

function signOf(difference: number, equalWithin: number): number {
  if (!Number.isFinite(difference)) throw new RangeError(`difference must be finite, got ${difference}`);
  return Math.abs(difference) <= equalWithin ? 0 : Math.sign(difference);
}

const cheaperOf = (sign: number): CheaperStretch['cheaper'] => (sign === 0 ? 'neither' : sign > 0 ? 'second' : 'first');

/** Narrows down where the sign of one place ends on the way to another. */
function narrow(input: DifferenceOverRange, last: SignedPoint, next: SignedPoint): BreakEven {
  const { difference, low, high } = input;
  // Between two unequal ends the bare sign tells the place better than the band of equality.
  const equalWithin = last.sign !== 0 && next.sign !== 0 ? 0 : input.equalWithin;
  let below = last.place;
  let above = next.place;
  while (above - below > (high - low) * placeTolerance) {
    const middle = (below + above) / 2;
    if (signOf(difference(middle), equalWithin) === last.sign) below = middle;
    else above = middle;
  }
  const differenceBelow = difference(below);
  const differenceAbove = difference(above);
  const scale = Math.max(Math.abs(difference(low)), Math.abs(difference(high)));
  return {
    at: (below + above) / 2,
    cheaperBelow: cheaperOf(last.sign),
    cheaperAbove: cheaperOf(next.sign),
    differenceBelow,
    differenceAbove,
    isJump: Math.abs(differenceAbove - differenceBelow) > Math.max(2 * input.equalWithin, jumpShare * scale),
  };
}
