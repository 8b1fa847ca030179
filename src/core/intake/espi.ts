import { quality as grades } from '../load';
import { assemble } from './assemble';
import { IntakeError, intakeError } from './errors';
import type { EspiEntry, EspiReading } from './espi-feed';
import { findStep } from './marks';
import { onlyGrows } from './registers';
import type { PlacedStrand } from './series';
import type {
  ColumnEvidence,
  ColumnMap,
  IntakeNote,
  IntervalReading,
  IntervalRole,
  Measure,
  ReadOptions,
} from './types';
import { scaled, unitMeaning } from './units';

/** One meter reading of a feed: its type and its blocks, brought together by links. */
export interface EspiChannel {
  name: string;
  meter: string;
  role: IntervalRole;
  unit: string;
  /** To kWh, kvarh or kVAh. */
  factor: number;
  measure: Measure;
  why: string;
  sure: boolean;
  readings: EspiReading[];
}

// Codes of units and flows: NAESB REQ.21, as listed in the schema of ESPI (usage.xsd).
const unitsByCode: Record<string, string> = {
  '72': 'Wh',
  '73': 'varh',
  '71': 'VAh',
  '38': 'W',
  '63': 'var',
  '61': 'VA',
};

/** Brings the entries of a feed together by their links: blocks to meter readings, those to their types and usage points. */
export function channelsOfFeed(entries: readonly EspiEntry[], map: Partial<ColumnMap>): EspiChannel[] {
  const of = (kind: EspiEntry['kind']): EspiEntry[] => entries.filter((entry) => entry.kind === kind);
  const types = of('ReadingType');
  const readings = of('MeterReading');
  const blocks = of('IntervalBlock');
  const groups = new Map<EspiEntry | null, EspiEntry[]>();
  for (const block of blocks) {
    const owner =
      readings.find((reading) => belongsTo(block, reading)) ??
      (readings.length === 1 ? readings[0] : undefined) ??
      null;
    groups.set(owner, [...(groups.get(owner) ?? []), block]);
  }
  const points = of('UsagePoint');
  return [...groups].map(([reading, own], index) => {
    const type =
      types.find((one) => one.self !== '' && reading?.related.includes(one.self)) ??
      (types.length === 1 ? types[0] : undefined);
    const point =
      points.find((one) => one.self !== '' && reading?.up.startsWith(`${one.self}/`)) ??
      (points.length === 1 ? points[0] : undefined);
    const name = reading?.title || `Readings ${index + 1}`;
    const given = map.columns?.find((use) => use.index === index);
    const meaning = meaningOf(type, given?.role as IntervalRole | undefined, given?.unit);
    const all = own.flatMap((block) => timedReadings(block, type));
    const measure =
      onlyGrows(all.map((one) => one.value)) && meaning.measure === 'energy' ? 'register' : meaning.measure;
    return {
      name,
      meter: point?.title || point?.self.split('/').at(-1) || 'one meter',
      ...meaning,
      measure,
      readings: all,
    };
  });
}

function belongsTo(block: EspiEntry, reading: EspiEntry): boolean {
  if (reading.self === '') return false;
  return (
    block.up === reading.self ||
    block.up.startsWith(`${reading.self}/`) ||
    reading.related.includes(block.up) ||
    reading.related.includes(block.self)
  );
}

/** A reading without a start of its own follows the one before in its block; a duration may stand in three places. */
function timedReadings(block: EspiEntry, type: EspiEntry | undefined): EspiReading[] {
  const usual = Number(type?.fields.get('intervalLength')) || Number.NaN;
  const initial = Number(type?.fields.get('defaultQuality') ?? Number.NaN);
  let next = Number(block.fields.get('interval.start') ?? Number.NaN);
  return block.readings.map((reading) => {
    const startS = Number.isNaN(reading.startS) ? next : reading.startS;
    const durationS = reading.durationS > 0 ? reading.durationS : usual;
    next = startS + durationS;
    return {
      startS,
      durationS,
      value: reading.value,
      quality: Number.isNaN(reading.quality) ? initial : reading.quality,
    };
  });
}

type Meaning = Pick<EspiChannel, 'role' | 'unit' | 'factor' | 'measure' | 'why' | 'sure'>;

function meaningOf(
  type: EspiEntry | undefined,
  givenRole: IntervalRole | undefined,
  givenUnit: string | undefined,
): Meaning {
  const code = type?.fields.get('uom') ?? '';
  const unitText = givenUnit ?? unitsByCode[code] ?? '';
  const unit = unitMeaning(unitText);
  const power = Number(type?.fields.get('powerOfTenMultiplier') ?? 0);
  const isSane = Number.isInteger(power) && Math.abs(power) <= 12;
  const scale = givenUnit ? 1 : isSane ? 10 ** power : Number.NaN;
  if (!unit || Number.isNaN(scale)) {
    const why = type ? `Unit code ${code || 'absent'} is none of energy or power` : 'No reading type tells the unit';
    return { role: 'ignore', unit: '', factor: 1, measure: 'energy', why, sure: type !== undefined };
  }
  const flow = type?.fields.get('flowDirection') ?? '';
  const role = givenRole ?? roleOf(unit.quantity, flow);
  const why =
    givenRole || givenUnit ? 'Given by the column map' : `Unit code ${code}, flow direction ${flow || 'absent'}`;
  return {
    role,
    unit: unit.unit,
    factor: unit.factor * scale,
    measure: unit.measure,
    why,
    sure: flow !== '' || givenRole !== undefined,
  };
}

function roleOf(quantity: string, flow: string): IntervalRole {
  if (quantity === 'apparent') return flow === '19' ? 'ignore' : 'apparent';
  if (quantity === 'active') return flow === '19' ? 'export' : 'active';
  const senses: Record<string, IntervalRole> = {
    '2': 'reactive-lagging',
    '3': 'reactive-leading',
    '15': 'reactive-lagging',
    '18': 'reactive-leading',
    '16': 'ignore',
    '17': 'ignore',
    '5': 'reactive-lagging',
    '13': 'reactive-leading',
    '1': 'reactive-lagging',
    '19': 'reactive-leading',
  };
  return senses[flow] ?? 'reactive-signed';
}

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
  return [...new Set(channels.filter((channel) => channel.role !== 'ignore').map((channel) => channel.meter))];
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
  const used = channels.filter(
    (channel) => channel.meter === meter && channel.role !== 'ignore' && channel.readings.length > 0,
  );
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
const gradeOf = (code: number): number =>
  (code >= 7 && code <= 13) || code === 15 ? grades.estimated : grades.measured;

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
      quality: Uint8Array.from(readings, (reading) => gradeOf(reading.quality)),
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
