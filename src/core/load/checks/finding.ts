import type { LoadSeries } from '../series';

/** What may be wrong with readings that are there. */
export type LoadFault =
  | 'negative'
  | 'impossible'
  | 'over-capacity'
  | 'spike'
  | 'flat'
  | 'zeros'
  | 'poor-factor'
  | 'reactive-alone'
  | 'clock-shift'
  | 'energy-differs';

/** One thing to look at, half-open in time. Nothing is repaired: a person decides. */
export interface LoadFinding {
  fault: LoadFault;
  /** `fault`: cannot be true; `caution`: hardly; `note`: worth a look. */
  severity: 'fault' | 'caution' | 'note';
  fromMs: number;
  toMs: number;
  /** Intervals concerned; of one that is scattered fewer than lie between the instants. */
  intervals: number;
  /** What was found: kW, a factor, kWh or minutes, as the fault has it. */
  found: number;
  /** What it is held against; null where there is nothing. */
  against: number | null;
  /** The bill it is about, where it is about one. */
  name?: string;
}

/** A run of intervals: first and behind the last. */
export interface Run {
  from: number;
  to: number;
}

/** Runs of intervals that meet a condition. */
export function runsWhere(count: number, meets: (index: number) => boolean): Run[] {
  const runs: Run[] = [];
  for (let index = 0; index < count; index++) {
    if (!meets(index)) continue;
    const open = runs.at(-1);
    if (open?.to === index) open.to++;
    else runs.push({ from: index, to: index + 1 });
  }
  return runs;
}

/** Beginning and end of a run as instants. */
export const instantsOf = ({ startMs, stepMinutes }: LoadSeries, { from, to }: Run) => ({
  fromMs: startMs + from * stepMinutes * 60_000,
  toMs: startMs + to * stepMinutes * 60_000,
  intervals: to - from,
});

/** Mean power of an energy. [kW or kvar] */
export const meanPower = ({ stepMinutes }: LoadSeries, energy: number) => (energy * 60) / stepMinutes;
