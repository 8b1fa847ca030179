import type { Upstream } from './types';
import { upstreamLosses } from './upstream';

/** From `low` to `high`. */
export interface Ends {
  low: number;
  high: number;
}

/** Power the meter may see when the plant takes more, each change within its ends. */
export type SeenEnds = (
  metered: { kw: number; kvar: number },
  moreKw: Ends,
  moreKvar: Ends,
  out: { kw: Ends; kvar: Ends },
) => boolean;

/** Where nothing lies between meter and bus. */
export const seenAtBus: SeenEnds = (metered, moreKw, moreKvar, out) => {
  out.kw.low = metered.kw + moreKw.low;
  out.kw.high = metered.kw + moreKw.high;
  out.kvar.low = metered.kvar + moreKvar.low;
  out.kvar.high = metered.kvar + moreKvar.high;
  return true;
};

/** Share added on either side for the rounds after which the simulation takes the losses as settled. */
const SETTLED_ROOM = 1e-9;

/**
 * Ends of the power at the meter over all changes behind the upstream part.
 *
 * With g = S^2 - S0^2 the simulation settles g = phi(g) = (P0 + dP + r g)^2 + (Q0 + dQ + x g)^2 - S0^2 by substitution from 0. A range of g
 * that holds 0 and that phi maps into itself for all changes holds every round of it; mapped again and again it closes in on the answers.
 *
 * @returns A function that answers false where no such range is found: the load is then too great for the impedance
 */
export function seenThrough(upstream: Upstream): SeenEnds {
  upstreamLosses(upstream);
  const r = upstream.resistancePu / upstream.ratedKva;
  const x = upstream.reactancePu / upstream.ratedKva;
  return (metered, moreKw, moreKvar, out) => {
    const square = metered.kw ** 2 + metered.kvar ** 2;
    const phi = (g: Ends): Ends => {
      const p = squareOf(metered.kw + moreKw.low + r * g.low, metered.kw + moreKw.high + r * g.high);
      const q = squareOf(metered.kvar + moreKvar.low + x * g.low, metered.kvar + moreKvar.high + x * g.high);
      return { low: p.low + q.low - square, high: p.high + q.high - square };
    };
    const first = phi({ low: 0, high: 0 });
    let reach = Math.max(Math.abs(first.low), Math.abs(first.high), 1e-9);
    let g: Ends | null = null;
    for (let attempt = 0; attempt < 6 && !g; attempt++) {
      reach *= 1.5;
      const mapped = phi({ low: -reach, high: reach });
      if (mapped.low >= -reach && mapped.high <= reach) g = mapped;
    }
    if (!g) return false;
    for (let round = 0; round < 12; round++) g = phi(g);
    const room = SETTLED_ROOM * (square + Math.abs(g.low) + Math.abs(g.high));
    out.kw.low = metered.kw + moreKw.low + r * (g.low - room);
    out.kw.high = metered.kw + moreKw.high + r * (g.high + room);
    out.kvar.low = metered.kvar + moreKvar.low + x * (g.low - room);
    out.kvar.high = metered.kvar + moreKvar.high + x * (g.high + room);
    return true;
  };
}

function squareOf(low: number, high: number): Ends {
  const most = Math.max(low * low, high * high);
  return { low: low <= 0 && high >= 0 ? 0 : Math.min(low * low, high * high), high: most };
}
