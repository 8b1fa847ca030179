import { z } from 'zod';

/** What a plan's money is worth, on the assumptions of its own form. */
export interface AppraisalView {
  simplePaybackYears: number | null;
  discountedPaybackYears: number | null;
  npv: number;
  irr: number | null;
  notes: string[];
}

export interface PlanEconomics {
  discountPercent: number;
  escalationPercent: number;
  horizonYears: number;
}

/** One month of the cumulative cash flow; `low` and `high` hold eight of ten samples. Major units. */
export interface CashFlowMonth {
  month: number;
  cumulative: number;
  low?: number;
  high?: number;
}

/** Money assumptions of a plan as its form sends them. */
export const economicsInput = z.object({
  discountPercent: z
    .number({ error: 'Write the discount rate in per cent.' })
    .min(0, 'The discount rate lies between 0 and 40 %.')
    .max(40, 'The discount rate lies between 0 and 40 %.'),
  escalationPercent: z
    .number({ error: 'Write the yearly rise of prices in per cent.' })
    .min(-20, 'The yearly rise lies between −20 and 30 %.')
    .max(30, 'The yearly rise lies between −20 and 30 %.'),
  horizonYears: z
    .number({ error: 'Write the horizon in years.' })
    .int('Write whole years.')
    .min(1, 'The horizon lies between 1 and 30 years.')
    .max(30, 'The horizon lies between 1 and 30 years.'),
});

export const planDefaults = { discountPercent: 8, escalationPercent: 0, horizonYears: 10 } as const;

/** How far the figures of a plan are taken to scatter when its cash flow is sampled: one standard deviation. */
export const cashFlowSpread = { savingPercent: 10, costPercent: 15, escalationPercentPoints: 1 } as const;
