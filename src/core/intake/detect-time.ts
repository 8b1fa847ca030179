import { shareOf, type ColumnProfile } from './cells';
import { guess, type RoleFinding, type Test } from './evidence';
import type { Grid } from './grid';
import { findDateOrder, orderInWords } from './stamp-order';
import { StampScanner } from './stamps';
import type { ColumnMap, DateOrder, IntervalRole, StampStyle } from './column-map';
import type { Guess } from './types';
import type { WideColumns } from './wide';
import { mentions, namesTime } from './words';

interface TimeInput {
  grid: Grid;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  timeZone: string;
  map: Partial<ColumnMap>;
  wide: WideColumns | null;
  decimalMark: '.' | ',';
}

/** Columns that say when, the order of their dates, and hints at marks and clock that their names give. */
interface TimeFinding {
  findings: Map<number, RoleFinding>;
  guesses: Guess[];
  stamp: StampStyle;
}

const timeRoles: ReadonlySet<string> = new Set([
  'stamp',
  'stamp-begin',
  'stamp-end',
  'date',
  'time',
  'interval-number',
]);

/** Finds the columns that say when a reading was taken. */
export function findTimeColumns(input: TimeInput): TimeFinding {
  const findings = givenTimeColumns(input) ?? detectedTimeColumns(input);
  const dated = [...findings].find(([, finding]) =>
    ['stamp', 'stamp-begin', 'date', 'stamp-end'].includes(finding.role),
  );
  const guesses: Guess[] = [];
  const given = input.map.stamp?.order;
  let order = given;
  if (dated) {
    const [index, finding] = dated;
    const found = numericStamp(input, index) ?? findDateOrder(input.grid, index, input.rows, input.timeZone);
    const tests: Test[] = given && given !== found.order ? [[true, 'Given by the column map']] : found.tests;
    order ??= found.order;
    guesses.push(guess('date-order', orderInWords(order), tests));
    finding.tests.push(...tests);
  }
  return { findings, guesses, stamp: { ...(order ? { order } : {}), ...hintsOf(input, findings) } };
}

function givenTimeColumns(input: TimeInput): Map<number, RoleFinding> | null {
  const given = (input.map.columns ?? []).filter((use) => timeRoles.has(use.role) && use.index < input.profiles.length);
  if (given.length === 0) return null;
  const detected = detectedTimeColumns(input);
  return new Map(
    given.map((use): [number, RoleFinding] => {
      const own = detected.get(use.index);
      return [use.index, own?.role === use.role ? own : { role: use.role, tests: [[true, 'Given by the column map']] }];
    }),
  );
}

function detectedTimeColumns(input: TimeInput): Map<number, RoleFinding> {
  const { profiles, wide } = input;
  const taken = new Set(wide?.columns.map((use) => use.index) ?? []);
  const free = profiles.filter((profile) => !taken.has(profile.index));
  const stamps = free.filter((profile) => shareOf(profile, 'stamp') > 0.6 && shareOf(profile, 'stamp', 'date') > 0.75);
  const dates = free.filter((profile) => shareOf(profile, 'date') > 0.9);
  const times = free.filter((profile) => shareOf(profile, 'time') > 0.9);
  const number = free.find((profile) => isIntervalNumber(input, profile));
  const clock = times[0] ?? (dates.length > 0 ? free.find((profile) => isFigureTime(input, profile)) : undefined);
  const midnightDates = stamps.filter((profile) => isMidnightOnly(input, profile));
  const date = dates[0] ?? (wide || clock || number ? midnightDates[0] : undefined);
  const found = new Map<number, RoleFinding>();
  const put = (profile: ColumnProfile, role: IntervalRole, tests: Test[]): void =>
    void found.set(profile.index, { role, tests });
  if (wide) {
    const day = date ?? stamps[0];
    if (day) put(day, 'date', [[true, 'The only date of the row']]);
    return found;
  }
  if (date && (clock || number)) {
    put(date, 'date', [[shareOf(date, 'date', 'stamp') === 1, 'Every cell is a date']]);
    if (clock) put(clock, 'time', [[true, 'Every cell is a time of day']]);
    else if (number) put(number, 'interval-number', [[true, 'Whole numbers that count through the day']]);
    return found;
  }
  const [first, second] = byBeginAndEnd(input, stamps);
  if (first && second) {
    put(first, 'stamp-begin', [[true, 'Begins where the column beside it ends']]);
    put(second, 'stamp-end', [[true, 'Ends where the next row begins']]);
  } else if (first) put(first, 'stamp', [[shareOf(first, 'stamp', 'date') === 1, 'Every cell is a date with a time']]);
  else {
    const serial = free.find((profile) => numericStamp(input, profile.index) !== null);
    if (serial) put(serial, 'stamp', [[true, 'Figures that count days or seconds']]);
    else if (date) put(date, 'stamp', [[false, 'Dates without times of day']]);
  }
  return found;
}

