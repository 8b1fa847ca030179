import type { SearchProgress } from './search-fields';

/** Costs of settings, each priced once. A setting is one index per motor into its list of field currents. */
export interface CostTable {
  /** Cost of a setting; Infinity once the search is cancelled. */
  cost: (at: number[]) => number;
  /** Announces candidates that are certain to be priced. */
  plan: (candidates: number[][]) => void;
  /** Prices every combination; false when cancelled on the way. */
  priceAll: () => boolean;
  all: () => { at: number[]; cost: number }[];
  priced: () => number;
  cancelled: () => boolean;
}

/**
 * Prices settings on demand and remembers them.
 *
 * @param settings  Field currents per motor. [A]
 * @param price  Bill totals of field currents, one per motor.
 * @param onProgress  Called after every candidate priced; returning false cancels.
 */
export function createCostTable(
  settings: number[][],
  price: (fieldsA: number[]) => Float64Array,
  onProgress?: (progress: SearchProgress) => boolean | void,
): CostTable {
  const known = new Map<string, { at: number[]; cost: number }>();
  let cancelled = false;
  let expected = 0;
  let bestCost = Infinity;
  const cost = (at: number[]): number => {
    const key = at.join(',');
    const found = known.get(key);
    if (found) return found.cost;
    if (cancelled) return Infinity;
    const total = price(at.map((k, m) => settings[m]![k]!)).reduce((sum, value) => sum + value, 0);
    if (Number.isNaN(total))
      throw new RangeError('totals must be numbers, got NaN: price only periods without missing intervals');
    known.set(key, { at: [...at], cost: total });
    bestCost = Math.min(bestCost, total);
    expected = Math.max(expected, known.size);
    if (onProgress?.({ priced: known.size, planned: expected, bestCost }) === false) cancelled = true;
    return total;
  };
  return {
    cost,
    plan: (candidates) => {
      expected = known.size + candidates.filter((at) => !known.has(at.join(','))).length;
    },
    priceAll: () => {
      expected = settings.reduce((product, axis) => product * axis.length, 1);
      for (const at of combinations(settings)) cost(at);
      return !cancelled;
    },
    all: () => [...known.values()],
    priced: () => known.size,
    cancelled: () => cancelled,
  };
}

/** Every setting, the last motor varying fastest. */
function* combinations(settings: number[][]): Generator<number[]> {
  const at = settings.map(() => 0);
  for (;;) {
    yield at;
    let m = at.length - 1;
    while (m >= 0 && at[m] === settings[m]!.length - 1) at[m--] = 0;
    if (m < 0) return;
    at[m]!++;
  }
}
