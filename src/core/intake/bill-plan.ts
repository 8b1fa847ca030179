import { figureDigits } from './bill-figures';
import { findItems } from './bill-items';
import { findLabels } from './bill-labels';
import { filledDown, locateBills, type LocatedBills } from './bill-layout';
import { billCellKind } from './bill-months';
import { findPeriods } from './bill-periods';
import { pairRates } from './bill-rates';
import { meaningOf, settleDoubles } from './bill-roles';
import { settleSums } from './bill-sums';
import { findYears, type FoundYears } from './bill-years';
import type { TableBlock } from './block';
import { profileColumns, sampleRows, shareOf, withoutFooters, type ColumnProfile } from './cells';
import { decimalGuess, headerGuess } from './detect';
import { columnEvidence, guess, useOf, valuesShown, type RoleFinding } from './evidence';
import type { Grid } from './grid';
import { delimiterGuesses } from './guesses';
import { mergeColumns, mergeEvidence } from './merge-map';
import { voteDecimalMark, type DecimalVote } from './numbers';
import type { OpenedTable } from './open';
import type { ColumnMap, ColumnUse, DateOrder } from './column-map';
import type { ColumnEvidence, Guess, ReadOptions } from './types';

/** A table of bills with its meaning settled. */
export interface BillPlan {
  opened: OpenedTable;
  /** The table with a row a bill or a line; the file's own grid turned where it has a column a bill. */
  grid: Grid;
  block: TableBlock;
  /** What a line is called, by column. */
  labels: readonly string[];
  columns: ColumnUse[];
  decimalMark: '.' | ',';
  order: DateOrder;
  /** Years of months written without one. */
  years: FoundYears | null;
  isTransposed: boolean;
  /** A row is a line of a bill. */
  isItems: boolean;
  columnMap: ColumnMap;
  evidence: ColumnEvidence[];
  guesses: Guess[];
}

/**
 * Settles the meaning of a table of bills: detection first, the column map over it.
 * @throws {IntakeError} if no table is found or the map does not fit it.
 */
export function planBills(opened: OpenedTable, options: ReadOptions): BillPlan {
  const map: Partial<ColumnMap> = options.columnMap ?? {};
  const located = locateBills(opened.grid, options.fileName, map);
  const found = detect(opened, located, options, map);
  const { grid, block, rows, evidence, decimalMark } = found;
  const merged = mergeColumns(
    evidence.map((line) => useOf(line)),
    map,
    block,
    options.fileName,
  );
  const shown = mergeEvidence(evidence, merged, map);
  const columns = pairRates({ grid, rows, decimalMark, columns: merged }, shown);
  const years = yearsOf({ opened, grid, block, columns }, options, map);
  const settled: Settled = { ...found, columns, years, isTransposed: located.isTransposed };
  return {
    ...settled,
    opened: { ...opened, dialect: { ...opened.dialect, decimalMark } },
    columnMap: completeMap(opened, settled, map),
    evidence: shown,
    guesses: [
      ...delimiterGuesses(opened, map),
      headerGuess(grid, block),
      layoutGuess(settled),
      decimalGuess(found.vote, map),
      found.orderGuess,
      ...(years ? [years.guess] : []),
    ],
  };
}

type Settled = Pick<
  BillPlan,
  'grid' | 'block' | 'labels' | 'columns' | 'decimalMark' | 'order' | 'years' | 'isTransposed' | 'isItems'
>;

interface Detected extends Omit<Settled, 'columns' | 'years' | 'isTransposed'> {
  rows: readonly number[];
  evidence: ColumnEvidence[];
  vote: DecimalVote;
  orderGuess: Guess;
}

