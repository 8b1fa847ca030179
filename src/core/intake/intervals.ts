import { quality as grades, type LoadSeries } from '../load';
import { findBlock, type TableBlock } from './block';
import { detectColumns, type IntervalDetection } from './detect';
import { intakeError, IntakeError } from './errors';
import { guess } from './evidence';
import { columnOf, extractLong, valueRoles, type ColumnPlan, type Extraction } from './extract';
import { extractWide } from './extract-wide';
import { delimiterGuesses } from './guesses';
import { foldRuns, mergeColumns, mergeEvidence } from './merge-map';
import type { OpenedTable } from './open';
import { preambleMultiplier } from './preamble';
import { differenceRegisters, gridChannels, loadOf } from './series';
import { timelineOf } from './timeline';
import type {
  ColumnEvidence,
  ColumnMap,
  ColumnUse,
  Guess,
  IntakeGap,
  IntakeNote,
  IntakeReport,
  IntervalReading,
  ReadOptions,
} from './types';
import { mentions } from './words';

/** A table of intervals with its meaning settled. */
export interface IntervalPlan {
  opened: OpenedTable;
  block: TableBlock;
  plan: ColumnPlan;
  columnMap: ColumnMap;
  evidence: ColumnEvidence[];
  guesses: Guess[];
  meters: string[];
}

/**
 * Settles the meaning of a table of intervals: detection first, the column map over it.
 * @throws {IntakeError} if no table is found or the map does not fit it.
 */
export function planIntervals(opened: OpenedTable, options: ReadOptions): IntervalPlan {
  const map: Partial<ColumnMap> = options.columnMap ?? {};
  const { grid, dialect } = opened;
  const block = findBlock(grid, options.fileName, map, 'readings');
  const detection = detectColumns(grid, block, {
    timeZone: options.timeZone,
    map,
    ...(dialect.delimiter ? { delimiter: dialect.delimiter } : {}),
  });
  const columns = mergeColumns(detection.columns, map, block, options.fileName);
  const stamp = { ...detection.stamp, ...map.stamp };
  const meters = metersOf(opened, block, columns);
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
function metersOf(opened: OpenedTable, block: TableBlock, columns: readonly ColumnUse[]): string[] {
  const column = columnOf(columns, 'meter');
  const timeColumn =
    columns.find((use) => use.role === 'stamp' || use.role === 'stamp-begin' || use.role === 'date')?.index ?? -1;
  if (column < 0) return [];
  const meters = new Set<string>();
  for (let row = block.firstRow; row <= block.lastRow && meters.size < 200; row += 1) {
    const meter = opened.grid.text(row, column);
    if (meter !== '' && (timeColumn < 0 || opened.grid.text(row, timeColumn) !== '')) meters.add(meter);
  }
  return [...meters];
}

/**
 * Reads a planned table into a load.
 * @throws {IntakeError} naming every reason why it cannot be read.
 */
export function readPlanned(planned: IntervalPlan, options: ReadOptions): IntervalReading & { guesses: Guess[] } {
  checkMeters(planned, options);
  checkColumns(planned, options);
  const { plan, opened } = planned;
  const extraction = plan.layout === 'wide' ? extractWide(plan) : extractLong(plan);
  checkExtraction(extraction, options);
  const notes = [...extraction.notes, ...assumptions(planned)];
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
    }),
  }));
  const gridded = gridChannels(placed, opened.grid, options.fileName);
  const { load, notes: loadNotes, negative } = loadOf(isRegister ? differenceRegisters(gridded) : gridded);
  const first = placed[0]?.timeline;
  notes.push(...uniqueNotes(placed.flatMap(({ timeline }) => timeline.notes)), ...loadNotes);
  const columnMap: ColumnMap = { ...planned.columnMap, stamp: { ...planned.columnMap.stamp, ...first?.style } };
  const report = {
    ...reportOf(load, { format: opened.format, rowsRead: extraction.rowsRead, duplicates: gridded.duplicates, notes }),
    negative,
    columnMap,
  };
  return { load, report, guesses: first?.guesses ?? [] };
}

function uniqueNotes(notes: IntakeNote[]): IntakeNote[] {
  return notes.filter(
    (note, at) =>
      notes.findIndex(
        (other) => other.code === note.code && other.where === note.where && other.message === note.message,
      ) === at,
  );
}

/** Several meters cannot be one load: the file's are listed for the person to pick. */
function checkMeters(planned: IntervalPlan, options: ReadOptions): void {
  const { meters, plan } = planned;
  if (meters.length > 1 && plan.meter === undefined) {
    throw intakeError(
      `The file holds ${meters.length} meters: ${meters.slice(0, 20).join(', ')}${meters.length > 20 ? ' …' : ''}.`,
      options.fileName,
      'Pick one of them in the column map, then bring the file in again for the next.',
    );
  }
  if (plan.meter !== undefined && meters.length > 0 && !meters.includes(plan.meter)) {
    throw intakeError(
      `The column map picks the meter “${plan.meter}”, which the file does not have.`,
      `${options.fileName}, meters: ${meters.slice(0, 20).join(', ')}`,
      'Pick one of the meters in the file.',
    );
  }
}

