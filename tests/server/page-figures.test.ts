import { describe, expect, it } from 'vitest';
import { sameBox, turnedBox } from '@/components/intake/pages/box';
import { figuresOfPage, type TextRun } from '@/components/intake/pages/page-text';
import { dateTyped, numberTyped, saysTheSame, styleShown, type Printed } from '@/components/intake/pages/printed';

const size = { width: 600, height: 800 };

/** Text whose letters are all six wide, on a line. */
const run = (text: string, left: number, baseline: number): TextRun => ({
  text,
  left,
  right: left + 6 * text.length,
  baseline,
  height: 10,
});
const textsOf = (...runs: TextRun[]) => figuresOfPage(runs, size).map(({ text }) => text);

describe('figuresOfPage', () => {
  it('finds numbers line by line from the top, whatever the order in the file', () => {
    const runs = [run('Tax', 20, 200), run('4,514.76', 500, 200), run('Energy', 20, 100), run('134,651.58', 500, 101)];
    const figures = figuresOfPage(runs, size);
    expect(figures.map(({ text, line }) => [text, line])).toEqual([
      ['134,651.58', 'Energy 134,651.58'],
      ['4,514.76', 'Tax 4,514.76'],
    ]);
  });

  it('places a number within a longer run by the width of its letters', () => {
    // Ten letters of six before it: left = 20 + 60 = 80 of 600; ten letters long: right = 80 + 60 = 140 of 600.
    // Top = 100 - 0.85 x 10 = 91.5 and bottom = 100 + 0.25 x 10 = 102.5, of 800.
    const [figure] = figuresOfPage([run('Total due 196,632.07 USD', 20, 100)], size);
    expect(figure?.text).toBe('196,632.07');
    const edges = [80 / 600, 91.5 / 800, 140 / 600, 102.5 / 800];
    edges.forEach((edge, index) => expect(figure?.box[index]).toBeCloseTo(edge, 4));
  });

  it('joins a number that was drawn in pieces and keeps columns apart', () => {
    expect(textsOf(run('45', 100, 50), run(',779', 112.5, 50), run('.25', 137, 50))).toEqual(['45,779.25']);
    expect(textsOf(run('30', 100, 50), run('415.00', 140, 50))).toEqual(['30', '415.00']);
  });

  it.each([
    ['5,115 kW at 8.95', ['5,115', '8.95']],
    ['2,479,826kWh', ['2,479,826']],
    ['Tax 2.35 %', ['2.35']],
    ['USD (12.00)', ['(12.00)']],
    ['credit 12.00 CR', ['12.00 CR']],
    ['credit 1.234,56-', ['1.234,56-']],
    ['$1,947.33 and -$5.00', ['$1,947.33', '-$5.00']],
    ['12,34,567.89 INR', ['12,34,567.89']],
    ['1 234 567,89 kWh', ['1 234 567,89']],
    ['from 05/11/2026 to 9 Jun 2026', ['05/11/2026', '9 Jun 2026']],
    ['June 10, 2026; 2026-06-30; 11.05.2026', ['June 10, 2026', '2026-06-30', '11.05.2026']],
    ['at 17:15, schedule LP-4, meter 5510-274, account 88-1042', []],
    ['page 1 of 2', ['1', '2']],
    ['no figure here', []],
  ])('reads "%s"', (text, expected) => expect(textsOf(run(text, 20, 100))).toEqual(expected));
});

describe('numberTyped', () => {
  it.each([
    ['1,234.56', 'point', '1,234.56'],
    ['1.234,56', 'comma', '1,234.56'],
    ['1.234', 'point', '1.234'],
    ['1.234', 'comma', '1,234'],
    ['(12.00)', 'point', '-12.00'],
    ['12.00 CR', 'point', '-12.00'],
    ['1.234,56-', 'comma', '-1,234.56'],
    ['-$5.00', 'point', '-5.00'],
    ['12,34,567.89', 'point', '1,234,567.89'],
    ['1 234 567,89', 'comma', '1,234,567.89'],
    ['0.0024', 'point', '0.0024'],
    ['1,23,45', 'comma', null],
    ['1.2.3', 'point', null],
  ] as const)('takes %s with decimal %s as %s', (text, decimal, expected) =>
    expect(numberTyped(text, decimal)).toBe(expected),
  );
});

describe('dateTyped', () => {
  it.each([
    ['05/11/2026', 'month', '2026-05-11'],
    ['05/11/2026', 'day', '2026-11-05'],
    ['11.05.26', 'day', '2026-05-11'],
    ['9 Jun 2026', 'day', '2026-06-09'],
    ['June 10, 2026', 'day', '2026-06-10'],
    ['2026-06-30', 'day', '2026-06-30'],
    ['31/02/2026', 'day', null],
    ['13/13/2026', 'month', null],
  ] as const)('takes %s, %s first, as %s', (text, order, expected) => expect(dateTyped(text, order)).toBe(expected));
});

describe('styleShown', () => {
  const numbers = (...texts: string[]): Printed[] => texts.map((text) => ({ kind: 'number', text }));
  const dates = (...texts: string[]): Printed[] => texts.map((text) => ({ kind: 'date', text }));

  it.each([
    ['decimals behind a point', numbers('1,234.56', '415.00'), { decimal: 'point', dates: null }],
    ['decimals behind a comma', numbers('1.234,56', '0,83'), { decimal: 'comma', dates: null }],
    ['nothing that tells', numbers('1.234', '5,115', '12'), { decimal: null, dates: null }],
    ['a month first', dates('05/11/2026', '05/28/2026'), { decimal: null, dates: 'month' }],
    ['a day first', dates('28.05.2026'), { decimal: null, dates: 'day' }],
    ['days and months that could be either', dates('05/11/2026'), { decimal: null, dates: null }],
  ])('sees %s', (_what, printed, expected) => expect(styleShown(printed)).toEqual(expected));
});

describe('saysTheSame', () => {
  it.each([
    ['45779.25', '45,779.25', true],
    ['1,234.56', '1.234,56', true],
    ['-12', '(12.00)', true],
    ['2026-05-11', '05/11/2026', true],
    ['856470', '856470', true],
    ['45,779.26', '45,779.25', false],
    ['', '45,779.25', false],
  ])('a field with %s and a page with %s: %s', (field, text, expected) =>
    expect(saysTheSame(field, text)).toBe(expected),
  );
});

describe('turnedBox', () => {
  it('comes back after four quarters and goes from the top left to the top right with one', () => {
    const box: [number, number, number, number] = [0.1, 0.2, 0.3, 0.25];
    const once = turnedBox(box, 1);
    [0.75, 0.1, 0.8, 0.3].forEach((edge, index) => expect(once[index]).toBeCloseTo(edge, 12));
    expect(sameBox(turnedBox(once, 3), box)).toBe(true);
  });
});
