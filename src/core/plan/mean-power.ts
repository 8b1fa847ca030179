import type { Grid } from './local-days';

/** Mean power of consecutive intervals. */
export interface PowerSeries {
  /** UTC instant at which interval 0 begins. [ms] */
  startMs: number;
  stepMinutes: number;
  /** NaN where missing. [kW] */
  kw: Float64Array;
}

const MINUTE_MS = 60_000;

/**
 * Mean power over the intervals of another grid: each part of an interval counts by its time, and within an interval of the
 * series the power is taken as constant.
 *
 * @param series  What was metered, in steps of any length and phase.
 * @param grid  The intervals asked for.
 * @returns NaN where any part is missing or lies outside the series. [kW], Float64Array of grid.count
 */
export function meanPowerOn(series: PowerSeries, grid: Grid): Float64Array {
  const stepMs = series.stepMinutes * MINUTE_MS;
  const wantedMs = grid.stepMinutes * MINUTE_MS;
  const lengthMs = series.kw.length * stepMs;
  return new Float64Array(grid.count).map((_, i) => {
    // Whole milliseconds: parts are exact, and no sliver of a neighbour slips in by rounding.
    const fromMs = grid.startMs + i * wantedMs - series.startMs;
    const toMs = fromMs + wantedMs;
    if (fromMs < 0 || toMs > lengthMs) return NaN;
    let sum = 0;
    for (let k = Math.floor(fromMs / stepMs); k * stepMs < toMs; k++) {
      sum += series.kw[k]! * (Math.min((k + 1) * stepMs, toMs) - Math.max(k * stepMs, fromMs));
    }
    return sum / wantedMs;
  });
}

/**
 * Several series of one submeter laid over each other: where two have a value for an interval, the later in the list stands.
 *
 * @returns NaN where none has one. [kW], Float64Array of grid.count
 */
export function laidPowerOn(series: readonly PowerSeries[], grid: Grid): Float64Array {
  const laid = new Float64Array(grid.count).fill(NaN);
  for (const one of series) {
    meanPowerOn(one, grid).forEach((kw, i) => {
      if (!Number.isNaN(kw)) laid[i] = kw;
    });
  }
  return laid;
}
