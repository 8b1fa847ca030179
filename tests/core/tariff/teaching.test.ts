import { describe, expect, it } from 'vitest';
import { readSchedule, wordProblem } from '@/core/tariff';
import { buildSchedule, problemsOf } from './build';
import { millrace } from './worked-schedules';

/** What is said of Millrace with one text replaced by another: problems with their line. */
function saidOf(found: string, written: string): string[] {
  if (!millrace.includes(found)) throw new Error(`The working schedule does not hold ${found}`);
  return problemsOf(() => readSchedule(millrace.replace(found, written))).map(wordProblem);
}
const lineOf = (found: string): number => millrace.slice(0, millrace.indexOf(found)).split('\n').length;

describe('slips of YAML', () => {
  it.each<[string, string, string, string]>([
    ['a tab', '  maxKva:', '\tmaxKva:', 'a tab indents this line. Indent with blanks.'],
    [
      'a blank too many',
      '  maxKva:',
      '   maxKva:',
      'this line is indented like none above it. Indent it like its neighbours.',
    ],
    [
      'no blank behind the colon',
      'rounding: 0.01',
      'rounding:0.01',
      'no blank stands behind the colon. Write rounding: 0.01.',
    ],
    [
      'no colon',
      'rounding: 0.01',
      'rounding 0.01',
      'this line has no colon. Write a name, a colon, a blank and a value: rate: 0.10.',
    ],
    [
      'a colon in a text',
      'title: Large supply,',
      'title: Large supply: ',
      'a second colon stands in this value. Put texts with a colon in quotes, entries in braces: { to: 5, rate: 1 }.',
    ],
    [
      'a quotation mark left open',
      'title: Large',
      'title: "Large',
      'a quotation mark is not closed. Close it on the same line.',
    ],
    [
      'a brace too many',
      '{ highest: kva }',
      '{ highest: kva }}',
      'a } closes nothing. Take it away, or open it before.',
    ],
    [
      'a reserved character',
      'title: Large supply, kVA demand, time of use',
      'title: @large',
      'a value cannot begin with @. Put it in quotes: "@large".',
    ],
  ])('%s', (_, found, written, read) => {
    const said = saidOf(found, written);
    expect(said[0]).toMatch(new RegExp(`^${lineOf(found)}:\\d+ `));
    expect(said[0]).toContain(read);
  });

  it('a brace left open is told where the file goes on', () => {
    const [first] = saidOf('{ highest: kva }', '{ highest: kva');
    expect(first).toContain('a { or [ above is not closed.');
  });

  it('no blank behind a colon inside braces', () => {
    expect(saidOf('rate: 0.0180', 'rate:0.0180')[0]).toContain(
      'charges.reactive.rate:0.0180: no blank stands behind the colon. Write rate: 0.0180.',
    );
  });

  it('a list where entries belong', () => {
    expect(saidOf('maxKva:      { highest: kva }', 'maxKva:      [highest, kva]')[0]).toContain(
      'quantities.maxKva: is a list, not a set of entries. Write { sum: kwh }',
    );
  });
});

describe('notes on versions', () => {
  const notesOf = (text: string): string[] =>
    readSchedule(text).notes.map(({ path, message }) => `${path}: ${message}`);

  it('tell one that stands below a later one', () => {
    const text = `${millrace}  2026-03-01:\n    rates: { allowance: 0.45 }\n`;
    expect(notesOf(text)).toContain(
      'versions.2026-03-01: Stands below the later version of 2026-08-01. It holds from its own day on; write it above.',
    );
    expect(notesOf(millrace)).toEqual([]);
  });

  it('tell one that changes nothing', () => {
    const text = `${millrace}  2026-09-01:\n    note: Sheet 6\n    rates: { allowance: 0.33 }\n`;
    expect(notesOf(text)).toEqual(['versions.2026-09-01: The version changes nothing.']);
  });

  it('tell months without a rider between its first and last', () => {
    const text = millrace.replace(
      '2026-07: 0.0031, 2026-08: 0.0029',
      '2026-07: 0.0031, 2026-10: 0.0029, 2026-12: 0.0030',
    );
    expect(notesOf(text)).toEqual([
      'rates.fuel: No value for 2026-08, 2026-09, 2026-11, between 2026-07 and 2026-12: bills of that time cannot be priced.',
    ]);
    const years = millrace.replace('2026-07: 0.0031, 2026-08: 0.0029', '2026-07: 0.0031, 2028-08: 0.0029');
    expect(notesOf(years)[0]).toContain('2026-08, 2026-09, 2026-10, 2026-11, 2026-12, 2027-01 and 18 more, between');
  });
});

describe('notes on the windows of a family', () => {
  const seasons = 'seasons: { winter: 11-01 to 03-31, summer: rest }\n';
  const noted = (windows: string, names: string): string[] =>
    buildSchedule(
      `${seasons}windows:\n${windows}\nquantities:\n  q: { sum: kwh, inEach: ${names} }\ncharges:\n  c: { per: q, rate: 1, group: energy }`,
      { source: '{ status: invented }' },
    ).notes.map(({ message }) => message);

  // Worked out on paper from the rules.
  it('name the hours that lie in none, and in several', () => {
    const windows = `  a:
    - { season: winter, days: weekdays, hours: [00:00-12:00, 14:00-24:00] }
    - { season: summer, days: weekdays, hours: 00:00-24:00 }
  b: { days: [weekends, holidays], hours: 00:00-24:00 }`;
    expect(noted(windows, '[a, b]')).toEqual([
      'The windows a, b leave gaps, that time counts in none: weekdays 12:00-14:00 in winter.',
    ]);
    const twice = windows.replace('[weekends, holidays], hours: 00:00-24:00', 'every day, hours: 20:00-06:00');
    expect(noted(twice, '[a, b]')).toEqual([
      'The windows a, b overlap, that time counts twice: weekdays 00:00-06:00 and 20:00-24:00.',
      'The windows a, b leave gaps, that time counts in none: weekends, holidays 06:00-20:00; weekdays 12:00-14:00 in winter.',
    ]);
  });

  it('name single days, and no more stretches than can be read', () => {
    const days = ['mon', 'tue', 'wed', 'thu', 'fri'].map((day, i) => `    - { days: ${day}, hours: 0${i}:00-24:00 }`);
    const windows = `  a:\n${days.join('\n')}\n    - { days: [weekends, holidays], hours: 06:00-24:00 }`;
    expect(noted(windows, '[a]')).toEqual([
      'The windows a leave gaps, that time counts in none: weekends, holidays 00:00-06:00; tue 00:00-01:00; wed 00:00-02:00; thu 00:00-03:00; and 1 more.',
    ]);
  });

  it('are none where windows fill the week', () => {
    expect(noted('  a: { days: weekdays, hours: 08:00-20:00 }\n  b: { rest: a }', '[a, b]')).toEqual([]);
  });
});
