import { describe, expect, it } from 'vitest';
import { shaftLoadSeries } from '../../../src/core/plan';
import type { ShiftCalendar } from '../../../src/core/plan';

const zone = 'America/Chicago';
const hourly = (fromUtc: number, count: number) => ({ startMs: fromUtc, stepMinutes: 60, count });
const hoursAt = (series: Float64Array, kw: number) => series.filter((value) => value === kw).length;

describe('shaftLoadSeries', () => {
  it('runs shifts by local clock and kind of day, a later rule over an earlier one', () => {
    // Monday 2026-06-01 00:00 in Chicago is 05:00 UTC. A week: five weekdays of 16 h, one Saturday of 8 h.
    const calendar: ShiftCalendar = {
      rules: [
        { days: ['weekday'], from: '06:00', to: '22:00', shaftKw: 900 },
        { days: ['sat'], from: '06:00', to: '14:00', loadFraction: 0.5 },
        { days: ['wed'], from: '10:00', to: '11:00', shaftKw: 0 },
      ],
    };
    const series = shaftLoadSeries(calendar, hourly(Date.UTC(2026, 5, 1, 5), 168), zone, 1000);
    expect(hoursAt(series, 900)).toBe(79);
    expect(hoursAt(series, 500)).toBe(8);
    expect(series[5]).toBe(0);
    expect(series[6]).toBe(900);
    expect(series[21]).toBe(900);
    expect(series[22]).toBe(0);
    expect(series[2 * 24 + 10]).toBe(0);
  });

  it('carries a night shift into the next day', () => {
    const calendar: ShiftCalendar = { rules: [{ days: ['fri'], from: '22:00', to: '06:00', shaftKw: 700 }] };
    // Friday 2026-06-05 00:00 local.
    const series = shaftLoadSeries(calendar, hourly(Date.UTC(2026, 5, 5, 5), 48), zone);
    expect([...series].map((kw, i) => (kw > 0 ? i : -1)).filter((i) => i >= 0)).toEqual([
      22, 23, 24, 25, 26, 27, 28, 29,
    ]);
  });

  it('keeps clock times through both clock changes: 23 and 25 hours of continuous running', () => {
    const calendar: ShiftCalendar = {
      rules: [
        { days: ['every'], dates: { from: '2026-03-08', to: '2026-03-09' }, from: '00:00', to: '24:00', shaftKw: 1 },
      ],
    };
    expect(hoursAt(shaftLoadSeries(calendar, hourly(Date.UTC(2026, 2, 7), 96), zone), 1)).toBe(23);
    calendar.rules[0]!.dates = { from: '2026-11-01', to: '2026-11-02' };
    expect(hoursAt(shaftLoadSeries(calendar, hourly(Date.UTC(2026, 9, 31), 96), zone), 1)).toBe(25);
    // 06:00 local stays 06:00: 12:00 UTC before 8 March, 11:00 UTC after.
    const shift = shaftLoadSeries(
      { rules: [{ days: ['every'], from: '06:00', to: '07:00', shaftKw: 1 }] },
      hourly(Date.UTC(2026, 2, 7), 72),
      zone,
    );
    expect([shift[12], shift[24 + 11], shift[48 + 11]]).toEqual([1, 1, 1]);
    expect(hoursAt(shift, 1)).toBe(3);
  });

  it('stands still in shutdowns, and on holidays unless a rule names them', () => {
    const calendar: ShiftCalendar = {
      rules: [
        { days: ['weekday'], from: '00:00', to: '24:00', shaftKw: 10 },
        { days: ['holiday'], from: '08:00', to: '10:00', shaftKw: 5 },
      ],
      holidays: ['2026-06-02'],
      shutdowns: [{ from: '2026-06-04', to: '2026-06-06' }],
    };
    const series = shaftLoadSeries(calendar, hourly(Date.UTC(2026, 5, 1), 120), 'UTC');
    expect(hoursAt(series, 10)).toBe(48);
    expect(hoursAt(series, 5)).toBe(2);
  });

  it('takes the load of an interval’s middle', () => {
    const series = shaftLoadSeries(
      { rules: [{ days: ['every'], from: '06:10', to: '06:40', shaftKw: 1 }] },
      { startMs: Date.UTC(2026, 5, 1, 6), stepMinutes: 15, count: 4 },
      'UTC',
    );
    expect([...series]).toEqual([0, 1, 1, 0]);
  });

  it('serves zones of half hours and any year without NaN', () => {
    const calendar: ShiftCalendar = { rules: [{ days: ['every'], from: '09:00', to: '17:00', shaftKw: 3 }] };
    const series = shaftLoadSeries(
      calendar,
      { startMs: Date.UTC(2025, 0, 1), stepMinutes: 15, count: 35040 },
      'Asia/Kolkata',
    );
    expect(series.some((kw) => Number.isNaN(kw))).toBe(false);
    expect(hoursAt(series, 3)).toBe(365 * 32);
    expect(series[14]).toBe(3);
    expect(series[13]).toBe(0);
  });

  it.each([
    [{ rules: [{ days: [], from: '06:00', to: '07:00', shaftKw: 1 }] }, /rules\[0\].days/],
    [{ rules: [{ days: ['monday'], from: '06:00', to: '07:00', shaftKw: 1 }] }, /got monday/],
    [
      { rules: [{ days: ['mon'], from: '6:00', to: '07:00', shaftKw: 1 }] },
      /rules\[0\].from must be a clock time HH:MM/,
    ],
    [{ rules: [{ days: ['mon'], from: '06:00', to: '24:30', shaftKw: 1 }] }, /rules\[0\].to/],
    [{ rules: [{ days: ['mon'], from: '06:00', to: '07:00' }] }, /either shaftKw or loadFraction, got neither/],
    [{ rules: [{ days: ['mon'], from: '06:00', to: '07:00', loadFraction: 0.5 }] }, /ratedOutputKw/],
    [{ rules: [{ days: ['mon'], from: '06:00', to: '07:00', shaftKw: -1 }] }, /load >= 0, got -1/],
    [{ rules: [], shutdowns: [{ from: '2026-02-01', to: '2026-02-01' }] }, /shutdowns\[0\] must end after they begin/],
    [
      {
        rules: [
          { days: ['mon'], dates: { from: '2026-2-1', to: '2026-03-01' }, from: '06:00', to: '07:00', shaftKw: 1 },
        ],
      },
      /rules\[0\].dates.from must be a day written YYYY-MM-DD, got 2026-2-1/,
    ],
    [{ rules: [], holidays: ['2026-02-30'] }, /holidays\[0\] must be a day .* got 2026-02-30/],
  ])('refuses %j', (calendar, message) => {
    expect(() => shaftLoadSeries(calendar as ShiftCalendar, hourly(0, 1), 'UTC')).toThrow(message);
  });

  it('refuses an unknown zone', () => {
    expect(() => shaftLoadSeries({ rules: [] }, hourly(0, 1), 'Atlantis/Capital')).toThrow(/timeZone/);
  });
});
