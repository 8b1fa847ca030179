import { quality as grades, stepLengthsMinutes } from '../load';
import { assemble } from './assemble';
import { IntakeError, intakeError } from './errors';
import type { EspiChannel } from './espi-channels';
import type { EspiFeed } from './espi-feed';
import { notesOnLocalTime } from './espi-times';
import { findStep } from './marks';
import type { PlacedStrand } from './series';
import type { ColumnMap } from './column-map';
import type { ColumnEvidence, IntakeNote, IntervalReading, ReadOptions } from './types';
import { scaled } from './units';

/** Evidence: a line a meter reading. */
export function evidenceOfEspi(channels: readonly EspiChannel[]): ColumnEvidence[] {
  return channels.map((channel, index) => ({
    index,
    span: 1,
    letter: String(index + 1),
    name: channel.name,
    values: `${channel.values.length} readings`,
    takenAs: channel.role,
    unit: channel.unit,
    measure: channel.measure,
    why: channel.why,
    testsMet: channel.sure ? 1 : 0,
    testsTotal: 1,
    sure: channel.sure,
  }));
}

/** The complete map a feed is read with. */
export function mapOfEspi(channels: readonly EspiChannel[], meter: string | undefined): ColumnMap {
  const columns = channels.map(({ name, role, unit, measure }, index) => ({
    index,
    name,
    role,
    ...(unit === '' ? {} : { unit, measure }),
  }));
  return { kind: 'intervals', columns, ...(meter === undefined ? {} : { meter }) };
}

/** Meters with channels of energy. */
export function metersOfEspi(channels: readonly EspiChannel[]): string[] {
  const telling = channels.filter((channel) => channel.role !== 'ignore' && channel.role !== 'power-factor');
  return [...new Set(telling.map((channel) => channel.meter))];
}

const rank = { energy: 0, register: 1, power: 2 };

/**
 * Channels of a meter that make its load. Where several tell the same role, energies per interval go before registers and
 * those before power: counted together they would count twice.
 */
function usedChannels(channels: readonly EspiChannel[], meter: string): EspiChannel[] {
  const own = channels.filter(
    (channel) => channel.meter === meter && channel.role !== 'ignore' && channel.values.length > 0,
  );
  return own.filter(
    (channel) => !own.some((other) => other.role === channel.role && rank[other.measure] < rank[channel.measure]),
  );
}

/** The channels that are read, and what is to be said about the choice. */
export interface EspiChoice {
  meter: string;
  used: EspiChannel[];
  notes: IntakeNote[];
}

/**
 * Chooses the channels of one meter.
 * @throws {IntakeError} if no channel holds energy, a unit is unknown, or several meters are there and none is picked.
 */
function chooseChannels(channels: readonly EspiChannel[], options: ReadOptions): EspiChoice {
  const meters = metersOfEspi(channels);
  const meter = options.columnMap?.meter ?? (meters.length === 1 ? meters[0] : undefined);
  if (meters.length === 0)
    throw new IntakeError(
      channels.length === 0
        ? [noReadings(options)]
        : channels.slice(0, 20).map((channel) => unknownUnit(channel, options)),
    );
  if (meter === undefined || !meters.includes(meter)) {
    throw intakeError(
      `The feed holds ${meters.length} meters: ${meters.slice(0, 20).join(', ')}.`,
      options.fileName,
      'Pick one of them in the column map.',
    );
  }
  const used = usedChannels(channels, meter);
  const left = channels
    .filter((channel) => !used.includes(channel))
    .map((channel) => `${channel.name} (${channel.why})`);
  const notes: IntakeNote[] =
    left.length === 0 ? [] : [{ code: 'channel-left-out', message: `Left out: ${left.slice(0, 8).join('; ')}.` }];
  if (used.some((channel) => channel.role === 'reactive-lagging' && !/direction (2|15|5)$/.test(channel.why))) {
    notes.push({
      code: 'reactive-sense',
      message: 'A reactive channel has no sense in its type: it is taken as lagging.',
    });
  }
  return { meter, used, notes };
}

/** The readings of one meter with their places in time, and how they were chosen. */
export function placeEspi(
  channels: readonly EspiChannel[],
  options: ReadOptions,
): { placed: PlacedStrand[]; choice: EspiChoice } {
  const choice = chooseChannels(channels, options);
  return { placed: choice.used.flatMap((channel) => placedOf(channel, options, choice.notes)), choice };
}

/**
 * Reads the load of one meter of an ESPI feed. Times are UTC seconds and name beginnings.
 * @throws {IntakeError} if no channel holds energy, a unit is unknown, or several meters are there and none is picked.
 */
