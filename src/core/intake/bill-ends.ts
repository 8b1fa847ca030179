import { isoDate } from '../load';
import { columnFor, placeOf, type DatedRow } from './bill-dates';
import type { BillPlan } from './bill-plan';
import { intakeError } from './errors';
import { guess, type Test } from './evidence';
import type { Guess, IntakeNote, ReadOptions } from './types';

type Ends = 'inclusive' | 'exclusive';

/** Decides whether the last day printed belongs to the period, and makes every `to` exclusive. */
export function settleEnds(plan: BillPlan, rows: DatedRow[], options: ReadOptions, notes: IntakeNote[]): Guess {
  if (columnFor(plan, 'month') >= 0) return wholeMonths(plan);
  const isSpan = columnFor(plan, 'period') >= 0;
  const hasFrom = isSpan || columnFor(plan, 'period-from') >= 0;
  if (!hasFrom || (!isSpan && columnFor(plan, 'period-to') < 0))
    return settleSingleDates(plan, rows, hasFrom, options, notes);
  const { ends, tests } = findEnds(rows);
  const settled = plan.columnMap.periodEnds ?? ends;
  plan.columnMap.periodEnds = settled;
  if (settled === 'inclusive') for (const row of rows) row.to += 1;
  const message =
    settled === 'inclusive'
      ? 'The last day printed belongs to its period.'
      : 'The last day printed belongs to the next period: periods run from reading to reading.';
  const isAssumed = settled === ends && tests.some(([isMet]) => !isMet);
  notes.push({
    code: isAssumed ? 'period-ends-assumed' : 'period-ends',
    message: isAssumed ? `${message} This is the custom of readings, not shown by the file.` : message,
  });
  const shown: Test[] = settled === ends ? tests : [[true, 'Given by the column map']];
  return guess('period-ends', settled === 'inclusive' ? 'last day included' : 'last day not included', shown);
}

/** A month of account may differ from the month of use by some days: a person has to know. */
function wholeMonths(plan: BillPlan): Guess {
  const isSure = plan.evidence.find((line) => line.takenAs === 'month')?.sure ?? true;
  return guess('period-ends', 'whole months', [
    [isSure, isSure ? 'Each bill names its month' : 'Only the month of account is named, taken as the month of use'],
  ]);
}

/** By how periods meet, else by the days printed, else by the ends of months. Documents of the same days count once. */
function findEnds(all: readonly DatedRow[]): { ends: Ends; tests: Test[] } {
  const rows = all.filter(
    (row, at) => !all.slice(0, at).some((other) => other.from === row.from && other.to === row.to),
  );
  const begins = new Set(rows.map((row) => row.from));
  const count = (isSo: (row: DatedRow) => boolean): number => rows.filter(isSo).length;
  const meeting = {
    inclusive: count((row) => begins.has(row.to + 1)),
    exclusive: count((row) => begins.has(row.to)),
  };
  const counted = {
    inclusive: count((row) => row.to - row.from + 1 === row.days),
    exclusive: count((row) => row.to - row.from === row.days),
  };
  const byMeeting = preferred(meeting);
  const byDays = preferred(counted);
  if (!byMeeting && !byDays) {
    const isMonthEnd = rows.every((row) => isoDate(row.to + 1).endsWith('-01'));
    if (isMonthEnd) return { ends: 'inclusive', tests: [[true, 'Every period ends on the last day of a month']] };
    return { ends: 'exclusive', tests: [[false, 'Nothing tells whether the last day belongs to the period']] };
  }
  const ends = byMeeting ?? byDays ?? 'exclusive';
  const tests: Test[] = [];
  const meet = ends === 'inclusive' ? 'end the day before the next begins' : 'end on the day the next begins';
  if (byMeeting) tests.push([true, `${meeting[ends]} of ${rows.length - 1} periods ${meet}`]);
  const counts = byDays === 'inclusive' ? 'in' : 'out';
  if (byDays)
    tests.push([
      byDays === ends,
      `The days printed count the last day ${counts} (${counted[byDays]} of ${rows.length})`,
    ]);
  return { ends, tests };
}

/** The end with more votes; null if they are equal. */
function preferred(votes: Record<Ends, number>): Ends | null {
  if (votes.inclusive === votes.exclusive) return null;
  return votes.inclusive > votes.exclusive ? 'inclusive' : 'exclusive';
}

/** One date a bill: periods run from one date to the next, the first by its printed days or dropped. */
function settleSingleDates(
  plan: BillPlan,
  rows: DatedRow[],
  hasFrom: boolean,
  options: ReadOptions,
  notes: IntakeNote[],
): Guess {
  const dates = [...new Set(rows.map((row) => (hasFrom ? row.from : row.to)))].sort((a, b) => a - b);
  for (const row of rows) {
    const at = dates.indexOf(hasFrom ? row.from : row.to);
    const neighbour = dates[hasFrom ? at + 1 : at - 1] ?? Number.NaN;
    if (hasFrom) row.to = Number.isNaN(row.days) ? neighbour : row.from + row.days;
    else row.from = Number.isNaN(row.days) ? neighbour : row.to - row.days;
  }
  const open = rows.find((row) => Number.isNaN(row.from) || Number.isNaN(row.to));
  if (open && dates.length === 1)
    throw intakeError(
      'The only bill has one date, so its period cannot be told.',
      `${options.fileName}, ${placeOf(plan, open.row)}`,
      'Add a column with the first day or with the days of the period.',
    );
  if (open) {
    notes.push({
      code: 'period-open',
      message: `The ${hasFrom ? 'last' : 'first'} bill has no ${hasFrom ? 'end' : 'beginning'} and is left out.`,
      where: placeOf(plan, open.row),
    });
  }
  return guess('period-ends', 'from date to date', [[false, 'Each bill has one date']]);
}
