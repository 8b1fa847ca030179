import { netFlows } from './appraise';
import type { Project } from './appraise';

/** One year of a project. Year 0 holds the capital. */
export interface CashFlowYear {
  year: number;
  saving: number;
  upkeep: number;
  net: number;
  cumulative: number;
  /** Net at the year-end discount factor. */
  discounted: number;
  cumulativeDiscounted: number;
}

/** One month; month 0 holds the capital. A year's net is spread evenly over its months. */
export interface CashFlowMonth {
  month: number;
  net: number;
  cumulative: number;
  cumulativeDiscounted: number;
}

/**
 * Savings year by year from the first year's, each group of charges growing at its own rate.
 *
 * @param input.firstYear  First year's saving by group (energy, demand, reactive ...). [currency]
 * @param input.escalation  Yearly growth by group; a group without one grows at `otherEscalation`. [unitless], > -1
 * @param input.otherEscalation  Growth of the rest, 0 when absent.
 * @param input.years  Number of years. Whole, >= 1
 * @returns Total saving of each year. number[years]
 * @throws {RangeError} naming the argument out of range
 */
export function escalatedSavings(input: {
  firstYear: Record<string, number>;
  escalation?: Record<string, number>;
  otherEscalation?: number;
  years: number;
}): number[] {
  const { firstYear, escalation = {}, otherEscalation = 0, years } = input;
  if (!(Number.isInteger(years) && years >= 1)) throw new RangeError(`years must be a whole number >= 1, got ${years}`);
  const groups = Object.entries(firstYear).map(([group, saving]) => {
    const growth = escalation[group] ?? otherEscalation;
    if (!(growth > -1 && Number.isFinite(growth)))
      throw new RangeError(`escalation of ${group} must be above -1, got ${growth}`);
    if (!Number.isFinite(saving)) throw new RangeError(`firstYear.${group} must be finite, got ${saving}`);
    return { saving, growth };
  });
  return Array.from({ length: years }, (_, k) =>
    groups.reduce((sum, { saving, growth }) => sum + saving * (1 + growth) ** k, 0),
  );
}

/**
 * Cash flow of a project by year and by month, with its cumulative series for the payback chart.
 *
 * The cumulative value at a year's end is the same in both. Within the year the monthly series is a straight line, so it
 * crosses zero where `appraise` says the simple payback is.
 *
 * @throws {RangeError} as `appraise`
 */
export function cashFlow(project: Project): { years: CashFlowYear[]; months: CashFlowMonth[] } {
  const flows = netFlows(project);
  const years: CashFlowYear[] = [
    yearRow(0, { saving: 0, upkeep: 0, net: -project.capitalCost, discounted: -project.capitalCost }),
  ];
  const months: CashFlowMonth[] = [
    {
      month: 0,
      net: -project.capitalCost,
      cumulative: -project.capitalCost,
      cumulativeDiscounted: -project.capitalCost,
    },
  ];
  flows.forEach((net, k) => {
    const before = years[k]!;
    const discounted = net / (1 + project.discountRate) ** (k + 1);
    const saving = project.yearlySaving[k]!;
    years.push(yearRow(k + 1, { saving, upkeep: saving - net, net, discounted }, before));
    for (let month = 1; month <= 12; month++) {
      months.push({
        month: 12 * k + month,
        net: net / 12,
        cumulative: before.cumulative + (net * month) / 12,
        cumulativeDiscounted: before.cumulativeDiscounted + (discounted * month) / 12,
      });
    }
  });
  return { years, months };
}

function yearRow(
  year: number,
  row: { saving: number; upkeep: number; net: number; discounted: number },
  before: { cumulative: number; cumulativeDiscounted: number } = { cumulative: 0, cumulativeDiscounted: 0 },
): CashFlowYear {
  return {
    year,
    ...row,
    cumulative: before.cumulative + row.net,
    cumulativeDiscounted: before.cumulativeDiscounted + row.discounted,
  };
}

/**
 * A project after tax and incentive: tax falls on saving less upkeep less straight-line depreciation.
 *
 * @param project  Project before tax.
 * @param input.taxRate  Rate on profit. [unitless], [0, 1)
 * @param input.depreciationYears  Years over which the capital less incentive is written off evenly. Whole, >= 1
 * @param input.incentive  Grant or rebate received at the start. [currency], [0, capitalCost]
 * @returns The project whose flows are after tax; appraise it as any other.
 * @throws {RangeError} naming the argument out of range
 * @source [NEW] ch. 11: after-tax flow = (saving - upkeep)(1 - t) + t x depreciation.
 */
export function afterTax(
  project: Project,
  input: { taxRate: number; depreciationYears: number; incentive?: number },
): Project {
  const { taxRate, depreciationYears, incentive = 0 } = input;
  if (!(taxRate >= 0 && taxRate < 1)) throw new RangeError(`taxRate must be in [0, 1), got ${taxRate}`);
  if (!(Number.isInteger(depreciationYears) && depreciationYears >= 1)) {
    throw new RangeError(`depreciationYears must be a whole number >= 1, got ${depreciationYears}`);
  }
  if (!(incentive >= 0 && incentive <= project.capitalCost)) {
    throw new RangeError(`incentive must be between 0 and capitalCost, got ${incentive}`);
  }
  const capitalCost = project.capitalCost - incentive;
  const yearlySaving = netFlows(project).map(
    (net, k) => net * (1 - taxRate) + (k < depreciationYears ? (taxRate * capitalCost) / depreciationYears : 0),
  );
  return { capitalCost, yearlySaving, discountRate: project.discountRate };
}
