import { stepLengthsMinutes } from '../load';
import { intakeError } from './errors';
import { guess, type Test } from './evidence';
import { beginnings, findMarks, findStep } from './marks';
import type { Strand } from './strand';
import type { Guess, IntakeNote, StampStyle } from './types';
import { localise, zoneSpan, type ClockChange, type Localised } from './zone';

/** When every reading of a strand begins. */
export interface Timeline {
  stepMinutes: number;
  style: StampStyle;
  /** UTC minutes of the beginning of each reading; NaN where the reading has no place in time. */
  utc: Float64Array;
  notes: IntakeNote[];
  guesses: Guess[];
}

interface TimelineOptions {
  timeZone: string;
  fileName: string;
  /** What names of columns hint at or the map gives. */
  style: StampStyle;
  /** What the map gives. */
  given: StampStyle;
  /** The figures are register readings: a stamp is the instant of the reading. */
  isRegister: boolean;
}

/**
 * Works out the step, the end the stamps name and the clock they follow, and from them the UTC beginning of every reading.
 * @throws {IntakeError} if the stamps follow no step a series can have.
 */
export function timelineOf(strand: Strand, options: TimelineOptions): Timeline {
  const instants = strand.offsets
    ? strand.walls.map((wall, at) => wall - (strand.offsets?.[at] ?? Number.NaN))
    : strand.walls;
  const step = stepOf(strand, instants, options);
  const { stepMinutes } = step;
  const { marks, guess: marksGuess } = options.isRegister
    ? {
        marks: 'begin' as const,
        guess: guess('marks', 'instant of the reading', [[true, 'Registers are read at an instant']]),
      }
    : findMarks(
        strand.walls,
        stepMinutes,
        options.given.marks ?? options.style.marks,
        options.given.marks !== undefined,
      );
  const guesses = [step.guess, marksGuess];
  const base = { stepMinutes, guesses };
  if (strand.offsets) {
    // A stamp without its offset among stamps that have one keeps the clock of the row before.
    const utc = beginnings(instants, stepMinutes, marks === 'own-day-end' ? 'end' : marks);
    guesses.push(guess('clock', 'offset in each stamp', [[true, 'Every stamp carries its offset from UTC']]));
    return { ...base, utc, style: { ...options.style, marks, clock: 'offset', stepMinutes }, notes: [] };
  }
  const clock = options.given.clock ?? (options.style.order === 'epoch' ? 'utc' : options.style.clock);
  const starts = beginnings(strand.walls, stepMinutes, marks);
  const placed = placeStarts(strand, starts, { ...options, stepMinutes, clock, isEnd: marks !== 'begin' });
  guesses.push(placed.guess);
  return {
    ...base,
    utc: placed.utc,
    style: { ...options.style, marks, clock: placed.clock, stepMinutes },
    notes: placed.notes,
  };
}

function stepOf(
  strand: Strand,
  instants: Float64Array,
  options: TimelineOptions,
): { stepMinutes: number; guess: Guess } {
  const spanned = strand.spans ? findMode(strand.spans) : Number.NaN;
  const found = findStep(instants);
  const stepMinutes =
    options.given.stepMinutes ?? options.style.stepMinutes ?? (Number.isNaN(spanned) ? found.stepMinutes : spanned);
  const isKnown = stepLengthsMinutes.some((length) => length === stepMinutes);
  if (!isKnown) {
    throw intakeError(
      Number.isNaN(stepMinutes)
        ? 'The file holds fewer than two readings with a stamp, so the length of an interval cannot be told.'
        : `The stamps are mostly ${stepMinutes} minutes apart; a series needs one of ${stepLengthsMinutes.join(', ')} minutes.`,
      options.fileName,
      'Check the columns of date and time and the order of day and month in the column map, or export regular readings.',
    );
  }
  const mixed = found.others.filter(
    (other) => stepLengthsMinutes.some((length) => length === other) && other < 60 && other < stepMinutes,
  );
  const tests: Test[] = [
    [
      found.share > 0.95 || options.style.stepMinutes !== undefined,
      `${(found.share * 100).toFixed(found.share > 0.9995 ? 0 : 2)} % of neighbouring stamps are ${stepMinutes} minutes apart`,
    ],
  ];
  if (mixed.length > 0) tests.push([false, `some are ${mixed.join(' or ')} minutes apart`]);
  return { stepMinutes, guess: guess('step', `${stepMinutes} minutes`, tests) };
}

