import { assemble } from './assemble';
import { findBlock, type TableBlock } from './block';
import { checkColumns, checkExtraction, checkMeters } from './checks';
import { detectColumns } from './detect';
import { guess } from './evidence';
import { columnOf, extractLong, valueRoles, type ColumnPlan, type Extraction } from './extract';
import { extractWide } from './extract-wide';
import { channelMeaning, isContradictory } from './channel-words';
import { delimiterGuesses, openNotes } from './guesses';
import { foldRuns, mergeColumns, mergeEvidence } from './merge-map';
import type { Grid } from './grid';
import type { OpenedTable } from './open';
import { preambleMultiplier } from './preamble';
import type { PlacedStrand } from './series';
import { unstack } from './stacked';
import { timelineOf } from './timeline';
import type { ColumnMap, ColumnUse } from './column-map';
import type { ColumnEvidence, Guess, IntakeNote, IntervalReading, ReadOptions } from './types';
import { unitMeaning } from './units';

/** A table of intervals with its meaning settled. */
export interface IntervalPlan {
  opened: OpenedTable;
  block: TableBlock;
  plan: ColumnPlan;
  columnMap: ColumnMap;
  evidence: ColumnEvidence[];
  guesses: Guess[];
  meters: string[];
  notes: IntakeNote[];
}

/**
 * Settles the meaning of a table of intervals: detection first, the column map over it.
 * @throws {IntakeError} if no table is found or the map does not fit it.
 */
export function planIntervals(opened: OpenedTable, options: ReadOptions): IntervalPlan {
  const map: Partial<ColumnMap> = options.columnMap ?? {};
  const { dialect } = opened;
  const found = findBlock(opened.grid, options.fileName, map, 'readings');
  const { grid, block, notes } = unstack(opened.grid, found);
  const detection = detectColumns(grid, block, {
    timeZone: options.timeZone,
    map,
    ...(dialect.delimiter ? { delimiter: dialect.delimiter } : {}),
  });
  const columns = mergeColumns(detection.columns, map, block, options.fileName);
  const stamp = { ...detection.stamp, ...map.stamp };
  const meters = metersOf(grid, block, columns);
  const plan: ColumnPlan = {
    grid,
    block,
    columns,
    decimalMark: detection.decimalMark,
    stamp,
    hints: detection.stamp,
    layout: detection.layout,
    meter: map.meter ?? (meters.length === 1 ? meters[0] : undefined),
  };
  return {
    opened: { ...opened, dialect: { ...dialect, decimalMark: detection.decimalMark } },
    notes,
    block,
    plan,
    meters,
    columnMap: completeMap(opened, block, plan),
    evidence: foldRuns(mergeEvidence(detection.evidence, columns, map)),
    guesses: [...delimiterGuesses(opened, map), ...detection.guesses, ...meterGuesses(meters, map)],
  };
}

function completeMap(opened: OpenedTable, block: TableBlock, plan: ColumnPlan): ColumnMap {
  const { grid, dialect } = opened;
  return {
    kind: 'intervals',
    ...(dialect.sheet === undefined ? {} : { sheet: dialect.sheet }),
    ...(dialect.delimiter === undefined ? {} : { delimiter: dialect.delimiter }),
    decimalMark: plan.decimalMark,
    headerRow: block.headerRow === null ? null : grid.rowNumber(block.headerRow),
    firstRow: grid.rowNumber(block.firstRow),
    layout: plan.layout,
    columns: plan.columns,
    stamp: plan.stamp,
    ...(plan.meter === undefined ? {} : { meter: plan.meter }),
  };
}

function meterGuesses(meters: string[], map: Partial<ColumnMap>): Guess[] {
  if (meters.length === 0) return [];
  if (map.meter)
    return [guess('meter', map.meter, [[meters.includes(map.meter), `One of ${meters.length} in the file`]])];
  return [
    guess('meter', meters.slice(0, 8).join(', '), [
      [meters.length === 1, meters.length === 1 ? 'One meter throughout' : `${meters.length} meters in one file`],
    ]),
  ];
}

/** Names of the meters the rows speak of, at most 200. */
function metersOf(grid: Grid, block: TableBlock, columns: readonly ColumnUse[]): string[] {
  const column = columnOf(columns, 'meter');
  const timeColumn =
    columns.find((use) => use.role === 'stamp' || use.role === 'stamp-begin' || use.role === 'date')?.index ?? -1;
  if (column < 0) return [];
  const meters = new Set<string>();
  for (let row = block.firstRow; row <= block.lastRow && meters.size < 200; row += 1) {
    const meter = grid.text(row, column);
    if (meter !== '' && (timeColumn < 0 || grid.text(row, timeColumn) !== '')) meters.add(meter);
  }
  return [...meters];
}

