import type { InductionMotor } from './types';

/**
 * Power an induction motor takes at shaft loads, from the points of its data sheet.
 *
 * Losses and reactive power are straight lines over the shaft load between the points; a data sheet gives 1/2, 3/4 and full load.
 * Below the least point both keep its straight line down to no load, with losses and reactive power never below half of the
 * least point's; above the greatest the last straight line is prolonged. At standstill nothing is taken.
 *
 * @param motor  Rated output and points with efficiency and lagging power factor.
 * @param loads  Shaft loads. [kW], each > 0
 * @returns kvar absorbed and input, one value per load. [kvar], [kW]
 * @throws {RangeError} naming the point out of range
 * @source Common practice: reactive power of an induction motor is nearly constant (magnetizing) plus a part that grows with load, its
 *   losses a constant part plus one that grows with load; both are smooth, so lines between the sheet's points are near.
 */
export function inductionTaken(
  motor: InductionMotor,
  loads: Float64Array,
): { kvar: Float64Array; inputKw: Float64Array } {
  const knots = knotsOf(motor);
  const inputKw = new Float64Array(loads.length);
  const kvar = loads.map((shaftKw, i) => {
    inputKw[i] = shaftKw + along(knots, shaftKw, 'lossKw');
    return along(knots, shaftKw, 'kvar');
  });
  return { kvar, inputKw };
}

interface Knot {
  shaftKw: number;
  lossKw: number;
  kvar: number;
}

function knotsOf({ ratedOutputKw, points }: InductionMotor): Knot[] {
  if (!(ratedOutputKw > 0 && Number.isFinite(ratedOutputKw)))
    throw new RangeError(`induction.ratedOutputKw must be > 0, got ${ratedOutputKw}`);
  if (points.length < 2) throw new RangeError(`induction.points must be at least two, got ${points.length}`);
  return points.map(({ loadShare, efficiency, powerFactor }, k) => {
    const name = `induction.points[${k}]`;
    const before = k > 0 ? points[k - 1]!.loadShare : 0;
    if (!(loadShare > before && loadShare <= 2))
      throw new RangeError(`${name}.loadShare must be above ${before} and at most 2, got ${loadShare}`);
    if (!(efficiency > 0 && efficiency <= 1))
      throw new RangeError(`${name}.efficiency must be in (0, 1], got ${efficiency}`);
    if (!(powerFactor > 0 && powerFactor <= 1))
      throw new RangeError(`${name}.powerFactor must be in (0, 1], got ${powerFactor}`);
    const shaftKw = loadShare * ratedOutputKw;
    const inputKw = shaftKw / efficiency;
    return { shaftKw, lossKw: inputKw - shaftKw, kvar: (inputKw * Math.sqrt(1 - powerFactor ** 2)) / powerFactor };
  });
}

function along(knots: Knot[], shaftKw: number, name: 'lossKw' | 'kvar'): number {
  let k = 1;
  while (k < knots.length - 1 && shaftKw > knots[k]!.shaftKw) k++;
  const from = knots[k - 1]!;
  const to = knots[k]!;
  const share = (shaftKw - from.shaftKw) / (to.shaftKw - from.shaftKw);
  return Math.max(knots[0]![name] / 2, from[name] + share * (to[name] - from[name]));
}
