import { movedInvestment, type Investment, type Spreads } from '../core/economics';
import type { PlanEconomics } from './plan-money';

/** How uncertain the inputs of a plan's money are: one standard deviation each. */
export interface MoneySpread {
  /** Per cent of the saving: model and measurement. */
  savingPercent: number;
  /** Per cent of the operating hours. */
  hoursPercent: number;
  /** Per cent of work and of upkeep. */
  workPercent: number;
  upkeepPercent: number;
  /** Percentage points a year of the rise of energy charges, and of demand, reactive and fixed ones. */
  energyRisePoints: number;
  demandRisePoints: number;
}

/** What a reader may move, by name. Amounts in major units, all else in per cent or years. */
export const assumptionKeys = [
  'escalationPercent',
  'energyRisePercent',
  'demandRisePercent',
  'reactiveRisePercent',
  'fixedRisePercent',
  'runsPercent',
  'savingPercent',
  'capitalCost',
  'incentive',
  'yearlyUpkeep',
  'upkeepGrowthPercent',
  'discountPercent',
  'taxPercent',
  'horizonYears',
] as const;
export type AssumptionKey = (typeof assumptionKeys)[number];

/** Within which an assumption may be moved. */
export interface AssumptionRange {
  low: number;
  high: number;
}

/** Spreads where a plan gives none. Common practice, not measured. */
export const defaultSpread: MoneySpread = {
  savingPercent: 10,
  hoursPercent: 5,
  workPercent: 15,
  upkeepPercent: 20,
  energyRisePoints: 1,
  demandRisePoints: 1,
};

/** Years of writing off where none are given. */
export const defaultDepreciationYears = 10;

/** A plan's money as far as its form writes it. Major units. */
export interface MoneyEntries {
  capitalCost: number;
  yearlyUpkeep: number;
  economics: PlanEconomics;
}

/** The consultant's own value of each assumption; undefined for a rise that follows the common one. */
export function assumptionValue({ capitalCost, yearlyUpkeep, economics }: MoneyEntries, key: AssumptionKey) {
  if (key === 'capitalCost') return capitalCost;
  if (key === 'yearlyUpkeep') return yearlyUpkeep;
  if (key === 'runsPercent' || key === 'savingPercent') return 100;
  if (key === 'incentive' || key === 'upkeepGrowthPercent' || key === 'taxPercent') return economics[key] ?? 0;
  return economics[key];
}

/** A plan's money with what it saves: all that paybacks and present values are worked out from, on server and page. */
export interface PlanMoney extends MoneyEntries {
  /** First year's saving by group of charges, and the part of it that goes with the operating hours. */
  saving: Record<string, number>;
  savingWithHours: Record<string, number>;
}

/** Assumptions set otherwise than the plan does. */
export type OwnAssumptions = Partial<Record<AssumptionKey, number>>;

/** What the core appraises, with some assumptions set otherwise. */
export function investmentOf(money: PlanMoney, own: OwnAssumptions = {}): Investment {
  const value = (key: AssumptionKey) => own[key] ?? assumptionValue(money, key);
  const share = (key: AssumptionKey) => (value(key) ?? 0) / 100;
  const rise = (key: AssumptionKey) => (value(key) ?? value('escalationPercent') ?? 0) / 100;
  const plain: Investment = {
    capitalCost: value('capitalCost') ?? 0,
    incentive: value('incentive'),
    saving: money.saving,
    savingWithHours: money.savingWithHours,
    growth: {
      energy: rise('energyRisePercent'),
      demand: rise('demandRisePercent'),
      reactive: rise('reactiveRisePercent'),
      fixed: rise('fixedRisePercent'),
    },
    yearlyUpkeep: value('yearlyUpkeep') ?? 0,
    upkeepGrowth: share('upkeepGrowthPercent'),
    taxRate: share('taxPercent'),
    depreciationYears: money.economics.depreciationYears ?? defaultDepreciationYears,
    discountRate: share('discountPercent'),
    years: value('horizonYears') ?? 1,
  };
  return movedInvestment(plain, { saving: share('savingPercent'), hours: share('runsPercent') });
}

/** How uncertain a plan's inputs are, as the core samples them. */
export function spreadsOf({ spread }: PlanEconomics): Spreads {
  const { savingPercent, hoursPercent, workPercent, upkeepPercent, energyRisePoints, demandRisePoints } = {
    ...defaultSpread,
    ...spread,
  };
  return {
    saving: savingPercent / 100,
    hours: hoursPercent / 100,
    work: workPercent / 100,
    upkeep: upkeepPercent / 100,
    energyGrowth: energyRisePoints / 100,
    demandGrowth: demandRisePoints / 100,
  };
}
