import type { NumberPlace, Tier } from '../model';
import { greater, hull, isPoint, lesser, loosened, meet, minus, plus, point, times, type Range } from './range';
import { rangeOf } from './range-formula';
import type { RangeState } from './range-state';

/** A number under a piece's season. */
export function rangeOfPlace({ point: state, values }: RangeState, place: NumberPlace): Range {
  const { season, month } = state.piece;
  const expression =
    place.kind === 'same'
      ? place.expression
      : place.kind === 'seasons'
        ? place.bySeason[season]
        : place.byMonth.get(month);
  if (!expression) throw new RangeError(`season must be one of the text's, got ${season}`);
  return rangeOf(expression, values);
}

/** One tier over ranges: what falls into it, its upper end and, where anything may fall into it, its rate. */
interface RangedTier {
  inTier: Range;
  limit: Range;
  rate: Range | undefined;
}

/**
 * Price of a quantity by marginal tiers over ranges.
 *
 * Tier by tier first; where quantity or limits are not one value that counts parts of the quantity twice, so that the result is held
 * against two other enclosures: the quantity times the rates it may meet, and the sum with every limit by itself.
 */
export function rangePrice(state: RangeState, price: Tier[], quantity: Range): Range {
  const tiers = tiersOf(state, price, quantity);
  const byTier = tiers.reduce((sum, { inTier, rate }) => (rate ? plus(sum, times(inTier, rate)) : sum), point(0));
  const rates = tiers.flatMap(({ rate }) => (rate ? [rate] : []));
  if (rates.length === 0 || (isPoint(quantity) && tiers.every(({ limit }) => isPoint(limit)))) return byTier;
  const atOneRate = loosened(times(quantity, rates.reduce(hull)));
  return meet(meet(byTier, atOneRate), byLimits(state, price, tiers, quantity));
}

function tiersOf(state: RangeState, price: Tier[], quantity: Range): RangedTier[] {
  let below = point(0);
  return price.map(({ to, rate }, k) => {
    const limit = to ? greater(below, rangeOf(to, state.values)) : point(Infinity);
    // A negative quantity is priced in the first tier.
    const inTier = k === 0 ? lesser(quantity, limit) : greater(point(0), minus(lesser(quantity, limit), below));
    below = limit;
    const isEmpty = inTier.low === 0 && inTier.high === 0;
    return { inTier, limit, rate: isEmpty ? undefined : rangeOfPlace(state, rate) };
  });
}

/**
 * The same as a sum in which each limit stands once: with certain rates r and limits L rising,
 *
 *     price(q) = sum of (r_k - r_k+1) min(q, L_k) + r_last q
 *
 * Each term takes its own worst limit; the quantity is the same in all, and the sum is a straight line between the limits.
 * Derivation: what falls into tier k is min(q, L_k) - min(q, L_k-1); collect the terms of each L_k.
 */
function byLimits(state: RangeState, price: Tier[], tiers: RangedTier[], quantity: Range): Range {
  const open = { low: -Infinity, high: Infinity };
  if (!Number.isFinite(quantity.low) || !Number.isFinite(quantity.high)) return open;
  const rates = price.map(({ rate }, k) => tiers[k]!.rate ?? rangeOfPlace(state, rate));
  if (!rates.every(isPoint) || tiers.slice(0, -1).some(({ limit }) => !Number.isFinite(limit.high))) return open;
  const slopes = rates.map(({ low }, k) => low - (rates[k + 1]?.low ?? 0));
  const extreme = (sign: 1 | -1): number => {
    const limits = tiers.map(({ limit }, k) => (sign * slopes[k]! >= 0 ? limit.low : limit.high));
    const at = (q: number): number => slopes.reduce((sum, slope, k) => sum + slope * Math.min(q, limits[k]!), 0);
    const corners = limits.filter((limit) => limit > quantity.low && limit < quantity.high);
    return sign * Math.min(...[quantity.low, quantity.high, ...corners].map((q) => sign * at(q)));
  };
  const size = slopes.reduce((sum, slope) => sum + Math.abs(slope), 0);
  const crumbs = 1e-12 * size * Math.max(Math.abs(quantity.low), Math.abs(quantity.high));
  return loosened({ low: extreme(1) - crumbs, high: extreme(-1) + crumbs });
}