function findMode(spans: Float64Array): number {
  const counts = new Map<number, number>();
  for (const span of spans) if (!Number.isNaN(span)) counts.set(span, (counts.get(span) ?? 0) + 1);
  const [best] = [...counts].sort((a, b) => b[1] - a[1]);
  return best?.[0] ?? Number.NaN;
}

interface PlaceOptions extends TimelineOptions {
  stepMinutes: number;
  clock: StampStyle['clock'];
  isEnd: boolean;
}

interface Placed {
  utc: Float64Array;
  clock: NonNullable<StampStyle['clock']>;
  guess: Guess;
  notes: IntakeNote[];
}

/** Candidate readings of the clock are tried on the file itself: the one that leaves fewest gaps and clashes is taken. */
function placeStarts(strand: Strand, starts: Float64Array, options: PlaceOptions): Placed {
  if (options.clock === 'utc') {
    return {
      utc: starts,
      clock: 'utc',
      notes: [],
      guess: guess('clock', 'UTC', [[true, options.given.clock ? 'Given by the column map' : 'Named UTC in the file']]),
    };
  }
  const { least, most } = rangeOf(starts);
  const zone = zoneSpan(options.timeZone, least - 1440, most + 1440);
  const changes = zone.changes.filter((change) => change.wallTo > least && change.wallFrom <= most);
  const standard = (): Float64Array => {
    const offset = Math.min(zone.firstOffset, ...zone.changes.map((change) => change.after));
    return starts.map((start) => start - offset);
  };
  if (options.clock === 'standard') {
    return {
      utc: standard(),
      clock: 'standard',
      notes: [],
      guess: guess('clock', 'standard time all year', [
        [true, options.given.clock ? 'Given by the column map' : 'Named standard time in the file'],
      ]),
    };
  }
  const local = localise(starts, zone);
  if (changes.length === 0) {
    const fixed =
      zone.changes.length === 0
        ? `${options.timeZone} has no clock change in this time`
        : 'No clock change falls into the file';
    return {
      utc: local.utc,
      clock: 'local',
      notes: [],
      guess: guess('clock', `local time, ${options.timeZone}`, [[true, fixed]]),
    };
  }
  const values = strand.channels[0]?.values ?? new Float64Array();
  const tries: { utc: Float64Array; clock: 'local' | 'standard'; found: Localised | null; faults: number }[] = [
    {
      utc: local.utc,
      clock: 'local',
      found: local,
      faults: faultsOf(local.utc, options.stepMinutes) + countReal(values, local.inGap),
    },
  ];
  if (options.isEnd) {
    const ends = localise(
      starts.map((start) => start + options.stepMinutes),
      zone,
    );
    const utc = ends.utc.map((end) => end - options.stepMinutes);
    tries.push({
      utc,
      clock: 'local',
      found: ends,
      faults: faultsOf(utc, options.stepMinutes) + countReal(values, ends.inGap),
    });
  }
  if (options.given.clock === undefined) {
    const utc = standard();
    // Blanks or noughts in the hour that summer time skips are fillers: they speak for a wall clock.
    const fillers = local.inGap.length - countReal(values, local.inGap);
    tries.push({ utc, clock: 'standard', found: null, faults: faultsOf(utc, options.stepMinutes) + 2 * fillers });
  }
  const best = tries.reduce((least, next) => (next.faults < least.faults ? next : least));
  const tests = clockTests(best, changes, tries[0]?.faults ?? 0);
  const words = best.clock === 'standard' ? 'standard time all year' : `local time, ${options.timeZone}`;
  return {
    utc: best.utc,
    clock: best.clock,
    notes: best.found ? clockNotes(best.found, values) : [standardNote],
    guess: guess('clock', words, tests),
  };
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

/** Missing and doubly filled intervals that a placement leaves. */
function faultsOf(utc: Float64Array, stepMinutes: number): number {
  const { least, most } = rangeOf(utc);
  const slots = Math.min(2_000_000, Math.floor((most - least) / stepMinutes) + 1);
  if (!(slots > 0)) return Infinity;
  const filled = new Uint8Array(slots);
  let clashes = 0;
  let used = 0;
  for (const minute of utc) {
    if (Number.isNaN(minute)) continue;
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

function clockTests(
  best: { clock: string; found: Localised | null; faults: number },
  changes: ClockChange[],
  localFaults: number,
): Test[] {
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
