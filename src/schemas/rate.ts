import { z } from 'zod';
import { dayInput } from './hour';

/** A billing rate as it is typed, in major units an hour. */
export const rateInput = z.object({
  userId: z.number().int().positive(),
  /** Null: for all engagements that have no rate of their own. */
  engagementId: z.number().int().positive().nullable(),
  perHour: z
    .number({ error: 'Write the rate as a number, such as 145 or 145.50.' })
    .min(0, 'A rate is not negative.')
    .max(100_000, 'This rate is above 100,000 an hour. Check it.'),
  from: dayInput,
});
export type RateInput = z.output<typeof rateInput>;

export const rateChangeInput = rateInput
  .pick({ perHour: true, from: true })
  .extend({ version: z.number().int().min(0) });
export type RateChangeInput = z.output<typeof rateChangeInput>;

/** A billing rate as the screen shows it; `until` is its last day, null where it runs on. */
export interface RateView {
  id: number;
  userId: number;
  engagementId: number | null;
  /** Code of the engagement, or null for all. */
  code: string | null;
  perHourMinor: number;
  currency: string;
  from: string;
  until: string | null;
  version: number;
}
