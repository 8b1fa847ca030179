import { isTimeZone, isoDate } from '../load';
import type { BillingPeriod } from '../load';
import { MINUTES_PER_DAY, compileDayRule, dayOf, holdsAt, localMiddles } from './local-days';
import type { CompiledDayRule, DayKind, Grid } from './local-days';
import type { Spans } from './types';

/** A stretch of the year with settings of its own: a season, a shift, or a shift within a season. What is absent does not narrow it. */
export interface SpanRule {
  name: string;
  /** Calendar months, January is 1. */
  months?: number[];
  /** Local dates, [from, to). */
  dates?: BillingPeriod;
  days?: DayKind[];
  /** Local clock times HH:MM, both or neither; `to` may be 24:00. An end that is not after its beginning lies in the next day. */
  from?: string;
  to?: string;
}

/** Most spans of a plan: an operator keeps no more settings apart. */
export const MOST_SPANS = 12;

/**
 * Which span each interval lies in, by the local time of its middle.
 *
 * The first span covers what no other does, whatever its own rule says; of the others a later one wins over an earlier one. A span
 * over midnight belongs to the day, month and date it begins in.
 *
 * @param rules  Spans in order, 1 to 12.
 * @param grid  The intervals.
 * @param timeZone  IANA zone of the plant.
 * @param holidays  Local dates that count as holidays: neither weekday nor Saturday nor Sunday.
 * @returns index[interval] of the rule, uint8[grid.count]; count of the rules
 * @throws {RangeError} naming the rule and what is wrong with it
 */
export function spanSeries(rules: SpanRule[], grid: Grid, timeZone: string, holidays: string[] = []): Spans {
  if (!(rules.length >= 1 && rules.length <= MOST_SPANS))
    throw new RangeError(`rules must be 1 to ${MOST_SPANS} spans, got ${rules.length}`);
  if (!isTimeZone(timeZone)) throw new RangeError(`timeZone must be an IANA zone, got ${timeZone}`);
  const compiled = rules.map((rule, i) => compileSpan(rule, `rules[${i}]`));
  const offDays = new Set(holidays.map((date, i) => dayOf(date, `holidays[${i}]`)));
  const index = new Uint8Array(grid.count);
  localMiddles(grid, timeZone).forEach((localMs, i) => {
    const minute = Math.floor(localMs / 60_000);
    const day = Math.floor(minute / MINUTES_PER_DAY);
    index[i] = spanAt(compiled, offDays, day, minute - day * MINUTES_PER_DAY);
  });
  return { index, count: rules.length };
}

interface CompiledSpan extends CompiledDayRule {
  months: Set<number> | null;
}

function compileSpan(rule: SpanRule, name: string): CompiledSpan {
  if ((rule.from === undefined) !== (rule.to === undefined))
    throw new RangeError(`${name} must have both from and to, or neither, got one`);
  const wrong = rule.months?.find((month) => !(Number.isInteger(month) && month >= 1 && month <= 12));
  if (wrong !== undefined) throw new RangeError(`${name}.months must be months from 1 to 12, got ${wrong}`);
  const { days = ['every' as const], dates, from = '00:00', to = '24:00' } = rule;
  return { ...compileDayRule({ days, dates, from, to }, name), months: rule.months ? new Set(rule.months) : null };
}

function spanAt(spans: CompiledSpan[], holidays: Set<number>, day: number, minute: number): number {
  for (let k = spans.length - 1; k >= 1; k--) {
    const begins = holdsAt(spans[k]!, holidays, day, minute);
    if (begins === null) continue;
    const { months } = spans[k]!;
    if (!months || months.has(Number(isoDate(begins).slice(5, 7)))) return k;
  }
  return 0;
}
