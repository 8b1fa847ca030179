import { appraise, paybackYears } from './appraise';
import { escalatedSavings } from './cash-flow';
import { normalStream, uniformStream } from './random';

/** A project whose saving grows at one rate, with how uncertain its figures are. */
export interface UncertainProject {
  capitalCost: number;
  firstYearSaving: number;
  /** Upkeep, the same every year. */
  yearlyUpkeep?: number;
  /** Yearly growth of the saving. [unitless] */
  escalationRate: number;
  discountRate: number;
  years: number;
  uncertainty: {
    /** Relative standard deviations of saving and capital cost. [unitless], >= 0 */
    saving: number;
    cost: number;
    /** Standard deviation of the yearly growth. [unitless], >= 0 */
    escalation: number;
  };
  samples: number;
  seed: number;
}

/** Values that 10, 50 and 90 % of the samples stay at or below; null: not paid back within the years. */
export interface Quantiles<T> {
  p10: T;
  p50: T;
  p90: T;
}

export interface UncertaintyResult {
  paybackMonths: Quantiles<number | null>;
  npv: Quantiles<number>;
  /** Share of samples paid back within the years. */
  paidBackShare: number;
  /** Cumulative cash flow at the end of each month, month 0 first. */
  band: (Quantiles<number> & { month: number })[];
  /** NPV with one input at its 10 % and 90 % value and the others as given, the widest swing first. */
  ranking: { input: 'saving' | 'cost' | 'escalation'; npvLow: number; npvHigh: number; swing: number }[];
}

/** Standard normal value exceeded with 10 % probability. */
const Z90 = 1.2815515655446004;

/**
 * Spread of payback and present value by sampling: the same seed gives the same figures.
 *
 * Saving and cost are multiplied by exp(z ln(1 + u)), so that they stay positive and their median is as given; growth is
 * given plus u z. The three are independent.
 *
 * @throws {RangeError} naming the argument out of range
 */
export function sampleAppraisal(project: UncertainProject): UncertaintyResult {
  checkUncertain(project);
  const normal = normalStream(uniformStream(project.seed));
  const months = 12 * project.years + 1;
  const cumulative = Array.from({ length: months }, () => new Float64Array(project.samples));
  const npv = new Float64Array(project.samples);
  const payback = new Float64Array(project.samples);
  for (let i = 0; i < project.samples; i++) {
    const draw = drawn(project, normal(), normal(), normal());
    npv[i] = draw.npv;
    payback[i] = 12 * (paybackYears(draw.capitalCost, draw.flows) ?? Infinity);
    fillCumulative(cumulative, i, draw);
  }
  npv.sort();
  payback.sort();
  const months3 = quantilesOf(payback);
  const orNull = (value: number) => (Number.isFinite(value) ? value : null);
  return {
    paybackMonths: { p10: orNull(months3.p10), p50: orNull(months3.p50), p90: orNull(months3.p90) },
    npv: quantilesOf(npv),
    paidBackShare: payback.filter((value) => Number.isFinite(value)).length / project.samples,
    band: cumulative.map((values, month) => ({ month, ...quantilesOf(values.sort()) })),
    ranking: rankInputs(project),
  };
}

interface Draw {
  capitalCost: number;
  flows: number[];
  npv: number;
}

/** The project with each input moved by a number of standard deviations. */
function drawn(project: UncertainProject, zSaving: number, zCost: number, zEscalation: number): Draw {
  const { uncertainty, years, discountRate, yearlyUpkeep = 0 } = project;
  const capitalCost = project.capitalCost * (1 + uncertainty.cost) ** zCost;
  const saving = project.firstYearSaving * (1 + uncertainty.saving) ** zSaving;
  const otherEscalation = Math.max(-0.99, project.escalationRate + uncertainty.escalation * zEscalation);
  const yearlySaving = escalatedSavings({ firstYear: { saving }, otherEscalation, years });
  const flows = yearlySaving.map((amount) => amount - yearlyUpkeep);
  const npv = flows.reduce((sum, flow, k) => sum + flow / (1 + discountRate) ** (k + 1), -capitalCost);
  return { capitalCost, flows, npv };
}

function fillCumulative(cumulative: Float64Array[], sample: number, draw: Draw): void {
  let total = -draw.capitalCost;
  cumulative[0]![sample] = total;
  draw.flows.forEach((flow, year) => {
    for (let month = 1; month <= 12; month++) cumulative[12 * year + month]![sample] = total + (flow * month) / 12;
    total += flow;
  });
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

function rankInputs(project: UncertainProject): UncertaintyResult['ranking'] {
  const inputs = ['saving', 'cost', 'escalation'] as const;
  const npvAt = (input: (typeof inputs)[number], z: number) =>
    drawn(project, input === 'saving' ? z : 0, input === 'cost' ? z : 0, input === 'escalation' ? z : 0).npv;
  return inputs
    .map((input) => {
      const npvLow = npvAt(input, -Z90);
      const npvHigh = npvAt(input, Z90);
      return { input, npvLow, npvHigh, swing: Math.abs(npvHigh - npvLow) };
    })
    .sort((a, b) => b.swing - a.swing);
}

function checkUncertain(project: UncertainProject): void {
  const { samples, uncertainty, years } = project;
  if (!(Number.isInteger(samples) && samples >= 2 && samples <= 1e6)) {
    throw new RangeError(`samples must be a whole number from 2 to 1000000, got ${samples}`);
  }
  if (!(Number.isInteger(years) && years >= 1 && years <= 100))
    throw new RangeError(`years must be a whole number from 1 to 100, got ${years}`);
  if (!(Number.isInteger(project.seed) && Number.isSafeInteger(project.seed)))
    throw new RangeError(`seed must be a whole number, got ${project.seed}`);
  for (const [name, spread] of Object.entries(uncertainty)) {
    if (!(spread >= 0 && spread <= 10)) throw new RangeError(`uncertainty.${name} must be in [0, 10], got ${spread}`);
  }
  const { capitalCost, discountRate, firstYearSaving, yearlyUpkeep = 0 } = project;
  appraise({ capitalCost, discountRate, yearlySaving: [firstYearSaving], yearlyUpkeep: [yearlyUpkeep] });
}