/** Two stamp columns are begin and end if their names say so or the one always follows the other by up to an hour. */
function byBeginAndEnd(input: TimeInput, stamps: ColumnProfile[]): [ColumnProfile?, ColumnProfile?] {
  const [first, second] = stamps;
  if (!first || !second) return [first, undefined];
  const begin = stamps.find((profile) => mentions(profile.name, 'begin'));
  const end = stamps.find((profile) => mentions(profile.name, 'end'));
  if (begin && end && begin !== end) return [begin, end];
  const order = findDateOrder(input.grid, first.index, input.rows, input.timeZone).order;
  const scanner = new StampScanner();
  const minuteAt = (row: number, column: number): number =>
    input.grid.scan(row, column, scanner) && scanner.resolve(order)
      ? scanner.day * 1440 + (Number.isNaN(scanner.minute) ? 0 : scanner.minute)
      : Number.NaN;
  const lengths = input.rows.slice(0, 50).map((row) => minuteAt(row, second.index) - minuteAt(row, first.index));
  const isSpan = lengths.filter((length) => length > 0 && length <= 60).length > lengths.length * 0.8;
  return isSpan ? [first, second] : [first, undefined];
}

function isMidnightOnly(input: TimeInput, profile: ColumnProfile): boolean {
  const scanner = new StampScanner();
  return input.rows.slice(0, 120).every((row) => {
    if (!input.grid.scan(row, profile.index, scanner)) return true;
    return (
      !['DMY', 'MDY', 'YMD'].some((order) => scanner.resolve(order as DateOrder)) ||
      scanner.minute === 0 ||
      Number.isNaN(scanner.minute)
    );
  });
}

function figuresOf(input: TimeInput, profile: ColumnProfile): number[] {
  if (shareOf(profile, 'number') < 0.95) return [];
  return input.rows
    .slice(0, 120)
    .map((row) => input.grid.number(row, profile.index, input.decimalMark))
    .filter((figure) => !Number.isNaN(figure));
}

/** Counts 0..23, 1..24, 1..25, 1..48, 1..96: whole numbers, mostly one more than the row before, named like a time. */
function isIntervalNumber(input: TimeInput, profile: ColumnProfile): boolean {
  if (!mentions(profile.name, 'time') && profile.name !== '') return false;
  const figures = figuresOf(input, profile);
  if (figures.length < 3 || figures.some((figure) => !Number.isInteger(figure) || figure < 0 || figure > 100))
    return false;
  const next = figures.slice(1).filter((figure, at) => figure - (figures[at] ?? 0) === 1).length;
  return next > (figures.length - 1) * 0.85;
}

/** Times as bare figures: 0, 15, 30, 45, 100 ... 2345 or 0015. */
function isFigureTime(input: TimeInput, profile: ColumnProfile): boolean {
  if (!mentions(profile.name, 'time')) return false;
  const figures = figuresOf(input, profile);
  if (figures.length < 3 || !figures.some((figure) => figure >= 100)) return false;
  return figures.every((figure) => Number.isInteger(figure) && figure >= 0 && figure <= 2400 && figure % 100 < 60);
}

/** Spreadsheet serials and epoch figures, which only their size and a name of date or time give away. */
function numericStamp(input: TimeInput, index: number): { order: DateOrder; tests: Test[] } | null {
  const profile = input.profiles[index];
  if (!profile || !namesTime(profile.name)) return null;
  const figures = figuresOf(input, profile);
  if (figures.length < 2) return null;
  const within = (least: number, most: number): boolean => figures.every((figure) => figure >= least && figure <= most);
  if (within(25_569, 80_000)) return { order: 'serial', tests: [[true, 'Figures of the size of spreadsheet dates']] };
  if (within(1e8, 5e9) || within(1e11, 5e12))
    return { order: 'epoch', tests: [[true, 'Figures of the size of seconds since 1970']] };
  return null;
}

function hintsOf(input: TimeInput, findings: Map<number, RoleFinding>): StampStyle {
  const entries = [...findings].map(([index, finding]) => ({
    role: finding.role,
    name: input.profiles[index]?.name ?? '',
  }));
  if (entries.some((entry) => entry.role === 'stamp-begin'))
    return { marks: 'begin', ...clockHint(entries.map((entry) => entry.name)) };
  const names = entries
    .filter((entry) => entry.role === 'stamp' || entry.role === 'time' || entry.role === 'stamp-end')
    .map((entry) => entry.name);
  const isEnd = names.some((name) => mentions(name, 'end')) || entries.every((entry) => entry.role === 'stamp-end');
  const isBegin = names.some((name) => mentions(name, 'begin'));
  const marks: StampStyle = isEnd === isBegin || entries.length === 0 ? {} : { marks: isEnd ? 'end' : 'begin' };
  return { ...marks, ...clockHint(entries.map((entry) => entry.name)) };
}

function clockHint(names: readonly string[]): StampStyle {
  if (names.some((name) => /\b(utc|gmt|zulu)\b/i.test(name.replaceAll('_', ' ')))) return { clock: 'utc' };
  if (names.some((name) => /standard[\s_]time|winterzeit|normalzeit|\b(EST|CST|MST|PST)\b/.test(name)))
    return { clock: 'standard' };
  return {};
}
