import { uniformStream } from '../economics/random';
import type { LoadSeries } from '../load';
import { admissibleRange } from './admissible-range';
import { distinctLoads, withBothRegisters } from './simulator';
import { shiftRegisters } from './registers';
import type { Plant } from './types';

/** What no admissible excitation of the plant's motors can beat. */
export interface CostBound {
  /** Least bill sum any admissible kvar in any interval could reach; null when the bills forbid the argument. [currency] */
  cost: number | null;
  /** Why the bound holds, or why there is none, in words. */
  words: string;
  /** Trials in which the bills were tested for the property the bound rests on. */
  trials: number;
}

/** A bill may fall by this much where it should not, from rounding of lines. [currency] */
const ROUNDING = 0.05;

/**
 * Lower bound of the year's bills over every way the motors could be excited, each interval on its own.
 *
 * In every interval each motor may take any reactive power within its limits at its load (the standing one included). The least
 * lagging energy, the least leading energy and the least active energy that any of these choices gives are put into one series and
 * priced. The argument: no admissible excitation has less in any register of any interval, so where a bill never falls as a register
 * rises, no admissible excitation costs less. That property belongs to the schedule; it is tested by pricing pairs of series between
 * the ends of the ranges, a register lowered in the second. If a bill rises as a reactive register falls, there is no bound; if it
 * rises as active energy falls (a rounded power factor does that), twice the most seen is taken off and the words say so.
 *
 * The bound is loose by what no field can do: one kvar for every interval, lagging and leading register at their least together, and
 * the losses of the least-loss field with the kvar of another.
 *
 * @param input.plant  Load and motors; what lies upstream is left out, so the bound holds for a meter at the bus.
 * @param input.totals  Bill totals of a load series, period by period.
 * @param input.trials  Pairs priced; 90 when absent.
 * @param input.seed  Seed of the trials; 1 when absent.
 * @throws {RangeError} naming the argument out of range
 */
export function boundCost(input: {
  plant: Plant;
  totals: (load: LoadSeries) => Float64Array;
  trials?: number;
  seed?: number;
}): CostBound {
  const { plant, totals, trials = 90, seed = 1 } = input;
  if (plant.upstream) return { cost: null, words: 'No bound: losses upstream of the bus are metered.', trials: 0 };
  const { load } = withBothRegisters(plant.load);
  const ranges = rangesOf(plant, load.kwh.length);
  const price = (series: LoadSeries) => totals(series).reduce((sum, total) => sum + total, 0);
  const floor = floorOf(load, ranges);
  const uniform = uniformStream(seed);
  let slack = 0;
  for (let trial = 0; trial < trials; trial++) {
    const base = candidateOf(load, ranges, uniform);
    const { series, channel } = loweredOf(base, floor, uniform);
    const rise = price(series) - price(base);
    if (rise <= ROUNDING) continue;
    if (channel !== 'kwh') return noBound(channel, trial + 1);
    slack = Math.max(slack, 2 * rise);
  }
  if (slack === 0) return { cost: price(floor), words: PLAIN_WORDS.replace('TRIALS', String(trials)), trials };
  const cost = Math.min(...ENERGY_SHARES.map((share) => price(withEnergy(floor, load, share)))) - slack;
  return { cost, words: STEPPED_WORDS.replace('SLACK', slack.toFixed(2)).replace('TRIALS', String(trials)), trials };
}

/** Shares of the way from least to metered active energy that are priced where a bill steps with it. */
const ENERGY_SHARES = Array.from({ length: 21 }, (_, k) => k / 20);

const LOOSE =
  'Finer control than a fixed field can bring at most the difference, and less in truth: one field cannot serve every register at once.';
const PLAIN_WORDS =
  "No excitation within the motors' limits, chosen interval by interval, costs less, provided a bill never rises as a register falls: " +
  `none of TRIALS trials on this schedule did. ${LOOSE}`;
const STEPPED_WORDS =
  "No excitation within the motors' limits, chosen interval by interval, is likely to cost less. Under this schedule a bill can rise a " +
  `little as active energy falls; SLACK, twice the most seen in TRIALS trials, is taken off for it. ${LOOSE}`;

function noBound(channel: (typeof CHANNELS)[number], trials: number): CostBound {
  const words = `No bound: under this schedule a bill can rise when ${CHANNEL_WORDS[channel]} falls, so the cheapest excitation need not be the least energy.`;
  return { cost: null, words, trials };
}

