import { appraise, type Appraisal, type Project } from './appraise';

/**
 * A saving bought with work: what it costs, what it saves by group of charges, and how its money is reckoned. Amounts in
 * one currency, major units; rates per year, unitless.
 */
export interface Investment {
  /** Spent at the start. >= 0 */
  capitalCost: number;
  /** Grant or rebate received at the start; never counted above the capital cost. >= 0, absent: none */
  incentive?: number;
  /** First year's saving by group of charges; negative where a group costs more. */
  saving: Record<string, number>;
  /** Part of it that goes with the operating hours, by group; an absent group does not. */
  savingWithHours?: Record<string, number>;
  /** Yearly growth of each group. A group without one (riders, tax) follows the others, weighted by what they save. > -1 */
  growth: Record<string, number>;
  /** First year's upkeep. */
  yearlyUpkeep: number;
  /** > -1, absent: none */
  upkeepGrowth?: number;
  /** Rate on profit. [0, 1), absent: none */
  taxRate?: number;
  /** Years over which the capital less the incentive is written off evenly. Whole, >= 1; needed with a tax rate. */
  depreciationYears?: number;
  /** > -1 */
  discountRate: number;
  /** Horizon. Whole, 1 to 100 */
  years: number;
}

/** One year. Year 0 holds work and incentive; `tax` is negative where it is a relief. */
export interface InvestmentYear {
  year: number;
  work: number;
  incentive: number;
  saving: number;
  upkeep: number;
  tax: number;
  /** -work + incentive + saving - upkeep - tax */
  net: number;
  cumulative: number;
  /** Net at the year-end discount factor. */
  discounted: number;
  cumulativeDiscounted: number;
}

/** One month; month 0 holds work and incentive. */
export type InvestmentMonth = Omit<InvestmentYear, 'year'> & { month: number };

/** Incentive that is counted: never above the capital cost. */
const incentiveOf = ({ capitalCost, incentive = 0 }: Investment) => Math.min(incentive, capitalCost);

/** Growth of the groups that have none of their own: that of the others, weighted by what they save. */
export function followingGrowth({ saving, growth }: Pick<Investment, 'saving' | 'growth'>): number {
  const rates = Object.entries(growth);
  const weight = (group: string) => Math.abs(saving[group] ?? 0);
  const total = rates.reduce((sum, [group]) => sum + weight(group), 0);
  if (total === 0) return rates.reduce((sum, [, rate]) => sum + rate / rates.length, 0);
  return rates.reduce((sum, [group, rate]) => sum + (rate * weight(group)) / total, 0);
}

/** Saving of each year, every group growing at its own rate. number[years] */
export function yearlySavings(investment: Pick<Investment, 'saving' | 'growth' | 'years'>): number[] {
  const { saving, growth, years } = investment;
  const following = followingGrowth(investment);
  const yearly = new Array<number>(years).fill(0);
  for (const [group, first] of Object.entries(saving)) {
    let amount = first;
    for (let k = 0; k < years; k++) {
      yearly[k]! += amount;
      amount *= 1 + (growth[group] ?? following);
    }
  }
  return yearly;
}

/**
 * An investment year by year, after upkeep, tax and incentive. Year 0 first.
 *
 * Tax falls on saving less upkeep less straight-line depreciation of the capital less the incentive. A negative base
 * relieves the plant's other profit; what is not written off within the horizon is lost.
 *
 *     net[k] = S[k] - U[k] - t (S[k] - U[k] - D[k]),   D = (C - I)/N for the first N years        [NEW] ch. 11
 *
 * @returns InvestmentYear[years + 1]. Amounts in the currency of the investment.
 * @throws {RangeError} naming the argument out of range
 * @source [NEW] ch. 11. Reducing the depreciated basis by the incentive is common practice.
 */
export function investmentYears(investment: Investment): InvestmentYear[] {
  checkInvestment(investment);
  return yearsOfChecked(investment);
}

/** The same for an investment that was checked before: what sampling calls a thousand times. */
export function yearsOfChecked(investment: Investment): InvestmentYear[] {
  const { capitalCost, yearlyUpkeep, upkeepGrowth = 0, taxRate = 0, depreciationYears = 1, discountRate } = investment;
  const incentive = incentiveOf(investment);
  const basis = capitalCost - incentive;
  const start = { year: 0, work: capitalCost, incentive, saving: 0, upkeep: 0, tax: 0, net: 0 - basis };
  const rows: InvestmentYear[] = [
    { ...start, cumulative: start.net, discounted: start.net, cumulativeDiscounted: start.net },
  ];
  yearlySavings(investment).forEach((saving, k) => {
    const upkeep = yearlyUpkeep * (1 + upkeepGrowth) ** k;
    const depreciation = k < depreciationYears ? basis / depreciationYears : 0;
    const tax = taxRate * (saving - upkeep - depreciation);
    const net = saving - upkeep - tax;
    const discounted = net / (1 + discountRate) ** (k + 1);
    const before = rows[k]!;
    rows.push({
      year: k + 1,
      work: 0,
      incentive: 0,
      saving,
      upkeep,
      tax,
      net,
      cumulative: before.cumulative + net,
      discounted,
      cumulativeDiscounted: before.cumulativeDiscounted + discounted,
    });
  });
  return rows;
}

