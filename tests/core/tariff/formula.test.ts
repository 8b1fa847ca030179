import fc from 'fast-check';
import { all, create } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { compileFormula, FormulaFault, place } from '@/core/tariff/formula/compile';
import { parseFormula } from '@/core/tariff/formula/parse';
import { printFormula } from '@/core/tariff/formula/print';
import { FormulaMistake } from '@/core/tariff/formula/tokens';

const names = ['a', 'b', 'c'] as const;

/** Value of a formula with a = 3, b = 0.5, c = 0 unless told. */
function value(text: string, given: Record<string, number> = { a: 3, b: 0.5, c: 0 }): number {
  const values = new Float64Array(place.names + names.length);
  values[place.zeroPf] = 1;
  values[place.zeroRatio] = 0;
  for (const [i, name] of names.entries()) values[place.names + i] = given[name] ?? 0;
  return compileFormula(parseFormula(text), (name) => {
    const slot = place.names + names.findIndex((known) => known === name);
    return (v) => v[slot]!;
  })(values);
}

describe('formulas', () => {
  it.each([
    ['2 + 3 * 4', 14],
    ['(2 + 3) * 4', 20],
    ['-2 ^ 2', -4],
    ['2 ^ -1', 0.5],
    ['2 ^ 3 ^ 2', 512],
    ['2 - -3', 5],
    ['10 / 4 / 5', 0.5],
    ['1 < 2 and 2 < 1 or 1 = 1', 1],
    ['not 1 = 1 and 0 = 1', 0],
    ['not (0 = 1 and 0 = 1)', 1],
    ['max(1; 4; 2) - min(3; a; 2)', 2],
    ['excess(5; 3) + excess(3; 5)', 2],
    ['between(6; 3; 4) + between(3.5; 3; 4) + between(2; 3; 4)', 1.5],
    ['hypot(a; 4)', 5],
    ['sqrt(16) + abs(-2)', 6],
    ['pf(4; 3)', 0.8],
    ['pf(4; -3)', 0.8],
    ['pf(0; 3)', 1],
    ['pf(7; 0)', 1],
    ['ratio(3; 4)', 0.75],
    ['ratio(3; c)', 0],
    ['if(a > 2; 10; 20)', 10],
    ['if(c; 10; 20)', 20],
    ['3 >= a and a <= 3', 1],
    ['0.1 + 0.2 = 0.3', 1],
    ['0.1 + 0.2 > 0.3', 0],
    ['excess(0.1 + 0.2; 0.3)', 0],
    ['5e-5 * 1e5', 5],
  ])('%s is %d', (text, expected) => {
    expect(value(text)).toBeCloseTo(expected, 12);
  });

  // tan(arccos 0.95) = 0.328684 and tan(arccos 0.8) = 0.75, by the definition of the functions.
  it('gives the tangent of a power factor', () => {
    expect(value('tanOf(0.8)')).toBeCloseTo(0.75, 12);
    expect(value('tanOf(0.95)')).toBeCloseTo(Math.tan(Math.acos(0.95)), 12);
    expect(value('tanOf(1)')).toBe(0);
  });

  it.each([
    ['1 / c', 'divides by zero', 0, 5],
    ['2 * (a / (b - 0.5))', 'divides by zero', 4, 19],
    ['sqrt(b - 1)', 'root of a negative number', 0, 11],
    ['tanOf(c)', 'takes a power factor', 0, 8],
    ['c ^ -1', 'no finite value', 0, 6],
    ['(c - 8) ^ 0.5', 'no finite value', 0, 13],
    ['daysSince(a)', 'takes a date written like 20260115', 0, 12],
  ])('%s %s', (text, message, start, end) => {
    const fault = caught(() => value(text));
    expect(fault).toBeInstanceOf(FormulaFault);
    expect(fault).toMatchObject({ message: expect.stringContaining(message), start, end });
  });

  it.each([
    ['max(a, b)', 5, 'a comma ends the value here.'],
    ['9,80', 1, 'a decimal comma is not read.'],
    ['2a', 0, '"2a" is neither a number nor a name.'],
    ['a b', 2, '"b" is not expected here.'],
    ['(a', 0, 'a bracket opens here and never closes.'],
    ['max(a; b', 3, 'a bracket opens here and never closes.'],
    ['a)', 1, '")" is not expected here.'],
    ['a +', 3, 'the formula ends too early.'],
    ['', 0, 'the formula ends too early.'],
    ['1 < 2 < 3', 6, '"<" is not expected here.'],
    ['a = = b', 4, '"=" is not expected here.'],
    ['excess(a)', 0, '"excess" is given 1 value.'],
    ['maks(a; b)', 0, 'there is no function "maks".'],
    ['__proto__', 0, '"_" is not part of a formula.'],
    ['a.b', 1, '"." is not part of a formula.'],
    ['"a"', 0, '""" is not part of a formula.'],
    ['a; b', 1, '";" is not expected here.'],
    ['not not a', 4, '"not" is not expected here.'],
    ['5 %', 2, '"%" is not part of a formula.'],
  ])('refuses %s at its place', (text, offset, message) => {
    const mistake = caught(() => parseFormula(text));
    expect(mistake).toBeInstanceOf(FormulaMistake);
    expect(mistake).toMatchObject({ offset, message });
  });

  it('keeps to 500 characters and 40 levels', () => {
    expect(() => parseFormula(`1${' + 1'.repeat(124)}`)).not.toThrow();
    expect(() => parseFormula(`1${' + 1'.repeat(125)}`)).toThrow('at most 500 are read');
    expect(() => parseFormula(`${'('.repeat(40)}1${')'.repeat(40)}`)).not.toThrow();
    expect(() => parseFormula(`${'('.repeat(41)}1${')'.repeat(41)}`)).toThrow('nested deeper than 40 levels');
    expect(() => parseFormula(`${'abs('.repeat(41)}1${')'.repeat(41)}`)).toThrow('nested deeper than 40 levels');
    expect(() => parseFormula(`${'2 ^ '.repeat(60)}1`)).toThrow('nested deeper than 40 levels');
  });

  it('answers any text with a value or a mistake in its place', () => {
    const pieces = fc.constantFrom(
      'a',
      'b',
      '1',
      '0.5',
      '+',
      '-',
      '*',
      '/',
      '^',
      '(',
      ')',
      ';',
      ' ',
      'max(',
      'not ',
      'and ',
      '<',
      '=',
      'pf(',
      'é',
      ',',
      '%',
    );
    fc.assert(
      fc.property(
        fc.array(pieces, { maxLength: 25 }).map((parts) => parts.join('')),
        (text) => {
          const result = caught(() => value(text));
          if (result === undefined) return;
          if (result instanceof FormulaMistake) expect(result.offset).toBeLessThanOrEqual(text.length);
          else expect(result).toBeInstanceOf(FormulaFault);
        },
      ),
      { numRuns: 2000 },
    );
  });
});

