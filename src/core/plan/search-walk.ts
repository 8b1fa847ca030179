/** A setting: one index per axis into its list. */
export type At = number[];

/** Two axes of which one can take over reactive power from the other. */
export interface Exchange {
  from: number;
  to: number;
  /** Reactive power by setting of each. [kvar] */
  fromKvar: number[];
  toKvar: number[];
}

/** Axes that are priced together, and the orders in which some of them are raised together. */
export interface WalkGround {
  /** Number of settings per axis. */
  lengths: number[];
  /** Every axis as it stands. */
  standing: At;
  /** Paths over some axes, from all at their least to all at their most, each cheapest step first. */
  paths: { axes: number[]; points: At[] }[];
  /** Pairs of axes that can stand in for one another: per setting of `from`, the setting of `to` for each change that makes up for it. */
  exchanges: Exchange[];
  /** Price every combination when there are no more than this. */
  exhaustiveUpTo: number;
}

/** Asks for costs of settings, batch by batch; returns whether every combination was asked for. */
export type Walk = Generator<At[], boolean, number[]>;

/** Points of the coarse grid, about. */
const COARSE = 144;

/** Starts carried into the descent besides the standing setting. */
const STARTS = 2;

/** Rounds of a descent, at most; each needs an improvement. */
const ROUNDS = 40;

/** Settings passed over between those of a coarse line, and best ones of it that are looked at closely. */
const COARSE_STEP = 4;
const CLOSELY = 3;

/** Reach of a neighbourhood, in settings. */
const REACH = 2;

/** Axes up to this number have all neighbours tried together; more have them tried in pairs. */
const TOGETHER = 3;

/**
 * Walks over the settings of some axes to the cheapest.
 *
 * Bills are jagged in the settings (ratchets, cliffs, steps), so no slope is used. Where the combinations are few all are priced. Else:
 * a coarse grid over the paths; from its best points, far from one another, and from the standing setting a descent by coarse lines
 * along each axis; the best is then polished: whole lines along each axis and each path, whole lines along which one axis makes up for
 * another (the floor of a valley), and all neighbours two settings away, two axes at a time where there are many, until nothing is cheaper. Equal costs keep the setting met first, so the same input walks the same way.
 */
export function* walk(ground: WalkGround): Walk {
  const { lengths, standing, paths, exhaustiveUpTo } = ground;
  // Priced first: a search cancelled at once never answers with something dearer than leaving all alone.
  let best = yield* bestOf([standing], standing, Infinity);
  if (lengths.reduce((product, length) => product * length, 1) <= exhaustiveUpTo) {
    yield [...combinations(lengths)];
    return true;
  }
  for (const start of [...(yield* startsFrom(lengths, paths, standing)), standing]) {
    const found = yield* descend(lengths, start);
    if (found.cost < best.cost) best = found;
  }
  yield* polish(ground, best);
  return false;
}

interface Priced {
  at: At;
  cost: number;
}

/** The cheapest of some settings, or the one known where none is cheaper. */
function* bestOf(candidates: At[], known: At, cost: number): Generator<At[], Priced, number[]> {
  const costs: number[] = yield candidates;
  let best = { at: known, cost };
  candidates.forEach((at, k) => {
    if (costs[k]! < best.cost) best = { at, cost: costs[k]! };
  });
  return best;
}

/** Best points of a coarse grid over the paths, far from one another. */
function* startsFrom(lengths: number[], paths: WalkGround['paths'], standing: At): Generator<At[], At[], number[]> {
  const perPath = Math.max(3, Math.floor(COARSE ** (1 / Math.max(1, paths.length))));
  const grid = product(paths.map(({ points }) => evenly(points.length, perPath).map((k) => points[k]!)));
  const candidates = grid.map((points) => {
    const at = [...standing];
    points.forEach((point, p) => paths[p]!.axes.forEach((axis, k) => (at[axis] = point[k]!)));
    return at;
  });
  const costs: number[] = yield candidates;
  const order = candidates.map((_, k) => k).sort((a, b) => costs[a]! - costs[b]! || a - b);
  const starts: At[] = [];
  for (const k of order) {
    const near = starts.some((start) =>
      start.every((own, m) => Math.abs(own - candidates[k]![m]!) <= lengths[m]! / perPath + 1),
    );
    if (!near) starts.push(candidates[k]!);
    if (starts.length === STARTS) break;
  }
  return starts;
}

