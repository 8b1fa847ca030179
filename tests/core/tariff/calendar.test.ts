import { describe, expect, it } from 'vitest';
import { addDays, dayNumber, localDateStartMs } from '@/core/load';
import { priceBills, type PricedBill } from '@/core/tariff';
import { dayKindsOf, dayTokens } from '@/core/tariff/calendar/day-kinds';
import { holidaysOfYear } from '@/core/tariff/calendar/holidays';
import { buildSchedule, buildSeries, valuesOf } from './build';

/** kWh of one kW steady, by window: the hours of each. */
function hoursIn(
  windows: string,
  names: string[],
  input: {
    from: string;
    to: string;
    timeZone: string;
    stepMinutes?: number;
    head?: Record<string, string>;
    above?: string;
  },
): Record<string, number> {
  const { from, to, timeZone, stepMinutes = 15 } = input;
  const load = buildSeries({ from, to, timeZone, stepMinutes, powers: () => [1, 0, 0] });
  const body = `${input.above ?? ''}\nwindows:\n${windows}\nquantities:\n  kwh: { sum: kwh, inEach: [${names.join(', ')}] }\ncharges:\n  length: { amount: hours, group: fixed }`;
  const [bill] = priceBills(buildSchedule(body, { timeZone, ...input.head }), load, { periods: [{ from, to }] });
  const found = Object.fromEntries(
    Object.entries(valuesOf(bill)).map(([name, value]) => [name.slice(3), Math.round(value * 1e6) / 1e6]),
  );
  return { ...found, all: bill!.total };
}

describe('windows', () => {
  const rules =
    '  peak: { days: weekdays, hours: 08:00-20:00 }\n  night: { days: every day, hours: 22:00-06:00 }\n  rest1: { rest: [peak, night] }';

  it('hold on their days and hours, over midnight too', () => {
    // Monday 13 to Sunday 19 July 2026: five days of 12 hours, seven nights of 8, and the rest of 168.
    const found = hoursIn(rules, ['peak', 'night', 'rest1'], {
      from: '2026-07-13',
      to: '2026-07-20',
      timeZone: 'Europe/Lisbon',
    });
    expect(found).toEqual({ Peak: 60, Night: 56, Rest1: 52, all: 168 });
  });

  it('judge every instant of a night by its own date', () => {
    // A night of weekdays only: Friday 17 from 22:00 to midnight counts, Saturday until 06:00 does not.
    const found = hoursIn('  night: { days: weekdays, hours: 22:00-06:00 }', ['night'], {
      from: '2026-07-17',
      to: '2026-07-19',
      timeZone: 'Europe/Lisbon',
    });
    expect(found['Night']).toBe(8);
  });

  // IANA: clocks in Chicago skip 02:00-03:00 on 8 March 2026 and repeat 01:00-02:00 on 1 November 2026.
  it('price days of 23 and 25 hours as they are', () => {
    const early = '  early: { days: every day, hours: 01:00-04:00 }\n  rest1: { rest: early }';
    const chicago = { timeZone: 'America/Chicago', stepMinutes: 60 };
    expect(hoursIn(early, ['early', 'rest1'], { ...chicago, from: '2026-03-08', to: '2026-03-09' })).toEqual({
      Early: 2,
      Rest1: 21,
      all: 23,
    });
    expect(hoursIn(early, ['early', 'rest1'], { ...chicago, from: '2026-11-01', to: '2026-11-02' })).toEqual({
      Early: 4,
      Rest1: 21,
      all: 25,
    });
  });

  // IANA: Chile changes at midnight (forward at 24:00 of 5 September 2026, back at 24:00 of 4 April); Lord Howe Island by half an hour,
  // from 02:00 to 02:30 on 4 October 2026.
  it('follow changes at midnight and of half an hour', () => {
    const early = '  early: { days: every day, hours: 00:00-02:00 }\n  late: { days: every day, hours: 23:00-24:00 }';
    const santiago = { timeZone: 'America/Santiago', stepMinutes: 60 };
    expect(hoursIn(early, ['early', 'late'], { ...santiago, from: '2026-09-06', to: '2026-09-07' })).toEqual({
      Early: 1,
      Late: 1,
      all: 23,
    });
    expect(hoursIn(early, ['early', 'late'], { ...santiago, from: '2026-04-04', to: '2026-04-05' })).toEqual({
      Early: 2,
      Late: 2,
      all: 25,
    });
    const half = '  mid: { days: every day, hours: 01:00-03:00 }\n  other: { rest: mid }';
    const island = { timeZone: 'Australia/Lord_Howe', stepMinutes: 30, from: '2026-10-04', to: '2026-10-05' };
    expect(hoursIn(half, ['mid', 'other'], island)).toEqual({ Mid: 1.5, Other: 22, all: 23.5 });
  });

  it('follow the local clock in zones of half and quarter hours', () => {
    const found = hoursIn('  noon: { days: every day, hours: 12:00-13:00 }', ['noon'], {
      from: '2026-07-13',
      to: '2026-07-14',
      timeZone: 'Asia/Kathmandu',
    });
    expect(found['Noon']).toBe(1);
  });

  it('choose rules by season', () => {
    const above = 'seasons:\n  winter: [11-01 to 12-31, 01-01 to 02-28]\n  summer: rest';
    const rule =
      '  peak:\n    - { season: winter, days: every day, hours: 17:00-21:00 }\n    - { season: summer, days: every day, hours: [10:00-11:00, 13:00-14:00] }';
    // 27 February to 2 March 2028: 27, 28 and 29 February are winter (02-28 includes 02-29), 1 March is summer.
    const found = hoursIn(rule, ['peak'], { from: '2028-02-27', to: '2028-03-02', timeZone: 'Europe/Lisbon', above });
    expect(found['Peak']).toBe(3 * 4 + 2);
  });
});

