import { quality as grades, type LoadSeries } from './series';

const minuteMs = 60_000;
const channels = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** The readings one file brought to a meter. */
export interface LoadLayer {
  load: LoadSeries;
  /** Of two layers with a reading for the same interval the one of higher rank shows. */
  rank: number;
  /** What the readings came with: id of the file. */
  source: number;
}

/** Layers laid over each other. */
export interface LaidLoad {
  load: LoadSeries;
  /** Source of the layer on top of each interval; 0 where no layer has a reading. int32[intervals] */
  sources: Int32Array;
}

/** A regular grid: beginning [ms since epoch], step [min], number of intervals. */
export interface LoadGrid {
  startMs: number;
  stepMinutes: number;
  count: number;
}

/** A series without a single reading. */
export function emptyLoad({ startMs, stepMinutes, count }: LoadGrid): LoadSeries {
  return {
    startMs,
    stepMinutes,
    kwh: new Float64Array(count).fill(NaN),
    kvarhLagging: new Float64Array(count).fill(NaN),
    kvarhLeading: new Float64Array(count).fill(NaN),
    quality: new Uint8Array(count).fill(grades.missing),
  };
}

/** Instant behind the last interval. [ms since epoch] */
export function endOfLoad(load: Pick<LoadSeries, 'startMs' | 'stepMinutes' | 'kwh'>): number {
  return load.startMs + load.kwh.length * load.stepMinutes * minuteMs;
}

/**
 * Sums a series up to longer intervals: an energy is known only where all its parts are, and estimated where one of them is.
 *
 * @param load  The finer series
 * @param grid  Where the longer intervals begin and how long they are; what lies outside the series is missing
 * @throws {RangeError} if the grid's step is no whole multiple of the series', or an interval of the series lies across a border of the grid
 */
export function aggregateLoad(load: LoadSeries, grid: LoadGrid): LoadSeries {
  const parts = grid.stepMinutes / load.stepMinutes;
  const stepMs = load.stepMinutes * minuteMs;
  const offset = (load.startMs - grid.startMs) / stepMs;
  if (!Number.isInteger(parts)) {
    throw new RangeError(
      `stepMinutes must be a whole multiple of the series' ${load.stepMinutes} minutes, got ${grid.stepMinutes}`,
    );
  }
  if (!Number.isInteger(offset)) {
    throw new RangeError(`startMs must begin with an interval of the series, got ${grid.startMs}`);
  }
  const laid = emptyLoad(grid);
  for (let index = 0; index < grid.count; index++) {
    const first = index * parts - offset;
    if (first < 0 || first + parts > load.kwh.length) continue;
    const marks = load.quality.subarray(first, first + parts);
    if (marks.includes(grades.missing)) continue;
    laid.quality[index] = marks.includes(grades.estimated) ? grades.estimated : grades.measured;
    for (const channel of channels) {
      let sum = 0;
      for (let part = first; part < first + parts; part++) sum += load[channel][part]!;
      laid[channel][index] = sum;
    }
  }
  return laid;
}

/** Whether every reading of a coarse layer lies within a finer one above it, so that none of them shows. */
function isCovered({ load, rank }: LoadLayer, finer: readonly LoadLayer[]): boolean {
  const above = finer.filter((layer) => layer.rank > rank);
  const stepMs = load.stepMinutes * minuteMs;
  return load.quality.every((mark, index) => {
    if (mark === grades.missing) return true;
    const fromMs = load.startMs + index * stepMs;
    return above.some((layer) => layer.load.startMs <= fromMs && endOfLoad(layer.load) >= fromMs + stepMs);
  });
}

/**
 * The layers that show and the step they can be read in together: the longest among them. A layer of longer intervals
 * that lies wholly under finer ones is left out, and fills none of their gaps.
 *
 * @returns Layers and step [min]; the step of the finest where there is but one
 */
export function layersThatShow(layers: readonly LoadLayer[]): { layers: LoadLayer[]; stepMinutes: number } {
  const byStep = [...layers].sort((a, b) => a.load.stepMinutes - b.load.stepMinutes);
  const shown: LoadLayer[] = [];
  let stepMinutes = byStep[0]?.load.stepMinutes ?? 0;
  for (const layer of byStep) {
    const finer = shown.filter((other) => other.load.stepMinutes < layer.load.stepMinutes);
    if (layer.load.stepMinutes > stepMinutes && isCovered(layer, finer)) continue;
    shown.push(layer);
    stepMinutes = layer.load.stepMinutes;
  }
  return { layers: shown, stepMinutes };
}

/**
 * Lays files over each other: in every interval the reading of the highest rank shows, a missing one lets through what
 * lies under it, and a channel that only a lower one carries is taken from there. Nothing of a layer is changed, so
 * taking one away gives back exactly what was under it.
 *
 * @param layers  In any order; each step divides the grid's
 * @param grid  What is asked for
 * @throws {RangeError} if a layer does not lie on the grid
 */
export function overlayLoads(layers: readonly LoadLayer[], grid: LoadGrid): LaidLoad {
  const laid = { load: emptyLoad(grid), sources: new Int32Array(grid.count) };
  for (const layer of [...layers].sort((a, b) => a.rank - b.rank))
    layOver(laid, onGrid(layer.load, grid), layer.source);
  return laid;
}

/** The part of a layer inside a grid, in the grid's step. */
function onGrid(load: LoadSeries, grid: LoadGrid): LoadSeries {
  if (load.stepMinutes === grid.stepMinutes) return load;
  const stepMs = grid.stepMinutes * minuteMs;
  const first = Math.max(0, Math.floor((load.startMs - grid.startMs) / stepMs));
  const end = Math.min(grid.count, Math.ceil((endOfLoad(load) - grid.startMs) / stepMs));
  const part = {
    startMs: grid.startMs + first * stepMs,
    stepMinutes: grid.stepMinutes,
    count: Math.max(0, end - first),
  };
  return aggregateLoad(load, part);
}

function layOver({ load, sources }: LaidLoad, layer: LoadSeries, source: number): void {
  const offset = Math.round((layer.startMs - load.startMs) / (load.stepMinutes * minuteMs));
  const first = Math.max(0, -offset);
  const end = Math.min(layer.kwh.length, load.kwh.length - offset);
  for (let index = first; index < end; index++) {
    const mark = layer.quality[index]!;
    if (mark === grades.missing) continue;
    const at = offset + index;
    const under = load.quality[at]!;
    let isWhole = true;
    for (const channel of channels) {
      const energy = layer[channel][index]!;
      if (!Number.isNaN(energy)) load[channel][at] = energy;
      else if (!Number.isNaN(load[channel][at]!)) isWhole = false;
    }
    load.quality[at] = isWhole || under === grades.missing ? mark : Math.max(mark, under);
    sources[at] = source;
  }
}
