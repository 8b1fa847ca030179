import { z } from 'zod';
import { isCalendarDate } from '../core/load';
import type { ChargeGroup } from '../core/tariff';
import type { ContractField } from './tariff';
import type { WhyStepView } from './tariff-why';

const date = z.string({ error: 'Choose a day.' }).refine(isCalendarDate, { error: 'Choose a day of the calendar.' });
const amount = z
  .number({ error: 'Write a number, such as 1,200.5.' })
  .min(0, 'Write a number from nought on.')
  .max(1e12, 'This is more than any bill holds.');
const values = z.record(z.string(), z.number({ error: 'Write a number, such as 1,200.5.' }));

/** Lowest power factor that may be told or aimed at. */
export const leastPowerFactor = 0.1;
const powerFactor = z
  .number({ error: 'Write a power factor such as 0.86.' })
  .min(leastPowerFactor, 'A power factor lies between 0.1 and 1.')
  .max(1, 'A power factor lies between 0.1 and 1.');

/** A month told in short, to be priced on a schedule: keys are those of the form and of the page's address. */
export const tryInput = z.object({
  /** First day, and the day behind the last. */
  from: date,
  to: date,
  kwh: amount.optional(),
  kw: amount.optional(),
  kvarh: amount.optional(),
  pf: powerFactor.optional(),
  /** Power factor the field is raised to. */
  target: powerFactor,
  /** Told by name: quantities, contract inputs, what ratchets look back at. */
  q: values,
  c: values,
  p: values,
});
export type TryInput = z.infer<typeof tryInput>;

/** Power factor the second column begins with. */
export const usualTarget = 0.95;

/** A quantity or look back the form asks, with what is taken for it. `key` is its place in the form and the address. */
export interface TryField {
  key: string;
  label: string;
  unit: string;
  value: number | null;
  /** `fixed`: it is one of the figures typed above. */
  state: 'typed' | 'assumed' | 'missing' | 'fixed';
  /** How the value came about, or what to type. */
  words: string;
}

/** Plain JSON behind an amount: what the why panel shows. */
export interface TryWhy {
  title: string;
  steps: WhyStepView[];
}

/** A line of the bill, in minor units; the second column is null where there is none. */
export interface TryLine {
  id: string;
  label: string;
  group: ChargeGroup;
  quantity: number | null;
  unit: string;
  rate: number | null;
  /** The rate is per cent of other lines. */
  isPercent: boolean;
  amountMinor: number;
  why: TryWhy;
  targetMinor: number | null;
  targetWhy: TryWhy | null;
}

/** The month priced. */
export interface TryBill {
  lines: TryLine[];
  totalMinor: number;
  targetMinor: number | null;
  /** What the month costs more than at unity power factor; null where the power factor is not known. */
  poorFactorMinor: number | null;
  notes: string[];
}

/** A try-out as its page shows it. */
export interface TryView {
  headline: string;
  currency: string;
  days: number;
  measured: TryField[];
  lookBacks: TryField[];
  contract: ContractField[];
  /** What follows from the figures typed: worked out, not asked. */
  whole: { kvarh: number | null; pf: number | null };
  target: number;
  /** Why the second column is empty; null where it is not. */
  noTarget: string | null;
  /** What is still to be typed before there is a bill. */
  waiting: string[];
  /** Messages by key of the form; `form` for what belongs to no field. */
  faults: Record<string, string>;
  bill: TryBill | null;
  /** The result as text to paste into a mail; null without a bill. */
  summary: string | null;
}
