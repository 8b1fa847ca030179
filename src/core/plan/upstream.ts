import type { Upstream } from './types';

/** Power at the meter in one interval. */
export interface MeteredPower {
  kw: number;
  kvar: number;
}

/** Losses between the meter and the plant's bus. */
export interface UpstreamLosses {
  /**
   * Power the meter sees when the plant behind it takes some more.
   *
   *     P = P0 + dP + R (S^2 - S0^2),   Q = Q0 + dQ + X (S^2 - S0^2),   S at the meter
   *
   * Solved by substitution to rounding error: the losses are a small share of S, so each round gains more than a digit.
   */
  seen: (metered: MeteredPower, moreKw: number, moreKvar: number, out: MeteredPower) => void;
  /** Power at the bus when the meter sees this. */
  atBus: (metered: MeteredPower) => MeteredPower;
}

/** @throws {RangeError} naming the argument out of range */
export function upstreamLosses({ ratedKva, resistancePu, reactancePu }: Upstream): UpstreamLosses {
  if (!(ratedKva > 0)) throw new RangeError(`upstream.ratedKva must be > 0, got ${ratedKva}`);
  if (!(resistancePu >= 0 && resistancePu < 0.2))
    throw new RangeError(`upstream.resistancePu must be in [0, 0.2), got ${resistancePu}`);
  if (!(reactancePu >= 0 && reactancePu < 0.5))
    throw new RangeError(`upstream.reactancePu must be in [0, 0.5), got ${reactancePu}`);
  const r = resistancePu / ratedKva;
  const x = reactancePu / ratedKva;
  const seen: UpstreamLosses['seen'] = ({ kw: p, kvar: q }, moreKw, moreKvar, out) => {
    const square = p * p + q * q;
    let gained = 0;
    for (let round = 0; round < 40; round++) {
      const next = (p + moreKw + r * gained) ** 2 + (q + moreKvar + x * gained) ** 2 - square;
      const settled = !(Math.abs(next - gained) > 1e-12 * square);
      gained = next;
      if (settled) break;
    }
    out.kw = p + moreKw + r * gained;
    out.kvar = q + moreKvar + x * gained;
  };
  const atBus = ({ kw, kvar }: MeteredPower) => {
    const square = kw * kw + kvar * kvar;
    return { kw: kw - r * square, kvar: kvar - x * square };
  };
  return { seen, atBus };
}

/** Where nothing lies between meter and bus. */
export const noUpstream: UpstreamLosses = {
  seen: ({ kw, kvar }, moreKw, moreKvar, out) => {
    out.kw = kw + moreKw;
    out.kvar = kvar + moreKvar;
  },
  atBus: (metered) => metered,
};
