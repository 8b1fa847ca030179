import { addMonths, dayNumber, isoDate, type BillingPeriod } from '../../load';
import { place, unlessFault } from '../formula/compile';
import type { PastDefinition, Schedule, ScheduleText, SeasonTable } from '../model';
import { roundToStep } from '../../units';
import { isSame } from '../formula/functions';
import { sizeOf, type BillState, type PieceState } from './bill-state';
import { seasonOfDate } from './period-plan';
import { expressionsOfQuantity } from './text-plan';

/** Values of an earlier period as they were then. */
export interface HistoryRecord {
  period: BillingPeriod;
  values: Float64Array;
  known: Uint8Array;
  /** Told by the caller, not priced here: rates and contract inputs are the present ones. */
  isTold: boolean;
}

/** Records of months told by the caller, oldest first. */
export function tellHistory(
  schedule: Schedule,
  from: string,
  history: Record<string, number[]> | undefined,
): HistoryRecord[] {
  const names = Object.entries(history ?? {}).filter(([name]) => schedule.slots.has(name));
  const length = Math.max(0, ...names.map(([, values]) => values.length));
  const records: HistoryRecord[] = [];
  for (let back = length; back >= 1; back--) {
    const period = { from: addMonths(from, -back), to: addMonths(from, -back + 1) };
    const record = {
      period,
      values: new Float64Array(sizeOf(schedule)),
      known: new Uint8Array(sizeOf(schedule)),
      isTold: true,
    };
    for (const [name, values] of names) {
      const value = values[values.length - back];
      if (value === undefined || !Number.isFinite(value)) continue;
      record.values[schedule.slots.get(name)!] = value;
      record.known[schedule.slots.get(name)!] = 1;
    }
    records.push(record);
  }
  return records;
}

/** The record a priced bill leaves: its values under the last text. */
export function recordOf(bill: BillState): HistoryRecord {
  const last = bill.pieces[bill.pieces.length - 1]!;
  return { period: bill.plan.period, values: last.values, known: last.known, isTold: false };
}

/**
 * Completes a told month: rates and contract inputs of the present, then every formula and step whose parts are known.
 */
export function completeTold(record: HistoryRecord, text: ScheduleText, present: PieceState): HistoryRecord {
  const values = record.values.slice();
  const known = record.known.slice();
  const days = dayNumber(record.period.to) - dayNumber(record.period.from);
  values.set([days, days * 24], place.days);
  values.set(present.values.subarray(place.zeroPf, place.firstDay), place.zeroPf);
  values[place.firstDay] = dayNumber(record.period.from);
  for (const { slot } of [...text.contract, ...text.rates]) {
    if (known[slot] === 1) continue;
    values[slot] = present.values[slot]!;
    known[slot] = present.known[slot]!;
  }
  for (const quantity of text.quantities) {
    const { definition, slot, rounding } = quantity;
    if (known[slot] === 1 || (definition.kind !== 'formula' && definition.kind !== 'pick')) continue;
    if (!expressionsOfQuantity(quantity).every(({ slots }) => slots.every((part) => known[part] === 1))) continue;
    const value = unlessFault(() =>
      definition.kind === 'formula' ? definition.expression.evaluate(values) : pickValue(definition, values),
    );
    if (value === undefined || !Number.isFinite(value)) continue;
    values[slot] = rounding ? roundToStep(value, rounding) : value;
    known[slot] = 1;
  }
  return { ...record, values, known };
}

/** Value of a pick: the step with the greatest beginning that is reached (to 1e-12). */
export function pickValue(
  definition: {
    of: { evaluate(v: Float64Array): number };
    steps: { from: number; value: { evaluate(v: Float64Array): number } }[];
    otherwise: { evaluate(v: Float64Array): number };
  },
  values: Float64Array,
): number {
  const at = definition.of.evaluate(values);
  for (const step of definition.steps) if (at >= step.from || isSame(at, step.from)) return step.value.evaluate(values);
  return definition.otherwise.evaluate(values);
}

/** What a look back found. */
export interface PastResult {
  value: number;
  /** Periods asked for and known; the one that set a highest or lowest. */
  asked: number;
  known: number;
  setBy?: BillingPeriod;
}

