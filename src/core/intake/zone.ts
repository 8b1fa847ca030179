import { changeBetween, isTimeZone, zoneOffsetMs } from '../load';
import { intakeError } from './errors';

/** A change of a zone's clock. Minutes since 1970-01-01 UTC and minutes east of UTC. */
export interface ClockChange {
  utcMinute: number;
  before: number;
  after: number;
  /** Wall clock from which the change is felt: the missing hour's or the repeated hour's beginning, and its end. */
  wallFrom: number;
  wallTo: number;
}

/** Offsets of a zone over a span of time. */
export interface ZoneSpan {
  firstOffset: number;
  changes: ClockChange[];
}

const weekMinutes = 7 * 1440;
const minuteMs = 60_000;
const offsetAt = (timeZone: string, utcMinute: number): number =>
  zoneOffsetMs(utcMinute * minuteMs, timeZone) / minuteMs;

/**
 * Offsets of a zone between two instants: looked up once a week, the minute of each change found by halving.
 * @throws {IntakeError} if the zone is not known.
 */
export function zoneSpan(timeZone: string, fromUtcMinute: number, toUtcMinute: number): ZoneSpan {
  if (!isTimeZone(timeZone)) {
    throw intakeError(
      `The time zone “${timeZone}” is not known.`,
      'Site',
      'Give the site an IANA time zone such as Europe/Rome or America/Chicago.',
    );
  }
  const firstOffset = offsetAt(timeZone, fromUtcMinute);
  const changes: ClockChange[] = [];
  let before = firstOffset;
  for (let at = fromUtcMinute; at < toUtcMinute; at += weekMinutes) {
    const end = Math.min(at + weekMinutes, toUtcMinute);
    const after = offsetAt(timeZone, end);
    if (after === before) continue;
    const high = changeBetween(at * minuteMs, end * minuteMs, timeZone) / minuteMs;
    changes.push({
      utcMinute: high,
      before,
      after,
      wallFrom: high + Math.min(before, after),
      wallTo: high + Math.max(before, after),
    });
    before = after;
  }
  return { firstOffset, changes };
}

/** Where wall-clock stamps fall in UTC. */
export interface Localised {
  /** UTC minutes of every stamp; NaN where the wall clock never showed it. */
  utc: Float64Array;
  /** Positions of stamps within a spring hour that does not exist. */
  inGap: number[];
  /** Autumn hours of which the file has only one pass. */
  singlePasses: ClockChange[];
  /** Autumn hours of which the file has both passes. */
  doublePasses: ClockChange[];
}

/**
 * Turns wall-clock minutes, in the order of time, into UTC minutes. In a repeated autumn hour the first occurrence of a
 * stamp is the first pass and the second the second, whether the file interleaves the passes or sets one after the other. A
 * file that repeats the hour before as well has plain duplicates, which stay in the same pass.
 */
export function localise(walls: Float64Array, zone: ZoneSpan): Localised {
  const utc = new Float64Array(walls.length);
  const inGap: number[] = [];
  const overlaps = new Map<ClockChange, number[]>();
  const hourBefore = new Map<ClockChange, Map<number, number>>();
  let offset = zone.firstOffset;
  let from = Infinity;
  let to = -Infinity;
  for (let at = 0; at < walls.length; at += 1) {
    const wall = walls[at] ?? Number.NaN;
    if (!(wall >= from && wall < to)) {
      if (Number.isNaN(wall)) {
        utc[at] = Number.NaN;
        continue;
      }
      const segment = segmentOf(wall, zone);
      if (segment.special) {
        utc[at] = Number.NaN;
        if (segment.special.after > segment.special.before) inGap.push(at);
        else listOf(overlaps, segment.special).push(at);
        continue;
      }
      ({ offset, from, to } = segment);
    }
    utc[at] = wall - offset;
  }
  for (const change of overlaps.keys()) hourBefore.set(change, new Map());
  if (overlaps.size > 0) countHourBefore(walls, hourBefore);
  const singlePasses: ClockChange[] = [];
  const doublePasses: ClockChange[] = [];
  for (const [change, positions] of overlaps) {
    const repeats = Math.max(1, ...(hourBefore.get(change)?.values() ?? []));
    const isDouble = placeOverlap(walls, utc, change, positions, repeats);
    (isDouble ? doublePasses : singlePasses).push(change);
  }
  return { utc, inGap, singlePasses, doublePasses };
}

function listOf(lists: Map<ClockChange, number[]>, change: ClockChange): number[] {
  const list = lists.get(change) ?? [];
  lists.set(change, list);
  return list;
}

function segmentOf(
  wall: number,
  zone: ZoneSpan,
): { offset: number; from: number; to: number; special: ClockChange | null } {
  let offset = zone.firstOffset;
  let from = -Infinity;
  for (const change of zone.changes) {
    if (wall < change.wallFrom) return { offset, from, to: change.wallFrom, special: null };
    if (wall < change.wallTo) return { offset, from, to: from, special: change };
    offset = change.after;
    from = change.wallTo;
  }
  return { offset, from, to: Infinity, special: null };
}

function countHourBefore(walls: Float64Array, hours: Map<ClockChange, Map<number, number>>): void {
  for (const wall of walls) {
    for (const [change, counts] of hours) {
      if (wall >= change.wallFrom - 60 && wall < change.wallFrom) counts.set(wall, (counts.get(wall) ?? 0) + 1);
    }
  }
}

/** Places the stamps of a repeated hour; true if any stamp is met in both passes. */
function placeOverlap(
  walls: Float64Array,
  utc: Float64Array,
  change: ClockChange,
  positions: number[],
  repeats: number,
): boolean {
  const seen = new Map<number, number>();
  const totals = new Map<number, number>();
  for (const at of positions) totals.set(walls[at] ?? 0, (totals.get(walls[at] ?? 0) ?? 0) + 1);
  let isDouble = false;
  for (const at of positions) {
    const wall = walls[at] ?? 0;
    const occurrence = seen.get(wall) ?? 0;
    seen.set(wall, occurrence + 1);
    const hasBoth = (totals.get(wall) ?? 0) >= repeats * 2;
    const pass = hasBoth ? (repeats > 1 ? occurrence % 2 : Math.min(occurrence, 1)) : 0;
    if (hasBoth) isDouble = true;
    utc[at] = wall - (pass === 0 ? change.before : change.after);
  }
  return isDouble;
}
