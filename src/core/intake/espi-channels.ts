import type { EspiEntry, EspiReading } from './espi-feed';
import { isConstant, onlyGrows } from './registers';
import type { ColumnMap, IntervalRole, Measure } from './types';
import { unitMeaning } from './units';

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
const unitsByCode = new Map([
  ['72', 'Wh'],
  ['73', 'varh'],
  ['71', 'VAh'],
  ['38', 'W'],
  ['63', 'var'],
  ['61', 'VA'],
]);
const powerFactorCode = '65';

const reactiveSenses = new Map<string, IntervalRole>([
  ['2', 'reactive-lagging'],
  ['3', 'reactive-leading'],
  ['15', 'reactive-lagging'],
  ['18', 'reactive-leading'],
  ['16', 'ignore'],
  ['17', 'ignore'],
  ['5', 'reactive-lagging'],
  ['13', 'reactive-leading'],
  ['1', 'reactive-lagging'],
  ['19', 'reactive-leading'],
]);

// Accumulation behaviours of a register: bulk quantity, continuous cumulative, cumulative. Bulk quantity alone is no proof:
// feeds put it on energies per interval too.
const cumulativeCodes = new Set(['2', '3']);

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
    const group = groups.get(owner);
    if (group) group.push(block);
    else groups.set(owner, [block]);
  }
  const meterOf = meterNamer(of('UsagePoint'));
  const channels = [...groups].map(([reading, own], index): EspiChannel => {
    const type =
      types.find((one) => one.self !== '' && reading?.related.includes(one.self)) ??
      (types.length === 1 ? types[0] : undefined);
    const name = reading?.title || `Readings ${index + 1}`;
    const given = map.columns?.find((use) => use.index === index);
    const meaning = meaningOf(type, given?.role as IntervalRole | undefined, given?.unit);
    const all = own.flatMap((block) => timedReadings(block, type));
    const isCumulative = cumulativeCodes.has(type?.fields.get('accumulationBehaviour') ?? '');
    const inOrder = [...all].sort((a, b) => a.startS - b.startS).map((one) => one.value);
    const isRegister = meaning.measure === 'energy' && onlyGrows(inOrder, isCumulative);
    return {
      name,
      meter: meterOf(reading),
      ...meaning,
      measure: isRegister ? 'register' : meaning.measure,
      readings: all,
    };
  });
  for (const channel of channels) if (standsStill(channel, channels)) channel.measure = 'register';
  return channels;
}

/** A register that stands still throughout, told by another of its meter that does not. */
function standsStill(channel: EspiChannel, channels: readonly EspiChannel[]): boolean {
  const runs = channels.some((other) => other.meter === channel.meter && other.measure === 'register');
  return runs && channel.measure === 'energy' && isConstant(channel.readings.map((reading) => reading.value));
}

/** Names the meter of a reading by its usage point: the title, with the end of the link where titles are alike. */
function meterNamer(points: readonly EspiEntry[]): (reading: EspiEntry | null) => string {
  const endOf = (point: EspiEntry): string => point.self.split('/').at(-1) ?? '';
  const isShared = (title: string): boolean => points.filter((point) => point.title === title).length > 1;
  const nameOf = (point: EspiEntry): string =>
    point.title === '' ? endOf(point) : isShared(point.title) ? `${point.title} (${endOf(point)})` : point.title;
  const isOf = (reading: EspiEntry, point: EspiEntry): boolean =>
    point.self !== '' &&
    ([reading.up, reading.self].some((link) => link.startsWith(`${point.self}/`)) ||
      [reading.up, reading.self].some((link) => link !== '' && point.related.includes(link)));
  return (reading) => {
    const own = points.find((point) => reading !== null && isOf(reading, point));
    const point = own ?? (points.length === 1 ? points[0] : undefined);
    return (point && nameOf(point)) || 'one meter';
  };
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
      qualities: reading.qualities.length === 0 ? [initial] : reading.qualities,
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
  const unitText = givenUnit ?? unitsByCode.get(code) ?? '';
  const unit = unitMeaning(unitText);
  const power = Number(type?.fields.get('powerOfTenMultiplier') ?? 0);
  const isSane = Number.isInteger(power) && Math.abs(power) <= 12;
  const scale = givenUnit ? 1 : isSane ? 10 ** power : Number.NaN;
  if (code === powerFactorCode && !givenUnit && isSane) {
    const why = `Unit code ${code}, a power factor`;
    return { role: 'power-factor', unit: '', factor: scale, measure: 'energy', why, sure: true };
  }
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
  return reactiveSenses.get(flow) ?? 'reactive-signed';
}
