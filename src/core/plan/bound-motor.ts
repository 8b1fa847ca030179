import { piecesAt, type LossPieces } from './bound-pieces';
import { reactiveSupply } from '../machine';
import type { ReactiveSupply } from '../machine';
import type { PlacedMotor } from './placed-motor';
import type { PlanMotor } from './types';

/** What a motor may take beyond standing at each distinct load, behind a zero for the standstill. Load view. */
export interface MotorReach {
  index: Uint32Array;
  /** [kvar] */
  leastKvar: Float64Array;
  mostKvar: Float64Array;
  /** Least over all it may deliver, and what delivering most takes. [kW] */
  leastKw: Float64Array;
  mostKw: Float64Array;
  atMostDeliveredKw: Float64Array;
  /** Reactive power taken beyond standing where the losses are least. [kvar] */
  leastLossKvar: Float64Array;
  /** What delivering more than that costs; per kvar and kW. */
  pieces: (LossPieces | undefined)[];
}

/** Room for the error of the machine's tables, as a share of rated kVA. */
const TABLE_ROOM = 4e-6;

/** Halvings of the range when the reactive power of least loss is looked for. */
const HALVINGS = 24;

/**
 * Range of a motor's reactive power at every load, within all its limits, and the least it can lose there.
 *
 * The standing setting counts as admissible even where it breaks a limit: it is what a plan may leave as it is.
 *
 * The least input is below that of every reactive power because the input is convex in it: where the slope changes its sign between two
 * points, it lies above both tangents, so above the point where they meet. Derivation: with Phi = h (p^2 + q^2) + X If^2 the input is the
 * least p with p >= shaft + constant losses + Phi(p, q); where Phi is convex that set is convex, and so is its lower border over q.
 * If^2 is convex: for a machine without saturation, Ra left out, with b the voltage behind Xq, d its angle, k = Xd/Xq - 1 and
 * E = (1 + k) b - k V cos d >= 0, the determinant of its second derivatives is a positive multiple of
 * (1 + k)^2 E (..) + (k V sin d/b)^2 ((1 + k)^2 - (k V cos d/b)^2), which E >= 0 keeps from being negative. Armature resistance and
 * saturation are small beside; a load at which the slopes sampled do not rise is given the whole spread of its inputs as room.
 *
 * @param canStand  Whether it may be left as it stands: not where it replaces another motor
 * @throws {PullOutError} when the field limit does not hold the highest load
 */
export function motorReach(
  placed: PlacedMotor,
  { motor, voltagePu, leastFieldA }: Pick<PlanMotor, 'motor' | 'voltagePu' | 'leastFieldA'>,
  canStand: boolean,
): MotorReach {
  const { loads, index, standing, ratedKva } = placed;
  const supply = reactiveSupply(motor, { loads, voltagePu, leastFieldA });
  const room = TABLE_ROOM * ratedKva;
  const count = loads.length + 1;
  const reach: MotorReach = {
    index,
    leastKvar: new Float64Array(count),
    mostKvar: new Float64Array(count),
    leastKw: new Float64Array(count),
    mostKw: new Float64Array(count),
    atMostDeliveredKw: new Float64Array(count),
    leastLossKvar: new Float64Array(count),
    pieces: [undefined],
  };
  const none = canStand ? 0 : NaN;
  for (let k = 1; k < count; k++) {
    const { lossLow, lossHigh, atMost, leastLossAt, isConvex } = inputsAt(supply, k - 1);
    const standingKw = standing.kw[k]!;
    const standingKvar = standing.kvar[k]!;
    reach.leastKvar[k] = least(-supply.most[k - 1]! - standingKvar - room, none);
    reach.mostKvar[k] = most(-supply.least[k - 1]! - standingKvar + room, none);
    reach.leastKw[k] = least(lossLow - standingKw - room, none);
    reach.mostKw[k] = most(lossHigh - standingKw + room, none);
    reach.atMostDeliveredKw[k] = atMost - standingKw;
    reach.leastLossKvar[k] = -leastLossAt - standingKvar;
    const beyond = (canStand ? Math.max(0, -standingKvar - supply.most[k - 1]!) : 0) + room;
    reach.pieces.push(piecesAt(supply, k - 1, { from: leastLossAt, isConvex, beyond, room }));
  }
  return reach;
}

const least = (a: number, b: number): number => (Number.isNaN(b) ? a : Math.min(a, b));
const most = (a: number, b: number): number => (Number.isNaN(b) ? a : Math.max(a, b));

/** Inputs over the range at a load. */
interface Inputs {
  lossLow: number;
  lossHigh: number;
  /** At most delivered. */
  atMost: number;
  /** Delivered where the input is least. [kvar] */
  leastLossAt: number;
  isConvex: boolean;
}

/** Lower and upper end of the input over the range at a load, and that at most delivered. */
function inputsAt(supply: ReactiveSupply, k: number): Inputs {
  let [low, high] = [supply.least[k]!, supply.most[k]!];
  const atLeast = supply.inputKwAt(k, low);
  const atMost = supply.inputKwAt(k, high);
  const lossHigh = Math.max(atLeast, atMost);
  const slope = (q: number): number => supply.marginalLossAt(k, q);
  const leastLossAt = atMost < atLeast ? high : low;
  const atEnd = { lossLow: Math.min(atLeast, atMost), lossHigh, atMost, leastLossAt, isConvex: true };
  if (!(high > low)) return atEnd;
  if (!risesEverywhere(slope, low, high)) {
    const middle = [0.25, 0.5, 0.75].map((share) => supply.inputKwAt(k, low + share * (high - low)));
    const [lowest, highest] = [Math.min(atEnd.lossLow, ...middle), Math.max(lossHigh, ...middle)];
    return { lossLow: 2 * lowest - highest, lossHigh: 2 * highest - lowest, atMost, leastLossAt: low, isConvex: false };
  }
  if (slope(low) >= 0 || slope(high) <= 0) return atEnd;
  for (let halving = 0; halving < HALVINGS; halving++) {
    const middle = (low + high) / 2;
    if (slope(middle) < 0) low = middle;
    else high = middle;
  }
  const lossLow = supply.inputKwAt(k, low) + slope(low) * (high - low);
  return { lossLow, lossHigh, atMost, leastLossAt: low, isConvex: true };
}

function risesEverywhere(slope: (q: number) => number, low: number, high: number): boolean {
  let before = -Infinity;
  for (let j = 0; j <= 4; j++) {
    const found = slope(low + ((high - low) * j) / 4);
    if (found < before - 1e-9) return false;
    before = found;
  }
  return true;
}
