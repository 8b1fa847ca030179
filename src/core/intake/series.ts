import { intakeError } from './errors';
import type { Grid } from './grid';
import { layStrand } from './lay-strand';
import { joinSteps } from './steps';
import type { Strand } from './strand';
import type { Timeline } from './timeline';
import type { IntervalRole } from './column-map';
import type { IntakeNote } from './types';

const mostIntervals = 1_200_000;

/** What tells the number of a row in the file. */
export type RowNumbers = Pick<Grid, 'rowNumber'>;

/** A strand with its place in time. */
export interface PlacedStrand {
  strand: Strand;
  timeline: Timeline;
}

/** Channels on one regular grid of time, before they become a load. */
export interface GriddedChannels {
  startMs: number;
  stepMinutes: number;
  length: number;
  /** Figures by role, kWh, kvarh, kVAh or a ratio per interval; NaN where missing. */
  channels: Map<IntervalRole, Float64Array>;
  quality: Uint8Array;
  duplicates: number;
  /** How often a register falls. */
  falls: number;
  notes: IntakeNote[];
}

/** Instants that a reading may name: 1970, by any clock, to the end of 2216. [min] */
const isPlaceable = (minute: number): boolean => minute >= -1440 && minute < 1.3e8;

/**
 * Lays strands on one regular grid. The first reading of an interval is kept, later ones are duplicates; readings off the
 * grid are left out.
 * @throws {IntakeError} if many readings are off the grid or the span is out of proportion.
 */
export function gridChannels(
  given: readonly PlacedStrand[],
  { rows: grid, fileName, isTable }: { rows: RowNumbers; fileName: string; isTable: boolean },
): GriddedChannels {
  const notes: IntakeNote[] = [];
  const placed = joinSteps(given, notes);
  const stepMinutes = placed[0]?.timeline.stepMinutes ?? Number.NaN;
  const phase = phaseOf(placed, stepMinutes);
  const { least, most, readings, offGrid } = surveyOf(placed, phase, stepMinutes);
  const length = (most - least) / stepMinutes + 1;
  checkSpan({ readings, length, offGrid, least, most, grid, fileName, stepMinutes });
  if (offGrid.length > 0) {
    notes.push({
      code: 'off-grid',
      message: `${offGrid.length} readings do not lie on the ${stepMinutes}-minute grid and are left out.`,
      where: rowsInWords(grid, offGrid),
    });
  }
  const gridded: GriddedChannels = {
    startMs: least * 60_000,
    stepMinutes,
    length,
    channels: new Map(),
    quality: new Uint8Array(length),
    duplicates: 0,
    falls: 0,
    notes,
  };
  const differing: number[] = [];
  for (const one of placed) layStrand(one, least, gridded, differing);
  noteDiffering({ differing, readings, grid, fileName, notes, isTable });
  return placed.every(isInstants) ? withoutLast(gridded) : gridded;
}

/** Registers alone, read at instants: the last reading only ends an interval. */
const isInstants = ({ strand, timeline }: PlacedStrand): boolean =>
  timeline.style.marks !== 'end' &&
  timeline.style.marks !== 'own-day-end' &&
  strand.channels.every((channel) => channel.measure === 'register');

function withoutLast(gridded: GriddedChannels): GriddedChannels {
  const length = Math.max(0, gridded.length - 1);
  const channels = new Map([...gridded.channels].map(([role, figures]) => [role, figures.subarray(0, length)]));
  return { ...gridded, length, channels, quality: gridded.quality.subarray(0, length) };
}

interface Survey {
  least: number;
  most: number;
  readings: number;
  /** Rows of readings off the grid. */
  offGrid: number[];
}

function surveyOf(placed: readonly PlacedStrand[], phase: number, stepMinutes: number): Survey {
  const survey: Survey = { least: Infinity, most: -Infinity, readings: 0, offGrid: [] };
  for (const { strand, timeline } of placed) {
    const { utc } = timeline;
    for (let at = 0; at < utc.length; at += 1) {
      const minute = utc[at] ?? Number.NaN;
      if (!isPlaceable(minute)) continue;
      survey.readings += 1;
      if (!Number.isInteger((minute - phase) / stepMinutes)) survey.offGrid.push(strand.rows[at] ?? 0);
      else {
        if (minute < survey.least) survey.least = minute;
        if (minute > survey.most) survey.most = minute;
      }
    }
  }
  return survey;
}

