import type { CellPlan } from '../calendar/cells';
import { place, type Evaluate } from '../formula/compile';
import type { LoadSeries } from '../../load';

const { cellKwh, cellKvarhLagging, cellKvarhLeading, cellHours } = place;

/** Two values this near to each other, as a fraction of the value, are a tie: the earlier one stands. */
export const tieFraction = 1e-12;

/** Adds the series' energies into cells of several intervals. With `isActiveKept` the active energy and gaps of the last call stay. */
export function fillCells(plan: CellPlan, load: LoadSeries, isActiveKept: boolean): void {
  if (plan.isSingle) return;
  if (!isActiveKept) fillActive(plan, load);
  if (plan.needsReactive) fillReactive(plan, load);
}

function fillActive(plan: CellPlan, { kwh, quality, stepMinutes }: LoadSeries): void {
  const { starts, ends, members, base, broken } = plan;
  for (let cell = 0; cell < starts.length; cell++) {
    let energy = 0;
    let present = 0;
    const end = ends[cell]!;
    for (let k = starts[cell]!; k < end; k++) {
      const i = members === null ? base + k : members[k]!;
      if (quality[i] === 2) continue;
      energy += kwh[i]!;
      present++;
    }
    plan.kwh[cell] = energy;
    plan.hours[cell] = (present * stepMinutes) / 60;
    plan.isBad[cell] = broken[cell] === 1 || present < end - starts[cell]! ? 1 : 0;
  }
}

function fillReactive(plan: CellPlan, { kvarhLagging, kvarhLeading, quality }: LoadSeries): void {
  const { starts, ends, members, base } = plan;
  for (let cell = 0; cell < starts.length; cell++) {
    let lagging = 0;
    let leading = 0;
    const end = ends[cell]!;
    for (let k = starts[cell]!; k < end; k++) {
      const i = members === null ? base + k : members[k]!;
      if (quality[i] === 2) continue;
      lagging += kvarhLagging[i]!;
      leading += kvarhLeading[i]!;
    }
    plan.kvarhLagging[cell] = lagging;
    plan.kvarhLeading[cell] = leading;
  }
}

/**
 * Puts a cell's energies where formulas read them.
 *
 * @returns 0 if the cell holds nothing that was metered, 1 if something is missing of it, 2 if it is whole
 */
export function enterCell(plan: CellPlan, load: LoadSeries, cell: number, values: Float64Array): 0 | 1 | 2 {
  if (!plan.isSingle) {
    values[cellKwh] = plan.kwh[cell]!;
    values[cellKvarhLagging] = plan.kvarhLagging[cell]!;
    values[cellKvarhLeading] = plan.kvarhLeading[cell]!;
    values[cellHours] = plan.hours[cell]!;
    return plan.hours[cell] === 0 ? 0 : plan.isBad[cell] === 1 ? 1 : 2;
  }
  const i = plan.members === null ? plan.base + cell : plan.members[cell]!;
  if (load.quality[i] === 2) return 0;
  enterInterval(load, i, values);
  return 2;
}

/** Puts one interval's energies where formulas read them. */
export function enterInterval(load: LoadSeries, i: number, values: Float64Array): void {
  values[cellKwh] = load.kwh[i]!;
  values[cellKvarhLagging] = load.kvarhLagging[i]!;
  values[cellKvarhLeading] = load.kvarhLeading[i]!;
  values[cellHours] = load.stepMinutes / 60;
}

/** A measure's formula and condition. */
export interface CellFormula {
  evaluate: Evaluate;
  where: Evaluate | undefined;
}

/** Sums a formula over the cells of each piece into `sums[at + piece]`; returns the whole sum. */
export function sumCells(
  plan: CellPlan,
  load: LoadSeries,
  { evaluate, where }: CellFormula,
  values: Float64Array,
  sums: Float64Array,
  at: number,
): number {
  let whole = 0;
  for (let piece = 0; piece + 1 < plan.pieceStarts.length; piece++) {
    let sum = 0;
    const end = plan.pieceStarts[piece + 1]!;
    for (let cell = plan.pieceStarts[piece]!; cell < end; cell++) {
      if (enterCell(plan, load, cell, values) === 0) continue;
      if (where === undefined || where(values) !== 0) sum += evaluate(values);
    }
    sums[at + piece] = sum;
    whole += sum;
  }
  return whole;
}

/** The greatest (sign 1) or least (sign -1) value of a formula over whole cells; the earliest cell wins a tie. Cell -1: there is none. */
export function extremeCell(
  plan: CellPlan,
  load: LoadSeries,
  { evaluate, where }: CellFormula,
  values: Float64Array,
  sign: 1 | -1,
): { value: number; cell: number } {
  let best = -Infinity;
  let beyond = -Infinity;
  let bestCell = -1;
  const count = plan.starts.length;
  for (let cell = 0; cell < count; cell++) {
    if (enterCell(plan, load, cell, values) !== 2) continue;
    if (where !== undefined && where(values) === 0) continue;
    const value = sign * evaluate(values);
    if (value > beyond) {
      best = value;
      beyond = value + tieFraction * Math.abs(value);
      bestCell = cell;
    }
  }
  return { value: bestCell < 0 ? 0 : sign * best, cell: bestCell };
}

/** The `count` greatest or least values over whole cells, best first; with `isDistinctDays` the best of each day only. */
export function extremeCells(
  plan: CellPlan,
  load: LoadSeries,
  { evaluate, where }: CellFormula,
  values: Float64Array,
  how: { sign: 1 | -1; count: number; isDistinctDays: boolean },
): { value: number; cell: number }[] {
  const best: { value: number; cell: number }[] = [];
  for (let cell = 0; cell < plan.starts.length; cell++) {
    if (enterCell(plan, load, cell, values) !== 2 || (where !== undefined && where(values) === 0)) continue;
    const value = evaluate(values);
    // What is not above the last of a full list changes nothing, whatever its day.
    if (best.length === how.count && how.sign * value <= how.sign * best[how.count - 1]!.value) continue;
    keepBest(best, { value, cell }, plan.day, how);
  }
  return best;
}

function keepBest(
  best: { value: number; cell: number }[],
  entry: { value: number; cell: number },
  day: Int32Array,
  how: { sign: 1 | -1; count: number; isDistinctDays: boolean },
): void {
  const { sign, count, isDistinctDays } = how;
  if (isDistinctDays) {
    const sameDay = best.findIndex(({ cell }) => day[cell] === day[entry.cell]);
    if (sameDay >= 0) {
      if (sign * entry.value <= sign * best[sameDay]!.value) return;
      best.splice(sameDay, 1);
    }
  }
  const before = best.findIndex(({ value }) => sign * entry.value > sign * value);
  best.splice(before < 0 ? best.length : before, 0, entry);
  if (best.length > count) best.pop();
}
