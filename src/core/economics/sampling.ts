import { checkInvestment, yearsOfChecked, type Investment } from './investment';
import { checkSpreads, moveOf, movedInputs, movedInvestment, type Moves, type Spreads } from './moves';
import { paybackOf } from './ranking';
import { normalStream, uniformStream } from './random';

/** Values that 10, 50 and 90 % of the samples stay at or below. */
export interface Quantiles<T> {
  p10: T;
  p50: T;
  p90: T;
}

export interface SampledAppraisal {
  /** Null: not paid back within the horizon. [months] */
  paybackMonths: Quantiles<number | null>;
  npv: Quantiles<number>;
  /** Share of samples paid back within the horizon. */
  paidBackShare: number;
  /** Cumulative cash at the end of each month, month 0 first. */
  band: (Quantiles<number> & { month: number })[];
}

/**
 * Spread of payback, present value and cumulative cash by sampling the same investment that is appraised: growth by
 * group, upkeep, tax and incentive counted. The same seed gives the same figures; nothing is priced again, since all that is
 * drawn scales a saving that was priced once.
 *
 * The inputs are independent. Draws come in pairs of z and -z, so that the medians lie close to the figures without spread.
 *
 * @param options.samples  Number of draws. Whole, 2 to 1,000,000
 * @param options.seed  Whole number.
 * @throws {RangeError} naming the argument out of range
 * @source [HAM] for the pairs; [HYF] type 7 for the quantiles.
 */
export function sampleAppraisal(
  investment: Investment,
  spreads: Spreads,
  { samples, seed }: { samples: number; seed: number },
): SampledAppraisal {
  checkSampling(samples, seed);
  checkInvestment(investment);
  checkSpreads(spreads);
  const normal = normalStream(uniformStream(seed));
  const cumulative = Array.from({ length: 12 * investment.years + 1 }, () => new Float64Array(samples));
  const npv = new Float64Array(samples);
  const payback = new Float64Array(samples);
  let z: number[] = [];
  for (let i = 0; i < samples; i++) {
    z = i % 2 === 0 ? movedInputs.map(normal) : z.map((one) => -one);
    const years = yearsOfChecked(movedInvestment(investment, movesOf(spreads, z)));
    npv[i] = years.at(-1)!.cumulativeDiscounted;
    payback[i] = 12 * (paybackOf(years) ?? Infinity);
    fillMonths(cumulative, i, years);
  }
  npv.sort();
  payback.sort();
  const months = quantilesOf(payback);
  const orNull = (value: number) => (Number.isFinite(value) ? value : null);
  return {
    paybackMonths: { p10: orNull(months.p10), p50: orNull(months.p50), p90: orNull(months.p90) },
    npv: quantilesOf(npv),
    paidBackShare: payback.filter((value) => Number.isFinite(value)).length / samples,
    band: cumulative.map((values, month) => ({ month, ...quantilesOf(values.sort()) })),
  };
}

const movesOf = (spreads: Spreads, z: number[]): Partial<Moves> =>
  Object.fromEntries(movedInputs.map((input, k) => [input, moveOf(input, spreads[input], z[k]!)]));

function fillMonths(cumulative: Float64Array[], sample: number, years: { net: number; cumulative: number }[]): void {
  cumulative[0]![sample] = years[0]!.cumulative;
  for (let year = 1; year < years.length; year++) {
    const before = years[year - 1]!.cumulative;
    const net = years[year]!.net;
    for (let m = 1; m <= 12; m++) cumulative[12 * (year - 1) + m]![sample] = before + (net * m) / 12;
  }
}

/** Quantiles of sorted values, straight lines between order statistics (type 7 of [HYF]). */
export function quantilesOf(sorted: Float64Array): Quantiles<number> {
  const at = (share: number) => {
    const place = share * (sorted.length - 1);
    const below = sorted[Math.floor(place)]!;
    const above = sorted[Math.ceil(place)]!;
    return below === above ? below : below + (above - below) * (place - Math.floor(place));
  };
  return { p10: at(0.1), p50: at(0.5), p90: at(0.9) };
}

function checkSampling(samples: number, seed: number): void {
  if (!(Number.isInteger(samples) && samples >= 2 && samples <= 1e6))
    throw new RangeError(`samples must be a whole number from 2 to 1000000, got ${samples}`);
  if (!Number.isSafeInteger(seed)) throw new RangeError(`seed must be a whole number, got ${seed}`);
}