function checkColumns(planned: IntervalPlan, options: ReadOptions): void {
  const { plan, columnMap } = planned;
  const isTimed = plan.columns.some((use) => ['stamp', 'stamp-begin', 'stamp-end', 'date'].includes(use.role));
  const where = `${options.fileName}, columns: ${plan.columns
    .map((use) => use.name || String(use.index + 1))
    .slice(0, 12)
    .join(', ')}`;
  if (!isTimed)
    throw intakeError(
      'No column holds the date and time of the readings.',
      where,
      'Say in the column map which column is the stamp, or which are date and time.',
    );
  if (plan.columns.some((use) => use.role === 'day-value' || use.role === 'value')) return;
  const active = plan.columns.filter((use) => use.role === 'active');
  if (!plan.columns.some((use) => valueRoles.has(use.role) && use.role !== 'export' && use.role !== 'power-factor')) {
    throw intakeError(
      'No column holds energy or power.',
      where,
      'Say in the column map which column is the energy drawn, and in which unit.',
    );
  }
  const isConfirmed =
    (options.columnMap?.columns ?? []).filter((use) => use.role === 'active').length === active.length;
  const isTou = active.every((use) => mentions(use.name, 'touRegister'));
  if (active.length > 1 && !isConfirmed && !isTou && columnMap.meter === undefined) {
    throw intakeError(
      `${active.length} columns may each be the energy drawn: ${active
        .map((use) => use.name || `column ${use.index + 1}`)
        .slice(0, 20)
        .join(', ')}. They may be several meters, or registers of one.`,
      options.fileName,
      'In the column map ignore all but one; or keep several as energy drawn, and they are added.',
    );
  }
}

function checkExtraction(extraction: Extraction, options: ReadOptions): void {
  const readings = extraction.strands.reduce((sum, strand) => sum + strand.rows.length, 0);
  const problems = [];
  const list = (found: { place: string; text: string }[]): string =>
    found
      .slice(0, 5)
      .map(({ place, text }) => `${place}: “${text.slice(0, 40)}”`)
      .join('; ');
  const { badStamps, badValues, notes } = extraction;
  if (badStamps.length > Math.max(2, readings * 0.01)) {
    problems.push({
      message: `${badStamps.length} rows have a stamp that cannot be read as a date and time.`,
      where: `${options.fileName}, ${list(badStamps)}`,
      remedy: 'Check which columns are date and time and the order of day, month and year in the column map.',
    });
  } else if (badStamps.length > 0)
    notes.push({
      code: 'stamp-unreadable',
      message: `${badStamps.length} rows without a readable stamp are left out.`,
      where: list(badStamps),
    });
  if (badValues.length > Math.max(2, readings * 0.01)) {
    problems.push({
      message: `${badValues.length} cells that should hold figures hold words.`,
      where: `${options.fileName}, ${list(badValues)}`,
      remedy: 'Check which columns hold figures and the decimal mark in the column map.',
    });
  } else if (badValues.length > 0)
    notes.push({
      code: 'value-unreadable',
      message: `${badValues.length} cells hold no figure and count as missing.`,
      where: list(badValues),
    });
  if (readings === 0 && problems.length === 0)
    problems.push({
      message: 'The table holds no reading.',
      where: options.fileName,
      remedy: 'Check the first row of data and the columns in the column map.',
    });
  if (problems.length > 0) throw new IntakeError(problems);
}

/** Units nobody named and multipliers nobody applied. */
function assumptions(planned: IntervalPlan): IntakeNote[] {
  const notes: IntakeNote[] = [];
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
  if (multiplier !== '')
    notes.push({
      code: 'multiplier-mentioned',
      message: `The file mentions a multiplier (${multiplier}); the figures are taken as printed, not multiplied.`,
    });
  return notes;
}

/** The report of a load. */
export function reportOf(
  load: LoadSeries,
  found: Pick<IntakeReport, 'format' | 'rowsRead' | 'duplicates' | 'notes'>,
): IntakeReport {
  const hours = load.stepMinutes / 60;
  const stepMs = load.stepMinutes * 60_000;
  let missing = 0;
  let estimated = 0;
  let peakAt = -1;
  const gaps: IntakeGap[] = [];
  for (let slot = 0; slot < load.kwh.length; slot += 1) {
    const grade = load.quality[slot];
    if (grade === grades.estimated) estimated += 1;
    if (grade === grades.missing) {
      missing += 1;
      const fromMs = load.startMs + slot * stepMs;
      const open = gaps.at(-1);
      if (open?.toMs === fromMs) {
        open.toMs += stepMs;
        open.intervals += 1;
      } else gaps.push({ fromMs, toMs: fromMs + stepMs, intervals: 1 });
    } else if ((load.kwh[slot] ?? Number.NaN) > (peakAt < 0 ? -1 : (load.kwh[peakAt] ?? 0))) peakAt = slot;
  }
  const maxKw = peakAt < 0 ? Number.NaN : (load.kwh[peakAt] ?? 0) / hours;
  return {
    ...found,
    intervals: load.kwh.length,
    missing,
    estimated,
    firstMs: load.startMs,
    lastMs: load.startMs + (load.kwh.length - 1) * stepMs,
    totalKwh: total(load.kwh),
    totalKvarhLagging: total(load.kvarhLagging),
    totalKvarhLeading: total(load.kvarhLeading),
    maxKw,
    gaps,
    stepMinutes: load.stepMinutes,
    ...(peakAt < 0 ? {} : { peak: { ms: load.startMs + peakAt * stepMs, kw: maxKw } }),
  };
}

/** Sum of the figures that are there; NaN if none is. */
function total(figures: Float64Array): number {
  let sum = 0;
  let count = 0;
  for (const figure of figures) {
    if (Number.isNaN(figure)) continue;
    sum += figure;
    count += 1;
  }
  return count === 0 ? Number.NaN : sum;
}

export type { IntervalDetection };
