import type { InvestmentYear, Quantiles, RankedInput } from '../core/economics';

/** What a plan's money comes to beyond paybacks and present value. Major units. */
export interface MoneyView {
  /** First year's saving by group of charges, and the part of it that goes with the operating hours. */
  saving: Record<string, number>;
  savingWithHours: Record<string, number>;
  /** Year 0 first. */
  years: InvestmentYear[];
  /** Of the samples; null: not paid back within the horizon. */
  npv: Quantiles<number>;
  paybackMonths: Quantiles<number | null>;
  paidBackShare: number;
  /** What moves the result, the widest first. */
  ranking: RankedInput[];
  /** Work at which the present value is nought; null where no work would be worth it. */
  breakEvenCapital: number | null;
}
