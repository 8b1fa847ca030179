import type { ReactiveSupply } from '../machine';

/** Losses of delivering more than where they are least, piece by piece. */
export interface LossPieces {
  /** Width of each piece. [kvar] */
  kvar: Float64Array;
  /** [kW/kvar], rising */
  kwPerKvar: Float64Array;
  /** What straight pieces may tell too much. [kW] */
  roomKw: number;
}

/** Pieces of a curve. */
const PIECES = 8;

/**
 * Losses of delivering more than `from`, where they are least, in straight pieces.
 *
 * A chord of a convex curve lies above it by at most a quarter of its width times what the slope rises by: `roomKw` is the most of that. What
 * may be delivered `beyond` the range, and a curve that is not convex, cost nothing.
 *
 * @returns nothing where no more can be delivered
 */
export function piecesAt(
  supply: ReactiveSupply,
  k: number,
  { from, isConvex, beyond, room }: { from: number; isConvex: boolean; beyond: number; room: number },
): LossPieces {
  const width = Math.max(0, supply.most[k]! - from);
  if (!isConvex || width === 0)
    return { kvar: Float64Array.of(width + beyond), kwPerKvar: Float64Array.of(0), roomKw: 0 };
  const kvar = new Float64Array(PIECES + 1).fill(width / PIECES);
  kvar[0] = beyond;
  const kwPerKvar = new Float64Array(PIECES + 1);
  let roomKw = 0;
  let before = supply.inputKwAt(k, from);
  let slopeBefore = supply.marginalLossAt(k, from);
  for (let j = 1; j <= PIECES; j++) {
    const at = from + (width * j) / PIECES;
    const input = supply.inputKwAt(k, at);
    const slope = supply.marginalLossAt(k, at);
    kwPerKvar[j] = Math.max(kwPerKvar[j - 1]!, (input - before) / (width / PIECES));
    roomKw = Math.max(roomKw, ((slope - slopeBefore) * width) / PIECES / 4);
    before = input;
    slopeBefore = slope;
  }
  return { kvar, kwPerKvar, roomKw: roomKw + room };
}
