import { billCellKind } from './bill-months';
import { findPeriods } from './bill-periods';
import { settleSums } from './bill-sums';
import { billMeaning } from './bill-words';
import { findBlock, type TableBlock } from './block';
import { profileColumns, sampleRows, shareOf, withoutFooters, type ColumnProfile } from './cells';
import { decimalGuess, decimalVote, headerGuess } from './detect';
import { IntakeError } from './errors';
import { columnEvidence, guess, useOf, valuesShown, type RoleFinding } from './evidence';
import { transpose, type Grid } from './grid';
import { delimiterGuesses } from './guesses';
import { mergeColumns, mergeEvidence } from './merge-map';
import type { OpenedTable } from './open';
import type { ColumnEvidence, ColumnMap, ColumnUse, DateOrder, Guess, ReadOptions } from './types';
import { unitOfHeader } from './units';

/** A table of bills with its meaning settled. */
export interface BillPlan {
  opened: OpenedTable;
  /** The table with a row a bill; the file's own grid turned where it has a column a bill. */
  grid: Grid;
  block: TableBlock;
  columns: ColumnUse[];
  decimalMark: '.' | ',';
  order: DateOrder;
  isTransposed: boolean;
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
  const { grid, block, isTransposed } = locateBills(opened.grid, options.fileName, map);
  const rows = withoutFooters(grid, sampleRows(block.firstRow, block.lastRow, 400));
  const profiles = profileColumns(grid, block.names, rows, billCellKind);
  const vote = decimalVote(
    grid,
    profiles,
    rows,
    opened.dialect.delimiter ? { delimiter: opened.dialect.delimiter } : {},
  );
  const decimalMark = map.decimalMark ?? vote.mark;
  const findings = new Map<number, RoleFinding>();
  const order = findPeriods({ grid, profiles, rows, map, timeZone: options.timeZone, findings });
  for (const profile of profiles)
    if (!findings.has(profile.index)) findings.set(profile.index, meaningOf(grid, profile, rows));
  settleTotals(grid, profiles, rows, decimalMark, findings);
  settleSums({ grid, profiles, rows, decimalMark, findings });
  settleDoubles(profiles, findings);
  const evidence = profiles.map((profile) =>
    columnEvidence(
      profile,
      findings.get(profile.index) ?? { role: 'ignore', tests: [] },
      valuesShown(grid, profile, rows, decimalMark),
    ),
  );
  const columns = mergeColumns(
    evidence.map((line) => useOf(line)),
    map,
    block,
    options.fileName,
  );
  const layout = guess('layout', isTransposed ? 'transposed' : 'long', [
    [true, isTransposed ? 'A column holds one bill' : 'A row holds one bill'],
  ]);
  const settled = { grid, block, columns, decimalMark, order: order.order, isTransposed };
  return {
    ...settled,
    opened: { ...opened, dialect: { ...opened.dialect, decimalMark } },
    columnMap: completeMap(opened, settled, map),
    evidence: mergeEvidence(evidence, columns, map),
    guesses: [...delimiterGuesses(opened, map), headerGuess(grid, block), layout, decimalGuess(vote, map), order],
  };
}

type Settled = Pick<BillPlan, 'grid' | 'block' | 'columns' | 'decimalMark' | 'order' | 'isTransposed'>;

function completeMap({ dialect }: OpenedTable, settled: Settled, map: Partial<ColumnMap>): ColumnMap {
  const { grid, block, columns, decimalMark, order, isTransposed } = settled;
  return {
    kind: 'bills',
    ...(dialect.sheet === undefined ? {} : { sheet: dialect.sheet }),
    ...(dialect.delimiter === undefined ? {} : { delimiter: dialect.delimiter }),
    decimalMark,
    headerRow: block.headerRow === null ? null : grid.rowNumber(block.headerRow),
    firstRow: grid.rowNumber(block.firstRow),
    layout: isTransposed ? 'transposed' : 'long',
    columns,
    stamp: { order },
    ...(map.periodEnds ? { periodEnds: map.periodEnds } : {}),
  };
}

/** A row a bill, or, where no row holds a date beside figures, a column a bill. */
function locateBills(
  grid: Grid,
  fileName: string,
  map: Partial<ColumnMap>,
): { grid: Grid; block: TableBlock; isTransposed: boolean } {
  if (map.layout === 'transposed') {
    const turned = transpose(grid);
    return { grid: turned, block: findBlock(turned, fileName, map, 'bills', billCellKind), isTransposed: true };
  }
  try {
    return { grid, block: findBlock(grid, fileName, map, 'bills', billCellKind), isTransposed: false };
  } catch (cause) {
    if (!(cause instanceof IntakeError) || map.layout === 'long' || grid.rows > 300) throw cause;
    const turned = transpose(grid);
    try {
      return { grid: turned, block: findBlock(turned, fileName, {}, 'bills', billCellKind), isTransposed: true };
    } catch {
      throw cause;
    }
  }
}

/** Meaning of a column of figures by its name and by currency signs or brackets in its cells. */
function meaningOf(grid: Grid, profile: ColumnProfile, rows: readonly number[]): RoleFinding {
  const isFigures = shareOf(profile, 'number') > (unitOfHeader(profile.name) ? 0.2 : 0.7);
  if (!isFigures)
    return {
      role: 'ignore',
      tests: [[true, profile.kinds.blank === profile.sampled ? 'Blank throughout' : 'Words, no figures']],
    };
  const texts = rows.map((row) => grid.figureText(row, profile.index)).filter((text) => text !== '');
  const isMoney =
    texts.filter((text) => /[$€£¥₹]|\b(USD|EUR|GBP|CAD|AUD|CHF|INR)\b|^\(.*\)$/.test(text)).length >
      texts.length * 0.3 && texts.length > 0;
  const { role, quantity, unit, tests } = billMeaning(profile.name, isMoney);
  return { role, quantity, unit, tests };
}

/** One total: the greatest of those named so; others are subtotals, which repeat the lines. */
function settleTotals(
  grid: Grid,
  profiles: readonly ColumnProfile[],
  rows: readonly number[],
  decimalMark: '.' | ',',
  findings: Map<number, RoleFinding>,
): void {
  const sumOf = (profile: ColumnProfile): number =>
    rows.reduce((sum, row) => sum + (grid.number(row, profile.index, decimalMark) || 0), 0);
  const totals = profiles
    .filter((profile) => findings.get(profile.index)?.role === 'total')
    .sort((a, b) => sumOf(b) - sumOf(a) || b.index - a.index);
  const subtotals = profiles.filter(
    (profile) =>
      findings.get(profile.index)?.role === 'charge' &&
      /sub ?-?total|total .*(before|excl)|net total/i.test(profile.name),
  );
  for (const profile of [...totals.slice(1), ...subtotals]) {
    findings.set(profile.index, { role: 'ignore', tests: [[true, 'A subtotal: it repeats lines of the bill']] });
  }
}

/** A quantity has one column: a second one of the same meaning is left out, to be looked at. */
function settleDoubles(profiles: readonly ColumnProfile[], findings: Map<number, RoleFinding>): void {
  const seen = new Map<string, ColumnProfile>();
  for (const profile of profiles) {
    const finding = findings.get(profile.index);
    if (!finding?.quantity) continue;
    const first = seen.get(finding.quantity);
    if (first)
      findings.set(profile.index, {
        role: 'ignore',
        tests: [[false, `Means the same as “${first.name}”, which is taken`]],
      });
    else seen.set(finding.quantity, profile);
  }
}
