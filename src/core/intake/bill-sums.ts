import type { ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import type { Grid } from './grid';

/** More undecided columns than this are not tried in every combination. */
const mostUndecided = 12;
/** Share of the bills whose lines must add up; the rest may hold slips of the utility. */
const shareThatAddsUp = 0.8;

interface Sums {
  grid: Grid;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  decimalMark: '.' | ',';
  findings: Map<number, RoleFinding>;
}

/** Columns whose name leaves open whether they hold amounts: "Demand", "Energy, on peak" say no unit. */
const isUndecided = (finding: RoleFinding | undefined) =>
  finding?.role === 'quantity' && finding.tests.every(([met]) => !met);

/** Sum of some columns in a row; blank cells are nothing. */
function sumOf({ grid, decimalMark }: Sums, row: number, columns: readonly ColumnProfile[]): number {
  return columns.reduce((sum, { index }) => sum + (grid.number(row, index, decimalMark) || 0), 0);
}

/** Share of the bills with a total whose lines come to it within a cent for every two lines. */
function shareAddingUp(sums: Sums, total: ColumnProfile, lines: readonly ColumnProfile[]): number {
  const totals = sums.rows.map((row) => [row, sums.grid.number(row, total.index, sums.decimalMark)] as const);
  const told = totals.filter(([, value]) => Number.isFinite(value));
  const tolerance = 0.0051 + 0.005 * Math.ceil(lines.length / 2);
  const fitting = told.filter(([row, value]) => Math.abs(sumOf(sums, row, lines) - value) <= tolerance);
  return told.length < 2 ? 0 : fitting.length / told.length;
}

/** Without a column named so, one that is the sum of all other lines in every bill is the total, not a line. */
function totalBySum(sums: Sums): ColumnProfile | undefined {
  const charges = sums.profiles.filter(({ index }) => sums.findings.get(index)?.role === 'charge');
  if (charges.length < 3) return undefined;
  return charges.find(
    (total) =>
      sums.rows.some((row) => sumOf(sums, row, [total]) !== 0) &&
      shareAddingUp(
        sums,
        total,
        charges.filter((other) => other !== total),
      ) >= shareThatAddsUp,
  );
}

function* combinations<Item>(items: readonly Item[]): Generator<Item[]> {
  for (let mask = 1; mask < 1 << items.length; mask++) yield items.filter((_, index) => mask & (1 << index));
}

/**
 * Lets the arithmetic of the bills decide what names leave open: where the lines add up to the total only with certain
 * undecided columns, these are lines of the bill and not quantities.
 */
export function settleSums(sums: Sums): void {
  const { profiles, findings } = sums;
  const named = profiles.find(({ index }) => findings.get(index)?.role === 'total');
  const found = named ? undefined : totalBySum(sums);
  if (found) findings.set(found.index, { role: 'total', tests: [[true, 'The sum of the other lines in every bill']] });
  const total = named ?? found;
  const charges = profiles.filter(({ index }) => findings.get(index)?.role === 'charge');
  const undecided = profiles.filter(({ index }) => isUndecided(findings.get(index)));
  if (!total || undecided.length === 0 || undecided.length > mostUndecided) return;
  if (shareAddingUp(sums, total, charges) >= shareThatAddsUp) return;
  const fitting = [...combinations(undecided)].filter(
    (chosen) => shareAddingUp(sums, total, [...charges, ...chosen]) >= shareThatAddsUp,
  );
  const lines = fitting.toSorted((one, other) => one.length - other.length)[0];
  if (!lines || !fitting.every((chosen) => lines.every((line) => chosen.includes(line)))) return;
  for (const { index } of lines) {
    findings.set(index, { role: 'charge', tests: [[true, 'Only with it do the lines add up to the total']] });
  }
}