export function readEspi(feed: EspiFeed, channels: readonly EspiChannel[], options: ReadOptions): IntervalReading {
  const { placed, choice } = placeEspi(channels, options);
  const { meter, used, notes } = choice;
  const reading = assemble(placed, {
    format: 'espi',
    fileName: options.fileName,
    rowsRead: used.reduce((sum, channel) => sum + channel.values.length, 0),
    rows: { rowNumber: (row) => feed.readings.lines[row] ?? 0 },
    notes,
    columnMap: mapOfEspi(channels, meter),
  });
  const timeNotes = notesOnLocalTime(feed.entries, { timeZone: options.timeZone, atMs: reading.load.startMs });
  return { ...reading, report: { ...reading.report, notes: [...reading.report.notes, ...timeNotes] } };
}

const noReadings = (options: ReadOptions) => ({
  message: 'The feed holds no interval block.',
  where: options.fileName,
  remedy: 'Ask for the interval data of the meter.',
});

const unknownUnit = (channel: EspiChannel, options: ReadOptions) => ({
  message: `“${channel.name}” holds no energy that is known: ${channel.why}.`,
  where: options.fileName,
  remedy: 'Say in the column map what it is and in which unit, or ask for the channel of energy.',
});

/** Most of a channel's readings that may be of a length of their own without changing the channel's. */
const straysFraction = 0.01;

/** A channel by length of interval, which may change within a feed; stray lengths are left out and counted. */
function placedOf(channel: EspiChannel, options: ReadOptions, notes: IntakeNote[]): PlacedStrand[] {
  const positions = positionsByLength(channel);
  const usual = [...positions].sort((a, b) => b[1].length - a[1].length)[0]?.[0] ?? Number.NaN;
  // The lengths a register's readings claim say nothing: its intervals lie between readings.
  const whole = Uint32Array.from(channel.values, (_value, at) => at);
  if (channel.measure === 'register' || positions.size < 2)
    return [strandOf(channel, whole, checked(usual, channel, options))];
  const kept = [...positions].filter(([, at]) => at.length > channel.values.length * straysFraction);
  const strays = channel.values.length - kept.reduce((sum, [, at]) => sum + at.length, 0);
  if (strays > 0) {
    notes.push({
      code: 'length-odd',
      message: `${strays} readings of “${channel.name}” do not last ${usual} minutes like the rest and are left out.`,
    });
  }
  return kept.map(([minutes, at]) => strandOf(channel, Uint32Array.from(at), checked(minutes, channel, options)));
}

function checked(stepMinutes: number, channel: EspiChannel, options: ReadOptions): number {
  if (stepLengthsMinutes.some((length) => length === stepMinutes)) return stepMinutes;
  throw intakeError(
    `The readings of “${channel.name}” last ${Number.isNaN(stepMinutes) ? 'an unknown time' : `${stepMinutes} minutes`}; a series needs 1 to 60.`,
    options.fileName,
    'Ask for interval data of an hour or less.',
  );
}

/** Positions of readings by their length in minutes; where none is told it is the step from one to the next. */
function positionsByLength({ durations, starts }: EspiChannel): Map<number, number[]> {
  const step = durations.some((seconds) => seconds > 0)
    ? Number.NaN
    : findStep(starts.map((start) => start / 60).sort()).stepMinutes;
  const positions = new Map<number, number[]>();
  durations.forEach((seconds, at) => {
    const minutes = seconds > 0 ? Math.round(seconds / 6) / 10 : step;
    const group = positions.get(minutes);
    if (group) group.push(at);
    else positions.set(minutes, [at]);
  });
  return positions;
}

function strandOf(channel: EspiChannel, positions: Uint32Array, stepMinutes: number): PlacedStrand {
  const utc = Float64Array.from(positions, (at) => (channel.starts[at] ?? Number.NaN) / 60);
  return {
    strand: {
      walls: utc,
      offsets: null,
      spans: null,
      days: null,
      rows: positions.map((at) => channel.rows[at] ?? 0),
      channels: [
        {
          role: channel.role,
          measure: channel.measure,
          name: channel.name,
          values: Float64Array.from(positions, (at) => scaled(channel.values[at] ?? Number.NaN, channel.factor)),
        },
      ],
      quality: Uint8Array.from(positions, (at) => channel.marks[at] ?? grades.measured),
      isTurned: false,
    },
    timeline: { stepMinutes, style: { clock: 'utc' }, utc, notes: [], guesses: [] },
  };
}
