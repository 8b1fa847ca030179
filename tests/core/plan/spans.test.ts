import { describe, expect, it } from 'vitest';
import { spanSeries } from '../../../src/core/plan';
import type { SpanRule } from '../../../src/core/plan';

const quarter = (startMs: number, days: number) => ({ startMs, stepMinutes: 15, count: days * 96 });

// 2026-03-05 is a Thursday. In Chicago clocks go forward on Sunday 2026-03-08 at 02:00, 08:00 UTC; midnight is 06:00 UTC before, 05:00 after.
const chicago = quarter(Date.UTC(2026, 2, 5, 6), 6);
const rest: SpanRule = { name: 'Rest' };

/** Spans of the hours of a local day, each read at its first quarter. */
const hoursOf = (index: Uint8Array, first: number, count = 24) =>
  Array.from({ length: count }, (_, hour) => index[first + 4 * hour]).join('');

describe('spanSeries', () => {
  it('gives everything to the first span where no other holds', () => {
    expect(spanSeries([rest], chicago, 'America/Chicago')).toEqual({ index: new Uint8Array(576), count: 1 });
  });

  it('keeps a shift over midnight with the day it begins in', () => {
    const night: SpanRule = { name: 'Night', days: ['weekday'], from: '22:00', to: '06:00' };
    const { index } = spanSeries([rest, night], chicago, 'America/Chicago');
    // Thursday: Wednesday's night until 06:00, then its own from 22:00.
    expect(hoursOf(index, 0)).toBe('111111000000000000000011');
    // Saturday: Friday's night until 06:00, none of its own.
    expect(hoursOf(index, 192)).toBe('111111000000000000000000');
    // Sunday has 23 hours and no night; Monday begins without one.
    expect(hoursOf(index, 288, 23)).toBe('00000000000000000000000');
    expect(hoursOf(index, 288 + 92)).toBe('000000000000000000000011');
  });

  it('lets a later span win, and reads holidays as no weekday', () => {
    const work: SpanRule = { name: 'Work', days: ['weekday'] };
    const noon: SpanRule = { name: 'Noon', from: '11:00', to: '13:00' };
    const { index, count } = spanSeries([rest, work, noon], chicago, 'America/Chicago', ['2026-03-06']);
    expect(count).toBe(3);
    expect(hoursOf(index, 0)).toBe('111111111112211111111111');
    expect(hoursOf(index, 96)).toBe('000000000002200000000000');
  });

  it('parts the year by months of the local calendar', () => {
    // Kolkata is UTC+5:30: 2026-05-31 18:30 UTC is midnight of 1 June.
    const grid = quarter(Date.UTC(2026, 4, 31), 1);
    const { index } = spanSeries([rest, { name: 'Summer', months: [6, 7, 8, 9] }], grid, 'Asia/Kolkata');
    expect(index.indexOf(1)).toBe(74);
    expect(index.lastIndexOf(0)).toBe(73);
  });

  it('keeps the night of the last day of a season in that season', () => {
    const grid = quarter(Date.UTC(2026, 5, 30), 2);
    const night: SpanRule = { name: 'June nights', months: [6], from: '22:00', to: '06:00' };
    expect(hoursOf(spanSeries([rest, night], grid, 'UTC').index, 96)).toBe('111111000000000000000000');
  });

  it('takes dates', () => {
    const stop: SpanRule = { name: 'Overhaul', dates: { from: '2026-03-06', to: '2026-03-07' } };
    const { index } = spanSeries([rest, stop], chicago, 'America/Chicago');
    expect([index.indexOf(1), index.lastIndexOf(1)]).toEqual([96, 191]);
  });

  it.each([
    [[], /rules must be 1 to 12 spans, got 0/],
    [[rest, { name: 'a', from: '06:00' }], /rules\[1\] must have both from and to/],
    [[rest, { name: 'a', months: [0] }], /rules\[1\]\.months must be months from 1 to 12, got 0/],
    [[rest, { name: 'a', days: [] }], /rules\[1\]\.days must name at least one/],
    [[rest, { name: 'a', from: '6', to: '25:00' }], /rules\[1\]\.from must be a clock time/],
    [[rest, { name: 'a', dates: { from: '2026-02-30', to: '2026-03-01' } }], /rules\[1\]\.dates\.from must be a day/],
  ] as [SpanRule[], RegExp][])('refuses %j', (rules, message) => {
    expect(() => spanSeries(rules, chicago, 'America/Chicago')).toThrow(message);
  });

  it('refuses a zone that is none', () => {
    expect(() => spanSeries([rest], chicago, 'Nowhere')).toThrow(/IANA zone, got Nowhere/);
  });
});
