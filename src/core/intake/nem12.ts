import { quality as grades, stepLengthsMinutes } from '../load';
import { assemble } from './assemble';
import { splitDelimited } from './csv';
import { IntakeError, intakeError } from './errors';
import { columnLetter, type Grid } from './grid';
import type { PlacedStrand } from './series';
import { StampScanner } from './stamps';
import type { ColumnMap, IntervalRole } from './column-map';
import type { ColumnEvidence, IntakeNote, IntakeProblem, IntervalReading, ReadOptions } from './types';
import { scaled, unitMeaning, type UnitMeaning } from './units';

// Meter data file format of the Australian market (AEMO, MDFF specification, NEM12): 200 names a stream, 300 holds a day of
// it, 400 the quality of parts of a day. Market time is UTC+10 all year and values name the end of their interval.
const marketOffsetMinutes = 600;

const suffixRoles = new Map<string, IntervalRole>([
  ['E', 'active'],
  ['B', 'export'],
  ['Q', 'reactive-lagging'],
  ['K', 'reactive-leading'],
]);

/** A day of a stream as its 300 record gives it. */
interface StreamDay {
  row: number;
  day: number;
  stepMinutes: number;
  figures: number[];
  marks: Uint8Array;
}

/** A stream: one channel of one meter. */
interface NemStream {
  nmi: string;
  suffix: string;
  unitText: string;
  role: IntervalRole;
  unit: UnitMeaning | null;
  days: StreamDay[];
}

/** A NEM12 file taken apart. */
export interface NemFile {
  grid: Grid;
  streams: NemStream[];
  notes: IntakeNote[];
}

/**
 * Takes a NEM12 file apart.
 * @throws {IntakeError} for accumulation data (NEM13) and for records that break the format, by their rows.
 */
export function parseNem12(text: string, fileName: string): NemFile {
  const grid = splitDelimited(text, ',', fileName);
  const streams: NemStream[] = [];
  const problems: IntakeProblem[] = [];
  let stream: NemStream | null = null;
  let stepMinutes = Number.NaN;
  let isEnded = false;
  for (let row = 0; row < grid.rows; row += 1) {
    const record = grid.text(row, 0);
    const where = `${fileName}, row ${grid.rowNumber(row)}`;
    if (record === '250' || record === '550' || (record === '100' && grid.text(row, 1) === 'NEM13')) {
      throw intakeError(
        'The file is NEM13: accumulated readings, not intervals.',
        where,
        'Ask for the interval data (NEM12) of the meter.',
      );
    }
    if (record === '900') isEnded = true;
    if (record === '200') {
      stream = streamOf(grid, row, streams);
      stepMinutes = announcedStep(grid.text(row, 8), stream);
    } else if (record === '300') {
      // What a stream that is left out holds need not fit.
      if (stream?.role === 'ignore') continue;
      const day = stream ? dayOf(grid, row, stepMinutes) : 'A day stands before any stream is named.';
      if (typeof day === 'string')
        problems.push({ message: day, where, remedy: 'Ask the sender for an unbroken file.' });
      else stream?.days.push(day);
    } else if (record === '400') {
      const day = stream?.days.at(-1);
      if (day) markRange(grid, row, day);
    }
  }
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
  const notes = isEnded
    ? []
    : [{ code: 'no-end-record', message: 'The file has no end record (900): it may have been cut off.' }];
  return { grid, streams, notes };
}

function streamOf(grid: Grid, row: number, streams: NemStream[]): NemStream {
  const [nmi, suffix, unitText] = [grid.text(row, 1), grid.text(row, 4).toUpperCase(), grid.text(row, 7)];
  const known = streams.find((one) => one.nmi === nmi && one.suffix === suffix && one.unitText === unitText);
  if (known) return known;
  const unit = unitMeaning(unitText);
  const stream: NemStream = { nmi, suffix, unitText, role: roleOf(suffix, unit), unit, days: [] };
  streams.push(stream);
  return stream;
}

