import type { CostTable } from './search-cost';

/** Candidates of the coarse grid, about. */
const COARSE = 400;

/** Starts carried into the descent. */
const STARTS = 3;

/** Rounds of the descent, at most; each needs an improvement. */
const ROUNDS = 50;

/** Motors up to this number get a grid over all of them; more get settings in step with one another. */
const GRID_MOTORS = 8;

/**
 * Prices a coarse grid over all motors (evenly spaced settings, ends included) and gives its best points, far from one another.
 */
export function startsFrom(costs: CostTable, settings: number[][]): number[][] {
  const perAxis = Math.max(2, Math.floor(COARSE ** (1 / settings.length)));
  const grid =
    settings.length <= GRID_MOTORS ? product(settings.map((axis) => evenly(axis.length, perAxis))) : inStep(settings);
  costs.plan(grid);
  const priced = grid.map((at) => ({ at, cost: costs.cost(at) }));
  priced.sort((a, b) => a.cost - b.cost);
  const starts: number[][] = [];
  for (const { at } of priced) {
    const near = starts.some((other) =>
      other.every((k, m) => Math.abs(k - at[m]!) <= settings[m]!.length / perAxis + 1),
    );
    if (!near) starts.push(at);
    if (starts.length === STARTS) break;
  }
  return starts;
}

/** Indices spread evenly over a list, both ends included. */
function evenly(length: number, most: number): number[] {
  const count = Math.min(length, most);
  return Array.from({ length: count }, (_, i) => (count === 1 ? 0 : Math.round((i * (length - 1)) / (count - 1))));
}

/** Every motor at the same share of its range, from lowest to highest. */
function inStep(settings: number[][]): number[][] {
  return Array.from({ length: 41 }, (_, i) => settings.map((axis) => Math.round((i * (axis.length - 1)) / 40)));
}

/** Each motor in turn over its whole range, then all neighbours, until nothing is cheaper. */
export function descend(costs: CostTable, settings: number[][], start: number[]): void {
  let at = start;
  for (let round = 0; round < ROUNDS && !costs.cancelled(); round++) {
    const before = costs.cost(at);
    settings.forEach((axis, m) => {
      const line = axis.map((_, k) => replaced(at, m, k));
      costs.plan(line);
      at = best(costs, line, at);
    });
    if (costs.cost(at) < before) continue;
    const around = neighbours(at, settings);
    costs.plan(around);
    at = best(costs, around, at);
    if (!(costs.cost(at) < before)) return;
  }
}

/** Settings up to two steps away in every motor; one step where there are more than four motors. */
function neighbours(at: number[], settings: number[][]): number[][] {
  const reach = settings.length <= 4 ? 2 : 1;
  if (settings.length > 6) return pairNeighbours(at, settings);
  const near = at.map((k, m) => {
    const from = Math.max(0, k - reach);
    return Array.from({ length: Math.min(settings[m]!.length - 1, k + reach) - from + 1 }, (_, i) => from + i);
  });
  return product(near);
}

/** Where motors are many: every pair of motors, one step each. */
function pairNeighbours(at: number[], settings: number[][]): number[][] {
  const found: number[][] = [];
  for (let a = 0; a < at.length; a++) {
    for (let b = a + 1; b < at.length; b++) {
      for (const [da, db] of [
        [-1, -1],
        [-1, 1],
        [1, -1],
        [1, 1],
      ] as const) {
        const moved = replaced(replaced(at, a, at[a]! + da), b, at[b]! + db);
        if (moved.every((k, m) => k >= 0 && k < settings[m]!.length)) found.push(moved);
      }
    }
  }
  return found;
}

function best(costs: CostTable, candidates: number[][], from: number[]): number[] {
  let found = from;
  for (const candidate of candidates) {
    if (costs.cost(candidate) < costs.cost(found)) found = candidate;
  }
  return found;
}

function replaced(at: number[], m: number, k: number): number[] {
  return at.map((own, other) => (other === m ? k : own));
}

function product(lists: number[][]): number[][] {
  return lists.reduce<number[][]>((rows, list) => rows.flatMap((row) => list.map((k) => [...row, k])), [[]]);
}
