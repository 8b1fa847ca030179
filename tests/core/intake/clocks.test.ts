import { describe, expect, it } from 'vitest';
import type { IntervalReading } from '@/core/intake';
import { readingsBetween, readText, wallOf, type Reading } from './files';

// Both clock changes of 2025: Vienna 30 March and 26 October, Chicago 9 March and 2 November.
const zones = [
  { timeZone: 'Europe/Vienna', from: '2025-02-28T23:00:00Z', to: '2025-11-30T23:00:00Z' },
  { timeZone: 'America/Chicago', from: '2025-03-01T06:00:00Z', to: '2025-12-01T06:00:00Z' },
];
const step = 15;
const stepMs = step * 60_000;

const table = (rows: string[]) => ['Time,kWh,Lagging kvarh', ...rows].join('\n');
const row = (stamp: string, reading: Reading) => `${stamp},${reading.kwh},${reading.lagging}`;

/** Local stamp of the beginning, or of the end by the same clock, or by the clock at the end. */
function stampOf(reading: Reading, timeZone: string, style: 'begin' | 'wall-end' | 'true-end'): string {
  if (style === 'true-end') {
    const { date, time } = wallOf(reading.utcMs + stepMs, timeZone);
    return `${date} ${time}`;
  }
  const { date, time } = wallOf(reading.utcMs, timeZone);
  if (style === 'begin') return `${date} ${time}`;
  const wall = Date.parse(`${date}T${time}:00Z`) + stepMs;
  return new Date(wall).toISOString().slice(0, 16).replace('T', ' ');
}

function expectEvery(reading: IntervalReading, readings: Reading[]): void {
  expect(reading.load.startMs).toBe(readings[0]?.utcMs);
  expect(reading.load.stepMinutes).toBe(step);
  expect([...reading.load.kwh]).toEqual(readings.map((one) => one.kwh));
  expect([...reading.load.kvarhLagging]).toEqual(readings.map((one) => one.lagging));
  expect(reading.report).toMatchObject({ missing: 0, duplicates: 0, rowsRead: readings.length });
}