describe('holidays', () => {
  // Portuguese public holidays of April 2026: Good Friday 3, Easter 5, Freedom Day Saturday 25 (Portuguese labour code, art. 234).
  const rules =
    '  work: { days: weekdays, hours: 00:00-24:00 }\n  free: { days: [weekends, holidays], hours: 00:00-24:00 }\n  fri: { days: fri, hours: 00:00-24:00 }';
  const april = { from: '2026-04-01', to: '2026-05-01', timeZone: 'Europe/Lisbon', stepMinutes: 60 };

  it('are no weekdays and no named days; a holiday on a weekend is a weekend', () => {
    const found = hoursIn(rules, ['work', 'free', 'fri'], { ...april, head: { holidays: '{ calendar: PT }' } });
    // 22 days of Monday to Friday less one; four Fridays less one.
    expect(found).toMatchObject({ Work: 21 * 24, Free: 9 * 24, Fri: 3 * 24, all: 720 });
  });

  it('can be added and dropped', () => {
    const found = hoursIn(rules, ['work', 'free', 'fri'], {
      ...april,
      head: { holidays: '{ calendar: PT, add: [2026-04-24], drop: [2026-04-03] }' },
    });
    expect(found).toMatchObject({ Work: 21 * 24, Free: 9 * 24, Fri: 3 * 24 });
    const none = hoursIn(rules, ['work', 'free', 'fri'], april);
    expect(none).toMatchObject({ Work: 22 * 24, Free: 8 * 24, Fri: 4 * 24 });
  });

  // US Code title 5, section 6103: Independence Day of 2026 falls on a Saturday, observed on Friday 3 July.
  it('include substitute days and public days only', () => {
    const us = holidaysOfYear({ calendar: 'US', add: [], drop: [] }, 2026);
    expect(us.has('2026-07-03') && us.has('2026-07-04') && us.has('2026-11-26')).toBe(true);
    // Mother's Day and Carnival are observances.
    expect(us.has('2026-05-10')).toBe(false);
    expect(holidaysOfYear({ calendar: 'PT', add: [], drop: [] }, 2026).has('2026-02-17')).toBe(false);
    // South Tyrol (IT-32) keeps Whit Monday, 25 May 2026; Italy does not.
    expect(holidaysOfYear({ calendar: 'IT-32', add: [], drop: [] }, 2026).has('2026-05-25')).toBe(true);
    expect(holidaysOfYear({ calendar: 'IT', add: [], drop: [] }, 2026).has('2026-05-25')).toBe(false);
  });
});

