import { printFormula } from '../formula/print';
import type { QuantityEntry, Schedule, ScheduleText, WindowEntry } from '../model';
import { neededQuantities, textsWithin } from './needs';
import { isSameOverAnyCell, wholeFamilies } from './whole-families';

/** What another schedule can be priced with for one bill. */
export interface CarriedQuantities {
  /** By the other schedule's names. */
  quantities: Record<string, number>;
  /** Needed by the other schedule's lines and known from nothing. */
  missing: QuantityEntry[];
}

/**
 * Carries a bill's quantities from one schedule to another by what they measure, never by their names alone: the same channel or formula over
 * the same cells, window and condition. What is measured over no window may also be the sum over windows that share out all time.
 *
 * Given quantities are carried where name and unit agree, since the bill says them and no definition can be compared.
 *
 * @param from.values  The bill's quantities by name, as priced on the first schedule
 */
export function carryQuantities(
  from: { schedule: Schedule; values: Record<string, number> },
  to: Schedule,
  period: { from: string; to: string },
): CarriedQuantities {
  const carried: CarriedQuantities = { quantities: {}, missing: [] };
  const sources = textsWithin(from.schedule, period);
  const isSameClock = from.schedule.timeZone === to.timeZone;
  for (const text of textsWithin(to, period)) {
    for (const quantity of neededQuantities(text).measured) {
      const known = sources.map((source) => knownValue(quantity, text, source, from.values, isSameClock));
      const [value] = known;
      const isKnown = value !== undefined && known.every((one) => one === value);
      if (isKnown) carried.quantities[quantity.name] = value;
      else if (!carried.missing.some(({ name }) => name === quantity.name)) carried.missing.push(quantity);
    }
  }
  return carried;
}

function knownValue(
  wanted: QuantityEntry,
  text: ScheduleText,
  source: ScheduleText,
  values: Record<string, number>,
  isSameClock: boolean,
): number | undefined {
  const valueOf = ({ name }: QuantityEntry) => (Object.hasOwn(values, name) ? values[name] : undefined);
  if (wanted.definition.kind === 'given') {
    const same = source.quantities.find(({ name, unit }) => name === wanted.name && unit === wanted.unit);
    return same && valueOf(same);
  }
  const key = meaningOf(wanted, text);
  if (key === undefined || (!isSameClock && key.needsClock)) return undefined;
  for (const quantity of source.quantities) {
    const value = meaningOf(quantity, source)?.words === key.words ? valueOf(quantity) : undefined;
    if (value !== undefined) return value;
  }
  return wholeOf(wanted, source, valueOf);
}

/** Total of a family that measures the same over windows that share out all time. */
function wholeOf(
  { definition }: QuantityEntry,
  source: ScheduleText,
  valueOf: (quantity: QuantityEntry) => number | undefined,
): number | undefined {
  const isPlainSum = definition.kind === 'measure' && isSameOverAnyCell(definition) && !definition.window;
  if (!isPlainSum || definition.channel === undefined) return undefined;
  for (const members of wholeFamilies(source, definition.channel)) {
    const values = members.map(valueOf);
    if (values.every((value) => value !== undefined)) return values.reduce((sum, value) => sum + value!, 0);
  }
  return undefined;
}

/** What a quantity measures, in one line that is equal for equal measures; nothing for what no meter measures. */
function meaningOf(
  { definition }: QuantityEntry,
  text: ScheduleText,
): { words: string; needsClock: boolean } | undefined {
  if (definition.kind !== 'measure') return undefined;
  const { operation, expression, where, each, window, count, isDistinctDays } = definition;
  // A formula with names in it means what those names are worth, which another schedule may set otherwise.
  if (expression.names.length > 0 || (where && where.names.length > 0)) return undefined;
  const cell = each === 'demand window' ? JSON.stringify(text.demandWindow ?? 'interval') : (each ?? 'interval');
  const time = window === undefined ? '' : timeOf(text.windows.get(window), text);
  const words = [
    operation,
    printFormula(expression.formula),
    where ? printFormula(where.formula) : '',
    isSameOverAnyCell(definition) ? '' : cell,
    time,
    count,
    isDistinctDays,
  ].join('|');
  return { words, needsClock: window !== undefined || each === 'day' || isDistinctDays };
}

/** The time a window holds, with the days of its seasons and holidays. */
function timeOf(window: WindowEntry | undefined, text: ScheduleText): string {
  if (!window) return 'unknown';
  if (window.restOf)
    return `rest of ${window.restOf.map((name) => timeOf(text.windows.get(name), text)).join(' and ')}`;
  const seasonDays = (season: number) => String(text.seasons?.ofDay.map((one) => (one === season ? 1 : 0)) ?? '');
  const rules = window.rules.map(({ seasons, days, spans }) => JSON.stringify([seasons.map(seasonDays), days, spans]));
  return `${rules.sort().join(' or ')} ${JSON.stringify(text.holidays)}`;
}
