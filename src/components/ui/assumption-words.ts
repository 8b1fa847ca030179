import type { AssumptionKey } from '../../schemas/assumptions';
import { formatNumber } from './format';

interface AssumptionWords {
  /** As a table lists it. */
  name: string;
  /** As the client is asked: the unit follows. */
  asked: string;
  /** Without a currency; `money` stands for the plan's own. */
  unit: string;
  money?: true;
  decimals: number;
  step: number;
}

const rise = { unit: '% a year', decimals: 1, step: 0.5 };

/** Assumptions of a plan's money in words, in the order of forms and tables. */
export const assumptionWords: Record<AssumptionKey, AssumptionWords> = {
  escalationPercent: { name: 'Rise of power prices', asked: 'Power prices rise by', ...rise },
  energyRisePercent: { name: 'Rise of energy charges', asked: 'Energy charges rise by', ...rise },
  demandRisePercent: { name: 'Rise of demand charges', asked: 'Demand charges rise by', ...rise },
  reactiveRisePercent: { name: 'Rise of reactive charges', asked: 'Reactive charges rise by', ...rise },
  fixedRisePercent: { name: 'Rise of fixed charges', asked: 'Fixed charges rise by', ...rise },
  runsPercent: { name: 'Operating hours', asked: 'The plant runs', unit: '% of last year', decimals: 0, step: 1 },
  savingPercent: { name: 'Saving', asked: 'Saved on the bills', unit: '% of calculated', decimals: 0, step: 1 },
  capitalCost: { name: 'Work in all', asked: 'The work costs', unit: '', money: true, decimals: 0, step: 500 },
  incentive: { name: 'Incentive', asked: 'A grant pays', unit: '', money: true, decimals: 0, step: 500 },
  yearlyUpkeep: { name: 'Upkeep', asked: 'Upkeep costs', unit: 'a year', money: true, decimals: 0, step: 100 },
  upkeepGrowthPercent: { name: 'Rise of upkeep', asked: 'Upkeep rises by', ...rise },
  discountPercent: { name: 'Discount rate', asked: 'Interest you reckon with', ...rise },
  taxPercent: { name: 'Tax rate', asked: 'Tax on what is saved', unit: '%', decimals: 1, step: 0.5 },
  horizonYears: { name: 'Horizon', asked: 'Years looked at', unit: 'years', decimals: 0, step: 1 },
};

/** Unit of an assumption in a currency: "USD a year", "% of last year". */
export function assumptionUnit(key: AssumptionKey, currency: string): string {
  const { unit, money } = assumptionWords[key];
  return money ? [currency, unit].filter(Boolean).join(' ') : unit;
}

/** Decimals an assumption's value needs: those of its kind, more only where the value has them. */
export function assumptionFigure(key: AssumptionKey, value: number): string {
  const { decimals } = assumptionWords[key];
  const tidy = Math.abs(value - Number(value.toFixed(decimals))) < 1e-9;
  return tidy ? formatNumber(value, { decimals }) : formatNumber(value, { upTo: 2 });
}

/** A value with its unit: "2.0 % a year", "61,500 USD". */
export const assumptionValueWords = (key: AssumptionKey, value: number, currency: string) =>
  `${assumptionFigure(key, value)}\u00a0${assumptionUnit(key, currency)}`;