/**
 * Evaluates a look back.
 *
 * @param records  Earlier periods, oldest first, then the present one if the span includes it
 */
export function evaluatePast(
  definition: PastDefinition,
  records: HistoryRecord[],
  present: BillingPeriod,
  seasons: SeasonTable | undefined,
): PastResult {
  const { expression, take, over } = definition;
  if (take.kind === 'streak') return streak(definition, records);
  const { known, kept } = recordsAsked(definition, records, present, seasons);
  const values = kept.map((record) => expression.evaluate(record.values));
  const askedCount = over.kind === 'last' ? over.count : monthsOfYearBefore(present.from);
  const knownEarlier = over.includesThis ? Math.max(0, known.length - 1) : known.length;
  const { value, index } = takeOf(take, values);
  return {
    value,
    asked: askedCount,
    known: Math.min(askedCount, knownEarlier),
    setBy: index === undefined ? undefined : kept[index]!.period,
  };
}

/** Records that a look back asks for and that are known; of these, those its season keeps. */
export function recordsAsked<R extends Pick<HistoryRecord, 'period' | 'known'>>(
  { expression, over, season }: PastDefinition,
  records: R[],
  present: BillingPeriod,
  seasons: SeasonTable | undefined,
): { known: R[]; kept: R[] } {
  const asked =
    over.kind === 'year'
      ? records.filter(({ period }) => period.from.slice(0, 4) === present.from.slice(0, 4))
      : records.slice(-(over.count + (over.includesThis ? 1 : 0)));
  const known = asked.filter((record) => expression.slots.every((slot) => record.known[slot] === 1));
  return { known, kept: season ? known.filter(({ period }) => isInSeason(period, season, seasons)) : known };
}

function monthsOfYearBefore(from: string): number {
  return Number(from.slice(5, 7)) - 1;
}

function isInSeason(
  period: BillingPeriod,
  season: NonNullable<PastDefinition['season']>,
  seasons: SeasonTable | undefined,
): boolean {
  if (!seasons) return true;
  const { days, inSeason } = seasonDays(period, seasons);
  const inside = inSeason[season.index]!;
  return season.isWholly ? inside === days : inside > days / 2;
}

const countedDays = new WeakMap<SeasonTable, Map<string, { days: number; inSeason: Uint16Array }>>();

/** Days of a period in each season; counted once. */
function seasonDays({ from, to }: BillingPeriod, seasons: SeasonTable): { days: number; inSeason: Uint16Array } {
  let counted = countedDays.get(seasons);
  if (!counted) countedDays.set(seasons, (counted = new Map()));
  const key = from + to;
  let count = counted.get(key);
  if (!count) {
    const first = dayNumber(from);
    count = { days: dayNumber(to) - first, inSeason: new Uint16Array(seasons.names.length) };
    for (let day = 0; day < count.days; day++) count.inSeason[seasonOfDate(seasons, isoDate(first + day))]!++;
    counted.set(key, count);
  }
  return count;
}

function takeOf(take: PastDefinition['take'], values: number[]): { value: number; index?: number } {
  if (values.length === 0) return { value: 0 };
  switch (take.kind) {
    case 'highest':
    case 'lowest': {
      const value = take.kind === 'highest' ? Math.max(...values) : Math.min(...values);
      return { value, index: values.indexOf(value) };
    }
    case 'mean': {
      const some = take.highest === undefined ? values : [...values].sort((a, b) => b - a).slice(0, take.highest);
      return { value: some.reduce((sum, value) => sum + value, 0) / some.length };
    }
    case 'sum':
      return { value: values.reduce((sum, value) => sum + value, 0) };
    default:
      return { value: values.filter((value) => value !== 0).length };
  }
}

function streak({ expression }: PastDefinition, records: HistoryRecord[]): PastResult {
  let length = 0;
  for (let i = records.length - 1; i >= 0; i--) {
    const record = records[i]!;
    const isKnown = expression.slots.every((slot) => record.known[slot] === 1);
    if (!isKnown) return { value: length, asked: length + 1, known: length };
    if (expression.evaluate(record.values) === 0) return { value: length, asked: 0, known: 0 };
    length++;
  }
  return { value: length, asked: length + 1, known: length };
}
