import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { readSchedule } from '@/core/tariff';
import { scheduleLines } from '@/components/schedules/schedule-lines';
import { configureEnv } from '@/server/env';
import { straddleWords } from '@/server/presenters/schedule';
import { yearPicture } from '@/server/presenters/year-picture';
import { libraryPage, schedulePage } from '@/server/services/schedule-page';
import { buildActor } from '../setup/build';
import { quarrySchedule } from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
writeFileSync(path.join(folder, 'quarry-lp.yaml'), quarrySchedule);
writeFileSync(path.join(folder, 'typo.yaml'), quarrySchedule.replace('quantities:', 'quantites:'));
process.env.TARIFF_DIR = folder;
configureEnv({});

/** A schedule with windows, in the zone and with the holidays given. */
const windowed = (windows: string, head = '') =>
  readSchedule(`schedule: w
title: Windows
currency: USD
timeZone: America/Chicago
source: { publisher: P, title: T, date: 2025-01-01, status: invented }
inForce: 2025-01-01
${head}
windows:
${windows}
quantities:
  kwh: { sum: kwh, inEach: [first, second] }
charges:
  energy: { per: kwh, rate: { first: 0.1, second: 0.2 }, group: energy }
`);

const pictureOf = (windows: string, head = '') => {
  const schedule = windowed(windows, head);
  return yearPicture(schedule, schedule.texts[0]!, 2026)!;
};
const hoursOf = (picture: ReturnType<typeof pictureOf>) => picture.windows.map(({ label, hours }) => [label, hours]);

describe('yearPicture', () => {
  it('counts a window of weekdays: 261 weekdays of 2026, twelve hours each', () => {
    const picture = pictureOf('  first: { days: weekdays, hours: 08:00-20:00 }\n  second: { rest: first }');
    expect(hoursOf(picture)).toEqual([
      ['First', 3132],
      ['Second', 8760 - 3132],
    ]);
    expect(picture.strips.map(({ label }) => label).sort()).toEqual(['Weekday', 'Weekend']);
  });

  it('takes the holidays out: 4 July 2026 is a Saturday and is kept on Friday 3 July', () => {
    const picture = pictureOf(
      '  first: { days: weekdays, hours: 08:00-20:00 }\n  second: { rest: first }',
      'holidays: { calendar: US, drop: [2026-01-01] }',
    );
    const day = (date: string) => (Date.parse(date) - Date.parse('2026-01-01')) / 86_400_000;
    // 5 U.S.C. 6103: a holiday on a Saturday is kept on the Friday before.
    expect(picture.holidays).toContain(day('2026-07-03'));
    expect(picture.holidays).toContain(day('2026-11-26'));
    expect(picture.holidays).not.toContain(day('2026-01-01'));
  });

  it('judges days whose clock changes by the clock: the night loses an hour in March and gains one in November', () => {
    const picture = pictureOf('  first: { days: every day, hours: 22:00-06:00 }\n  second: { rest: first }');
    // In 2026 the clock changes in the United States on 8 March and 1 November, at 02:00.
    expect(picture.oddDays).toEqual([
      { day: 31 + 28 + 7, hours: 23 },
      { day: 304, hours: 25 },
    ]);
    expect(hoursOf(picture)).toEqual([
      ['First', 365 * 8 - 1 + 1],
      ['Second', 365 * 16],
    ]);
    expect(picture.totalHours).toBe(8760);
  });

  it('divides the year at the seasons, both ends included', () => {
    const picture = pictureOf(
      '  first: { season: summer, days: every day, hours: 10:00-12:00 }\n  second: { rest: first }',
      'seasons: { summer: 06-01 to 09-30, winter: rest }',
    );
    // 1 June is day 151 of 2026 counted from 0, 1 October day 273.
    expect(picture.seasons.map(({ name, from, to }) => [name, from, to])).toEqual([
      ['winter', 0, 151],
      ['summer', 151, 273],
      ['winter', 273, 365],
    ]);
    expect(picture.windows[0]?.hours).toBe(122 * 2);
  });

  it('is nothing for a schedule without windows', () => {
    const schedule = readSchedule(quarrySchedule);
    expect(yearPicture(schedule, schedule.texts[0]!, 2026)).toBeNull();
  });
});

describe('schedulePage', () => {
  it('is closed to a client', async () => {
    const client = await buildActor({ role: 'client' });
    await expect(libraryPage(client)).rejects.toMatchObject({ status: 404 });
    await expect(schedulePage(client, 'quarry-lp', '2026-03-01')).rejects.toMatchObject({ status: 404 });
  });

  it('reads charges, quantities and rules with the line they stand on', async () => {
    const { view } = await schedulePage(await buildActor(), 'quarry-lp', '2025-06-01');
    const lineOf = (start: string) => quarrySchedule.split('\n').findIndex((line) => line.startsWith(start)) + 1;
    const demand = view.sheet?.charges.find((charge) => charge.name === 'demand');
    expect(demand).toMatchObject({ label: 'Demand', group: 'demand', clause: '5', line: lineOf('  demand:') });
    expect(demand?.words).toContain('summer 8.95, winter 6.60');
    expect(view.sheet?.quantities.find((one) => one.name === 'billedKw')?.line).toBe(lineOf('  billedKw:'));
    expect(view.sheet?.rules.find((rule) => rule.label === 'Demand window')).toMatchObject({
      words: '15 min',
      line: lineOf('demandWindow'),
    });
  });

  it('shows the text in force on the day', async () => {
    const actor = await buildActor();
    const wordsOn = async (today: string) => {
      const { view } = await schedulePage(actor, 'quarry-lp', today);
      return view.sheet?.charges.find((charge) => charge.name === 'excess')?.words;
    };
    expect(await wordsOn('2025-12-31')).toContain('0.0010');
    expect(await wordsOn('2026-01-01')).toContain('0.0012');
  });

  it('shows a broken text with its errors instead of a sheet', async () => {
    const { view } = await schedulePage(await buildActor(), 'typo', '2026-01-01');
    expect(view.sheet).toBeNull();
    const problem = view.problems.find(({ message, remedy }) =>
      `${message} ${remedy}`.includes('Did you mean "quantities"?'),
    );
    const line = scheduleLines(view.lines, view.problems)[problem!.line - 1];
    expect(line?.pieces.filter((piece) => piece.kind === 'slip').map((piece) => piece.text)).toEqual(['quantites:']);
  });
});

describe('scheduleLines', () => {
  it('loses no character of a line', () => {
    const lines = quarrySchedule
      .split('\n')
      .concat(['# a comment', '  key: value # behind', '- { a: "b # no comment" }', 'quantites: x']);
    const problems = [{ line: lines.length, column: 1, path: '', message: '', remedy: '' }];
    expect(scheduleLines(lines, problems).map(({ pieces }) => pieces.map((piece) => piece.text).join(''))).toEqual(
      lines,
    );
  });
});

describe('straddleWords', () => {
  const ruledBy = { text: null, season: null, month: null };

  it('says how a bill across borders is shared', () => {
    expect(straddleWords({ division: 'days', ruledBy })).toBe('texts, seasons, and rider months are shared by days');
  });

  it('says whose day decides', () => {
    expect(straddleWords({ division: 'intervals', ruledBy: { ...ruledBy, season: 'end' } })).toBe(
      'season of the last day holds for the whole bill; texts and rider months are shared by the intervals each covers',
    );
  });
});
