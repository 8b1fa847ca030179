/** Qualities of an interval: measured, estimated, missing. */
export const quality = { measured: 0, estimated: 1, missing: 2 } as const;

/** Lengths of interval a series may have. [min] */
export const stepLengthsMinutes = [1, 5, 10, 15, 20, 30, 60] as const;

/** A regular series of metered energy. All arrays have the same length. */
export interface LoadSeries {
  /** UTC instant at which interval 0 begins. [ms since epoch] */
  startMs: number;
  /** Length of an interval, one of {@link stepLengthsMinutes}. [min] */
  stepMinutes: number;
  /** Active energy drawn. [kWh per interval] */
  kwh: Float64Array;
  /** Reactive energy absorbed. [kvarh per interval], >= 0 */
  kvarhLagging: Float64Array;
  /** Reactive energy delivered. [kvarh per interval], >= 0 */
  kvarhLeading: Float64Array;
  /** 0 measured, 1 estimated, 2 missing (the values are NaN). */
  quality: Uint8Array;
}

/** A billing period of local dates YYYY-MM-DD, half-open: [from, to). */
export interface BillingPeriod {
  from: string;
  to: string;
}

/**
 * Checks the shape of a series.
 *
 * @throws {RangeError} naming the argument, what is allowed and what was received
 */
export function assertLoadSeries(load: LoadSeries): void {
  if (!Number.isFinite(load.startMs)) throw new RangeError(`startMs must be a number of ms, got ${load.startMs}`);
  if (!stepLengthsMinutes.some((minutes) => minutes === load.stepMinutes)) {
    throw new RangeError(`stepMinutes must be one of ${stepLengthsMinutes.join(', ')}, got ${load.stepMinutes}`);
  }
  const count = load.kwh.length;
  for (const name of ['kvarhLagging', 'kvarhLeading', 'quality'] as const) {
    if (load[name].length !== count) {
      throw new RangeError(`${name} must have ${count} values like kwh, got ${load[name].length}`);
    }
  }
}

/** UTC instant at which interval `index` begins. [ms since epoch] */
export function intervalStartMs(load: Pick<LoadSeries, 'startMs' | 'stepMinutes'>, index: number): number {
  return load.startMs + index * load.stepMinutes * 60_000;
}
