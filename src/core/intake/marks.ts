import { guess, type Test } from './evidence';
import type { StampStyle } from './column-map';
import type { Guess } from './types';

/** Length of an interval and which end of it the stamps name. */
interface MarkFinding {
  marks: NonNullable<StampStyle['marks']>;
  guess: Guess;
}

const clockTime = (wall: number): string => {
  const minute = ((wall % 1440) + 1440) % 1440;
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(Math.floor(minute % 60)).padStart(2, '0')}`;
};

/** Most frequent step between neighbouring stamps and the share of steps that are of that length. */
export function findStep(walls: Float64Array): { stepMinutes: number; share: number; others: number[] } {
  const counts = new Map<number, number>();
  let total = 0;
  const stride = Math.max(1, Math.floor(walls.length / 20_000));
  for (let at = 1; at < walls.length; at += stride) {
    const step = (walls[at] ?? Number.NaN) - (walls[at - 1] ?? Number.NaN);
    if (!(step > 0 && step <= 1440)) continue;
    counts.set(step, (counts.get(step) ?? 0) + 1);
    total += 1;
  }
  const ranked = [...counts].sort((a, b) => b[1] - a[1] || a[0] - b[0]);
  const [best] = ranked;
  if (!best) return { stepMinutes: Number.NaN, share: 0, others: [] };
  return {
    stepMinutes: best[0],
    share: best[1] / total,
    others: ranked
      .slice(1)
      .filter(([, count]) => count > total * 0.02)
      .map(([step]) => step),
  };
}

/**
 * Whether stamps name the beginning or the end of their intervals. A midnight that follows the last stamp of the same date
 * closes that date (`own-day-end`); otherwise the first and last stamps of the file, or the names of the columns, tell.
 */
export function findMarks(
  walls: Float64Array,
  stepMinutes: number,
  hint: StampStyle['marks'],
  given: StampStyle['marks'],
): MarkFinding {
  const detected = detectMarks(walls, stepMinutes, hint);
  if (!given || given === detected.marks) return detected;
  return { marks: given, guess: guess('marks', marksInWords(given), [[true, 'Given by the column map']]) };
}

function detectMarks(walls: Float64Array, stepMinutes: number, hint: StampStyle['marks']): MarkFinding {
  const first = walls[0] ?? Number.NaN;
  const last = walls[walls.length - 1] ?? Number.NaN;
  const { ownDay, nextDay } = countMidnights(walls, stepMinutes);
  const isNextDay = clockTime(last) === '00:00' && last > first;
  const span = `First stamp ${clockTime(first)}, last ${clockTime(last)}${isNextDay ? ' of the day after' : ''}`;
  const opensAtStep = clockTime(first) === clockTime(stepMinutes);
  if (ownDay > nextDay) {
    const tests: Test[] = [
      [
        true,
        `${ownDay} ${ownDay === 1 ? 'midnight follows' : 'midnights follow'} the last stamp of the same date and ${ownDay === 1 ? 'closes' : 'close'} that day`,
      ],
      [nextDay === 0, nextDay === 0 ? 'No midnight opens a day' : `${nextDay} midnights open a day`],
      [opensAtStep, span],
    ];
    return { marks: 'own-day-end', guess: guess('marks', marksInWords('own-day-end'), tests) };
  }
  const lastOfDay = clockTime(1440 - stepMinutes);
  const endTests: Test[] = [
    [opensAtStep, span],
    [clockTime(last) === '00:00', 'The last stamp is the midnight that closes the last day'],
  ];
  const beginTests: Test[] = [
    [clockTime(first) === '00:00', span],
    [
      clockTime(last) === lastOfDay,
      clockTime(last) === lastOfDay
        ? 'The last stamp is one interval before midnight'
        : 'The file does not end with a whole day, so that its last stamp tells nothing',
    ],
  ];
  const score = (tests: Test[]): number => tests.filter(([isMet]) => isMet).length;
  if (hint === 'end' || hint === 'begin') {
    const named: Test[] = [
      [true, `The column is named as ${hint === 'end' ? 'the end' : 'the beginning'} of the interval`],
    ];
    return { marks: hint, guess: guess('marks', marksInWords(hint), named) };
  }
  const marks = score(endTests) > score(beginTests) ? 'end' : 'begin';
  return { marks, guess: guess('marks', marksInWords(marks), marks === 'end' ? endTests : beginTests) };
}

/** Marks in words. */
function marksInWords(marks: NonNullable<StampStyle['marks']>): string {
  if (marks === 'begin') return 'beginning of interval';
  return marks === 'end' ? 'end of interval' : 'end of interval, midnight dated by the day it closes';
}

function countMidnights(walls: Float64Array, stepMinutes: number): { ownDay: number; nextDay: number } {
  let ownDay = 0;
  let nextDay = 0;
  for (let at = 1; at < walls.length; at += 1) {
    const wall = walls[at] ?? Number.NaN;
    if (!Number.isInteger(wall / 1440)) continue;
    const step = wall - (walls[at - 1] ?? Number.NaN);
    if (step === stepMinutes) nextDay += 1;
    else if (step === stepMinutes - 1440) ownDay += 1;
  }
  return { ownDay, nextDay };
}

/** Wall-clock minutes of the beginnings of the intervals. */
export function beginnings(
  walls: Float64Array,
  stepMinutes: number,
  marks: NonNullable<StampStyle['marks']>,
): Float64Array {
  if (marks === 'begin') return walls;
  const starts = new Float64Array(walls.length);
  for (let at = 0; at < walls.length; at += 1) {
    const wall = walls[at] ?? Number.NaN;
    const isOwnDay = marks === 'own-day-end' && Number.isInteger(wall / 1440);
    starts[at] = wall - stepMinutes + (isOwnDay ? 1440 : 0);
  }
  return starts;
}