/**
 * The same month by month, each year spread evenly over its months: no day of the work is known that would tell which
 * bill comes first. The cumulative line crosses nought where the simple payback is.
 *
 * @returns InvestmentMonth[12 years + 1]
 */
export function investmentMonths(years: InvestmentYear[]): InvestmentMonth[] {
  return years.flatMap(({ year, ...row }, index) => {
    const before = years[index - 1];
    if (!before) return [{ ...row, month: 0 }];
    return Array.from({ length: 12 }, (_, m): InvestmentMonth => ({
      month: 12 * (year - 1) + m + 1,
      ...{ work: row.work / 12, incentive: row.incentive / 12, saving: row.saving / 12, upkeep: row.upkeep / 12 },
      ...{ tax: row.tax / 12, net: row.net / 12, discounted: row.discounted / 12 },
      cumulative: before.cumulative + (row.net * (m + 1)) / 12,
      cumulativeDiscounted: before.cumulativeDiscounted + (row.discounted * (m + 1)) / 12,
    }));
  });
}

/** What `appraise` is given: capital less incentive, and each year's net flow. */
export function projectOf(years: InvestmentYear[], discountRate: number): Project {
  const [start, ...rest] = years;
  return { capitalCost: 0 - start!.net, yearlySaving: rest.map((row) => row.net), discountRate };
}

/**
 * Paybacks, present value and rate of return of an investment, after upkeep, tax and incentive.
 *
 * What costs nothing is paid back at once only where its first year brings something; else never.
 */
export function appraiseInvestment(investment: Investment): Appraisal {
  const years = investmentYears(investment);
  const appraisal = appraise(projectOf(years, investment.discountRate));
  if (years[0]!.net < 0 || years[1]!.net > 0) return appraisal;
  return { ...appraisal, simplePaybackYears: null, discountedPaybackYears: null };
}

/**
 * Capital cost at which the present value is nought, all else as given; null where it would not be at or above the incentive.
 *
 * The present value falls in a straight line with the capital: one for what is paid, less the tax its depreciation saves.
 */
export function breakEvenCapital(investment: Investment): number | null {
  const npvAt = (capitalCost: number) => investmentYears({ ...investment, capitalCost }).at(-1)!.cumulativeDiscounted;
  const { incentive = 0 } = investment;
  const span = Math.max(1, investment.capitalCost, incentive);
  const free = npvAt(incentive);
  if (free < 0) return null;
  const slope = (npvAt(incentive + span) - free) / span;
  return slope < 0 ? incentive - free / slope : null;
}

/** @throws {RangeError} naming the argument out of range */
export function checkInvestment(investment: Investment): void {
  const { years, incentive = 0, taxRate = 0, depreciationYears, upkeepGrowth = 0 } = investment;
  if (!(Number.isInteger(years) && years >= 1 && years <= 100))
    throw new RangeError(`years must be a whole number from 1 to 100, got ${years}`);
  if (!(investment.capitalCost >= 0 && Number.isFinite(investment.capitalCost)))
    throw new RangeError(`capitalCost must be >= 0, got ${investment.capitalCost}`);
  if (!(incentive >= 0 && Number.isFinite(incentive))) throw new RangeError(`incentive must be >= 0, got ${incentive}`);
  if (!(taxRate >= 0 && taxRate < 1)) throw new RangeError(`taxRate must be in [0, 1), got ${taxRate}`);
  const wholeYears = Number.isInteger(depreciationYears) && depreciationYears! >= 1;
  if ((taxRate > 0 || depreciationYears !== undefined) && !wholeYears)
    throw new RangeError(`depreciationYears must be a whole number >= 1, got ${depreciationYears}`);
  const rates = { ...investment.growth, upkeep: upkeepGrowth, discount: investment.discountRate };
  for (const [name, rate] of Object.entries(rates)) {
    if (!(rate > -1 && Number.isFinite(rate))) throw new RangeError(`growth of ${name} must be above -1, got ${rate}`);
  }
  const amounts = {
    ...investment.saving,
    ...prefixed(investment.savingWithHours),
    yearlyUpkeep: investment.yearlyUpkeep,
  };
  for (const [name, amount] of Object.entries(amounts)) {
    if (!Number.isFinite(amount)) throw new RangeError(`saving or upkeep must be finite, got ${amount} for ${name}`);
  }
}

const prefixed = (amounts: Record<string, number> = {}) =>
  Object.fromEntries(Object.entries(amounts).map(([name, amount]) => [`${name} with hours`, amount]));
