import { ratesOfReturn } from './irr';

/** A capital project that saves money year by year. Amounts in one currency, major units. */
export interface Project {
  /** Spent at the start. >= 0 */
  capitalCost: number;
  /** Saving of year k + 1. number[years] */
  yearlySaving: number[];
  /** Upkeep of year k + 1; a missing year is 0. */
  yearlyUpkeep?: number[];
  /** [unitless per year], > -1 */
  discountRate: number;
}

/** What a project is worth. */
export interface Appraisal {
  /** Null: never paid back within the years given. */
  simplePaybackYears: number | null;
  discountedPaybackYears: number | null;
  npv: number;
  /** Null when there is none or more than one above -100 %; a note says which. */
  irr: number | null;
  notes: string[];
}

/** Rounding allowed when a sum just reaches the capital. */
const REACHED = 1e-12;

/**
 * Payback, present value and rate of return of a capital project.
 *
 * Flows are saving minus upkeep. For the paybacks a year's flow arrives evenly through it, discounted at the factor of
 * the year's end, (1 + r)^(k + 1); for present value and rate of return it arrives at the year's end. The first crossing
 * counts; a later relapse does not.
 *
 *     NPV = -C + sum f[k]/(1 + r)^(k + 1),   IRR: the r with NPV = 0        [NEW] ch. 5 and 7
 *
 * @param project  Capital cost, yearly saving, upkeep and discount rate.
 * @returns Paybacks [years], NPV [currency], IRR [unitless per year] and notes in words.
 * @throws {RangeError} naming the argument out of range
 * @source [NEW] for NPV, IRR and discounted payback; interpolation within the year is common practice.
 */
export function appraise(project: Project): Appraisal {
  const flows = netFlows(project);
  const { capitalCost, discountRate } = project;
  const discounted = flows.map((flow, k) => flow / (1 + discountRate) ** (k + 1));
  const notes: string[] = [];
  const simplePaybackYears = paybackYears(capitalCost, flows);
  const discountedPaybackYears = paybackYears(capitalCost, discounted);
  if (simplePaybackYears === null) notes.push(`The capital is not recovered within ${flows.length} years.`);
  else if (discountedPaybackYears === null)
    notes.push(`Discounted, the capital is not recovered within ${flows.length} years.`);
  return {
    simplePaybackYears,
    discountedPaybackYears,
    npv: discounted.reduce((sum, flow) => sum + flow, -capitalCost),
    irr: singleRate([-capitalCost, ...flows], notes),
    notes,
  };
}

/** Saving minus upkeep, year by year. */
export function netFlows(project: Project): number[] {
  const { capitalCost, yearlySaving, yearlyUpkeep = [], discountRate } = project;
  if (!(capitalCost >= 0 && Number.isFinite(capitalCost)))
    throw new RangeError(`capitalCost must be >= 0, got ${capitalCost}`);
  if (!(discountRate > -1 && Number.isFinite(discountRate)))
    throw new RangeError(`discountRate must be above -1, got ${discountRate}`);
  if (yearlyUpkeep.length > yearlySaving.length) {
    throw new RangeError(
      `yearlyUpkeep must have at most ${yearlySaving.length} years like yearlySaving, got ${yearlyUpkeep.length}`,
    );
  }
  return yearlySaving.map((saving, k) => {
    const flow = saving - (yearlyUpkeep[k] ?? 0);
    if (!Number.isFinite(flow))
      throw new RangeError(`yearlySaving and yearlyUpkeep must be finite, got ${flow} in year ${k + 1}`);
    return flow;
  });
}

/** Years until the flows, each spread evenly over its year, first make up the capital; null if never. */
export function paybackYears(capitalCost: number, flows: number[]): number | null {
  if (capitalCost === 0) return 0;
  let recovered = 0;
  for (const [year, flow] of flows.entries()) {
    if (recovered + flow >= capitalCost * (1 - REACHED)) return year + Math.min(1, (capitalCost - recovered) / flow);
    recovered += flow;
  }
  return null;
}

function singleRate(flows: number[], notes: string[]): number | null {
  const rates = ratesOfReturn(flows);
  if (rates === 'every') {
    notes.push('No rate of return: all flows are zero.');
    return null;
  }
  if (rates.length === 1) return rates[0]!;
  if (rates.length === 0) notes.push('No rate of return above -100 %: the present value never is zero.');
  else {
    const list = rates.map((rate) => `${(100 * rate).toFixed(2)} %`).join(', ');
    notes.push(`More than one rate of return: ${list}. Judge by the present value.`);
  }
  return null;
}
