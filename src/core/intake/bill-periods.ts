import { monthDay } from './bill-months';
import { findPeriodOrder } from './bill-order';
import { shareOf, type ColumnProfile } from './cells';
import { guess, type RoleFinding } from './evidence';
import type { Grid } from './grid';
import { orderInWords } from './stamp-order';
import type { ColumnMap, DateOrder, Guess } from './types';
import { mentions } from './words';

/** What is known of the table when its periods are looked for. */
interface PeriodInput {
  grid: Grid;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  map: Partial<ColumnMap>;
  timeZone: string;
  findings: Map<number, RoleFinding>;
}

/** Columns of the period: from and to, a month, or the day of reading with the days before it. */
export function findPeriods(input: PeriodInput): Guess & { order: DateOrder } {
  const { grid, profiles, rows, map, findings } = input;
  const months = profiles.filter((profile) => isMonths(grid, profile, rows));
  const dates = profiles.filter(
    (profile) =>
      !months.includes(profile) && (shareOf(profile, 'date', 'stamp') > 0.6 || isSerials(grid, profile, rows)),
  );
  const relevant = dates.filter(
    (profile) =>
      !/\b(due|paid|payment|issued?|printed|invoice|bill) ?(date)?\b/i.test(profile.name.replaceAll('_', ' ')) ||
      mentions(profile.name, 'begin') ||
      mentions(profile.name, 'end'),
  );
  const [only = dates[0]] = relevant;
  const from =
    relevant.find((profile) => mentions(profile.name, 'begin')) ?? (relevant.length > 1 ? relevant[0] : undefined);
  const to =
    relevant.find(
      (profile) => profile !== from && (mentions(profile.name, 'end') || /\b(through|thru|read)\b/i.test(profile.name)),
    ) ?? relevant.find((profile) => profile !== from && from !== undefined);
  const put = (profile: ColumnProfile, role: RoleFinding['role'], why: string, isSure: boolean): void =>
    void findings.set(profile.index, { role, tests: [[isSure, why]] });
  if (from && to) {
    put(from, 'period-from', 'The earlier date of the row', mentions(from.name, 'begin') || relevant.length === 2);
    put(to, 'period-to', 'The later date of the row', mentions(to.name, 'end') || relevant.length === 2);
  } else if (months[0]) put(months[0], 'month', 'Each cell names a month', true);
  else if (only) {
    if (mentions(only.name, 'begin'))
      put(only, 'period-from', 'The only date of the row: each period runs to the next', false);
    else put(only, 'period-to', 'The only date of the row: each period begins where the one before ends', false);
  }
  const days = profiles.find(
    (profile) =>
      /\b(days|tage|giorni|jours|dias|días)\b/i.test(profile.name.replaceAll('_', ' ')) &&
      shareOf(profile, 'number') > 0.8,
  );
  if (days) put(days, 'days', 'Named as days', true);
  for (const profile of dates)
    if (!findings.has(profile.index)) put(profile, 'ignore', 'A date that bounds no period', true);
  const roleOf = (role: string): ColumnProfile | undefined =>
    profiles.find((profile) => findings.get(profile.index)?.role === role);
  const found = findPeriodOrder({
    grid,
    rows,
    timeZone: input.timeZone,
    from: roleOf('period-from'),
    to: roleOf('period-to'),
    days,
  });
  const given = map.stamp?.order;
  const order = given ?? found.order;
  const tests: [boolean, string][] = given && given !== found.order ? [[true, 'Given by the column map']] : found.tests;
  return { ...guess('date-order', orderInWords(order), tests), order };
}

const namesMonth = (name: string): boolean => /\b(month|monat|mese|mois|mes|maand)\b/i.test(name.replaceAll('_', ' '));

/** Cells that are months, or dates in a column named so; bare figures such as 202501 only where the name says month. */
function isMonths(grid: Grid, profile: ColumnProfile, rows: readonly number[]): boolean {
  const filled = profile.sampled - profile.kinds.blank;
  if (filled === 0 || (shareOf(profile, 'number') > 0.8 && !namesMonth(profile.name))) return false;
  const named = rows.filter((row) => !Number.isNaN(monthDay(grid.text(row, profile.index)))).length;
  return named >= filled * 0.8 || (namesMonth(profile.name) && shareOf(profile, 'date', 'stamp') > 0.8);
}

/** Spreadsheet dates without a date format: whole figures of their size under a name of a date. */
function isSerials(grid: Grid, profile: ColumnProfile, rows: readonly number[]): boolean {
  const isNamed = mentions(profile.name, 'date') || mentions(profile.name, 'begin') || mentions(profile.name, 'end');
  if (!isNamed || shareOf(profile, 'number') < 0.9) return false;
  return rows.every((row) => {
    const figure = grid.number(row, profile.index, '.');
    return Number.isNaN(figure) || (figure >= 25_569 && figure <= 80_000);
  });
}
