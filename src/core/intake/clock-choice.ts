import { guess, type Test } from './evidence';
import type { Strand } from './strand';
import type { StampStyle } from './column-map';
import type { Guess, IntakeNote } from './types';
import { localise, zoneSpan, type ClockChange, type Localised, type ZoneSpan } from './zone';

interface PlaceOptions {
  timeZone: string;
  stepMinutes: number;
  /** Clock that the file names or the map gives. */
  clock: StampStyle['clock'];
  /** Clock that the map gives. */
  given: StampStyle['clock'];
  /** The stamps name ends of intervals. */
  isEnd: boolean;
}

interface Placed {
  /** UTC minutes of the beginnings; NaN where a reading has no place in time. */
  utc: Float64Array;
  clock: NonNullable<StampStyle['clock']>;
  guess: Guess;
  notes: IntakeNote[];
}

/** One way to read the clock, and how badly it fits the file. */
interface ClockTry {
  utc: Float64Array;
  clock: 'local' | 'standard';
  /** How the repeated and skipped hours came out; null for standard time. */
  found: Localised | null;
  /** Gaps, clashes and readings in hours that never were. */
  faults: number;
}

/**
 * Places the beginnings of intervals in UTC. Ways to read the clock are tried on the file itself: as wall clock of the
 * beginnings, as wall clock of the ends, as time elapsed since midnight, as standard time. The one that leaves fewest gaps
 * and clashes is taken, the wall clock of the beginnings where they are equal.
 */
export function placeStarts(strand: Strand, starts: Float64Array, options: PlaceOptions): Placed {
  const source = options.given ? 'Given by the column map' : 'Named so in the file';
  if (options.clock === 'utc')
    return { utc: starts, clock: 'utc', notes: [], guess: guess('clock', 'UTC', [[true, source]]) };
  const { least, most } = rangeOf(starts);
  const zone = zoneSpan(options.timeZone, least - 1440, most + 1440);
  if (options.clock === 'standard') {
    return {
      utc: inStandardTime(starts, zone),
      clock: 'standard',
      notes: [],
      guess: guess('clock', 'standard time all year', [[true, source]]),
    };
  }
  const changes = zone.changes.filter((change) => change.wallTo > least && change.wallFrom <= most);
  if (changes.length === 0) {
    const why =
      zone.changes.length === 0
        ? `${options.timeZone} has no clock change in this time`
        : 'No clock change falls into the file';
    return {
      utc: localise(starts, zone).utc,
      clock: 'local',
      notes: [],
      guess: guess('clock', `local time, ${options.timeZone}`, [[true, why]]),
    };
  }
  const values = strand.channels[0]?.values ?? new Float64Array();
  const tries = triesOf(strand, starts, values, zone, options);
  const best = tries.reduce((fittest, next) => (next.faults < fittest.faults ? next : fittest));
  const words = best.clock === 'standard' ? 'standard time all year' : `local time, ${options.timeZone}`;
  return {
    utc: best.utc,
    clock: best.clock,
    notes: best.found ? clockNotes(best.found, values) : [standardNote],
    guess: guess('clock', words, clockTests(best, changes, tries[0]?.faults ?? 0)),
  };
}

function triesOf(
  strand: Strand,
  starts: Float64Array,
  values: Float64Array,
  zone: ZoneSpan,
  options: PlaceOptions,
): ClockTry[] {
  const { stepMinutes } = options;
  const local = localise(starts, zone);
  const attempt = (found: Localised, utc: Float64Array): ClockTry => ({
    utc,
    clock: 'local',
    found,
    faults: faultsOf(utc, values, stepMinutes) + countReal(values, found.inGap),
  });
  const tries = [attempt(local, local.utc)];
  if (options.isEnd) {
    const ends = localise(
      starts.map((start) => start + stepMinutes),
      zone,
    );
    tries.push(
      attempt(
        ends,
        ends.utc.map((end) => end - stepMinutes),
      ),
    );
  }
  if (strand.days) {
    const midnights = strand.days.map((day) => day * 1440);
    const found = localise(midnights, zone);
    const utc = found.utc.map((midnight, at) => midnight + (starts[at] ?? Number.NaN) - (midnights[at] ?? 0));
    // A day counted through has both passes of its repeated hour.
    const counted = attempt(
      {
        ...found,
        inGap: [],
        singlePasses: [],
        doublePasses: zone.changes.filter((change) => change.after < change.before),
      },
      utc,
    );
    tries.push(counted);
  }
  // Only readings in the hour that summer time skips tell standard time from a wall clock: an autumn hour met once may as well
  // have lost its second pass. Blanks or noughts there are fillers, which speak for a wall clock.
  const real = countReal(values, local.inGap);
  if (options.given === undefined && real > 0) {
    const utc = inStandardTime(starts, zone);
    const fillers = local.inGap.length - real;
    tries.push({ utc, clock: 'standard', found: null, faults: faultsOf(utc, values, stepMinutes) + 2 * fillers });
  }
  return tries;
}