/** Length of the intervals a 200 record announces, else that of the days of the stream before it; NaN if neither tells. */
function announcedStep(text: string, stream: NemStream): number {
  const announced = Number(text);
  const isKnown = stepLengthsMinutes.some((length) => length === announced);
  return isKnown ? announced : (stream.days.at(-1)?.stepMinutes ?? Number.NaN);
}

/** E is drawn, B delivered, Q goes with E (lagging), K with B (leading); voltage and the like are left out. */
function roleOf(suffix: string, unit: UnitMeaning | null): IntervalRole {
  const role = suffixRoles.get(suffix.charAt(0)) ?? 'ignore';
  const fits = unit?.measure === 'energy' && unit.quantity === (role.startsWith('reactive') ? 'reactive' : 'active');
  return fits ? role : 'ignore';
}

/** The day of a 300 record, or what is wrong with it. */
function dayOf(grid: Grid, row: number, stepMinutes: number): StreamDay | string {
  const scanner = new StampScanner();
  if (!grid.scan(row, 1, scanner) || !scanner.resolve('YMD')) return `“${grid.text(row, 1)}” is no date.`;
  const day = scanner.day;
  let qualityAt = 2;
  while (qualityAt < grid.width(row) && !/^[AEFNSV]\d{0,2}$/i.test(grid.text(row, qualityAt))) qualityAt += 1;
  const count = qualityAt - 2;
  const method = grid.text(row, qualityAt).toUpperCase();
  if (count === 0) return emptyDay(row, day, stepMinutes);
  const actualStep = 1440 / count;
  if (method === '' || !stepLengthsMinutes.some((length) => length === actualStep)) {
    const announced = Number.isNaN(stepMinutes)
      ? ''
      : `; ${1440 / stepMinutes} of ${stepMinutes} minutes were announced`;
    return `The day has ${count} values${announced}.`;
  }
  const figures = Array.from({ length: count }, (_, at) => grid.number(row, at + 2, '.'));
  const bad = figures.findIndex((figure, at) => Number.isNaN(figure) && grid.text(row, at + 2) !== '');
  if (bad >= 0) return `“${grid.text(row, bad + 2)}” in column ${columnLetter(bad + 2)} is no figure.`;
  return { row, day, stepMinutes: actualStep, figures, marks: new Uint8Array(count).fill(gradeOf(method)) };
}

/** A day without values is missing, whatever its 400 records say. */
function emptyDay(row: number, day: number, stepMinutes: number): StreamDay | string {
  if (Number.isNaN(stepMinutes)) return 'The day has no values, and no length of interval is announced for it.';
  const count = 1440 / stepMinutes;
  return {
    row,
    day,
    stepMinutes,
    figures: new Array<number>(count).fill(Number.NaN),
    marks: new Uint8Array(count).fill(grades.missing),
  };
}

/** A measured; E, F and S with their methods estimated; N missing; V is settled by the 400 records that follow. */
function gradeOf(method: string): number {
  if (method.startsWith('N')) return grades.missing;
  return /^[EFS]/.test(method) ? grades.estimated : grades.measured;
}

function markRange(grid: Grid, row: number, day: StreamDay): void {
  const [from, to] = [Number(grid.text(row, 1)), Number(grid.text(row, 2))];
  if (!Number.isInteger(from) || !Number.isInteger(to)) return;
  day.marks.fill(gradeOf(grid.text(row, 3).toUpperCase()), Math.max(0, from - 1), Math.max(0, to));
}

/** Meters of the file. */
export function metersOfNem(file: NemFile): string[] {
  return [...new Set(file.streams.map((stream) => stream.nmi))];
}

/** Evidence: a line a stream. */
export function evidenceOfNem(file: NemFile): ColumnEvidence[] {
  return file.streams.map((stream, index) => ({
    index,
    span: 1,
    letter: stream.suffix,
    name: `${stream.nmi} ${stream.suffix}`,
    values: `${stream.days.length} days`,
    takenAs: stream.role,
    unit: stream.unitText,
    ...(stream.unit ? { measure: stream.unit.measure } : {}),
    why:
      stream.role === 'ignore'
        ? `${stream.suffix} in ${stream.unitText || 'no unit'} is no energy the load needs`
        : `The format gives ${stream.suffix} this meaning`,
    testsMet: 1,
    testsTotal: 1,
    sure: true,
  }));
}

