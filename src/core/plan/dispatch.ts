/** What a motor loses at amounts of reactive power it may deliver, at one load. */
export interface LossCurve {
  /** Delivered, ascending; both ends of the range among them. One value: it cannot move. [kvar] */
  kvar: Float64Array;
  /** Losses at each. [kW] */
  lossKw: Float64Array;
}

/** How motors share the reactive power asked of them together. */
export interface Dispatch {
  /** What they can deliver together. [kvar] */
  lowKvar: number;
  highKvar: number;
  /** Losses of all when they deliver so much in the cheapest way, clipped to the range. [kW] */
  lossKw: (deliveredKvar: number) => number;
  /** The same with what each delivers. [kvar] */
  share: (deliveredKvar: number, out: Float64Array) => void;
}

interface Segment {
  motor: number;
  kvar: number;
  lossKw: number;
  /** Loss per kvar, never below that of the segments before it of the same motor. [kW/kvar] */
  price: number;
}

/** Prices nearer to one another than this are one price: what is asked is then shared by headroom. [kW/kvar] */
const SAME_PRICE = 1e-9;

/**
 * Loads motors in the cheapest order: the kvar of least extra loss first.
 *
 * Every curve is taken as straight between its points. Segments of all motors in order of their loss per kvar are the order of
 * loading; within their ranges the motors then stand at equal marginal losses, which is least in sum where losses rise ever faster
 * with reactive power (Derivation: were the marginal losses of two motors unequal, a kvar moved from the dearer to the cheaper would
 * save the difference). Segments of one price share by their headroom.
 */
export function cheapestOrder(curves: readonly LossCurve[]): Dispatch {
  const groups = groupsOf(curves);
  const low = curves.map(({ kvar }) => kvar[0]!);
  const lowKvar = low.reduce((sum, kvar) => sum + kvar, 0);
  const lowLossKw = curves.reduce((sum, { lossKw }) => sum + lossKw[0]!, 0);
  const ends = new Float64Array(groups.length + 1);
  const losses = new Float64Array(groups.length + 1);
  ends[0] = lowKvar;
  losses[0] = lowLossKw;
  groups.forEach(({ kvar, lossKw }, g) => {
    ends[g + 1] = ends[g]! + kvar;
    losses[g + 1] = losses[g]! + lossKw;
  });
  const highKvar = ends[groups.length]!;
  const lossKw = (delivered: number): number => {
    if (groups.length === 0 || delivered <= lowKvar) return lowLossKw;
    if (delivered >= highKvar) return losses[groups.length]!;
    const g = groupAt(ends, delivered);
    return losses[g]! + ((delivered - ends[g]!) / (ends[g + 1]! - ends[g]!)) * (losses[g + 1]! - losses[g]!);
  };
  const share = (delivered: number, out: Float64Array): void => {
    out.set(low);
    for (let g = 0; g < groups.length && delivered > ends[g]!; g++) {
      const part = Math.min(1, (delivered - ends[g]!) / groups[g]!.kvar);
      for (const segment of groups[g]!.segments) out[segment.motor]! += part * segment.kvar;
    }
  };
  return { lowKvar, highKvar, lossKw, share };
}

function groupsOf(curves: readonly LossCurve[]): { kvar: number; lossKw: number; segments: Segment[] }[] {
  const segments = curves.flatMap(({ kvar, lossKw }, motor) => {
    let price = -Infinity;
    return Array.from({ length: kvar.length - 1 }, (_, k): Segment => {
      const [width, loss] = [kvar[k + 1]! - kvar[k]!, lossKw[k + 1]! - lossKw[k]!];
      price = Math.max(price, loss / width);
      return { motor, kvar: width, lossKw: loss, price };
    });
  });
  segments.sort((a, b) => a.price - b.price || a.motor - b.motor);
  const groups: { kvar: number; lossKw: number; price: number; segments: Segment[] }[] = [];
  for (const segment of segments) {
    const last = groups.at(-1);
    if (last && segment.price - last.price <= SAME_PRICE) {
      last.kvar += segment.kvar;
      last.lossKw += segment.lossKw;
      last.segments.push(segment);
    } else {
      const { kvar, lossKw, price } = segment;
      groups.push({ kvar, lossKw, price, segments: [segment] });
    }
  }
  return groups;
}

/** Group in which an amount between the ends lies. */
function groupAt(ends: Float64Array, delivered: number): number {
  let low = 0;
  let high = ends.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (ends[middle]! <= delivered) low = middle;
    else high = middle;
  }
  return low;
}
