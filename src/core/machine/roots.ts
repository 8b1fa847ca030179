import { NotConvergedError } from './errors';

const EPS = 2.220446049250313e-16;
const GOLDEN = (3 - Math.sqrt(5)) / 2;
/** Absolute precision near zero: far below rounding of the per-unit values and radians sought here. */
const LEAST = 1e-18;

/**
 * Zero of a continuous function between two points of opposite sign: inverse quadratic interpolation, secant and
 * bisection combined, so that it is never slower than bisection.
 *
 * @param f  Function of one variable.
 * @param lo  One end of the bracket.
 * @param hi  Other end; f(lo) and f(hi) have opposite signs or one is zero.
 * @param code  Name of the quantity sought, for the error.
 * @returns A point where f changes sign, to the precision of the machine; 1e-18 around zero.
 * @throws {NotConvergedError} when the ends do not bracket a zero or after 200 steps.
 * @source [BRE] ch. 4 (procedure zero).
 */
export function brentRoot(f: (x: number) => number, lo: number, hi: number, code: string): number {
  let a = lo;
  let b = hi;
  let fa = f(a);
  let fb = f(b);
  if (!(Math.sign(fa) * Math.sign(fb) <= 0)) throw new NotConvergedError(code, 0, Math.min(Math.abs(fa), Math.abs(fb)));
  let c = b;
  let fc = fb;
  let step = 0;
  let last = 0;
  for (let i = 0; i < 200; i++) {
    if (fb > 0 === fc > 0) {
      [c, fc] = [a, fa];
      step = last = b - a;
    }
    if (Math.abs(fc) < Math.abs(fb)) [a, b, c, fa, fb, fc] = [b, c, b, fb, fc, fb];
    const tolerance = 2 * EPS * Math.abs(b) + LEAST;
    const half = (c - b) / 2;
    if (Math.abs(half) <= tolerance || fb === 0) return b;
    const trial = interpolate(a, b, c, fa, fb, fc, half, last, tolerance);
    last = trial === null ? half : step;
    step = trial ?? half;
    [a, fa] = [b, fb];
    b += Math.abs(step) > tolerance ? step : Math.sign(half) * tolerance;
    fb = f(b);
  }
  throw new NotConvergedError(code, 200, Math.abs(fb));
}

/** Step from b by secant or inverse quadratic interpolation; null where bisection is safer. */
function interpolate(
  a: number,
  b: number,
  c: number,
  fa: number,
  fb: number,
  fc: number,
  half: number,
  last: number,
  tolerance: number,
): number | null {
  if (Math.abs(last) < tolerance || Math.abs(fa) <= Math.abs(fb)) return null;
  const s = fb / fa;
  let p: number;
  let q: number;
  if (a === c) {
    p = 2 * half * s;
    q = 1 - s;
  } else {
    const t = fa / fc;
    const r = fb / fc;
    p = s * (2 * half * t * (t - r) - (b - a) * (r - 1));
    q = (t - 1) * (r - 1) * (s - 1);
  }
  if (p > 0) q = -q;
  p = Math.abs(p);
  const accepted = 2 * p < Math.min(3 * half * q - Math.abs(tolerance * q), Math.abs(last * q));
  return accepted ? p / q : null;
}

/**
 * Point of the least value of a function with one minimum between two points, by golden section.
 *
 * @returns The abscissa, to about the square root of machine precision.
 * @source [BRE] ch. 5 (golden section search).
 */
export function goldenMinimum(f: (x: number) => number, lo: number, hi: number): number {
  let a = lo;
  let b = hi;
  let x = a + GOLDEN * (b - a);
  let y = b - GOLDEN * (b - a);
  let fx = f(x);
  let fy = f(y);
  for (let i = 0; i < 120 && b - a > 1e-10 * (Math.abs(x) + Math.abs(y)) + 1e-14; i++) {
    if (fx <= fy) {
      [b, y, fy] = [y, x, fx];
      x = a + GOLDEN * (b - a);
      fx = f(x);
    } else {
      [a, x, fx] = [x, y, fy];
      y = b - GOLDEN * (b - a);
      fy = f(y);
    }
  }
  return fx <= fy ? x : y;
}
