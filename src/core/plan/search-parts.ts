import { walk } from './search-walk';
import type { At, Walk, WalkGround } from './search-walk';

/** How far a search is. `planned` counts what is priced and what is certain to be: it grows while better settings are found. */
export interface SearchProgress {
  priced: number;
  planned: number;
  bestCost: number;
}

/** Axes whose settings move the same bills, with those bills. No bill is moved by two parts. */
export interface SearchPart {
  axes: number[];
  bills: number[];
}

/** Settings of a part's axes with what its bills come to. */
export interface PartCost {
  at: At;
  cost: number;
}

/** What a search has priced. */
export interface SearchTable {
  /** Every setting priced, per part, in the order it was. */
  parts: { part: SearchPart; priced: PartCost[]; exhaustive: boolean }[];
  priced: number;
  cancelled: boolean;
}

/**
 * Parts an axis or a bill can be looked at in by itself: axes that move a common bill belong together.
 *
 * @param reach  Per axis: the bills that its setting may move.
 * @param bills  Number of bills.
 */
export function partsOf(reach: readonly (readonly number[])[], bills: number): SearchPart[] {
  const partOfBill = new Array<number>(bills).fill(-1);
  const parts: SearchPart[] = [];
  reach.forEach((own, axis) => {
    const touched = [...new Set(own.map((bill) => partOfBill[bill]!).filter((part) => part >= 0))];
    const into = touched[0] ?? parts.push({ axes: [], bills: [] }) - 1;
    for (const part of touched.slice(1)) {
      const gone = parts[part]!;
      parts[into]!.axes.push(...gone.axes);
      for (const bill of gone.bills) partOfBill[bill] = into;
      parts[into]!.bills.push(...gone.bills);
      parts[part] = { axes: [], bills: [] };
    }
    parts[into]!.axes.push(axis);
    for (const bill of own) {
      if (partOfBill[bill] === into) continue;
      partOfBill[bill] = into;
      parts[into]!.bills.push(bill);
    }
  });
  return parts
    .filter(({ axes }) => axes.length > 0)
    .map(({ axes, bills: own }) => ({ axes: axes.sort((a, b) => a - b), bills: own.sort((a, b) => a - b) }));
}

interface Walker {
  part: SearchPart;
  walk: Walk;
  known: Map<string, PartCost>;
  best: PartCost;
  /** Asked for; null when the walk has ended. */
  asked: At[] | null;
  /** What of it is not priced yet, from `next` on. */
  open: At[];
  next: number;
  exhaustive: boolean;
}

/**
 * Lets the walks of all parts go on side by side: one year's pricing answers each part's next question.
 *
 * @param input.grounds  Per part, its ground; axes in the part's own order.
 * @param input.standing  Every axis as it stands.
 * @param input.price  Bill totals of a setting of all axes.
 * @param input.onProgress  Called after every pricing; returning false ends the search.
 */
export function searchParts(input: {
  parts: SearchPart[];
  grounds: WalkGround[];
  standing: At;
  price: (at: At) => Float64Array;
  onProgress?: (progress: SearchProgress) => boolean | void;
}): SearchTable {
  const { parts, grounds, standing, price, onProgress } = input;
  const walkers = parts.map((part, p) => startWalk(part, grounds[p]!));
  let priced = 0;
  let cancelled = false;
  while (!cancelled) {
    for (const walker of walkers) passKnown(walker);
    if (walkers.every(({ asked }) => asked === null)) break;
    const at = [...standing];
    for (const walker of walkers) {
      const own = walker.open[walker.next] ?? walker.best.at;
      walker.part.axes.forEach((axis, k) => (at[axis] = own[k]!));
    }
    const totals = price(at);
    priced++;
    for (const walker of walkers) record(walker, at, totals);
    const planned = priced + Math.max(0, ...walkers.map(({ open, next }) => open.length - next));
    const bestCost = walkers.reduce((sum, { best }) => sum + best.cost, 0);
    cancelled = onProgress?.({ priced, planned, bestCost }) === false;
  }
  const found = walkers.map(({ part, known, exhaustive }) => ({
    part,
    priced: [...known.values()],
    exhaustive: exhaustive && !cancelled,
  }));
  return { parts: found, priced, cancelled };
}

function startWalk(part: SearchPart, ground: WalkGround): Walker {
  const best = { at: ground.standing, cost: Infinity };
  const walker = {
    part,
    walk: walk(ground),
    known: new Map(),
    best,
    asked: null,
    open: [],
    next: 0,
    exhaustive: false,
  };
  listen(walker, walker.walk.next());
  return walker;
}

/** Goes on to the next setting that is not priced yet. */
function passKnown(walker: Walker): void {
  while (walker.asked && walker.next === walker.open.length) {
    listen(walker, walker.walk.next(walker.asked.map((at) => walker.known.get(at.join())!.cost)));
  }
}

function listen(walker: Walker, answer: IteratorResult<At[], boolean>): void {
  walker.next = 0;
  walker.asked = answer.done ? null : answer.value;
  if (answer.done) walker.exhaustive = answer.value;
  const open = new Map((walker.asked ?? []).map((at) => [at.join(), at]));
  walker.open = [...open].filter(([key]) => !walker.known.has(key)).map(([, at]) => at);
}

function record(walker: Walker, all: At, totals: Float64Array): void {
  const { part, known } = walker;
  const at = part.axes.map((axis) => all[axis]!);
  const cost = part.bills.reduce((sum, bill) => sum + totals[bill]!, 0);
  if (Number.isNaN(cost))
    throw new RangeError('totals must be numbers, got NaN: price only periods without missing intervals');
  const one = { at, cost };
  known.set(at.join(), one);
  if (walker.next < walker.open.length) walker.next++;
  if (cost < walker.best.cost) walker.best = one;
}
