import type { BillingPeriod, LoadSeries } from '@/core/load';
import type { PriceOptions } from '@/core/tariff';

/**
 * A figure that must come out: a line, a quantity, `total` or `reactiveCost`, or lines added up (`lag + lead`); its value as published; its
 * name in the list of published cases, where it stands there; how far it may be off, if not as far as the case says.
 */
export interface Figure {
  name: string;
  value: number;
  key?: string;
  within?: number;
}

/** A published rule with figures: the form that says it, what it is given, what must come out. */
export interface FormCase {
  /** Id in the list of published cases; ours carry a word behind it. */
  id: string;
  form: string;
  /** Publisher, title, example or clause; how far the figures are the publisher's. */
  source: string;
  period: BillingPeriod;
  /** Quantities as a bill prints them; left out where a load is given. */
  quantities?: Record<string, number>;
  load?: LoadSeries;
  options?: Omit<PriceOptions, 'periods'>;
  figures: Figure[];
  /** Half a unit of the printed figures' last digit. */
  within: number;
  /** Figures of the list that stand inside the arithmetic, and why no line or quantity shows them. */
  inside?: Record<string, { values: number[]; why: string }>;
}

/** A figure. */
export function figure(name: string, value: number, key?: string, within?: number): Figure {
  return { name, value, key, within };
}

/** The period of cases that name none. */
export const january = { from: '2026-01-01', to: '2026-02-01' };
/** Words on a case whose figures are not the publisher's. */
export const ownInputs =
  'Rule and rates as published; the inputs are our own and the result is recomputed by hand from the steps.';
