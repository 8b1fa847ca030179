import type { CellPlan } from '../calendar/cells';
import type { LoadSeries } from '../../load';

/** How the energies of cells are added up. */
export interface FillRules {
  /** Some interval of the period is missing. */
  hasMissing: boolean;
  /** The active energies and gaps of the last call stay. */
  isActiveKept: boolean;
}

/** Adds the series' energies into cells of several intervals. */
export function fillCells(plan: CellPlan, load: LoadSeries, { hasMissing, isActiveKept }: FillRules): void {
  if (plan.isSingle) return;
  const missing = hasMissing ? load.quality : null;
  if (!isActiveKept) {
    if (hasMissing || !plan.isWhole) fillStanding(plan, load.stepMinutes, missing);
    plan.isWhole = !hasMissing;
    addInto(plan.kwh, plan, load.kwh, missing);
  }
  if (plan.needsLagging) addInto(plan.kvarhLagging, plan, load.kvarhLagging, missing);
  if (plan.needsLeading) addInto(plan.kvarhLeading, plan, load.kvarhLeading, missing);
}

/** Hours that were metered of each cell, and whether something is missing of it. */
function fillStanding(plan: CellPlan, stepMinutes: number, missing: Uint8Array | null): void {
  const { count, runStarts, runFirst, runEnd, broken, hours, standing } = plan;
  for (let cell = 0; cell < count; cell++) {
    let size = 0;
    let present = 0;
    const lastRun = runStarts === null ? cell + 1 : runStarts[cell + 1]!;
    for (let run = runStarts === null ? cell : runStarts[cell]!; run < lastRun; run++) {
      const end = runEnd[run]!;
      size += end - runFirst[run]!;
      if (missing) for (let i = runFirst[run]!; i < end; i++) if (missing[i] !== 2) present++;
    }
    if (!missing) present = size;
    hours[cell] = (present * stepMinutes) / 60;
    standing[cell] = present === 0 ? 0 : broken[cell] === 1 || present < size ? 1 : 2;
  }
  const first = hours[0]!;
  plan.evenHours = hours.every((one) => one === first) ? first : NaN;
}

function addInto(sums: Float64Array, plan: CellPlan, register: Float64Array, missing: Uint8Array | null): void {
  const { count, runStarts, runFirst, runEnd } = plan;
  if (missing === null && runStarts === null) {
    addRuns(sums, runFirst, runEnd, register);
    return;
  }
  for (let cell = 0; cell < count; cell++) {
    let energy = 0;
    const lastRun = runStarts === null ? cell + 1 : runStarts[cell + 1]!;
    for (let run = runStarts === null ? cell : runStarts[cell]!; run < lastRun; run++) {
      const end = runEnd[run]!;
      for (let i = runFirst[run]!; i < end; i++) {
        if (missing !== null && missing[i] === 2) continue;
        energy += register[i]!;
      }
    }
    sums[cell] = energy;
  }
}

/** The usual case by itself: nothing missing, every cell one run. */
function addRuns(sums: Float64Array, runFirst: Int32Array, runEnd: Int32Array, register: Float64Array): void {
  for (let run = 0; run < sums.length; run++) {
    const end = runEnd[run]!;
    let energy = 0;
    for (let i = runFirst[run]!; i < end; i++) energy += register[i]!;
    sums[run] = energy;
  }
}