/** What every column is taken for before a map is laid over it. */
function detect(opened: OpenedTable, located: LocatedBills, options: ReadOptions, map: Partial<ColumnMap>): Detected {
  const { block, names, labels } = located;
  const rows = withoutFooters(located.grid, sampleRows(block.firstRow, block.lastRow, 400));
  const plain = profileColumns(located.grid, names, rows, billCellKind);
  const vote = voteOf(located.grid, plain, rows, opened);
  const decimalMark = map.decimalMark ?? vote.mark;
  const periods = new Map<number, RoleFinding>();
  const orderGuess = findPeriods({
    grid: located.grid, profiles: plain, rows, map, timeZone: options.timeZone, findings: periods,
  }); // prettier-ignore
  const base: Columns = { grid: located.grid, profiles: plain, rows, decimalMark, findings: periods };
  const items = located.isTransposed || map.layout === 'long' ? null : withItems(base, map.layout === 'items');
  const table = items ?? base;
  if (!items) findLabels(table);
  const { grid, profiles, findings } = table;
  for (const profile of profiles)
    if (!findings.has(profile.index)) findings.set(profile.index, meaningOf(grid, profile, rows, decimalMark));
  if (!items) settleSums(table);
  settleDoubles(profiles, findings);
  const evidence = profiles.map((profile) =>
    columnEvidence(
      profile,
      findings.get(profile.index) ?? { role: 'ignore', tests: [] },
      valuesShown(grid, profile, rows, decimalMark),
    ),
  );
  const isItems = items !== null;
  return { grid, block, labels, rows, evidence, vote, orderGuess, decimalMark, order: orderGuess.order, isItems };
}

interface Columns {
  grid: Grid;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  decimalMark: '.' | ',';
  findings: Map<number, RoleFinding>;
}

/** The columns of a table with a row a line, its dates filled down; null if rows are bills. */
function withItems(base: Columns, isGiven: boolean): Columns | null {
  const grid = filledDown(base.grid);
  const names = base.profiles.map((profile) => profile.name);
  const filled: Columns = {
    ...base,
    grid,
    profiles: profileColumns(grid, names, base.rows, billCellKind),
    findings: new Map(base.findings),
  };
  findLabels(filled);
  return findItems({ ...filled, isGiven }) ? filled : null;
}

/** Decimal mark by the figures alone, whatever units and signs stand beside them. */
function voteOf(
  grid: Grid,
  profiles: readonly ColumnProfile[],
  rows: readonly number[],
  opened: OpenedTable,
): DecimalVote {
  const figures = profiles.filter((profile) => shareOf(profile, 'number') > 0.6);
  const cells = figures.flatMap((profile) =>
    rows.map((row) => figureDigits(grid.figureText(row, profile.index))).filter((text) => text !== ''),
  );
  return voteDecimalMark(cells, opened.dialect.delimiter === ';' ? ',' : '.');
}

function layoutGuess({ isTransposed, isItems }: Settled): Guess {
  if (isItems)
    return guess('layout', 'items', [
      [true, 'Several rows of the same invoice or period, each with a label and an amount'],
    ]);
  return guess('layout', isTransposed ? 'transposed' : 'long', [
    [true, isTransposed ? 'A column holds one bill' : 'A row holds one bill'],
  ]);
}

/** Years of a table that names months alone, from the texts about it. */
function yearsOf(
  { opened, grid, block, columns }: Pick<BillPlan, 'opened' | 'grid' | 'block' | 'columns'>,
  options: ReadOptions,
  map: Partial<ColumnMap>,
): FoundYears | null {
  const month = columns.find((use) => use.role === 'month')?.index ?? -1;
  if (month < 0 || columns.some((use) => use.role === 'year')) return null;
  const rows = sampleRows(block.firstRow, block.lastRow, 5000);
  const above = Array.from({ length: block.firstRow }, (_, row) =>
    Array.from({ length: Math.min(grid.width(row), 60) }, (_unused, column) => grid.text(row, column)).join(' '),
  );
  const texts = [above.join(' '), opened.dialect.sheet ?? '', options.fileName];
  return findYears({ grid, month, rows, texts, map });
}

function completeMap({ dialect }: OpenedTable, settled: Settled, map: Partial<ColumnMap>): ColumnMap {
  const { grid, block, columns, decimalMark, order, isTransposed, isItems, years } = settled;
  return {
    kind: 'bills',
    ...(dialect.sheet === undefined ? {} : { sheet: dialect.sheet }),
    ...(dialect.delimiter === undefined ? {} : { delimiter: dialect.delimiter }),
    decimalMark,
    headerRow: block.headerRow === null ? null : grid.rowNumber(block.headerRow),
    firstRow: grid.rowNumber(block.firstRow),
    layout: isTransposed ? 'transposed' : isItems ? 'items' : 'long',
    columns,
    stamp: { order },
    ...(map.periodEnds ? { periodEnds: map.periodEnds } : {}),
    ...(map.meter === undefined ? {} : { meter: map.meter }),
    ...(years ? { year: years.first } : {}),
    ...(map.documents ? { documents: map.documents } : {}),
  };
}
