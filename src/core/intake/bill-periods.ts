import { bareMonth, billCellKind, monthDay, spanParts } from './bill-months';
import { findPeriodOrder, type OrderInput } from './bill-order';
import { profileColumns, shareOf, type ColumnProfile } from './cells';
import { guess, type RoleFinding, type Test } from './evidence';
import { CellGrid, type Grid } from './grid';
import { orderInWords } from './stamp-order';
import type { ColumnMap, DateOrder } from './column-map';
import type { Guess } from './types';
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

const spaced = (name: string): string => name.replaceAll('_', ' ');
const otherDates =
  /\b(due|paid|payment|pay by|issued?|printed|invoice|bill|statement|posted|created|entered|uploaded)\b/i;
const monthOfAccount = /\b(revenue|fiscal|accounting|account|booking|finance|ledger|gl|posting|statement)\b/i;

/** Columns of the period: both days, in two cells or one; a month; or the day of reading with the days before it. */
export function findPeriods(input: PeriodInput): Guess & { order: DateOrder } {
  const { grid, profiles, rows, findings } = input;
  const put = (profile: ColumnProfile, role: RoleFinding['role'], why: string, isSure = true): void =>
    void findings.set(profile.index, { role, tests: [[isSure, why]] });
  const spans = profiles.filter((profile) => isSpans(grid, profile, rows));
  const months = profiles.filter((profile) => !spans.includes(profile) && isMonths(grid, profile, rows, profiles));
  const dates = profiles.filter(
    (profile) =>
      !months.includes(profile) &&
      !spans.includes(profile) &&
      (shareOf(profile, 'date', 'stamp') > 0.6 || isSerials(grid, profile, rows)),
  );
  const bounds = boundsOf(dates);
  const days = profiles.find(
    (profile) =>
      /\b(days|tage|giorni|jours|dias|días|dagen)\b/i.test(spaced(profile.name)) && shareOf(profile, 'number') > 0.8,
  );
  if (days) put(days, 'days', 'Named as days');
  if (bounds.from && bounds.to) {
    put(bounds.from, 'period-from', 'The earlier date of the row', bounds.isSure);
    put(bounds.to, 'period-to', 'The later date of the row', bounds.isSure);
  } else if (spans[0]) put(spans[0], 'period', 'Each cell holds two dates');
  else if (months[0] && !(bounds.only && monthOfAccount.test(months[0].name))) {
    const isAccount = monthOfAccount.test(months[0].name);
    put(
      months[0],
      'month',
      isAccount ? 'A month of account need not be the month of use' : 'Each cell names a month',
      !isAccount,
    );
    findYear(input, months[0], put);
  } else if (bounds.only) putOnly(bounds.only, put);
  for (const profile of [...dates, ...months, ...spans])
    if (!findings.has(profile.index))
      put(
        profile,
        'ignore',
        dates.includes(profile) ? 'A date that bounds no period' : 'The period stands in other columns',
      );
  return orderOf(input, days);
}

type Put = (profile: ColumnProfile, role: RoleFinding['role'], why: string, isSure?: boolean) => void;

function putOnly(only: ColumnProfile, put: Put): void {
  if (mentions(only.name, 'begin'))
    put(only, 'period-from', 'The only date of the row: each period runs to the next', false);
  else put(only, 'period-to', 'The only date of the row: each period begins where the one before ends', false);
}

interface Bounds {
  from: ColumnProfile | undefined;
  to: ColumnProfile | undefined;
  only: ColumnProfile | undefined;
  isSure: boolean;
}

const isEnd = (name: string): boolean =>
  mentions(name, 'end') || /\b(through|thru|(current|present|this) (read|meter)|read date)\b/i.test(spaced(name));
const isBegin = (name: string): boolean =>
  mentions(name, 'begin') || /\b(previous|prior|last) (read|meter)/i.test(spaced(name));

