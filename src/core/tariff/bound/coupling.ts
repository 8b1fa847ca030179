import type { ClassPlan } from '../price/class-loops';

/** What delivering more from one source in one interval costs in active energy, at least. */
export interface DeliveryCurve {
  /** Reactive energy of each piece beyond the least losses. [kvarh] */
  kvarh: Float64Array;
  /** Active energy per reactive energy of each piece, rising. [kWh/kvarh], >= 0 */
  kwhPerKvarh: Float64Array;
  /** What the pieces may tell too much. [kWh] */
  roomKwh: number;
}

/**
 * How active energy rises with reactive energy delivered, which the ends of a box do not tell.
 *
 * In each interval of each load meant, active energy is at least the box's low end and what the sources lose for what they deliver beyond
 * `leastLossKvarh` less the net reactive energy of the interval, each at least by its curve.
 */
export interface Coupling {
  /** Net reactive energy absorbed where losses are least. [kvarh], float64[intervals] */
  leastLossKvarh: Float64Array;
  /** The curve of each source in each interval; no curve: it delivers nothing there. */
  sources: { index: Uint32Array; curves: (DeliveryCurve | undefined)[] }[];
}

/** Least active energy of a class of intervals for what they deliver together. */
export class LossEnvelope {
  /** Net reactive energy of the class where losses are least. [kvarh] */
  leastLossKvarh = 0;
  private ends: Float64Array = Float64Array.of(0);
  private losses: Float64Array = Float64Array.of(0);
  private room = 0;

  /**
   * Losses of delivering until the net reactive energy is at most this, beyond the least: the cheapest pieces of all intervals first, which is
   * least in sum since the pieces of each curve rise in price. [kWh], >= 0
   */
  leastKwh(netKvarh: number): number {
    const delivered = this.leastLossKvarh - netKvarh;
    if (!(delivered > 0)) return 0;
    const { ends, losses } = this;
    const last = ends.length - 1;
    if (delivered >= ends[last]!) return Math.max(0, losses[last]! - this.room);
    let low = 0;
    let high = last;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (ends[middle]! <= delivered) low = middle;
      else high = middle;
    }
    const share = (delivered - ends[low]!) / (ends[high]! - ends[low]!);
    return Math.max(0, losses[low]! + share * (losses[high]! - losses[low]!) - this.room);
  }

  static of(pieces: { kvarh: number; price: number }[], leastLossKvarh: number, room: number): LossEnvelope {
    const envelope = new LossEnvelope();
    pieces.sort((a, b) => a.price - b.price);
    envelope.leastLossKvarh = leastLossKvarh;
    envelope.ends = new Float64Array(pieces.length + 1);
    envelope.losses = new Float64Array(pieces.length + 1);
    pieces.forEach(({ kvarh, price }, k) => {
      envelope.ends[k + 1] = envelope.ends[k]! + kvarh;
      envelope.losses[k + 1] = envelope.losses[k]! + kvarh * price;
    });
    // Room for the last digits of long sums, too.
    envelope.room = room + 1e-9 * envelope.losses[pieces.length]!;
    return envelope;
  }
}

/** The envelopes of a period's classes. */
export function envelopesOf(coupling: Coupling, classes: ClassPlan, quality: Uint8Array): LossEnvelope[] {
  const { runFirst, runEnd, runClass, classCount } = classes;
  return Array.from({ length: classCount }, (_, group) => {
    const pieces: { kvarh: number; price: number }[] = [];
    let least = 0;
    let room = 0;
    const counts = coupling.sources.map(() => new Map<number, number>());
    for (let run = 0; run < runFirst.length; run++) {
      if (runClass[run] !== group) continue;
      for (let i = runFirst[run]!; i < runEnd[run]!; i++) {
        if (quality[i] === 2) continue;
        least += coupling.leastLossKvarh[i]!;
        coupling.sources.forEach(({ index }, s) => counts[s]!.set(index[i]!, (counts[s]!.get(index[i]!) ?? 0) + 1));
      }
    }
    coupling.sources.forEach(({ curves }, s) => {
      for (const [k, count] of counts[s]!) {
        const curve = curves[k];
        if (!curve) continue;
        room += count * curve.roomKwh;
        curve.kvarh.forEach((kvarh, j) => pieces.push({ kvarh: count * kvarh, price: curve.kwhPerKvarh[j]! }));
      }
    });
    return LossEnvelope.of(pieces, least, room);
  });
}