/**
 * The readings of a planned table with their places in time.
 * @throws {IntakeError} naming every reason why they cannot be read.
 */
export function placePlanned(
  planned: IntervalPlan,
  options: ReadOptions,
): { placed: PlacedStrand[]; extraction: Extraction } {
  checkMeters(planned, options);
  checkColumns(planned, options);
  const { plan } = planned;
  const extraction = plan.layout === 'wide' ? extractWide(plan) : extractLong(plan);
  checkExtraction(extraction, options);
  const strands = extraction.strands.filter((strand) => strand.rows.length > 0);
  const isRegister = strands.every((strand) => strand.channels.every((channel) => channel.measure === 'register'));
  const given = options.columnMap?.stamp ?? {};
  const placed = strands.map((strand) => ({
    strand,
    timeline: timelineOf(strand, {
      timeZone: options.timeZone,
      fileName: options.fileName,
      style: plan.hints,
      given,
      isRegister,
      isWide: plan.layout === 'wide',
    }),
  }));
  return { placed, extraction };
}

/**
 * Reads a planned table into a load.
 * @throws {IntakeError} naming every reason why it cannot be read.
 */
export function readPlanned(planned: IntervalPlan, options: ReadOptions): IntervalReading & { guesses: Guess[] } {
  const { placed, extraction } = placePlanned(planned, options);
  const notes = [...planned.notes, ...extraction.notes, ...assumptions(planned)];
  const { opened } = planned;
  const first = placed[0]?.timeline;
  const columnMap: ColumnMap = { ...planned.columnMap, stamp: { ...planned.columnMap.stamp, ...first?.style } };
  const { load, report } = assemble(placed, {
    format: opened.format,
    fileName: options.fileName,
    rowsRead: extraction.rowsRead,
    rows: opened.grid,
    notes,
    columnMap,
  });
  return { load, report, guesses: first?.guesses ?? [] };
}

/** Units nobody named and multipliers nobody applied. */
function assumptions(planned: IntervalPlan): IntakeNote[] {
  const notes: IntakeNote[] = openNotes(planned.guesses, planned.opened);
  const senseless = planned.plan.columns.filter(
    (use) => use.role === 'reactive-lagging' && channelMeaning(use.name).role === 'reactive-signed',
  );
  if (senseless.length > 0)
    notes.push({
      code: 'reactive-sense',
      message: `${senseless.map((use) => use.name).join(', ')} names no sense and has no negative figure: it is taken as lagging.`,
    });
  const doubtful = planned.plan.columns.filter(
    (use) =>
      valueRoles.has(use.role) && use.measure === 'power' && isContradictory(use.name, unitMeaning(use.unit ?? '')),
  );
  if (doubtful.length > 0)
    notes.push({
      code: 'unit-doubtful',
      message: `${doubtful.map((use) => use.name).join(', ')}: the name speaks of energy and the unit is one of power; the figures are read as average power.`,
    });
  const isExplained = planned.plan.columns.some((use) => use.role === 'unit' || use.role === 'channel');
  const assumed = planned.evidence.filter((line) => line.isUnitAssumed && line.takenAs !== 'ignore');
  if (assumed.length > 0 && !isExplained) {
    const units = [...new Set(assumed.map((line) => line.unit))].join(' and ');
    notes.push({
      code: 'unit-assumed',
      message: `No unit is named in the file: the figures are taken as ${units} per interval.`,
      where: assumed.map((line) => `column ${line.letter}`).join(', '),
    });
  }
  const multiplier = preambleMultiplier(planned.opened.grid, planned.block);
  const factor = planned.plan.columns.find((use) => use.factor !== undefined)?.factor;
  if (multiplier)
    notes.push(
      factor === undefined
        ? {
            code: 'multiplier-mentioned',
            message: `The file mentions a multiplier (${multiplier.words}); the figures are taken as printed, not multiplied.`,
          }
        : {
            code: 'multiplier-applied',
            message: `The figures are multiplied by ${factor}: the file mentions a multiplier (${multiplier.words}).`,
          },
    );
  return notes;
}
