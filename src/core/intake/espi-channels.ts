import type { EspiEntry, EspiFeed } from './espi-feed';
import { meaningOfType, type EspiMeaning } from './espi-meaning';
import { estimatedBits, qualityBit, type EspiReadings } from './espi-readings';
import { quality as grades } from '../load';
import { isConstant, onlyGrows } from './registers';
import type { ColumnMap } from './column-map';

/** One meter reading of a feed: its type and its blocks, brought together by links. */
export interface EspiChannel extends EspiMeaning {
  name: string;
  meter: string;
  /** Position of each reading in the feed, in the order of the file. */
  rows: Uint32Array;
  /** Beginnings. [s since 1970] */
  starts: Float64Array;
  /** Lengths. [s] */
  durations: Float64Array;
  /** Figures as printed. */
  values: Float64Array;
  marks: Uint8Array;
}

// Accumulation behaviours of a register: continuous cumulative, cumulative. Bulk quantity alone is no proof: feeds put it on
// energies per interval too.
const cumulativeCodes = new Set(['2', '3']);
/** Kinds of service of a usage point: 0 is electricity; where a feed names another, its readings are none. */
const otherServices = new Map([
  ['1', 'gas'],
  ['2', 'water'],
]);

/** Brings a feed together by its links: blocks to meter readings, those to their types and usage points. */
export function channelsOfFeed(feed: EspiFeed, map: Partial<ColumnMap>): EspiChannel[] {
  const of = (kind: EspiEntry['kind']): EspiEntry[] => feed.entries.filter((entry) => entry.kind === kind);
  const types = of('ReadingType');
  const typeOf = bySelf(types);
  const pointOf = pointFinder(of('UsagePoint'));
  const groups = groupBlocks(of('IntervalBlock'), of('MeterReading'));
  const channels = [...groups].map(([reading, blocks], index): EspiChannel => {
    const linked = reading?.related.map((href) => typeOf.get(href)).find((one) => one !== undefined);
    const type = linked ?? (types.length === 1 ? types[0] : undefined);
    const point = pointOf(reading);
    const service = otherServices.get(point.entry?.fields.get('ServiceCategory.kind') ?? '');
    const given = map.columns?.find((use) => use.index === index);
    const meaning = meaningOfType(type, { given, service });
    const columns = columnsOf(feed.readings, blocks, type);
    return {
      name: reading?.title || `Readings ${index + 1}`,
      meter: point.name,
      ...meaning,
      measure: given?.measure ?? (isRegister(meaning, type, columns) ? 'register' : meaning.measure),
      ...columns,
    };
  });
  for (const channel of channels) if (!map.columns && standsStill(channel, channels)) channel.measure = 'register';
  return channels;
}

function bySelf(entries: readonly EspiEntry[]): Map<string, EspiEntry> {
  const found = new Map<string, EspiEntry>();
  for (const entry of entries) if (entry.self !== '' && !found.has(entry.self)) found.set(entry.self, entry);
  return found;
}

/** Blocks by the meter reading they belong to. A feed with one meter reading needs no links; blocks of nobody stand apart. */
function groupBlocks(blocks: readonly EspiEntry[], readings: readonly EspiEntry[]): Map<EspiEntry | null, EspiEntry[]> {
  const bySelfLink = bySelf(readings);
  const byRelated = new Map<string, EspiEntry>();
  for (const reading of readings)
    for (const href of reading.related) if (!byRelated.has(href)) byRelated.set(href, reading);
  const ownerOf = (block: EspiEntry): EspiEntry | undefined => {
    for (const path of [...pathsUp(block.up), block.self]) {
      const owner = bySelfLink.get(path) ?? byRelated.get(path);
      if (owner && path !== '') return owner;
    }
    return undefined;
  };
  const groups = new Map<EspiEntry | null, EspiEntry[]>();
  for (const block of blocks) {
    const owner = ownerOf(block) ?? (readings.length === 1 ? readings[0] : undefined) ?? null;
    const group = groups.get(owner);
    if (group) group.push(block);
    else groups.set(owner, [block]);
  }
  return groups;
}

/** An address and those it lies below: `/a/b/c`, `/a/b`, `/a`. */
function pathsUp(href: string): string[] {
  const paths: string[] = [];
  for (let path = href; path !== ''; path = path.slice(0, Math.max(0, path.lastIndexOf('/')))) paths.push(path);
  return paths;
}

