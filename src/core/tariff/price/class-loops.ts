import type { LoadSeries } from '../../load';
import { tieFraction } from './cell-loops';

const tieFactor = 1 + tieFraction;

/** Runs of successive intervals of one class (combination of windows), none crossing a piece's border, and what is gathered over them. */
export interface ClassPlan {
  classCount: number;
  pieceCount: number;
  /** First interval of each run, the one behind its last, its class and its piece. int32[runs] */
  runFirst: Int32Array;
  runEnd: Int32Array;
  runClass: Int32Array;
  runPiece: Int32Array;
  /** Sums by piece x classes + class. float64[pieces x classes] */
  kwh: Float64Array;
  kvarhLagging: Float64Array;
  kvarhLeading: Float64Array;
  /** Highest active energy of an interval and highest square of its apparent energy, by class, with the interval. */
  highestKwh: Float64Array;
  highestKwhAt: Int32Array;
  highestSquare: Float64Array;
  highestSquareAt: Int32Array;
  needs: { kwh: boolean; reactive: boolean; kwPeak: boolean; kvaPeak: boolean };
}

/** Gathers active energy: sums and highest interval by class. */
export function gatherActive(plan: ClassPlan, { kwh, quality }: LoadSeries, hasMissing: boolean): void {
  const { runFirst, runEnd, runClass, runPiece, classCount } = plan;
  plan.kwh.fill(0);
  plan.highestKwh.fill(-Infinity);
  plan.highestKwhAt.fill(-1);
  for (let run = 0; run < runFirst.length; run++) {
    const end = runEnd[run]!;
    const group = runClass[run]!;
    let sum = 0;
    let highest = plan.highestKwh[group]!;
    let beyond = highest * tieFactor;
    let at = plan.highestKwhAt[group]!;
    for (let i = runFirst[run]!; i < end; i++) {
      if (hasMissing && quality[i] === 2) continue;
      const energy = kwh[i]!;
      sum += energy;
      if (energy > beyond) {
        highest = energy;
        beyond = energy * tieFactor;
        at = i;
      }
    }
    plan.kwh[runPiece[run]! * classCount + group]! += sum;
    plan.highestKwh[group] = highest;
    plan.highestKwhAt[group] = at;
  }
}

/** Gathers reactive energy: sums by class. */
export function gatherReactive(
  plan: ClassPlan,
  { kvarhLagging, kvarhLeading, quality }: LoadSeries,
  hasMissing: boolean,
): void {
  const { runFirst, runEnd, runClass, runPiece, classCount } = plan;
  plan.kvarhLagging.fill(0);
  plan.kvarhLeading.fill(0);
  for (let run = 0; run < runFirst.length; run++) {
    const end = runEnd[run]!;
    let lagging = 0;
    let leading = 0;
    for (let i = runFirst[run]!; i < end; i++) {
      if (hasMissing && quality[i] === 2) continue;
      lagging += kvarhLagging[i]!;
      leading += kvarhLeading[i]!;
    }
    const place = runPiece[run]! * classCount + runClass[run]!;
    plan.kvarhLagging[place]! += lagging;
    plan.kvarhLeading[place]! += leading;
  }
}

/** Gathers the highest apparent energy of an interval by class, squared: one root at the end is enough. */
export function gatherApparent(
  plan: ClassPlan,
  { kwh, kvarhLagging, kvarhLeading, quality }: LoadSeries,
  hasMissing: boolean,
): void {
  const { runFirst, runEnd, runClass } = plan;
  plan.highestSquare.fill(-Infinity);
  plan.highestSquareAt.fill(-1);
  for (let run = 0; run < runFirst.length; run++) {
    const end = runEnd[run]!;
    const group = runClass[run]!;
    let highest = plan.highestSquare[group]!;
    let beyond = highest * tieFactor;
    let at = plan.highestSquareAt[group]!;
    for (let i = runFirst[run]!; i < end; i++) {
      if (hasMissing && quality[i] === 2) continue;
      const active = kwh[i]!;
      const reactive = kvarhLagging[i]! - kvarhLeading[i]!;
      const square = active * active + reactive * reactive;
      if (square > beyond) {
        highest = square;
        beyond = square * tieFactor;
        at = i;
      }
    }
    plan.highestSquare[group] = highest;
    plan.highestSquareAt[group] = at;
  }
}
