import { z } from 'zod';
import type { DayKind } from '../core/plan';

const spanName = z.string().trim().min(1, 'Name this part of the year.').max(40, 'At most 40 characters.');
const clock = z
  .string()
  .regex(/^([01]\d|2[0-3]):[0-5]\d$|^24:00$/, 'Write a clock time as 06:00; midnight at the end is 24:00.');

/** Kinds of day a shift may name. */
export const shiftDays = [
  'every',
  'weekday',
  'weekend',
  'mon',
  'tue',
  'wed',
  'thu',
  'fri',
  'sat',
  'sun',
] as const satisfies readonly DayKind[];

function everyMonthOnce(spans: { months: number[] }[], context: z.RefinementCtx): void {
  const seen = new Set<number>();
  const fault = (path: (string | number)[], message: string) => context.addIssue({ code: 'custom', path, message });
  spans.forEach(({ months }, index) => {
    if (months.some((month) => seen.has(month)))
      fault(['spans', index, 'months'], 'A month stands in two seasons. Keep it in one.');
    months.forEach((month) => seen.add(month));
  });
  if (seen.size < 12) fault(['spans'], 'Some months are in no season. Put every month into one.');
}

/** How a year is parted into stretches that may have settings of their own, as a person says it. */
export const spanSetInput = z.discriminatedUnion('by', [
  z.object({ by: z.literal('year') }),
  z
    .object({
      by: z.literal('months'),
      spans: z
        .array(
          z.object({ name: spanName, months: z.array(z.number().int().min(1).max(12)).min(1, 'Choose its months.') }),
        )
        .min(2, 'Two seasons at least.')
        .max(6, 'At most six seasons.'),
    })
    .superRefine(({ spans }, context) => everyMonthOnce(spans, context)),
  /** The schedule's own seasons, in its order. */
  z.object({
    by: z.literal('schedule'),
    spans: z
      .array(z.object({ name: spanName }))
      .min(2)
      .max(8),
  }),
  /** Hours of the local clock; a later shift wins over an earlier one, all other time is the last span, `rest`. */
  z.object({
    by: z.literal('clock'),
    spans: z
      .array(
        z
          .object({
            name: spanName,
            days: z.array(z.enum(shiftDays)).min(1, 'Choose its days.'),
            from: clock,
            to: clock,
          })
          .refine(({ from, to }) => from !== to, { path: ['to'], message: 'The shift ends where it begins.' }),
      )
      .min(1, 'Name one shift at least.')
      .max(5, 'At most five shifts.'),
    rest: spanName,
  }),
]);
export type SpanSet = z.output<typeof spanSetInput>;

export const wholeYear: SpanSet = { by: 'year' };

/** Names of the spans in their order; one, empty, where the year is whole. */
export function spanNames(set: SpanSet): string[] {
  if (set.by === 'year') return [''];
  const names = set.spans.map(({ name }) => name);
  return set.by === 'clock' ? [...names, set.rest] : names;
}
