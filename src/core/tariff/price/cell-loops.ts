import type { CellPlan } from '../calendar/cells';
import type { LoadSeries } from '../../load';
import type { MeasureDefinition } from '../model';
import { enterCell, type CellBlock } from './cell-block';
import type { Column } from './column-steps';

/** Two values this near to each other, as a fraction of the value, are a tie: the earlier one stands. */
export const tieFraction = 1e-12;

/** A measure's formula and condition as columns over a block's cells. */
export interface CellFormula {
  definition: MeasureDefinition;
  block: CellBlock;
  column: Column;
  where: Column | undefined;
  /** Room of the block for what closures find, cell by cell. */
  room: number;
}

/** A value with the cell that has it; cell -1: there is none. */
export interface CellValue {
  value: number;
  cell: number;
}

/** Sums a formula over the cells of each piece into `sums[at + piece]`; returns the whole sum. */
export function sumCells(
  plan: CellPlan,
  load: LoadSeries,
  formula: CellFormula,
  values: Float64Array,
  { sums, at }: { sums: Float64Array; at: number },
): number {
  const { block } = formula;
  const pieces = plan.pieceStarts.length - 1;
  let piece = 0;
  sums.fill(0, at, at + pieces);
  for (let from = 0; from < plan.count; from += block.count) {
    const results = workBlock(plan, load, formula, values, from);
    const { standing, count } = block;
    let k = 0;
    while (k < count) {
      const end = Math.min(count, plan.pieceStarts[piece + 1]! - from);
      let sum = sums[at + piece]!;
      for (; k < end; k++) if (standing[k] !== 0) sum += results[k]!;
      sums[at + piece] = sum;
      if (k < count) piece++;
    }
  }
  let whole = 0;
  for (let p = 0; p < pieces; p++) whole += sums[at + p]!;
  return whole;
}

/** The greatest (sign 1) or least (sign -1) value of a formula over whole cells; the earliest cell wins a tie. */
export function extremeCell(
  plan: CellPlan,
  load: LoadSeries,
  formula: CellFormula,
  values: Float64Array,
  sign: 1 | -1,
): CellValue {
  const { block } = formula;
  let best = -Infinity;
  let beyond = -Infinity;
  let bestCell = -1;
  for (let from = 0; from < plan.count; from += block.count) {
    const results = workBlock(plan, load, formula, values, from);
    const { standing, count } = block;
    for (let k = 0; k < count; k++) {
      const value = sign * results[k]!;
      if (!(value > beyond) || standing[k] !== 2) continue;
      best = value;
      beyond = value + tieFraction * Math.abs(value);
      bestCell = from + k;
    }
  }
  return { value: bestCell < 0 ? 0 : sign * best, cell: bestCell };
}

/** The `count` greatest or least values over whole cells, best first; on distinct days the best of each day only. */
export function extremeCells(
  plan: CellPlan,
  load: LoadSeries,
  formula: CellFormula,
  values: Float64Array,
): CellValue[] {
  const { block, definition } = formula;
  const { count, isDistinctDays } = definition;
  const sign = definition.operation === 'highest' ? 1 : -1;
  const how = { sign, count, isDistinctDays } as const;
  const best: CellValue[] = [];
  for (let from = 0; from < plan.count; from += block.count) {
    const results = workBlock(plan, load, formula, values, from);
    const { standing } = block;
    for (let k = 0; k < block.count; k++) {
      if (standing[k] !== 2) continue;
      const value = results[k]!;
      // What is not above the last of a full list changes nothing, whatever its day.
      if (best.length === count && sign * value <= sign * best[count - 1]!.value) continue;
      keepBest(best, { value, cell: from + k }, plan.day, how);
    }
  }
  return best;
}

function keepBest(
  best: CellValue[],
  entry: CellValue,
  day: Int32Array,
  { sign, count, isDistinctDays }: { sign: 1 | -1; count: number; isDistinctDays: boolean },
): void {
  if (isDistinctDays) {
    const sameDay = best.findIndex(({ cell }) => day[cell] === day[entry.cell]);
    if (sameDay >= 0) {
      if (sign * entry.value <= sign * best[sameDay]!.value) return;
      best.splice(sameDay, 1);
    }
  }
  let from = 0;
  for (let to = best.length; from < to;) {
    const middle = (from + to) >> 1;
    if (sign * entry.value > sign * best[middle]!.value) to = middle;
    else from = middle + 1;
  }
  best.splice(from, 0, entry);
  if (best.length > count) best.pop();
}

/** Works a formula out over the next cells; those whose condition fails do not count. */
function workBlock(
  plan: CellPlan,
  load: LoadSeries,
  formula: CellFormula,
  values: Float64Array,
  from: number,
): Float64Array {
  const { block, column, where } = formula;
  block.enter(plan, load, from);
  if (where) {
    if (!where.fill(values)) return workCells(plan, load, formula, values);
    block.keepWhere(where.out);
  }
  return column.fill(values) ? column.out : workCells(plan, load, formula, values);
}

/** The same by closures, cell by cell, for a block where some step may have no value. */
function workCells(
  plan: CellPlan,
  load: LoadSeries,
  { block, definition, room }: CellFormula,
  values: Float64Array,
): Float64Array {
  const { expression, where } = definition;
  const results = block.rooms[room]!;
  const kept = block.takeStanding();
  for (let k = 0; k < block.count; k++) {
    const standing = enterCell(plan, load, block.from + k, values);
    const isKept = standing !== 0 && (!where || where.evaluate(values) !== 0);
    kept[k] = isKept ? standing : 0;
    if (isKept) results[k] = expression.evaluate(values);
  }
  return results;
}
