import { boundTotals, compilePricing, PriceError } from '../tariff';
import type { PriceOptions, Schedule } from '../tariff';
import { plantBox, type BoundGround } from './bound-box';

/** What no admissible reactive power can beat. */
export interface PlanBound {
  /** Sum of the periods' lowest bills. [currency] */
  total: number;
  /** [currency], float64[periods] */
  perPeriod: Float64Array;
  /**
   * How loose it may be for losses: those of delivering most everywhere beyond the least, as energy and priced on the same bills; the cost is
   * null where such bills cannot be priced. The bound charges a part of them where what is delivered counts in plain sums, else none.
   */
  freeLossKwh: number;
  freeLossCost: number | null;
  notes: string[];
  refused?: undefined;
}

/** Why no bound can be given. */
export interface RefusedBound {
  refused: string;
}

/**
 * Bound that no admissible reactive power in any interval can beat: under every control of the motors within their limits, with
 * every step of the capacitors connected or not, the year's bills come to at least `total`.
 *
 * A relaxation: in each interval and each quantity of the bill reactive power and losses are free within what the machines can do, so
 * that no plan need reach it. Losses are charged at the least that each motor can have at its load, and at what the reactive energy
 * delivered in the period costs at least, window by window, where the bill lies under one text and season and nothing is upstream.
 *
 * @param ask.schedule, ask.options  As of `priceBills`
 * @returns The bound, or why there is none
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a motor cannot hold its load
 */
export function boundOf(ask: BoundGround & { schedule: Schedule; options: PriceOptions }): PlanBound | RefusedBound {
  const { schedule, options } = ask;
  const made = plantBox(ask);
  if (!made)
    return {
      refused: 'The upstream impedance is too great for what the motors could take: check its rating and reactance.',
    };
  const { box, coupling, mostDelivered } = made;
  const bound = boundTotals(schedule, box, options, coupling);
  if (bound.refused !== undefined) return { refused: bound.refused };
  const { low } = bound.totals;
  const total = low.reduce((sum, value) => sum + value, 0);
  if (!Number.isFinite(total)) return { refused: bound.notes[bound.notes.length - 1] ?? 'A bill has no lower end.' };
  const { withLosses, withLeast } = mostDelivered;
  const freeLossKwh = withLosses.kwh.reduce(
    (sum, kwh, i) => (Number.isNaN(kwh) ? sum : sum + kwh - withLeast.kwh[i]!),
    0,
  );
  return {
    total,
    perPeriod: low,
    freeLossKwh,
    freeLossCost: freeLossCost(schedule, options, mostDelivered),
    notes: bound.notes,
  };
}

type MostDelivered = NonNullable<ReturnType<typeof plantBox>>['mostDelivered'];

function freeLossCost(
  schedule: Schedule,
  options: PriceOptions,
  { withLosses, withLeast }: MostDelivered,
): number | null {
  const { startMs, stepMinutes, kwh } = withLosses;
  try {
    const pricing = compilePricing(schedule, { startMs, stepMinutes, count: kwh.length }, options);
    const sumOf = (totals: Float64Array): number => totals.reduce((sum, value) => sum + value, 0);
    return sumOf(pricing.totals(withLosses)) - sumOf(pricing.totals(withLeast));
  } catch (error) {
    if (error instanceof PriceError) return null;
    throw error;
  }
}