function inStandardTime(starts: Float64Array, zone: ZoneSpan): Float64Array {
  const offset = Math.min(zone.firstOffset, ...zone.changes.map((change) => change.after));
  return starts.map((start) => start - offset);
}

const standardNote: IntakeNote = {
  code: 'standard-time',
  message:
    'The stamps follow standard time all year: the hour that summer time skips has readings, and no hour is met twice in autumn.',
};

function rangeOf(walls: Float64Array): { least: number; most: number } {
  let least = Infinity;
  let most = -Infinity;
  for (const wall of walls) {
    if (wall < least) least = wall;
    if (wall > most) most = wall;
  }
  return { least, most };
}

/** Missing and doubly filled intervals that a placement leaves; blanks clash with nothing. */
function faultsOf(utc: Float64Array, values: Float64Array, stepMinutes: number): number {
  const { least, most } = rangeOf(utc);
  const slots = Math.min(2_000_000, Math.floor((most - least) / stepMinutes) + 1);
  if (!(slots > 0)) return Infinity;
  const filled = new Uint8Array(slots);
  let clashes = 0;
  let used = 0;
  for (let at = 0; at < utc.length; at += 1) {
    const minute = utc[at] ?? Number.NaN;
    if (Number.isNaN(minute) || Number.isNaN(values[at] ?? Number.NaN)) continue;
    const slot = Math.floor((minute - least) / stepMinutes);
    if (filled[slot] === 1) clashes += 1;
    else {
      filled[slot] = 1;
      used += 1;
    }
  }
  return slots - used + clashes;
}

function countReal(values: Float64Array, positions: number[]): number {
  return positions.filter((at) => (values[at] ?? Number.NaN) > 0 || (values[at] ?? Number.NaN) < 0).length;
}

function clockTests(best: ClockTry, changes: ClockChange[], localFaults: number): Test[] {
  const days = changes.map(
    (change) =>
      `${change.after > change.before ? 'spring' : 'autumn'} ${new Date(change.wallFrom * 60_000).toISOString().slice(0, 10)}`,
  );
  if (!best.found)
    return [
      [
        true,
        `Readings in the skipped hour and none twice (${days.join(', ')}): ${localFaults} clashes or gaps as local time, ${best.faults} as standard time`,
      ],
    ];
  const tests: Test[] = [];
  for (const change of changes.filter((other) => other.after < other.before)) {
    const day = new Date(change.wallFrom * 60_000).toISOString().slice(0, 10);
    const isDouble = best.found.doublePasses.includes(change);
    tests.push([
      isDouble,
      isDouble ? `The repeated hour of ${day} is met twice` : `The repeated hour of ${day} is met once only`,
    ]);
  }
  const springs = changes.filter((change) => change.after > change.before);
  if (springs.length > 0)
    tests.push([
      best.found.inGap.length === 0,
      best.found.inGap.length === 0
        ? 'The skipped hour of spring has no reading'
        : `${best.found.inGap.length} fillers in the skipped hour of spring`,
    ]);
  return tests;
}

function clockNotes(found: Localised, values: Float64Array): IntakeNote[] {
  const notes: IntakeNote[] = [];
  const day = (change: ClockChange): string => new Date(change.wallFrom * 60_000).toISOString().slice(0, 10);
  for (const change of found.doublePasses) {
    notes.push({
      code: 'repeated-hour',
      message: 'End of summer time: both passes of the repeated hour are kept.',
      where: day(change),
    });
  }
  for (const change of found.singlePasses) {
    notes.push({
      code: 'repeated-hour-once',
      message:
        'End of summer time: the file has the repeated hour once. It is kept as the first pass; the second is missing. It may hold the sum of both.',
      where: day(change),
    });
  }
  if (found.inGap.length > 0) {
    const real = countReal(values, found.inGap);
    notes.push(
      real > 0
        ? {
            code: 'skipped-hour-values',
            message: `${found.inGap.length} rows lie in the hour that summer time skips; ${real} of them hold readings, which are left out.`,
          }
        : {
            code: 'skipped-hour-fillers',
            message: `${found.inGap.length} blank or zero rows in the hour that summer time skips are left out.`,
          },
    );
  }
  return notes;
}