describe('cells of the local clock', () => {
  it('hold two hours where the autumn hour repeats, and none where the spring hour is skipped', () => {
    const count = (date: string): number => {
      const load = buildSeries({
        from: date,
        to: addDays(date, 1),
        timeZone: 'Europe/Lisbon',
        stepMinutes: 15,
        powers: () => [1, 0, 0],
      });
      const schedule = buildSchedule(
        'quantities:\n  cells: { sum: kwh / kwh, each: hour }\ncharges:\n  a: { amount: 1, group: fixed }',
      );
      return valuesOf(priceBills(schedule, load, { periods: [{ from: date, to: addDays(date, 1) }] })[0])['cells']!;
    };
    expect([count('2026-03-28'), count('2026-03-29'), count('2026-10-25')]).toEqual([24, 23, 25]);
  });

  it('begin demand windows at multiples of the local clock in any zone', () => {
    // Kathmandu is 5:45 ahead: half hours begin at a quarter past or to in UTC.
    const load = buildSeries({
      from: '2026-07-13',
      to: '2026-07-14',
      timeZone: 'Asia/Kathmandu',
      stepMinutes: 15,
      powers: (local) => [local.getUTCHours() === 9 && local.getUTCMinutes() < 30 ? 100 : 10, 0, 0],
    });
    const schedule = buildSchedule(
      'quantities:\n  maxKw: { highest: kw }\ncharges:\n  a: { amount: 1, group: fixed }',
      { timeZone: 'Asia/Kathmandu', demandWindow: '30 min' },
    );
    const [bill] = priceBills(schedule, load, { periods: [{ from: '2026-07-13', to: '2026-07-14' }] });
    expect(bill!.quantities['maxKw']).toMatchObject({ value: 100, at: '2026-07-13T03:15:00.000Z' });
  });
});

describe('kinds of days', () => {
  it('follow the words of the language', () => {
    const holds = (weekday: number, isHoliday: boolean): string[] =>
      [...dayTokens].filter(([, bit]) => dayKindsOf(weekday, isHoliday) & bit).map(([word]) => word);
    expect(holds(1, false)).toEqual(['every day', 'weekdays', 'mon']);
    expect(holds(1, true)).toEqual(['every day', 'holidays']);
    expect(holds(6, false)).toEqual(['every day', 'weekends', 'sat']);
    expect(holds(0, true)).toEqual(['every day', 'weekends', 'holidays']);
  });
});

describe('a whole year beside a slow reckoning', () => {
  it('puts every interval into the window its own local time says', () => {
    // The slow way: the platform's local time of each interval, one by one.
    const timeZone = 'America/Chicago';
    const from = '2026-01-01';
    const to = '2027-01-01';
    const load = buildSeries({
      from,
      to,
      timeZone,
      stepMinutes: 30,
      powers: (_, index) => [(index * 7919) % 101, 0, 0],
    });
    const format = new Intl.DateTimeFormat('en-US', {
      timeZone,
      weekday: 'short',
      hour: '2-digit',
      minute: '2-digit',
      hourCycle: 'h23',
      month: 'numeric',
      day: 'numeric',
    });
    let peak = 0;
    let winterNights = 0;
    for (let i = 0; i < load.kwh.length; i++) {
      const parts = Object.fromEntries(
        format.formatToParts(localDateStartMs(from, timeZone) + i * 1_800_000).map(({ type, value }) => [type, value]),
      );
      const hour = Number(parts['hour']);
      const isWeekend = parts['weekday'] === 'Sat' || parts['weekday'] === 'Sun';
      const month = Number(parts['month']);
      if (!isWeekend && hour >= 7 && hour < 19) peak += load.kwh[i]!;
      if ((month <= 3 || month >= 11) && (hour >= 22 || hour < 5)) winterNights += load.kwh[i]!;
    }
    const schedule = buildSchedule(
      'seasons:\n  winter: 11-01 to 03-31\n  summer: rest\nwindows:\n  peak: { days: weekdays, hours: 07:00-19:00 }\n  winterNight: { season: winter, days: every day, hours: 22:00-05:00 }\nquantities:\n  peakKwh: { sum: kwh, in: peak }\n  nightKwh: { sum: kwh, in: winterNight }\ncharges:\n  a: { amount: 1, group: fixed }',
      { timeZone, straddle: 'intervals' },
    );
    const months = Array.from({ length: 12 }, (_, m) => `2026-${String(m + 1).padStart(2, '0')}-01`);
    const bills: PricedBill[] = priceBills(schedule, load, {
      periods: months.map((first, m) => ({ from: first, to: months[m + 1] ?? to })),
    });
    const sum = (name: string): number => bills.reduce((whole, bill) => whole + bill.quantities[name]!.value, 0);
    expect(sum('peakKwh')).toBeCloseTo(peak, 6);
    expect(sum('nightKwh')).toBeCloseTo(winterNights, 6);
    expect(dayNumber(to) - dayNumber(from)).toBe(365);
  });
});
