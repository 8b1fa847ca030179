import { readCell } from './bill-cells';
import { isBalance, isLateFee } from './bill-words';
import type { ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import type { Grid } from './grid';

/** More undecided columns than this are not tried in every combination. */
const mostUndecided = 12;
/** Share of the bills whose lines must add up; the rest may hold slips of the utility. */
const shareThatAddsUp = 0.8;

interface SumsInput {
  grid: Grid;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  decimalMark: '.' | ',';
  findings: Map<number, RoleFinding>;
}

interface Sums extends SumsInput {
  /** By column: the figure of each of `rows`, blank is nought. */
  figures: ReadonlyMap<number, Float64Array>;
}

/** Columns whose name leaves open whether they hold amounts: "Demand", "Energy, on peak" say no unit. */
const isUndecided = (finding: RoleFinding | undefined) =>
  finding?.role === 'quantity' && finding.tests.every(([met]) => !met);

const figuresOf = ({ grid, rows, decimalMark }: SumsInput, { index }: ColumnProfile): Float64Array =>
  Float64Array.from(rows, (row) => readCell(grid, row, index, decimalMark).value);

/** Sum of some columns in the bill at a place of `rows`; blank cells are nothing. */
const sumOf = ({ figures }: Sums, at: number, columns: readonly ColumnProfile[]): number =>
  columns.reduce((sum, { index }) => sum + (figures.get(index)?.[at] || 0), 0);

/** Share of the bills with a total whose lines come to it within a cent for every two lines. */
function shareAddingUp(sums: Sums, total: ColumnProfile, lines: readonly ColumnProfile[]): number {
  const totals = [...(sums.figures.get(total.index) ?? [])].map((value, at) => [at, value] as const);
  const told = totals.filter(([, value]) => Number.isFinite(value));
  const tolerance = 0.0051 + 0.005 * Math.ceil(lines.length / 2);
  const fitting = told.filter(([at, value]) => Math.abs(sumOf(sums, at, lines) - value) <= tolerance);
  return told.length < 2 ? 0 : fitting.length / told.length;
}

const addsUp = (sums: Sums, total: ColumnProfile, lines: readonly ColumnProfile[]): boolean =>
  lines.length > 0 && shareAddingUp(sums, total, lines) >= shareThatAddsUp;

/** Without a column named so, one that is the sum of all other lines in every bill is the total, not a line. */
function totalBySum(sums: Sums): ColumnProfile | undefined {
  const charges = withRole(sums, 'charge');
  if (charges.length < 3) return undefined;
  return charges.find(
    (total) =>
      sums.rows.some((_, at) => sumOf(sums, at, [total]) !== 0) &&
      addsUp(
        sums,
        total,
        charges.filter((other) => other !== total),
      ),
  );
}

const withRole = ({ profiles, findings }: Sums, role: RoleFinding['role']): ColumnProfile[] =>
  profiles.filter(({ index }) => findings.get(index)?.role === role);

function* combinations<Item>(items: readonly Item[]): Generator<Item[]> {
  for (let mask = 1; mask < 1 << items.length; mask++) yield items.filter((_, index) => mask & (1 << index));
}

/**
 * Lets the arithmetic of the bills decide what names leave open: which of several totals is the bill's, which undecided
 * columns are lines of it, which line repeats others, and whether the total holds what was owed before.
 */
export function settleSums(input: SumsInput): void {
  const sums: Sums = {
    ...input,
    figures: new Map(input.profiles.map((profile) => [profile.index, figuresOf(input, profile)])),
  };
  const subtotals = settleTotals(sums);
  const total = withRole(sums, 'total')[0] ?? foundTotal(sums);
  if (!total || addsUp(sums, total, withRole(sums, 'charge'))) return;
  if (addLines(sums, total, subtotals) || dropRepeat(sums, total)) return;
  dropOwedTotal(sums, total);
}

function foundTotal(sums: Sums): ColumnProfile | undefined {
  const found = totalBySum(sums);
  if (found)
    sums.findings.set(found.index, { role: 'total', tests: [[true, 'The sum of the other lines in every bill']] });
  return found;
}

/** One total: that to which the lines add up, else the greatest of those named so; others are subtotals, which repeat lines. */
function settleTotals(sums: Sums): ColumnProfile[] {
  const { profiles, rows, findings } = sums;
  const whole = (profile: ColumnProfile): number => rows.reduce((sum, _, at) => sum + sumOf(sums, at, [profile]), 0);
  const charges = withRole(sums, 'charge').filter((profile) => !subtotalName.test(profile.name));
  const totals = withRole(sums, 'total').sort((a, b) => whole(b) - whole(a) || b.index - a.index);
  const chosen = totals.find((total) => addsUp(sums, total, charges)) ?? totals[0];
  const subtotals = profiles.filter(
    (profile) =>
      (totals.includes(profile) && profile !== chosen) ||
      (findings.get(profile.index)?.role === 'charge' && subtotalName.test(profile.name)),
  );
  for (const profile of subtotals)
    findings.set(profile.index, {
      role: 'ignore',
      tests: [[true, 'Another total: it repeats lines or holds what was owed before']],
    });
  return subtotals;
}

const subtotalName = /sub ?-?total|total .*(before|excl)|net total/i;

/** Undecided columns, subtotals and fees for paying late are lines where only with them the lines add up to the total. */
function addLines(sums: Sums, total: ColumnProfile, subtotals: readonly ColumnProfile[]): boolean {
  const { profiles, findings } = sums;
  const charges = withRole(sums, 'charge');
  const open = profiles.filter(
    (profile) =>
      isUndecided(findings.get(profile.index)) || subtotals.includes(profile) || isIgnoredLateFee(sums, profile),
  );
  if (open.length === 0 || open.length > mostUndecided) return false;
  const fitting = [...combinations(open)].filter((chosen) => addsUp(sums, total, [...charges, ...chosen]));
  const lines = fitting.toSorted((one, other) => one.length - other.length)[0];
  if (!lines || !fitting.every((chosen) => lines.every((line) => chosen.includes(line)))) return false;
  for (const { index } of lines)
    findings.set(index, { role: 'charge', tests: [[true, 'Only with it do the lines add up to the total']] });
  return true;
}

const isIgnoredLateFee = ({ findings }: Sums, { index, name, kinds, sampled }: ColumnProfile): boolean =>
  findings.get(index)?.role === 'ignore' && isLateFee(name) && kinds.blank < sampled;

/** A line without which the others add up to the total is a sum of some of them. */
function dropRepeat(sums: Sums, total: ColumnProfile): boolean {
  const charges = withRole(sums, 'charge');
  const repeats = charges.filter((one) =>
    addsUp(
      sums,
      total,
      charges.filter((other) => other !== one),
    ),
  );
  const [repeat] = repeats.filter((one) => sums.rows.some((_, at) => sumOf(sums, at, [one]) !== 0));
  if (!repeat || repeats.length > 1) return false;
  sums.findings.set(repeat.index, {
    role: 'ignore',
    tests: [[true, 'Without it the lines add up to the total: it repeats others of them']],
  });
  return true;
}

/** A total that comes out only with balances and payments is what is owed, not what the bill comes to. */
function dropOwedTotal(sums: Sums, total: ColumnProfile): void {
  const owed = sums.profiles.filter(
    (profile) =>
      sums.findings.get(profile.index)?.role === 'ignore' && (isBalance(profile.name) || isLateFee(profile.name)),
  );
  if (owed.length === 0 || owed.length > mostUndecided) return;
  const charges = withRole(sums, 'charge');
  const parts = [...combinations(owed)].find((chosen) => addsUp(sums, total, [...charges, ...chosen]));
  if (!parts) return;
  const names = parts.map((part) => `“${part.name}”`).join(' and ');
  sums.findings.set(total.index, {
    role: 'ignore',
    tests: [[true, `It holds ${names}: what is owed, not what the bill comes to`]],
  });
}
