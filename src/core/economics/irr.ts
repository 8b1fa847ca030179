/**
 * All internal rates of return of a series of yearly flows.
 *
 * The present value is a polynomial in x = 1/(1 + r). Its roots are isolated between the roots of its derivative, taken
 * recursively, on 0 < x <= 1 (rates from 0 up) and, mirrored, on 0 < 1/x < 1 (rates between -100 % and 0).
 *
 * @param flows  Flow at the end of year k, k = 0 first. [currency], any signs
 * @returns Distinct rates above -100 %, ascending; `every` when all flows are zero and every rate is one.
 * @source Rolle's theorem; roots found by bisection.
 */
export function ratesOfReturn(flows: number[]): number[] | 'every' {
  const first = flows.findIndex((flow) => flow !== 0);
  if (first === -1) return 'every';
  const trimmed = flows.slice(first);
  while (trimmed[trimmed.length - 1] === 0) trimmed.pop();
  const high = rootsUpToOne(trimmed).map((x) => 1 / x - 1);
  const low = rootsUpToOne([...trimmed].reverse())
    .filter((y) => y < 1)
    .map((y) => y - 1);
  return distinct([...low, ...high].sort((a, b) => a - b));
}

function distinct(rates: number[]): number[] {
  return rates.filter((rate, i) => i === 0 || rate - rates[i - 1]! > 1e-9 * (1 + Math.abs(rate)));
}

/** Roots of sum c[k] x^k in (0, 1], ascending. */
function rootsUpToOne(coefficients: number[]): number[] {
  if (coefficients.length < 2) return [];
  const degree = coefficients.length - 1;
  const slope = coefficients.slice(1).map((c, k) => (c * (k + 1)) / degree);
  const stations = [0, ...rootsUpToOne(slope), 1];
  const roots: number[] = [];
  stations.forEach((station, i) => {
    if (station > 0 && isRoot(coefficients, station)) {
      roots.push(station);
      return;
    }
    const before = stations[i - 1];
    if (before === undefined || (before > 0 && isRoot(coefficients, before))) return;
    if (valueOf(coefficients, before) * valueOf(coefficients, station) < 0)
      roots.push(bisect(coefficients, before, station));
  });
  return roots;
}

/** Zero within the rounding of its own terms: a root the curve only touches counts. */
function isRoot(coefficients: number[], x: number): boolean {
  const size = coefficients.reduceRight((sum, c) => sum * x + Math.abs(c), 0);
  return Math.abs(valueOf(coefficients, x)) <= 1e-14 * size;
}

function valueOf(coefficients: number[], x: number): number {
  return coefficients.reduceRight((sum, c) => sum * x + c, 0);
}

function bisect(coefficients: number[], lo: number, hi: number): number {
  const rising = valueOf(coefficients, hi) > 0;
  let [a, b] = [lo, hi];
  for (let i = 0; i < 1100; i++) {
    const middle = a + (b - a) / 2;
    if (middle <= a || middle >= b) break;
    if (valueOf(coefficients, middle) > 0 === rising) b = middle;
    else a = middle;
  }
  return Math.abs(valueOf(coefficients, a)) < Math.abs(valueOf(coefficients, b)) ? a : b;
}
