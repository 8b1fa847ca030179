/** Median of numbers; NaN where there are none. The middle two are averaged. */
export function medianOf(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const { length } = sorted;
  if (length === 0) return NaN;
  return (sorted[(length - 1) >> 1]! + sorted[length >> 1]!) / 2;
}

/** Makes the median absolute deviation of a normal sample estimate its standard deviation: 1 / quantile 0.75 of the normal. */
const normalConsistency = 1.4826;

/** Median and scaled median absolute deviation of numbers: centre and spread that single outliers do not move. */
export function robustSpread(values: ArrayLike<number>): { median: number; deviation: number } {
  const median = medianOf(values);
  const deviation = normalConsistency * medianOf(Array.from(values, (value) => Math.abs(value - median)));
  return { median, deviation };
}
