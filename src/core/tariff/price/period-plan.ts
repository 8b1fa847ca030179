import { addDays, dayNumber, isCalendarDate, isoDate, localDateStartMs, type BillingPeriod } from '../../load';
import { PriceError } from '../errors';
import type { Schedule, ScheduleText, SeasonTable } from '../model';
import { planText, type TextPlan } from './text-plan';

/** A part of a period under one text, season and rider month. */
export interface Piece {
  text: TextPlan;
  season: number;
  /** Month whose riders hold, YYYY-MM. */
  month: string;
  from: string;
  to: string;
  days: number;
  /** Share of the period's days. [unitless], (0, 1] */
  share: number;
}

/** A period with its facts and pieces. */
export interface PeriodPlan {
  index: number;
  period: BillingPeriod;
  startMs: number;
  endMs: number;
  days: number;
  hours: number;
  /** Days since 1970-01-01 of its first day. */
  firstDay: number;
  pieces: Piece[];
}

/** Season of a date; 0 where there are none. */
export function seasonOfDate(seasons: SeasonTable | undefined, date: string): number {
  return seasons ? seasons.ofDay[Number(date.slice(5, 7)) * 32 + Number(date.slice(8))]! : 0;
}

/** A period in words: `July 2026` for a whole month, else its first and last day. */
export function wordPeriod({ from, to }: BillingPeriod): string {
  const month = (date: string): string => months[Number(date.slice(5, 7)) - 1] ?? '';
  const isMonth = from.endsWith('-01') && to.endsWith('-01') && from.slice(0, 7) === addDays(to, -1).slice(0, 7);
  if (isMonth) return `${month(from)} ${from.slice(0, 4)}`;
  const last = addDays(to, -1);
  const day = (date: string): string => `${Number(date.slice(8))} ${month(date)} ${date.slice(0, 4)}`;
  return from === last ? day(from) : `${day(from)} to ${day(last)}`;
}

/** Names of the months. */
export const months = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

/**
 * Lays out the periods: checks their order, cuts them into pieces.
 *
 * @throws {PriceError} for a period that is none, overlaps the one before or begins before the schedule is in force
 */
export function planPeriods(schedule: Schedule, periods: readonly BillingPeriod[]): PeriodPlan[] {
  const textPlans = schedule.texts.map((text) => planText(schedule, text));
  return periods.map((period, index) => {
    checkPeriod(schedule, period, periods[index - 1]);
    const firstDay = dayNumber(period.from);
    const days = dayNumber(period.to) - firstDay;
    const startMs = localDateStartMs(period.from, schedule.timeZone);
    const endMs = localDateStartMs(period.to, schedule.timeZone);
    const pieces = cutPieces(schedule, textPlans, period, days);
    const { from, to } = period;
    return {
      index,
      period: { from, to },
      startMs,
      endMs,
      days,
      hours: (endMs - startMs) / 3_600_000,
      firstDay,
      pieces,
    };
  });
}

function checkPeriod({ inForce }: Schedule, period: BillingPeriod, before: BillingPeriod | undefined): void {
  const { from, to } = period;
  if (!isCalendarDate(from) || !isCalendarDate(to) || from >= to) {
    throw new PriceError(
      `${from} to ${to} is no billing period. Give two dates YYYY-MM-DD, the second after the first.`,
      { period },
    );
  }
  if (dayNumber(to) - dayNumber(from) > 1100)
    throw new PriceError(`${wordPeriod(period)} is longer than three years. Check its dates.`, { period });
  if (before && from < before.to) {
    throw new PriceError(
      `${wordPeriod(period)} begins before the period above it ends, ${before.to}. Give the periods in order.`,
      { period },
    );
  }
  if (inForce !== null && from < inForce) {
    throw new PriceError(
      `${wordPeriod(period)} begins on ${from}, but the schedule is in force from ${inForce} on. Choose the schedule of that time.`,
      { period },
    );
  }
}

function textAt(plans: TextPlan[], date: string): TextPlan {
  let found = plans[0]!;
  for (const plan of plans) if (plan.text.from <= date) found = plan;
  return found;
}

function cutPieces({ ruledBy }: Schedule, plans: TextPlan[], period: BillingPeriod, days: number): Piece[] {
  const first = dayNumber(period.from);
  const dateFor = (what: keyof Schedule['ruledBy'], date: string): string =>
    ruledBy[what] === 'start' ? period.from : ruledBy[what] === 'end' ? addDays(period.to, -1) : date;
  const pieces: Piece[] = [];
  for (let day = 0; day < days; day++) {
    const date = isoDate(first + day);
    const plan = textAt(plans, dateFor('text', date));
    const season = seasonOfDate(plan.text.seasons, dateFor('season', date));
    const month = dateFor('month', date).slice(0, 7);
    const last = pieces[pieces.length - 1];
    if (last && last.text === plan && !isCut(plan.text, last, season, month)) {
      last.days++;
      last.to = isoDate(first + day + 1);
    } else pieces.push({ text: plan, season, month, from: date, to: isoDate(first + day + 1), days: 1, share: 0 });
  }
  for (const piece of pieces) piece.share = piece.days / days;
  return pieces;
}

function isCut(text: ScheduleText, piece: Piece, season: number, month: string): boolean {
  return (text.dependsOnSeason && piece.season !== season) || (text.dependsOnMonth && piece.month !== month);
}