describe('formulas beside a general expression package (mathjs)', () => {
  const math = create(all!);
  const scope = {
    excess: (a: number, b: number) => Math.max(0, a - b),
    between: (q: number, a: number, b: number) => Math.max(0, Math.min(q, Math.max(a, b)) - a),
    pf: (p: number | boolean, q: number) => (Number(p) === 0 ? 1 : Math.abs(Number(p)) / Math.hypot(Number(p), q)),
    when: (c: number | boolean, a: number, b: number) => (Number(c) !== 0 ? a : b),
  };
  const leaf = fc.oneof(
    fc.constantFrom(...names),
    fc.integer({ min: 0, max: 90 }).map((n) => String(n / 8)),
  );
  const { formula } = fc.letrec<{ formula: string }>((tie) => ({
    formula: fc.oneof(
      { maxDepth: 5, withCrossShrink: true },
      leaf,
      fc
        .tuple(tie('formula'), fc.constantFrom('+', '-', '*', '/', '<', '>='), tie('formula'))
        .map(([a, operator, b]) => `(${a} ${operator} ${b})`),
      fc
        .tuple(
          tie('formula'),
          fc.constantFrom('+', '-', '*'),
          tie('formula'),
          fc.constantFrom('+', '-', '*'),
          tie('formula'),
        )
        .map(([a, x, b, y, c]) => `(${a} ${x} ${b} ${y} -${c})`),
      fc
        .tuple(fc.constantFrom('max', 'min', 'hypot', 'excess', 'pf'), tie('formula'), tie('formula'))
        .map(([fn, a, b]) => `${fn}(${a}; ${b})`),
      fc.tuple(tie('formula'), tie('formula'), tie('formula')).map(([a, b, c]) => `between(${a}; ${b}; ${c})`),
      fc.tuple(tie('formula'), tie('formula'), tie('formula')).map(([a, b, c]) => `if(${a}; ${b}; ${c})`),
      tie('formula').map((a) => `sqrt(abs(${a}))`),
    ),
  }));
  const numbers = fc.record({
    a: fc.integer({ min: -40, max: 40 }),
    b: fc.integer({ min: 0, max: 9 }).map((n) => n / 4),
    c: fc.integer({ min: 1, max: 5000 }),
  });

  it('gives the same values', () => {
    let compared = 0;
    fc.assert(
      fc.property(formula, numbers, (text, given) => {
        fc.pre(text.length <= 500);
        let ours: number;
        try {
          ours = value(text, given);
        } catch (error) {
          if (error instanceof FormulaMistake && /nested/.test(error.message)) return;
          expect(error).toBeInstanceOf(FormulaFault);
          return;
        }
        const oracle = Number(
          math.evaluate(text.replaceAll('if(', 'when(').replaceAll(';', ','), { ...scope, ...given }),
        );
        compared++;
        expect(Math.abs(ours - oracle)).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(oracle)));
      }),
      { numRuns: 6500 },
    );
    expect(compared).toBeGreaterThan(5000);
  });

  it('prints a formula that reads back to the same value', () => {
    fc.assert(
      fc.property(formula, numbers, (text, given) => {
        fc.pre(text.length <= 400);
        const printed = printFormula(parseFormula(text)).replaceAll(' x ', ' * ');
        const attempt = (formulaText: string): number | string => {
          try {
            return value(formulaText, given);
          } catch (error) {
            return error instanceof FormulaFault ? error.message.split(',')[0]! : 'mistake';
          }
        };
        expect(attempt(printed)).toEqual(attempt(text));
      }),
      { numRuns: 500 },
    );
  });
});

function caught(work: () => unknown): unknown {
  try {
    work();
    return undefined;
  } catch (error) {
    return error;
  }
}
