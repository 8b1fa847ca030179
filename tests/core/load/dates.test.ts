import { describe, expect, it } from 'vitest';
import {
  addDays,
  addMonths,
  assertLoadSeries,
  dayNumber,
  intervalStartMs,
  isCalendarDate,
  isTimeZone,
  isoDate,
  localDateOf,
  localDateStartMs,
  weekdayOf,
  zoneOffsetMs,
} from '@/core/load';

const hour = 3_600_000;

describe('local dates', () => {
  // Time zone database (IANA): begin of summer time at 02:00 local in Chicago on 8 March 2026, at 01:00 UTC in Europe on 29 March.
  it.each([
    ['2026-07-01', 'America/Chicago', Date.UTC(2026, 6, 1, 5)],
    ['2026-01-01', 'America/Chicago', Date.UTC(2026, 0, 1, 6)],
    ['2026-03-08', 'America/Chicago', Date.UTC(2026, 2, 8, 6)],
    ['2026-03-09', 'America/Chicago', Date.UTC(2026, 2, 9, 5)],
    ['2026-01-01', 'Asia/Kolkata', Date.UTC(2025, 11, 31, 18, 30)],
    ['2026-01-01', 'Asia/Kathmandu', Date.UTC(2025, 11, 31, 18, 15)],
    // Chile goes forward at midnight (24:00 of 5 September 2026): the date begins at 01:00 local, 04:00 UTC.
    ['2026-09-06', 'America/Santiago', Date.UTC(2026, 8, 6, 4)],
    // And back at midnight: 4 April 2026 has 25 hours and its last hour is read twice; 5 April begins once.
    ['2026-04-05', 'America/Santiago', Date.UTC(2026, 3, 5, 4)],
    // Cuba goes back from 01:00 to 00:00: the midnight of 1 November 2026 is read twice, the date begins with the first.
    ['2026-11-01', 'America/Havana', Date.UTC(2026, 10, 1, 4)],
  ])('%s in %s begins', (date, timeZone, ms) => {
    expect(localDateStartMs(date, timeZone)).toBe(ms);
    expect(localDateOf(ms, timeZone)).toBe(date);
    expect(localDateOf(ms - 1, timeZone)).toBe(addDays(date, -1));
  });

  it('gives days of 23 and 25 hours', () => {
    const length = (date: string): number =>
      (localDateStartMs(addDays(date, 1), 'Europe/Lisbon') - localDateStartMs(date, 'Europe/Lisbon')) / hour;
    expect([length('2026-03-28'), length('2026-03-29'), length('2026-10-25')]).toEqual([24, 23, 25]);
  });

  it('knows zones', () => {
    expect(zoneOffsetMs(Date.UTC(2026, 0, 1), 'Asia/Kathmandu')).toBe(5.75 * hour);
    expect(isTimeZone('Europe/Lisbon')).toBe(true);
    expect(isTimeZone('Europe/Lisboa')).toBe(false);
  });
});

describe('calendar arithmetic', () => {
  it('counts days and weekdays', () => {
    expect(dayNumber('1970-01-01')).toBe(0);
    expect(isoDate(dayNumber('2028-02-29'))).toBe('2028-02-29');
    // 14 July 2026 is a Tuesday.
    expect(weekdayOf(dayNumber('2026-07-14'))).toBe(2);
    expect(weekdayOf(dayNumber('1969-12-31'))).toBe(3);
  });

  it('adds months, to the last day where there is no such day', () => {
    expect(addMonths('2026-03-31', -1)).toBe('2026-02-28');
    expect(addMonths('2028-01-31', 1)).toBe('2028-02-29');
    expect(addMonths('2026-07-16', -11)).toBe('2025-08-16');
    expect(addMonths('2026-11-01', 14)).toBe('2028-01-01');
  });

  it('refuses what is no date', () => {
    expect(() => dayNumber('2026-02-30')).toThrow(
      'date must be a day of the calendar written YYYY-MM-DD, got "2026-02-30"',
    );
    expect(isCalendarDate('2026-6-1')).toBe(false);
    expect(isCalendarDate('2026-02-29')).toBe(false);
  });
});

describe('assertLoadSeries', () => {
  const load = {
    startMs: 0,
    stepMinutes: 15,
    kwh: new Float64Array(2),
    kvarhLagging: new Float64Array(2),
    kvarhLeading: new Float64Array(2),
    quality: new Uint8Array(2),
  };

  it('accepts a series and tells where its intervals begin', () => {
    expect(() => assertLoadSeries(load)).not.toThrow();
    expect(intervalStartMs(load, 2)).toBe(30 * 60_000);
  });

  it('names what is wrong', () => {
    expect(() => assertLoadSeries({ ...load, stepMinutes: 7 })).toThrow(
      'stepMinutes must be one of 1, 5, 10, 15, 20, 30, 60, got 7',
    );
    expect(() => assertLoadSeries({ ...load, quality: new Uint8Array(3) })).toThrow(
      'quality must have 2 values like kwh, got 3',
    );
    expect(() => assertLoadSeries({ ...load, startMs: NaN })).toThrow('startMs');
  });
});
