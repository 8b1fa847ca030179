import { describe, expect, it } from 'vitest';
import { fixOf, offsetOf, wordAt } from '@/components/schedules/editor/fix';
import { namesIn, placeAt } from '@/components/schedules/editor/text-place';
import { lessons, slippedText } from '@/components/schedules/guide/lessons';
import { checkExamples, readSchedule, ScheduleError } from '@/core/tariff';

/** Offset of the cursor, written as | in the text, and the text without it. */
function cursor(marked: string): [text: string, offset: number] {
  return [marked.replace('|', ''), marked.indexOf('|')];
}

/** Problems of a text that cannot be read. */
function problemsIn(text: string) {
  try {
    readSchedule(text);
  } catch (error) {
    if (error instanceof ScheduleError) return error.problems;
    throw error;
  }
  return [];
}

describe('placeAt', () => {
  it.each([
    ['the top of the file', '|', [], 'key'],
    ['an entry of a section', 'quantities:\n  |', ['quantities'], 'key'],
    ['a bracketed set', 'quantities:\n  kwh: { |', ['quantities', 'kwh'], 'key'],
    ['a value in brackets', 'quantities:\n  kwh: { sum: |', ['quantities', 'kwh', 'sum'], 'value'],
    ['the key after a comma', 'quantities:\n  kwh: { sum: kwh, |', ['quantities', 'kwh'], 'key'],
    ['a list in brackets', 'quantities:\n  kwh: { inEach: [peak, |', ['quantities', 'kwh', 'inEach', '2'], 'value'],
    ['brackets over lines', 'charges:\n  a: { per: kwh,\n    |', ['charges', 'a'], 'key'],
    ['a set by indentation', 'charges:\n  energy:\n    per: kwh\n    |', ['charges', 'energy'], 'key'],
    ['a value of it', 'charges:\n  energy:\n    per: |', ['charges', 'energy', 'per'], 'value'],
    ['tiers', 'charges:\n  e:\n    tiers:\n      - { to: 10, |', ['charges', 'e', 'tiers', '1'], 'key'],
    ['after a comment', 'charges: # of { the\n  |', ['charges'], 'key'],
    ['after quoted brackets', 'quantities:\n  a: { label: "x { y", |', ['quantities', 'a'], 'key'],
    ['a version', 'versions:\n  2026-08-01:\n    charges:\n      |', ['versions', '2026-08-01', 'charges'], 'key'],
    ['back at the top', 'charges:\n  a: { amount: 1 }\n|', [], 'key'],
  ])('knows %s', (_, marked, path, kind) => {
    expect(placeAt(...cursor(marked))).toMatchObject({ path, kind });
  });

  it('tells the keys a set has', () => {
    expect(placeAt(...cursor('quantities:\n  kwh: { sum: kwh, each: hour, |')).keys).toEqual(['sum', 'each']);
    expect(placeAt(...cursor('charges:\n  a:\n    per: kwh\n    rate: 1\n    |')).keys).toEqual(['per', 'rate']);
    expect(placeAt(...cursor('schedule: a\ntitle: b\n|')).keys).toEqual(['schedule', 'title']);
  });
});

describe('namesIn', () => {
  it('finds what the author has made, in versions too', () => {
    const names = namesIn(
      'windows: { peak: { days: weekdays, hours: 08:00-20:00 }, offPeak: { rest: peak } }\nquantities:\n  kwh: { sum: kwh }\n' +
        'versions:\n  2026-08-01:\n    charges:\n      levy: { per: kwh, rate: 1 }\n',
    );
    expect(names.get('windows')).toEqual(['peak', 'offPeak']);
    expect(names.get('quantities')).toEqual(['kwh']);
    expect(names.get('charges')).toEqual(['levy']);
  });
});

describe('fixOf', () => {
  const text = 'schedule: a\nquantites:\n  a: { formula: max(maxKVa; 1) }\n';
  const problem = (line: number, column: number, message: string, remedy: string) => ({
    line,
    column,
    path: '',
    message,
    remedy,
  });

  it('replaces the misspelt key by the one that is meant', () => {
    const fix = fixOf(text, problem(2, 1, 'is not a part of a schedule.', 'Did you mean "quantities"?'));
    expect(fix).toEqual({ from: 12, to: 21, insert: 'quantities' });
  });

  it('replaces the word a message quotes, inside a formula', () => {
    const at = text.indexOf('maxKVa');
    const column = at - text.lastIndexOf('\n', at);
    const fix = fixOf(text, problem(3, column, 'nothing is called "maxKVa".', 'Did you mean "maxKva"?'));
    expect(fix).toEqual({ from: at, to: at + 6, insert: 'maxKva' });
  });

  it('offers nothing where the remedy names no word', () => {
    expect(fixOf(text, problem(1, 1, 'is missing.', 'Write currency: EUR.'))).toBeNull();
  });

  it('keeps to the text where a place lies beyond it', () => {
    expect(offsetOf(text, { line: 99, column: 1 })).toBe(text.length);
    expect(wordAt(text, problem(99, 4, '', ''))).toEqual({ from: text.length, to: text.length });
  });
});

describe('the lessons of the guide', () => {
  it.each(lessons.map(({ id, text }) => [id, text] as const))('%s reproduces its bills worked by hand', (_, text) => {
    const results = checkExamples(readSchedule(text));
    expect(results.length).toBeGreaterThan(0);
    for (const { title, figures, problem } of results) {
      expect(problem, title).toBeUndefined();
      for (const { name, expected, found } of figures) expect(found, `${title}: ${name}`).toBeCloseTo(expected, 6);
    }
  });

  it('shows three errors in the text with slips, each with its remedy', () => {
    const problems = problemsIn(slippedText);
    expect(problems.map(({ line }) => slippedText.split('\n')[line - 1]?.trim().split(':')[0])).toEqual([
      'excessKvarh',
      'energy',
      'reactive',
    ]);
    expect(problems.map(({ remedy }) => remedy)).toEqual([
      'Did you mean "kvarh"?',
      'Write 0.09.',
      'Did you mean "group"?',
    ]);
  });
});
