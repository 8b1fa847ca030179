import type { IntervalRole, Measure } from './column-map';

/** One kind of figure along a strand. */
export interface StrandChannel {
  role: IntervalRole;
  measure: Measure;
  name: string;
  /** Figures in kWh, kvarh, kVAh (or kW, kvar, kVA), NaN where blank; senses as 1 and -1. */
  values: Float64Array;
  /** What the figures of the file were multiplied by; registers roll over by the digits of the file. */
  scale?: number;
}

/** Readings in the order of time, as stamped: one strand for a table of one meter, one per channel where rows name them. */
export interface Strand {
  /** Minutes of the wall clock since 1970-01-01 00:00 local, as stamped. */
  walls: Float64Array;
  /** Minutes east of UTC each stamp carries, or null if none does. */
  offsets: Float64Array | null;
  /** Minutes each reading spans by its begin and end stamps, or null. */
  spans: Float64Array | null;
  /** Day each reading belongs to where readings are numbered within the day (days since 1970-01-01), or null. */
  days: Float64Array | null;
  /** Row of the grid each reading stands in. */
  rows: Uint32Array;
  channels: StrandChannel[];
  /** Mark of quality of each reading, or null if the file has none. */
  quality: Uint8Array | null;
  /** The file runs backwards in time: the strand has been turned round. */
  isTurned: boolean;
}

/** Some readings of a strand, with channels of their own. */
export function pickReadings(strand: Strand, positions: readonly number[], channels: StrandChannel[]): Strand {
  const pick = (source: Float64Array): Float64Array => Float64Array.from(positions, (at) => source[at] ?? Number.NaN);
  return {
    walls: pick(strand.walls),
    offsets: strand.offsets && pick(strand.offsets),
    spans: strand.spans && pick(strand.spans),
    days: strand.days && pick(strand.days),
    rows: Uint32Array.from(positions, (at) => strand.rows[at] ?? 0),
    channels,
    quality: strand.quality && Uint8Array.from(positions, (at) => strand.quality?.[at] ?? 0),
    isTurned: strand.isTurned,
  };
}

/** The strand with its order of time turned round. */
export function turnStrand(strand: Strand): Strand {
  return {
    walls: strand.walls.slice().reverse(),
    offsets: strand.offsets?.slice().reverse() ?? null,
    spans: strand.spans?.slice().reverse() ?? null,
    days: strand.days?.slice().reverse() ?? null,
    rows: strand.rows.slice().reverse(),
    channels: strand.channels.map((channel) => ({ ...channel, values: channel.values.slice().reverse() })),
    quality: strand.quality?.slice().reverse() ?? null,
    isTurned: !strand.isTurned,
  };
}

/** Whether more stamps fall than rise. */
export function runsBackwards(walls: Float64Array): boolean {
  let balance = 0;
  for (let at = 1; at < walls.length; at += 1) {
    const step = (walls[at] ?? Number.NaN) - (walls[at - 1] ?? Number.NaN);
    if (step > 0) balance += 1;
    else if (step < 0) balance -= 1;
  }
  return balance < 0;
}