/** Names the meter of a reading by its usage point: the title, with the end of the link where titles are alike. */
export function pointFinder(
  points: readonly EspiEntry[],
): (reading: EspiEntry | null) => { entry: EspiEntry | undefined; name: string } {
  const endOf = (point: EspiEntry): string => point.self.split('/').at(-1) ?? '';
  const isShared = (title: string): boolean => points.filter((point) => point.title === title).length > 1;
  const nameOf = (point: EspiEntry): string =>
    point.title === '' ? endOf(point) : isShared(point.title) ? `${point.title} (${endOf(point)})` : point.title;
  const isOf = (reading: EspiEntry, point: EspiEntry): boolean =>
    point.self !== '' &&
    ([reading.up, reading.self].some((href) => href.startsWith(`${point.self}/`)) ||
      [reading.up, reading.self].some((href) => href !== '' && point.related.includes(href)));
  return (reading) => {
    const own = points.find((point) => reading !== null && isOf(reading, point));
    const entry = own ?? (points.length === 1 ? points[0] : undefined);
    return { entry, name: (entry && nameOf(entry)) || 'one meter' };
  };
}

type Columns = Pick<EspiChannel, 'rows' | 'starts' | 'durations' | 'values' | 'marks'>;

/** A reading without a start of its own follows the one before in its block; a duration may stand in three places. */
function columnsOf(readings: EspiReadings, blocks: readonly EspiEntry[], type: EspiEntry | undefined): Columns {
  const count = blocks.reduce((sum, block) => sum + block.to - block.from, 0);
  const columns: Columns = {
    rows: new Uint32Array(count),
    starts: new Float64Array(count),
    durations: new Float64Array(count),
    values: new Float64Array(count),
    marks: new Uint8Array(count),
  };
  const usualS = Number(type?.fields.get('intervalLength')) || Number.NaN;
  const usualQuality = qualityBit(Number(type?.fields.get('defaultQuality') ?? Number.NaN));
  let at = 0;
  for (const block of blocks) {
    let nextS = Number(block.fields.get('interval.start') ?? Number.NaN);
    for (let row = block.from; row < block.to; row += 1) {
      const ownS = readings.durations[row] ?? Number.NaN;
      const durationS = ownS > 0 ? ownS : usualS;
      const saidS = readings.starts[row] ?? Number.NaN;
      const startS = Number.isNaN(saidS) ? nextS : saidS;
      nextS = startS + durationS;
      columns.rows[at] = row;
      columns.starts[at] = startS;
      columns.durations[at] = durationS;
      columns.values[at] = readings.values[row] ?? Number.NaN;
      const codes = readings.qualities[row] || usualQuality;
      columns.marks[at] = (codes & estimatedBits) === 0 ? grades.measured : grades.estimated;
      at += 1;
    }
  }
  return columns;
}

function isRegister(meaning: EspiMeaning, type: EspiEntry | undefined, { starts, values }: Columns): boolean {
  if (meaning.measure !== 'energy' || meaning.role === 'power-factor') return false;
  return onlyGrows(inOrder(starts, values), cumulativeCodes.has(type?.fields.get('accumulationBehaviour') ?? ''));
}

/** Figures in the order of time, however the feed runs. */
function inOrder(starts: Float64Array, values: Float64Array): Float64Array {
  let rises = 0;
  let falls = 0;
  for (let at = 1; at < starts.length; at += 1) {
    const step = (starts[at] ?? 0) - (starts[at - 1] ?? 0);
    if (step < 0) falls += 1;
    else if (step > 0) rises += 1;
  }
  if (falls === 0) return values;
  if (rises === 0) return values.slice().reverse();
  const order = Uint32Array.from(starts, (_start, at) => at).sort((a, b) => (starts[a] ?? 0) - (starts[b] ?? 0));
  return Float64Array.from(order, (at) => values[at] ?? Number.NaN);
}

/** A register that stands still throughout, told by another of its meter that does not. */
function standsStill(channel: EspiChannel, channels: readonly EspiChannel[]): boolean {
  const runs = channels.some((other) => other.meter === channel.meter && other.measure === 'register');
  return runs && channel.measure === 'energy' && isConstant(channel.values);
}
