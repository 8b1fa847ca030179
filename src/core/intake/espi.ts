import { quality as grades } from '../load';
import { assemble } from './assemble';
import { IntakeError, intakeError } from './errors';
import type { EspiChannel } from './espi-channels';
import type { EspiReading } from './espi-feed';
import { findStep } from './marks';
import type { PlacedStrand } from './series';
import type { ColumnEvidence, IntakeNote, IntervalReading, ReadOptions } from './types';
import { scaled } from './units';

/** Evidence: a line a meter reading. */
export function evidenceOfEspi(channels: readonly EspiChannel[]): ColumnEvidence[] {
  return channels.map((channel, index) => ({
    index,
    span: 1,
    letter: String(index + 1),
    name: channel.name,
    values: `${channel.readings.length} readings`,
    takenAs: channel.role,
    unit: channel.unit,
    measure: channel.measure,
    why: channel.why,
    testsMet: channel.sure ? 1 : 0,
    testsTotal: 1,
    sure: channel.sure,
  }));
}

/** Meters with channels of energy. */
export function metersOfEspi(channels: readonly EspiChannel[]): string[] {
  const telling = channels.filter((channel) => channel.role !== 'ignore' && channel.role !== 'power-factor');
  return [...new Set(telling.map((channel) => channel.meter))];
}

/** Channels of a meter that make its load: energy or registers rather than power of the same role, which would count twice. */
function usedChannels(channels: readonly EspiChannel[], meter: string): EspiChannel[] {
  const own = channels.filter(
    (channel) => channel.meter === meter && channel.role !== 'ignore' && channel.readings.length > 0,
  );
  return own.filter(
    (channel) =>
      channel.measure !== 'power' || !own.some((other) => other.role === channel.role && other.measure !== 'power'),
  );
}

/**
 * Reads the load of one meter of an ESPI feed. Times are UTC seconds and name beginnings.
 * @throws {IntakeError} if no channel holds energy, a unit is unknown, or several meters are there and none is picked.
 */
export function readEspi(channels: readonly EspiChannel[], options: ReadOptions): IntervalReading {
  const meters = metersOfEspi(channels);
  const meter = options.columnMap?.meter ?? (meters.length === 1 ? meters[0] : undefined);
  if (meters.length === 0)
    throw new IntakeError(
      channels.length === 0 ? [noReadings(options)] : channels.map((channel) => unknownUnit(channel, options)),
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
  const placed = used.map((channel) => placedOf(channel, options));
  const rowsRead = used.reduce((sum, channel) => sum + channel.readings.length, 0);
  return assemble(placed, {
    format: 'espi',
    fileName: options.fileName,
    rowsRead,
    rows: { rowNumber: (row) => row + 1 },
    notes,
    columnMap: { kind: 'intervals', meter },
  });
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

/** Quality codes 7 to 13 and 15 are edited, estimated, derived or projected figures; others stand as measured. */
const isEstimate = (code: number): boolean => (code >= 7 && code <= 13) || code === 15;

const gradeOf = ({ qualities }: EspiReading): number =>
  qualities.some(isEstimate) ? grades.estimated : grades.measured;

function placedOf(channel: EspiChannel, options: ReadOptions): PlacedStrand {
  const { readings } = channel;
  const utc = Float64Array.from(readings, (reading) => reading.startS / 60);
  const durations = Float64Array.from(readings, (reading) => reading.durationS / 60).filter((minutes) => minutes > 0);
  const stepMinutes = durations.length > 0 ? modeOf(durations) : findStep(utc.slice().sort()).stepMinutes;
  if (![1, 5, 10, 15, 20, 30, 60].includes(stepMinutes)) {
    throw intakeError(
      `The readings of “${channel.name}” last ${Number.isNaN(stepMinutes) ? 'an unknown time' : `${stepMinutes} minutes`}; a series needs 1 to 60.`,
      options.fileName,
      'Ask for interval data of an hour or less.',
    );
  }
  return {
    strand: {
      walls: utc,
      offsets: null,
      spans: null,
      days: null,
      rows: Uint32Array.from(readings, (_reading, at) => at),
      channels: [
        {
          role: channel.role,
          measure: channel.measure,
          name: channel.name,
          values: Float64Array.from(readings, (reading) => scaled(reading.value, channel.factor)),
        },
      ],
      quality: Uint8Array.from(readings, gradeOf),
      isTurned: false,
    },
    timeline: { stepMinutes, style: { clock: 'utc' }, utc, notes: [], guesses: [] },
  };
}

function modeOf(durations: Float64Array): number {
  const counts = new Map<number, number>();
  for (const minutes of durations) counts.set(minutes, (counts.get(minutes) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? Number.NaN;
}