/**
 * Readings that contradict the first of their interval are noted. In a table many of them mean several meters or channels;
 * formats that name their channels have none to mistake.
 */
function noteDiffering(found: {
  differing: number[];
  readings: number;
  grid: RowNumbers;
  fileName: string;
  notes: IntakeNote[];
  isTable: boolean;
}): void {
  const { differing, readings, grid, fileName, notes, isTable } = found;
  if (isTable && differing.length > Math.max(12, readings * 0.35)) {
    throw intakeError(
      `${differing.length} of ${readings} readings name an interval that another reading fills with another figure.`,
      `${fileName}, ${rowsInWords(grid, differing)}`,
      'The file may hold several meters or channels: say in the column map which column names them, and pick one.',
    );
  }
  if (differing.length === 0) return;
  notes.push({
    code: 'duplicates-differ',
    message: `${differing.length} repeated readings differ from the first of their interval; the first is kept.`,
    where: rowsInWords(grid, differing),
  });
}

/** Rows in words, at most six of them. */
function rowsInWords(grid: RowNumbers, rows: readonly number[]): string {
  const shown = rows.slice(0, 6).map((row) => grid.rowNumber(row));
  return `${rows.length === 1 ? 'row' : 'rows'} ${shown.join(', ')}${rows.length > 6 ? ' …' : ''}`;
}

function isOnGrid(utc: Float64Array, first: number, stepMinutes: number): boolean {
  for (let at = 0; at < utc.length; at += 1) {
    const minute = utc[at] ?? Number.NaN;
    if (!Number.isNaN(minute) && !Number.isInteger((minute - first) / stepMinutes)) return false;
  }
  return true;
}

/** Minutes after a multiple of the step at which most readings begin. */
function phaseOf(placed: readonly PlacedStrand[], stepMinutes: number): number {
  const first = placed[0]?.timeline.utc.find((minute) => !Number.isNaN(minute)) ?? 0;
  const isRegular = placed.every(({ timeline }) => isOnGrid(timeline.utc, first, stepMinutes));
  if (isRegular) return first % stepMinutes;
  const counts = new Map<number, number>();
  for (const { timeline } of placed) {
    for (const minute of timeline.utc) {
      const phase = minute % stepMinutes;
      if (!Number.isNaN(phase)) counts.set(phase, (counts.get(phase) ?? 0) + 1);
    }
  }
  const [best] = [...counts].sort((a, b) => b[1] - a[1]);
  return best?.[0] ?? 0;
}

function checkSpan(span: {
  readings: number;
  length: number;
  offGrid: number[];
  least: number;
  most: number;
  grid: RowNumbers;
  fileName: string;
  stepMinutes: number;
}): void {
  const { readings, length, offGrid, grid, fileName } = span;
  if (!Number.isFinite(length) || readings === 0) {
    throw intakeError(
      'No reading could be placed in time.',
      fileName,
      'Check the columns of date and time in the column map.',
    );
  }
  if (offGrid.length > Math.max(4, readings * 0.005)) {
    throw intakeError(
      `${offGrid.length} of ${readings} readings do not lie on a regular ${span.stepMinutes}-minute grid.`,
      `${fileName}, ${rowsInWords(grid, offGrid)}`,
      'Bring in a regular export, or split the file where the length of its intervals changes.',
    );
  }
  const years = (day: number): string => new Date(day * 60_000).toISOString().slice(0, 10);
  if (length > mostIntervals || (length > 5000 && length > readings * 20)) {
    throw intakeError(
      `The stamps run from ${years(span.least)} to ${years(span.most)}, but only ${readings} of ${length} intervals have a reading.`,
      fileName,
      'Check the order of day, month and year in the column map, and rows with a wrong year.',
    );
  }
}
