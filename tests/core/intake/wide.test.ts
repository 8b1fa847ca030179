import { describe, expect, it } from 'vitest';
import { previewIntervals } from '@/core/intake';
import { bytesOf, readingsBetween, readText, wallOf, type Reading } from './files';

const vienna = 'Europe/Vienna';

/** Readings by local day, in order. */
function byDay(readings: Reading[], timeZone: string): Map<string, Reading[]> {
  const days = new Map<string, Reading[]>();
  for (const reading of readings) {
    const { date } = wallOf(reading.utcMs, timeZone);
    days.set(date, [...(days.get(date) ?? []), reading]);
  }
  return days;
}

const clock = (minute: number): string =>
  `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;

describe('a day a row', () => {
  const readings = readingsBetween('2025-05-31T22:00:00Z', '2025-06-05T22:00:00Z', 15);
  const days = [...byDay(readings, vienna)];
  const minutes = Array.from({ length: 96 }, (_, at) => at * 15);

  it.each([
    ['times of beginning', minutes.map(clock)],
    ['times of end, midnight as 00:00', minutes.map((minute) => clock((minute + 15) % 1440))],
    ['times of end, midnight as 24:00', minutes.map((minute) => clock(minute + 15))],
    ['spans of time', minutes.map((minute) => `${clock(minute)} - ${clock((minute + 15) % 1440)}`)],
    ['a prefix and a time', minutes.map((minute) => `kWh ${clock(minute)}`)],
    ['numbers', minutes.map((_minute, at) => `${at + 1}`)],
    ['a letter and numbers', minutes.map((_minute, at) => `V${String(at + 1).padStart(2, '0')}`)],
  ])('reads columns named by %s', async (_name, names) => {
    const rows = days.map(([date, own]) => [date, ...own.map((one) => one.kwh)].join(';'));
    const { load, report } = await readText([['Day', ...names].join(';'), ...rows].join('\n'), vienna);
    expect(load.startMs).toBe(readings[0]?.utcMs);
    expect(load.stepMinutes).toBe(15);
    expect([...load.kwh]).toEqual(readings.map((one) => one.kwh));
    expect(report).toMatchObject({ rowsRead: 5, intervals: 480, missing: 0 });
  });

  it('shows the columns of readings as one line of evidence', async () => {
    const rows = days.map(([date, own]) => [date, ...own.map((one) => one.kwh)].join(';'));
    const text = [['Day', ...minutes.map(clock)].join(';'), ...rows].join('\n');
    const preview = await previewIntervals(bytesOf(text), { fileName: 'wide.csv', timeZone: vienna });
    expect(preview.columns).toHaveLength(2);
    expect(preview.columns[1]).toMatchObject({
      takenAs: 'day-value',
      span: 96,
      letter: 'B',
      unit: 'kWh',
      isUnitAssumed: true,
    });
  });

  it('takes the quantity of each row from the column that names it', async () => {
    const rows = days.flatMap(([date, own]) => [
      [date, 'kWh', ...own.map((one) => one.kwh)].join(';'),
      [date, 'kvarh lagging', ...own.map((one) => one.lagging)].join(';'),
    ]);
    const { load, report } = await readText(
      [['Day', 'Channel', ...minutes.map(clock)].join(';'), ...rows].join('\n'),
      vienna,
    );
    expect([...load.kwh]).toEqual(readings.map((one) => one.kwh));
    expect([...load.kvarhLagging]).toEqual(readings.map((one) => one.lagging));
    expect(report.rowsRead).toBe(10);
  });

  it('reads days that run backwards and leaves blanks missing', async () => {
    const rows = days.map(([date, own]) =>
      [date, ...own.map((one, at) => (date === '2025-06-03' && at === 8 ? '' : one.kwh))].join(';'),
    );
    const { load, report } = await readText(
      [['Day', ...minutes.map(clock)].join(';'), ...rows.reverse()].join('\n'),
      vienna,
    );
    expect(report.missing).toBe(1);
    expect(load.kwh[2 * 96 + 8]).toBeNaN();
    expect(load.kwh[3 * 96]).toBe(readings[3 * 96]?.kwh);
  });
});

describe('a day a row over both clock changes', () => {
  const readings = readingsBetween('2025-03-28T23:00:00Z', '2025-11-02T23:00:00Z', 60);
  const days = [...byDay(readings, vienna)];

  it('reads 25 numbered columns counted through the day', async () => {
    const names = Array.from({ length: 25 }, (_, at) => `H${at + 1}`);
    const rows = days.map(([date, own]) => [date, ...names.map((_name, at) => own[at]?.kwh ?? '')].join(';'));
    const { load, report } = await readText([['Date', ...names].join(';'), ...rows].join('\n'), vienna);
    expect(load.startMs).toBe(readings[0]?.utcMs);
    expect([...load.kwh]).toEqual(readings.map((one) => one.kwh));
    expect(report).toMatchObject({ missing: 0, duplicates: 0 });
  });

  it('reads a second column for the repeated hour, blank on all other days', async () => {
    const names = Array.from({ length: 24 }, (_, hour) => clock(hour * 60)).flatMap((name) =>
      name === '02:00' ? ['02:00', '02:00'] : [name],
    );
    const rows = days.map(([date, own]) => {
      const left = [...own];
      const cells = names.map((name, at) => {
        const isSecond = at > 0 && names[at - 1] === name;
        const next = left[0];
        const fits = next && wallOf(next.utcMs, vienna).time === name && (!isSecond || own.length === 25);
        return fits ? (left.shift()?.kwh ?? '') : '';
      });
      return [date, ...cells].join(';');
    });
    const { load, report } = await readText([['Date', ...names].join(';'), ...rows].join('\n'), vienna);
    expect([...load.kwh]).toEqual(readings.map((one) => one.kwh));
    expect(report).toMatchObject({ missing: 0, duplicates: 0 });
  });
});
