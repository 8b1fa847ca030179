import { addDays } from '../../core/load';
import { MOST_SPANS, type SpanRule } from '../../core/plan';
import type { SeasonTable } from '../../core/tariff';
import type { SpanSet } from '../../schemas/plan-spans';
import { conflict } from '../errors';

/** The spans of a plan as the calculations take them; `of[k]` is the span, in the plan's order, that rule k belongs to. */
export interface SpanRules {
  rules: SpanRule[];
  of: number[];
}

/** What the seasons of a schedule are laid over. */
export interface SpanYear {
  seasons: SeasonTable | undefined;
  /** Local dates the readings cover, [from, to). */
  from: string;
  to: string;
}

/**
 * The rules of a plan's spans; null where the year is whole.
 *
 * @throws {ServiceError} 409 where the schedule has other seasons than the plan was made for
 */
export function spanRules(set: SpanSet, year: SpanYear): SpanRules | null {
  switch (set.by) {
    case 'year':
      return null;
    case 'months':
      return { rules: set.spans.map(({ name, months }) => ({ name, months })), of: set.spans.map((_, k) => k) };
    case 'clock':
      // The first rule covers what no other does: the rest of the time leads there and ends the plan's own order.
      return { rules: [{ name: set.rest }, ...set.spans], of: [set.spans.length, ...set.spans.map((_, k) => k)] };
    case 'schedule':
      return seasonRules(set.spans, year);
  }
}

function seasonRules(spans: { name: string }[], { seasons, from, to }: SpanYear): SpanRules {
  const names = seasons?.names ?? [];
  if (!seasons || names.length !== spans.length || names.some((name, k) => name !== spans[k]?.name)) {
    throw conflict(
      `The plan has settings by the seasons ${spans.map(({ name }) => name).join(', ')}; the schedule on file has ${names.length > 0 ? names.join(', ') : 'none'}. Open the plan and set it anew.`,
    );
  }
  const stretches = stretchesOf(seasons, from, to);
  // A season that comes twice in the year is two rules; the first, which covers the rest, needs one only.
  const [first] = stretches;
  const others = stretches.filter(({ season }) => season !== first?.season);
  if (others.length + 1 > MOST_SPANS) {
    throw conflict('The seasons of the schedule change too often to be set by hand. Part the year by months instead.');
  }
  const opening = first?.season ?? 0;
  return {
    rules: [
      { name: names[opening]! },
      ...others.map((one) => ({ name: names[one.season]!, dates: { from: one.from, to: one.to } })),
    ],
    of: [opening, ...others.map(({ season }) => season)],
  };
}

/** Runs of days of one season. */
function stretchesOf({ ofDay }: SeasonTable, from: string, to: string) {
  const stretches: { season: number; from: string; to: string }[] = [];
  for (let date = from; date < to; date = addDays(date, 1)) {
    const season = ofDay[Number(date.slice(5, 7)) * 32 + Number(date.slice(8))]!;
    const last = stretches.at(-1);
    if (last?.season === season) last.to = addDays(date, 1);
    else stretches.push({ season, from: date, to: addDays(date, 1) });
  }
  return stretches;
}