describe.each(zones)('stamps of $timeZone over both clock changes', ({ timeZone, from, to }) => {
  const readings = readingsBetween(from, to, step);

  it.each(['begin', 'wall-end', 'true-end'] as const)(
    'reads every interval of %s stamps, second pass after the first',
    async (style) => {
      expectEvery(
        await readText(table(readings.map((one) => row(stampOf(one, timeZone, style), one))), timeZone),
        readings,
      );
    },
  );

  it.each(['begin', 'wall-end'] as const)('reads %s stamps whose repeated hour is interleaved', async (style) => {
    const stamped = readings.map((one) => ({ one, stamp: stampOf(one, timeZone, style) }));
    const sorted = [...stamped].sort((a, b) =>
      a.stamp < b.stamp ? -1 : a.stamp > b.stamp ? 1 : a.one.utcMs - b.one.utcMs,
    );
    expect(sorted).not.toEqual(stamped);
    expectEvery(await readText(table(sorted.map(({ one, stamp }) => row(stamp, one))), timeZone), readings);
  });

  it('reads a file that runs backwards', async () => {
    const rows = readings.map((one) => row(stampOf(one, timeZone, 'begin'), one)).reverse();
    expectEvery(await readText(table(rows), timeZone), readings);
  });

  it('leaves the second pass missing where the repeated hour is written once', async () => {
    const seen = new Set<string>();
    const rows: string[] = [];
    const lost: number[] = [];
    readings.forEach((one, at) => {
      const stamp = stampOf(one, timeZone, 'begin');
      if (seen.has(stamp)) lost.push(at);
      else rows.push(row(stamp, one));
      seen.add(stamp);
    });
    const { load, report } = await readText(table(rows), timeZone);
    expect(lost).toHaveLength(4);
    expect(report.missing).toBe(4);
    expect(report.gaps).toEqual([
      { fromMs: readings[lost[0] ?? 0]?.utcMs, toMs: (readings[lost[3] ?? 0]?.utcMs ?? 0) + stepMs, intervals: 4 },
    ]);
    expect(report.notes.map((note) => note.code)).toContain('repeated-hour-once');
    readings.forEach((one, at) => {
      if (!lost.includes(at)) expect(load.kwh[at]).toBe(one.kwh);
    });
  });

  it.each([
    ['blank', ''],
    ['nought', '0'],
  ])('drops %s fillers in the hour that spring skips', async (_name, filler) => {
    const rows: string[] = [];
    readings.forEach((one, at) => {
      const before = readings[at - 1];
      const { time, date } = wallOf(one.utcMs, timeZone);
      const earlier = before ? wallOf(before.utcMs, timeZone) : null;
      if (earlier && time === '03:00' && earlier.time === '01:45') {
        for (const minute of ['00', '15', '30', '45']) rows.push(`${date} 02:${minute},${filler},${filler}`);
      }
      rows.push(row(stampOf(one, timeZone, 'begin'), one));
    });
    const reading = await readText(table(rows), timeZone);
    const fillers = rows.length - readings.length;
    expect(fillers).toBe(4);
    expect([...reading.load.kwh]).toEqual(readings.map((one) => one.kwh));
    expect(reading.report.notes.some((note) => note.code === 'skipped-hour-fillers')).toBe(true);
  });

  it('tells a clock without summer time by its readings in the skipped hour', async () => {
    const offset = timeZone === 'America/Chicago' ? -6 : 1;
    const rows = readings.map((one) => row(new Date(one.utcMs + offset * 3_600_000).toISOString().slice(0, 16), one));
    const reading = await readText(table(rows), timeZone);
    expectEvery(reading, readings);
    expect(reading.report.notes.map((note) => note.code)).toContain('standard-time');
  });

  it('follows the offset in each stamp whatever the zone of the site', async () => {
    const rows = readings.map((one) => {
      const { date, time } = wallOf(one.utcMs, timeZone);
      const minutes = (Date.parse(`${date}T${time}:00Z`) - one.utcMs) / 60_000;
      const sign = minutes < 0 ? '-' : '+';
      const hours = String(Math.abs(minutes) / 60).padStart(2, '0');
      return row(`${date}T${time}:00${sign}${hours}:00`, one);
    });
    expectEvery(await readText(table(rows), 'Asia/Tokyo'), readings);
  });

  it('reads hours numbered 1 to 24, 25 in autumn and 23 in spring', async () => {
    const hours = readings.filter((_, at) => at % 4 === 0);
    let day = '';
    let number = 0;
    const rows = hours.map((one) => {
      const { date } = wallOf(one.utcMs, timeZone);
      number = date === day ? number + 1 : 1;
      day = date;
      return `${date},${number},${one.kwh},${one.lagging}`;
    });
    const { load, report } = await readText(['Date,Hour,kWh,Lagging kvarh', ...rows].join('\n'), timeZone);
    expect(report).toMatchObject({ missing: 0, duplicates: 0, intervals: hours.length, stepMinutes: 60 });
    expect([...load.kwh]).toEqual(hours.map((one) => one.kwh));
  });
});

describe('stamps with both ends', () => {
  it('takes the beginning and the length from two columns', async () => {
    const timeZone = 'Europe/Vienna';
    const readings = readingsBetween('2025-05-31T22:00:00Z', '2025-06-03T22:00:00Z', step);
    const rows = readings.map(
      (one) => `${stampOf(one, timeZone, 'begin')},${stampOf(one, timeZone, 'true-end')},${one.kwh},${one.lagging}`,
    );
    expectEvery(await readText(['From,To,kWh,Lagging kvarh', ...rows].join('\n'), timeZone), readings);
  });

  it('reads spans of time beside a date', async () => {
    const timeZone = 'Europe/Vienna';
    const readings = readingsBetween('2025-05-31T22:00:00Z', '2025-06-03T22:00:00Z', step);
    const rows = readings.map((one) => {
      const { date, time } = wallOf(one.utcMs, timeZone);
      return `${date},${time} - ${wallOf(one.utcMs + stepMs, timeZone).time},${one.kwh},${one.lagging}`;
    });
    expectEvery(await readText(['Date,Span,kWh,Lagging kvarh', ...rows].join('\n'), timeZone), readings);
  });
});