/** First and last day among the columns of dates; dates of the paper itself (due, issued, paid) bound no period. */
function boundsOf(dates: readonly ColumnProfile[]): Bounds {
  const relevant = dates.filter(
    (profile) => !otherDates.test(spaced(profile.name)) || isBegin(profile.name) || isEnd(profile.name),
  );
  const namedFrom = relevant.find((profile) => isBegin(profile.name));
  const namedTo = relevant.find((profile) => profile !== namedFrom && isEnd(profile.name));
  const from = namedFrom ?? (relevant.length > 1 ? relevant.find((profile) => profile !== namedTo) : undefined);
  const to = namedTo ?? relevant.find((profile) => profile !== from && from !== undefined);
  const isSure = relevant.length === 2 || (namedFrom !== undefined && namedTo !== undefined);
  return { from, to, only: relevant[0] ?? dates[0], isSure };
}

/** A column of years beside months that name none. */
function findYear({ grid, profiles, rows }: PeriodInput, month: ColumnProfile, put: Put): void {
  if (rows.some((row) => !Number.isNaN(monthDay(grid.text(row, month.index))))) return;
  const year = profiles.find((profile) => isYears(profile));
  if (year) put(year, 'year', `The year of “${month.name}”`);
}

const isYears = (profile: ColumnProfile): boolean =>
  /\b(year|jahr|anno|ann[ée]e|año|ano|jaar)\b/i.test(spaced(profile.name)) &&
  profile.distinct.size > 0 &&
  [...profile.distinct.keys()].every((text) => /^(19|20|21)\d\d$/.test(text));

/** Order of the dates; the two dates of one cell are looked at as two columns. */
function orderOf(input: PeriodInput, days: ColumnProfile | undefined): Guess & { order: DateOrder } {
  const { grid, profiles, rows, map, findings } = input;
  const roleOf = (role: string): ColumnProfile | undefined =>
    profiles.find((profile) => findings.get(profile.index)?.role === role);
  const span = roleOf('period');
  const search: OrderInput = span
    ? spanColumns(grid, span, rows, input.timeZone)
    : { grid, rows, timeZone: input.timeZone, from: roleOf('period-from'), to: roleOf('period-to'), days };
  const found = findPeriodOrder(search);
  const given = map.stamp?.order;
  const order = given ?? found.order;
  const tests: Test[] = given && given !== found.order ? [[true, 'Given by the column map']] : found.tests;
  return { ...guess('date-order', orderInWords(order), tests), order };
}

function spanColumns(grid: Grid, span: ColumnProfile, rows: readonly number[], timeZone: string): OrderInput {
  const cells = rows.map((row) => spanParts(grid.text(row, span.index))).filter((parts) => parts !== null);
  const split = new CellGrid(cells);
  const own = cells.map((_, at) => at);
  const [from, to] = profileColumns(split, ['from', 'to'], own, billCellKind);
  return { grid: split, rows: own, timeZone, from, to, days: undefined };
}

const namesMonth = (name: string): boolean => /\b(month|monat|mese|mois|mes|mês|maand)\b/i.test(spaced(name));

/** Cells that are months, or dates in a column named so; bare figures such as 202501 only where the name says month. */
function isMonths(
  grid: Grid,
  profile: ColumnProfile,
  rows: readonly number[],
  profiles: readonly ColumnProfile[],
): boolean {
  const filled = profile.sampled - profile.kinds.blank;
  if (filled === 0) return false;
  const share = (isSo: (text: string) => boolean): number =>
    rows.filter((row) => isSo(grid.text(row, profile.index))).length / filled;
  if (share((text) => bareMonth(text) > 0) >= 0.8) return true;
  if (namesMonth(profile.name) && profiles.some(isYears) && share((text) => /^(0?[1-9]|1[0-2])$/.test(text)) >= 0.99)
    return true;
  if (shareOf(profile, 'number') > 0.8 && !namesMonth(profile.name)) return false;
  return (
    share((text) => !Number.isNaN(monthDay(text))) >= 0.8 ||
    (namesMonth(profile.name) && shareOf(profile, 'date', 'stamp') > 0.8)
  );
}

function isSpans(grid: Grid, profile: ColumnProfile, rows: readonly number[]): boolean {
  const filled = profile.sampled - profile.kinds.blank;
  return filled > 0 && rows.filter((row) => spanParts(grid.text(row, profile.index))).length >= filled * 0.8;
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
