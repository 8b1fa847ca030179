import { stepLengthsMinutes } from '../load';
import { intakeError } from './errors';
import { guess, type Test } from './evidence';
import { placeStarts } from './clock-choice';
import { beginnings, findMarks, findStep } from './marks';
import type { Strand } from './strand';
import type { StampStyle } from './column-map';
import type { Guess, IntakeNote } from './types';

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
  /** The columns of a wide table name the beginnings. */
  isWide: boolean;
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
    : options.isWide
      ? {
          marks: 'begin' as const,
          guess: guess('marks', 'beginning of interval', [[true, 'The names of the columns tell']]),
        }
      : findMarks(strand.walls, stepMinutes, options.style.marks, options.given.marks);
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
  const placed = placeStarts(strand, starts, {
    timeZone: options.timeZone,
    stepMinutes,
    clock,
    given: options.given.clock,
    isEnd: marks !== 'begin',
  });
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
