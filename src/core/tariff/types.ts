import type { BillingPeriod, LoadSeries } from '../load';
import type { ChargeGroup } from './model';

/** What a year of bills is priced with, beside the schedule. */
export interface PriceOptions {
  /** Billing periods in order, none overlapping. */
  periods: BillingPeriod[];
  /** The schedule's contract inputs: one set for all, or one per period. */
  contract?: Record<string, number> | Record<string, number>[];
  /**
   * Values of earlier periods by quantity or line, oldest first: consecutive calendar months counted back from `periods[0].from`,
   * the last entry the month just before. Unequal lengths align at the end.
   */
  history?: Record<string, number[]>;
  /** Per period: quantities the schedule declares as given by the bill. */
  given?: Record<string, number>[];
}

/** A period with the quantities its bill prints, by name. */
export type PrintedRow = BillingPeriod & { quantities: Record<string, number> };

/** A quantity as a bill shows it. */
export interface PricedQuantity {
  value: number;
  unit: string;
  /** ISO UTC instant at which the cell that set a highest or lowest begins. */
  at?: string;
  label?: string;
  clause?: string;
  /** How the value came about, in one sentence. */
  explanation?: string;
  /** Names it is worked out from, each once. */
  uses: string[];
  /** Whether an estimated interval has a part in it. */
  isEstimated?: boolean;
}

/** A contract input or rate as a bill used it. */
export interface PricedInput {
  value: number;
  unit: string;
  label?: string;
  clause?: string;
  explanation: string;
  uses: string[];
}

/** One line of a bill, rounded as the schedule says, in major units of the currency. */
export interface PricedLine {
  id: string;
  label: string;
  group: ChargeGroup;
  quantity?: number;
  unit?: string;
  rate?: number;
  amount: number;
  explanation: string;
  clause?: string;
  /** Amount minus the same line at unity power factor. */
  reactivePart: number;
  /** Names it is worked out from, each once. */
  uses: string[];
  /** Whether an estimated interval has a part in it. */
  isEstimated?: boolean;
}

/** A bill priced on a schedule. */
export interface PricedBill {
  period: BillingPeriod;
  currency: string;
  total: number;
  quantities: Record<string, PricedQuantity>;
  /** Contract inputs and rates under the last text of the period. */
  inputs: Record<string, PricedInput>;
  lines: PricedLine[];
  /** Total minus the total of the same bill at unity power factor. */
  reactiveCost: number;
  /** History incomplete, estimated or missing intervals, straddled version, assumptions. */
  notes: string[];
}

/** A regular grid of intervals: beginning [ms since epoch], step [min], number. */
export interface PricingGrid {
  startMs: number;
  stepMinutes: number;
  count: number;
}

/** How `totals` may save work. */
export interface TotalsOptions {
  /** The active energy and qualities are those of the previous call, element by element; only kvarh differ. */
  isActiveUnchanged?: boolean;
  /** Positions of the periods whose intervals may differ from the previous call; in all others they are the same. Absent: any may. */
  changed?: ReadonlySet<number>;
}

/** A schedule laid out over a grid and periods; prices any load on that grid. Not for use by two callers at once: it reuses its arrays. */
export interface CompiledPricing {
  /** Bill totals of the periods, equal to those of `bills`; no words. [currency], float64[periods] */
  totals(load: LoadSeries, options?: TotalsOptions): Float64Array;
  /** Bills with lines, quantities and words. */
  bills(load: LoadSeries): PricedBill[];
}
