import { expect } from 'vitest';
import { describeSchedule, PriceError, priceBills, readSchedule, ScheduleError, type Schedule } from '@/core/tariff';
import { buildSeries } from './build';

const period = { from: '2026-07-10', to: '2026-07-17' };

/** What became of a stranger's text. */
export type Outcome = 'priced' | 'not read' | 'not priced';

function price(schedule: Schedule): Outcome {
  const load = buildSeries({
    ...period,
    timeZone: schedule.timeZone,
    stepMinutes: 15,
    powers: (_, i) => [100 + (i % 37), i % 3 === 0 ? 60 : 0, i % 3 === 1 ? 25 : 0],
  });
  try {
    for (const bill of priceBills(schedule, load, { periods: [period] })) {
      expect(Number.isFinite(bill.total)).toBe(true);
      expect(Number.isFinite(bill.reactiveCost)).toBe(true);
    }
    return 'priced';
  } catch (error) {
    if (!(error instanceof PriceError)) throw error;
    expect(error.message).toMatch(/\w.*\.$/s);
    return 'not priced';
  }
}

/** Reads and prices a text; whatever is not a value or an error of ours is thrown on. */
export function outcomeOf(text: string): Outcome {
  let schedule: Schedule;
  try {
    schedule = readSchedule(text);
  } catch (error) {
    if (!(error instanceof ScheduleError)) throw error;
    const lines = text.split(/\r\n|\n/).length;
    expect(error.problems.length).toBeGreaterThan(0);
    for (const { line, column, message, remedy } of error.problems) {
      expect(line).toBeGreaterThanOrEqual(1);
      expect(line).toBeLessThanOrEqual(lines);
      expect(column).toBeGreaterThanOrEqual(1);
      expect(`${message} ${remedy}`.trim().length).toBeGreaterThan(10);
    }
    return 'not read';
  }
  JSON.stringify(describeSchedule(schedule));
  return price(schedule);
}
