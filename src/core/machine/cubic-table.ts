/** Two curves at one abscissa, and which of several regimes they are in there. */
export interface TableSample {
  a: number;
  b: number;
  /** Corners between regimes are closed in on. 0 when absent */
  regime?: number;
}

/** Both curves, and the regime, at many abscissas. */
export interface TableValues {
  a: Float64Array;
  b: Float64Array;
  regime: Uint8Array;
}

/** Piecewise cubics of two curves over ascending abscissas. */
export interface CubicTable {
  /**
   * Values at many abscissas.
   *
   * @param at  Ascending, within the table's range.
   * @param into  Arrays to write in; new ones when absent.
   */
  read: (at: Float64Array, into?: TableValues) => TableValues;
  /** The first curve at one abscissa within the table's range, in any order. */
  firstAt: (x: number) => number;
}

/** Least width of a table's piece, as a share of its range: where a curve has a corner. */
const LEAST_WIDTH = 1e-7;

type Cubic = [number, number, number, number];

interface Piece {
  from: number;
  to: number;
  scale: number;
  a: Cubic;
  b: Cubic;
  regime: number;
}

/**
 * Cubic pieces through four samples each, halved until three more samples agree.
 *
 * @param sample  Both curves at an abscissa.
 * @param from, to  Range, ascending.
 * @param tolerance  Greatest error at the samples that are compared, in the curves' unit.
 */
export function cubicTable(
  sample: (x: number) => TableSample,
  from: number,
  to: number,
  tolerance: number,
): CubicTable {
  const pieces: Piece[] = [];
  const least = (to - from) * LEAST_WIDTH;
  const build = (lo: number, hi: number) => {
    const at = (share: number) => sample(Math.min(lo + (hi - lo) * share, to));
    const knots = [0, 1 / 3, 2 / 3, 1].map(at);
    const a = cubicThrough(knots.map((k) => k.a));
    const b = cubicThrough(knots.map((k) => k.b));
    const regime = knots[0]!.regime ?? 0;
    const agrees =
      knots.every((k) => (k.regime ?? 0) === regime) &&
      [1 / 6, 1 / 2, 5 / 6].every((t) => {
        const solved = at(t);
        const error = Math.max(Math.abs(cubic(a, t) - solved.a), Math.abs(cubic(b, t) - solved.b));
        return error <= tolerance && (solved.regime ?? 0) === regime;
      });
    if (agrees || hi - lo <= least) pieces.push({ from: lo, to: hi, scale: 1 / (hi - lo), a, b, regime });
    else {
      build(lo, (lo + hi) / 2);
      build((lo + hi) / 2, hi);
    }
  };
  if (to > from) build(from, to);
  return {
    read: (at, into = newValues(at.length)) => readPieces(pieces, at, into),
    firstAt: (x) => firstOf(pieces, x),
  };
}

const newValues = (count: number): TableValues => ({
  a: new Float64Array(count),
  b: new Float64Array(count),
  regime: new Uint8Array(count),
});

function readPieces(pieces: Piece[], at: Float64Array, into: TableValues): TableValues {
  const { a, b, regime } = into;
  let i = 0;
  pieces.forEach((piece, k) => {
    const to = k === pieces.length - 1 ? Infinity : piece.to;
    const { from, scale } = piece;
    const [a0, a1, a2, a3] = piece.a;
    const [b0, b1, b2, b3] = piece.b;
    for (; i < at.length && at[i]! <= to; i++) {
      const t = (at[i]! - from) * scale;
      a[i] = a0 + t * (a1 + t * (a2 + t * a3));
      b[i] = b0 + t * (b1 + t * (b2 + t * b3));
      regime[i] = piece.regime;
    }
  });
  return into;
}

function firstOf(pieces: Piece[], x: number): number {
  let lo = 0;
  let hi = pieces.length - 1;
  while (lo < hi) {
    const middle = (lo + hi) >> 1;
    if (x <= pieces[middle]!.to) hi = middle;
    else lo = middle + 1;
  }
  const { a, from, scale } = pieces[lo]!;
  return cubic(a, (x - from) * scale);
}

function cubic(c: Cubic, t: number): number {
  return c[0] + t * (c[1] + t * (c[2] + t * c[3]));
}

/** Cubic through values at 0, 1/3, 2/3 and 1. Derivation: Newton's forward differences with step 1/3. */
function cubicThrough(values: number[]): Cubic {
  const [a, b, c, d] = values as Cubic;
  const first = b - a;
  const second = (c - 2 * b + a) / 2;
  const third = (d - 3 * c + 3 * b - a) / 6;
  return [a, 3 * (first - second + 2 * third), 9 * (second - 3 * third), 27 * third];
}
