import { z } from 'zod';
import {
  assumptionKeys,
  assumptionValue,
  type AssumptionKey,
  type AssumptionRange,
  type MoneyEntries,
  type MoneySpread,
} from './assumptions';

/** What a plan's money is worth, on the assumptions of its own form. */
export interface AppraisalView {
  simplePaybackYears: number | null;
  discountedPaybackYears: number | null;
  npv: number;
  irr: number | null;
  notes: string[];
}

/**
 * What a plan's money is reckoned with, as stored with it and frozen in editions. What is absent (all of it but the
 * first three in plans and editions made before) is as `assumptionValue` and `spreadsOf` say.
 */
export interface PlanEconomics {
  discountPercent: number;
  /** Rise of all charges that have none of their own. */
  escalationPercent: number;
  horizonYears: number;
  energyRisePercent?: number;
  demandRisePercent?: number;
  reactiveRisePercent?: number;
  fixedRisePercent?: number;
  upkeepGrowthPercent?: number;
  /** Grant or rebate received when the work is done, in major units as the form writes it. */
  incentive?: number;
  /** Rate on profit; 0 or absent: before tax. */
  taxPercent?: number;
  depreciationYears?: number;
  spread?: Partial<MoneySpread>;
  /** What the client may move, and how far; an absent assumption is fixed. */
  ranges?: Partial<Record<AssumptionKey, AssumptionRange>>;
}

export const planDefaults = { discountPercent: 8, escalationPercent: 0, horizonYears: 10 } as const;

/** One month of the cumulative cash flow; `low` and `high` hold eight of ten samples. Major units. */
export interface CashFlowMonth {
  month: number;
  cumulative: number;
  low?: number;
  high?: number;
}

/** Per cent or percentage points an entry must lie within, with the words of its refusal. */
const within = (low: number, high: number, what: string, unit = '%') =>
  z
    .number({ error: `Write ${what} as a number.` })
    .min(low, `${capital(what)} lies between ${signed(low)} and ${high} ${unit}.`)
    .max(high, `${capital(what)} lies between ${signed(low)} and ${high} ${unit}.`);

const capital = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);
const signed = (value: number) => (value < 0 ? `−${-value}` : String(value));
const rise = (what: string) => within(-20, 30, what);

/** An amount of money, major units. */
export const moneyInput = z
  .number({ error: 'Write an amount.' })
  .min(0, 'Write an amount of 0 or more.')
  .max(1e10, 'This amount is too large.');

const percentOf = (what: string) => within(10, 200, what);

/** Each assumption by the limits of its own entry. */
const assumptionInputs: Record<AssumptionKey, z.ZodType<number>> = {
  escalationPercent: rise('the yearly rise'),
  energyRisePercent: rise('the rise of energy charges'),
  demandRisePercent: rise('the rise of demand charges'),
  reactiveRisePercent: rise('the rise of reactive charges'),
  fixedRisePercent: rise('the rise of fixed charges'),
  runsPercent: percentOf('how much the plant runs'),
  savingPercent: percentOf('how much of the saving comes'),
  capitalCost: moneyInput,
  incentive: moneyInput,
  yearlyUpkeep: moneyInput,
  upkeepGrowthPercent: rise('the rise of upkeep'),
  discountPercent: within(0, 40, 'the discount rate'),
  taxPercent: within(0, 60, 'the tax rate'),
  horizonYears: within(1, 30, 'the horizon', 'years').refine(Number.isInteger, 'Write whole years.'),
};

const rangeOf = (entry: z.ZodType<number>) =>
  z
    .object({ low: entry, high: entry })
    .refine(({ low, high }) => low < high, { path: ['high'], error: 'The end of the range lies above its beginning.' })
    .optional();

const spreadInput = z
  .object({
    savingPercent: within(0, 100, 'the spread of the saving'),
    hoursPercent: within(0, 100, 'the spread of the operating hours'),
    workPercent: within(0, 100, 'the spread of the work'),
    upkeepPercent: within(0, 100, 'the spread of the upkeep'),
    energyRisePoints: within(0, 20, 'the spread of the rise', 'points'),
    demandRisePoints: within(0, 20, 'the spread of the rise', 'points'),
  })
  .partial();

const { discountPercent, escalationPercent, horizonYears, ...optional } = assumptionInputs;

/** The assumptions of a plan's money as its form sends them. */
export const economicsInput = z.object({
  discountPercent,
  escalationPercent,
  horizonYears,
  energyRisePercent: optional.energyRisePercent.optional(),
  demandRisePercent: optional.demandRisePercent.optional(),
  reactiveRisePercent: optional.reactiveRisePercent.optional(),
  fixedRisePercent: optional.fixedRisePercent.optional(),
  upkeepGrowthPercent: optional.upkeepGrowthPercent.optional(),
  incentive: moneyInput.optional(),
  taxPercent: optional.taxPercent.optional(),
  depreciationYears: within(1, 40, 'the time of writing off', 'years')
    .refine(Number.isInteger, 'Write whole years.')
    .optional(),
  spread: spreadInput.optional(),
  ranges: z
    .object(Object.fromEntries(assumptionKeys.map((key) => [key, rangeOf(assumptionInputs[key])])))
    .transform((ranges) => ranges as Partial<Record<AssumptionKey, AssumptionRange>>)
    .optional(),
});

/**
 * What of a plan's money fits together badly: an incentive above the work, a range that leaves out the plan's own value.
 *
 * @returns Words by the path of the entry.
 */
export function moneyFaults(entries: MoneyEntries): { path: string[]; message: string }[] {
  const { capitalCost, economics } = entries;
  const faults: { path: string[]; message: string }[] = [];
  if ((economics.incentive ?? 0) > capitalCost)
    faults.push({ path: ['economics', 'incentive'], message: 'An incentive is at most what the work costs.' });
  for (const [key, range] of Object.entries(economics.ranges ?? {}) as [AssumptionKey, AssumptionRange | undefined][]) {
    if (!range) continue;
    const own = assumptionValue(entries, key);
    const path = ['economics', 'ranges', key];
    if (own === undefined)
      faults.push({ path: [...path, 'low'], message: 'Give these charges a rise of their own first.' });
    else if (own < range.low || own > range.high)
      faults.push({
        path: [...path, own < range.low ? 'low' : 'high'],
        message: `The range holds the plan’s own ${own}.`,
      });
  }
  return faults;
}

/** Marks what `moneyFaults` finds. For `superRefine` of a plan's schema. */
export function refineMoney(entries: MoneyEntries, context: z.RefinementCtx): void {
  for (const { path, message } of moneyFaults(entries)) context.addIssue({ code: 'custom', path, message });
}
