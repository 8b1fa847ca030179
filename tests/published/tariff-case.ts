import type { PriceOptions, PrintedRow } from '@/core/tariff';

/** A published rule with figures: the schedule that says it, what it is given, what must come out. */
export interface TariffCase {
  id: string;
  /** Publisher, title, example or clause; how far the figures are the publisher's. */
  source: string;
  schedule: string;
  rows: PrintedRow[];
  options?: Omit<PriceOptions, 'periods'>;
  /** By quantity or line; `total` is the bill's. */
  expected: Record<string, number>;
  tolerance: number;
}

/** The period of cases that name none. */
export const january = { from: '2026-01-01', to: '2026-02-01' };
/** Words on a case whose figures are not the publisher's. */
export const ownInputs =
  'Rule and rates as published; the inputs are our own and the result is recomputed by hand from the steps.';

/** A schedule with the usual head. */
export function text(currency: string, timeZone: string, body: string): string {
  return `schedule: published-case\ncurrency: ${currency}\ntimeZone: ${timeZone}\ndemandWindow: 15 min\nzeroKwh: { pf: 1, ratio: 0 }\nrounding: 0.01\n${body}\n`;
}