function withEnergy(floor: LoadSeries, load: LoadSeries, share: number): LoadSeries {
  return { ...floor, kwh: floor.kwh.map((kwh, i) => kwh + share * (load.kwh[i]! - kwh)) };
}

interface Ranges {
  leastKvar: Float64Array;
  greatestKvar: Float64Array;
  leastKw: Float64Array;
}

/** Sum over the motors of what each could change, interval by interval. */
function rangesOf(plant: Plant, count: number): Ranges {
  const sums: Ranges = {
    leastKvar: new Float64Array(count),
    greatestKvar: new Float64Array(count),
    leastKw: new Float64Array(count),
  };
  plant.motors.forEach((planMotor, m) => {
    const { loads, index } = distinctLoads(planMotor.shaftKw, count, `motors[${m}]`);
    const range = admissibleRange(planMotor, loads);
    index.forEach((k, i) => {
      if (k === 0) return;
      sums.leastKvar[i]! += range.leastKvar[k - 1]!;
      sums.greatestKvar[i]! += range.greatestKvar[k - 1]!;
      sums.leastKw[i]! += range.leastKw[k - 1]!;
    });
  });
  return sums;
}

/** Every register of every interval at the least that any admissible excitation gives. */
function floorOf(load: LoadSeries, ranges: Ranges): LoadSeries {
  const hours = load.stepMinutes / 60;
  const lagging = new Float64Array(load.kwh.length);
  const leading = new Float64Array(load.kwh.length);
  load.kvarhLagging.forEach((own, i) => {
    lagging[i] = shiftRegisters(own, load.kvarhLeading[i]!, ranges.leastKvar[i]! * hours).kvarhLagging;
    leading[i] = shiftRegisters(own, load.kvarhLeading[i]!, ranges.greatestKvar[i]! * hours).kvarhLeading;
  });
  return {
    ...load,
    kwh: load.kwh.map((kwh, i) => kwh + ranges.leastKw[i]! * hours),
    kvarhLagging: lagging,
    kvarhLeading: leading,
  };
}

/** A series within the ranges: the same share of the range everywhere, or another share in every interval. */
function candidateOf(load: LoadSeries, ranges: Ranges, uniform: () => number): LoadSeries {
  const hours = load.stepMinutes / 60;
  const constant = uniform() < 0.5 ? uniform() : null;
  const series = {
    ...load,
    kwh: load.kwh.slice(),
    kvarhLagging: load.kvarhLagging.slice(),
    kvarhLeading: load.kvarhLeading.slice(),
  };
  for (let i = 0; i < load.kwh.length; i++) {
    const share = constant ?? uniform();
    const kvar = ranges.leastKvar[i]! + share * (ranges.greatestKvar[i]! - ranges.leastKvar[i]!);
    const shifted = shiftRegisters(load.kvarhLagging[i]!, load.kvarhLeading[i]!, kvar * hours);
    series.kvarhLagging[i] = shifted.kvarhLagging;
    series.kvarhLeading[i] = shifted.kvarhLeading;
  }
  return series;
}

const CHANNELS = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;
const CHANNEL_WORDS = { kwh: 'active energy', kvarhLagging: 'lagging energy', kvarhLeading: 'leading energy' };

/** The series with one register at its floor in some intervals: all, a stretch, or here and there. */
function loweredOf(
  base: LoadSeries,
  floor: LoadSeries,
  uniform: () => number,
): { series: LoadSeries; channel: (typeof CHANNELS)[number] } {
  const channel = CHANNELS[Math.floor(uniform() * 3)]!;
  const count = base.kwh.length;
  const kind = uniform();
  const from = Math.floor(uniform() * count);
  const length = kind < 0.3 ? count : Math.ceil(uniform() * count * 0.1);
  const chance = kind > 0.7 ? 0.2 : 1;
  const values = base[channel].slice();
  for (let i = 0; i < count; i++) {
    const within = kind < 0.3 || (i >= from && i < from + length) || kind > 0.7;
    if (within && (chance === 1 || uniform() < chance)) values[i] = Math.min(values[i]!, floor[channel][i]!);
  }
  return { series: { ...base, [channel]: values }, channel };
}