/**
 * The streams of one meter that make its load.
 * @throws {IntakeError} listing the meters if there are several and the map picks none.
 */
function chooseStreams(file: NemFile, options: ReadOptions): { meter: string; used: NemStream[]; left: string[] } {
  const meters = metersOfNem(file);
  const meter = options.columnMap?.meter ?? (meters.length === 1 ? meters[0] : undefined);
  if (meters.length === 0)
    throw intakeError(
      'The file names no stream (no 200 record).',
      options.fileName,
      'Ask the sender for an unbroken NEM12 file.',
    );
  if (meter === undefined || !meters.includes(meter)) {
    throw intakeError(
      `The file holds ${meters.length} meters: ${meters.slice(0, 20).join(', ')}.`,
      options.fileName,
      'Pick one of them in the column map.',
    );
  }
  const own = file.streams.filter((stream) => stream.nmi === meter);
  const used = own.filter((stream) => stream.role !== 'ignore' && stream.days.length > 0);
  if (used.length === 0)
    throw intakeError(
      `The meter ${meter} has no stream of energy.`,
      options.fileName,
      'Ask for the streams E, Q and K of the meter.',
    );
  return { meter, used, left: own.filter((stream) => stream.role === 'ignore').map((stream) => stream.suffix) };
}

/** The readings of one meter with their places in time. */
export const placeNem12 = (file: NemFile, options: ReadOptions): PlacedStrand[] =>
  chooseStreams(file, options).used.flatMap(placedOf);

/**
 * Reads the load of one meter of a NEM12 file.
 * @throws {IntakeError} listing the meters if there are several and the map picks none.
 */
export function readNem12(file: NemFile, options: ReadOptions): IntervalReading {
  const { meter, used, left } = chooseStreams(file, options);
  const notes: IntakeNote[] = [
    ...file.notes,
    { code: 'market-time', message: 'Dates are market time, UTC+10 all year, whatever the zone of the site.' },
  ];
  if (left.length > 0)
    notes.push({ code: 'channel-left-out', message: `Streams that hold no energy are left out: ${left.join(', ')}.` });
  const rowsRead = used.reduce((sum, stream) => sum + stream.days.length, 0);
  const columnMap: ColumnMap = { kind: 'intervals', meter };
  return assemble(used.flatMap(placedOf), {
    format: 'nem12',
    fileName: options.fileName,
    rowsRead,
    rows: file.grid,
    notes,
    columnMap,
  });
}

/** A stream by length of interval: it may change from one 200 record to the next. */
function placedOf(stream: NemStream): PlacedStrand[] {
  const steps = [...new Set(stream.days.map((day) => day.stepMinutes))];
  return steps.map((stepMinutes) => {
    const days = stream.days.filter((day) => day.stepMinutes === stepMinutes);
    const perDay = 1440 / stepMinutes;
    const factor = stream.unit?.factor ?? 1;
    const values = Float64Array.from({ length: days.length * perDay }, (_, at) =>
      scaled(days[Math.floor(at / perDay)]?.figures[at % perDay] ?? Number.NaN, factor),
    );
    const utc = values.map(
      (_figure, at) =>
        (days[Math.floor(at / perDay)]?.day ?? 0) * 1440 + (at % perDay) * stepMinutes - marketOffsetMinutes,
    );
    return {
      strand: {
        walls: utc,
        offsets: null,
        spans: null,
        days: null,
        rows: Uint32Array.from(values, (_figure, at) => days[Math.floor(at / perDay)]?.row ?? 0),
        channels: [{ role: stream.role, measure: 'energy', name: stream.suffix, values }],
        quality: Uint8Array.from(
          values,
          (_figure, at) => days[Math.floor(at / perDay)]?.marks[at % perDay] ?? grades.missing,
        ),
        isTurned: false,
      },
      timeline: { stepMinutes, style: { clock: 'offset' }, utc, notes: [], guesses: [] },
    };
  });
}