/** Coarse lines along each axis in turn, until nothing is cheaper. */
function* descend(lengths: number[], start: At): Generator<At[], Priced, number[]> {
  let best = yield* bestOf([start], start, Infinity);
  for (let round = 0; round < ROUNDS; round++) {
    const before = best.cost;
    for (let axis = 0; axis < lengths.length; axis++) best = yield* coarseLine(lengths, best, axis);
    if (!(best.cost < before)) break;
  }
  return best;
}

function* coarseLine(lengths: number[], from: Priced, axis: number): Generator<At[], Priced, number[]> {
  const length = lengths[axis]!;
  const coarse = evenly(length, Math.ceil(length / COARSE_STEP) + 1);
  const line = coarse.map((k) => moved(from.at, axis, k));
  const costs: number[] = yield line;
  const order = coarse.map((_, k) => k).sort((a, b) => costs[a]! - costs[b]! || a - b);
  const near = [...order.slice(0, CLOSELY).map((k) => coarse[k]!), from.at[axis]!];
  const close = new Set(near.flatMap((k) => around(k, COARSE_STEP - 1, length)));
  return yield* bestOf([...line, ...[...close].map((k) => moved(from.at, axis, k))], from.at, from.cost);
}

/** Whole lines along axes and paths, then neighbours, until nothing is cheaper. */
function* polish(ground: WalkGround, start: Priced): Generator<At[], void, number[]> {
  const { lengths, paths } = ground;
  let best = start;
  for (let round = 0; round < ROUNDS; round++) {
    const before = best.cost;
    for (let axis = 0; axis < lengths.length; axis++) {
      const line = Array.from({ length: lengths[axis]! }, (_, k) => moved(best.at, axis, k));
      best = yield* bestOf(line, best.at, best.cost);
    }
    if (best.cost < before) continue;
    for (const { axes, points } of paths) {
      const { at } = best;
      const line = points.map((point) => at.map((own, m) => point[axes.indexOf(m)] ?? own));
      best = yield* bestOf(line, best.at, best.cost);
    }
    if (best.cost < before) continue;
    for (const exchange of ground.exchanges) {
      best = yield* bestOf(exchangeLine(exchange, best.at), best.at, best.cost);
    }
    if (best.cost < before) continue;
    best = yield* bestOf(neighbours(best.at, lengths), best.at, best.cost);
    if (!(best.cost < before)) return;
  }
}

/** One axis over all its settings, the other making up for each change as nearly as its steps allow. */
function exchangeLine({ from, to, fromKvar, toKvar }: Exchange, at: At): At[] {
  const together = fromKvar[at[from]!]! + toKvar[at[to]!]!;
  return fromKvar.map((kvar, k) => {
    const gap = (own: number) => Math.abs(toKvar[own]! - (together - kvar));
    const nearest = toKvar.reduce((best, _, own) => (gap(own) < gap(best) ? own : best), 0);
    return moved(moved(at, from, k), to, nearest);
  });
}

/** Settings up to two away: in all axes together where they are few, else in two axes at a time. */
function neighbours(at: At, lengths: number[]): At[] {
  const near = at.map((k, m) => around(k, REACH, lengths[m]!));
  if (at.length <= TOGETHER) return product(near);
  const found: At[] = [];
  for (let a = 0; a < at.length; a++) {
    for (let b = a + 1; b < at.length; b++) {
      for (const ka of near[a]!) for (const kb of near[b]!) found.push(moved(moved(at, a, ka), b, kb));
    }
  }
  return found;
}

function around(k: number, reach: number, length: number): number[] {
  const from = Math.max(0, k - reach);
  return Array.from({ length: Math.min(length - 1, k + reach) - from + 1 }, (_, i) => from + i);
}

/** Indices spread evenly over a list, both ends included. */
function evenly(length: number, most: number): number[] {
  const count = Math.min(length, most);
  return Array.from({ length: count }, (_, i) => (count === 1 ? 0 : Math.round((i * (length - 1)) / (count - 1))));
}

function moved(at: At, axis: number, k: number): At {
  return at.map((own, other) => (other === axis ? k : own));
}

/** Every setting, the last axis varying fastest. */
function* combinations(lengths: number[]): Generator<At> {
  const at = lengths.map(() => 0);
  for (;;) {
    yield [...at];
    let m = at.length - 1;
    while (m >= 0 && at[m] === lengths[m]! - 1) at[m--] = 0;
    if (m < 0) return;
    at[m]!++;
  }
}

function product<Item>(lists: Item[][]): Item[][] {
  return lists.reduce<Item[][]>((rows, list) => rows.flatMap((row) => list.map((item) => [...row, item])), [[]]);
}
