import { describe, expect, it } from 'vitest';
import { namesIn } from '@/core/tariff/formula/ast';
import { compileFormula, place, unlessFault } from '@/core/tariff/formula/compile';
import { parseFormula } from '@/core/tariff/formula/parse';
import { rangeOf, type RangeValues } from '@/core/tariff/bound/range-formula';
import type { Expression } from '@/core/tariff';
import { randomOf } from './build-box';

const names = ['a', 'b', 'c', 'd'];

function expressionOf(text: string): Expression {
  const formula = parseFormula(text);
  const used = namesIn(formula);
  const slotOf = (name: string): number => place.names + names.indexOf(name);
  return {
    formula,
    path: '',
    names: used,
    slots: used.map(slotOf),
    channels: [],
    evaluate: compileFormula(formula, (name) => (v) => v[slotOf(name)]!),
  };
}

const twos = ['min', 'max', 'hypot', 'excess', 'pf', 'ratio'];
const ones = ['abs', 'sqrt', 'tanOf', '-', 'not '];
const signs = ['+', '-', '*', '/', '^', '=', '!=', '<', '<=', '>', '>=', 'and', 'or'];

function formulaText(random: () => number, depth: number): string {
  const any = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)]!;
  const part = (): string => formulaText(random, depth - 1);
  const kind = depth === 0 ? 5 + 2 * random() : 7 * random();
  if (kind < 2.5) return `((${part()}) ${any(signs)} (${part()}))`;
  if (kind < 3.5) return `${any(twos)}(${part()}; ${part()})`;
  if (kind < 4.2) return `(${any(ones)}(${part()}))`;
  if (kind < 4.6) return `if(${part()}; ${part()}; ${part()})`;
  if (kind < 5) return `between(${part()}; ${part()}; ${part()})`;
  if (kind < 6.3) return any(names);
  return any(['0', '0.5', '1', '2', '3', '100', '0.92']);
}

/** Ends of the names: zeros, points, narrow and wide, of either sign. */
function valuesOf(random: () => number): RangeValues {
  const room = (): Float64Array => new Float64Array(place.names + names.length);
  const values = { low: room(), high: room() };
  for (let slot = place.names; slot < place.names + names.length; slot++) {
    const at = [0, 1, 0.9, 5 * random(), 1000 * random(), -3 * random()][Math.floor(6 * random())]!;
    const width = [0, 0, 0.01, 1, 50][Math.floor(5 * random())]! * random();
    values.low[slot] = at;
    values.high[slot] = at + width;
  }
  values.low[place.zeroPf] = values.high[place.zeroPf] = 0.8;
  values.low[place.zeroRatio] = values.high[place.zeroRatio] = 0.3;
  return values;
}

function pointIn({ low, high }: RangeValues, random: () => number): Float64Array {
  return low.map((from, slot) => {
    const share = random() < 0.5 ? Math.round(random()) : random();
    return Math.min(high[slot]!, from + share * (high[slot]! - from));
  });
}

describe('formulas over ranges', () => {
  it('hold what the formula gives at every point, for random formulas', () => {
    const random = randomOf(20_261_201);
    let compared = 0;
    let narrow = 0;
    for (let round = 0; round < 12_000; round++) {
      const text = formulaText(random, 3);
      const expression = expressionOf(text);
      const values = valuesOf(random);
      const { low, high } = rangeOf(expression, values);
      if (Number.isFinite(low) && Number.isFinite(high)) narrow++;
      for (let again = 0; again < 5; again++) {
        const point = pointIn(values, random);
        const value = unlessFault(() => expression.evaluate(point));
        if (value === undefined || !Number.isFinite(value)) continue;
        if (!(value >= low && value <= high))
          throw new Error(`${text} is ${value}, outside ${low} to ${high} at ${point}`);
        compared++;
      }
    }
    expect(compared).toBeGreaterThan(30_000);
    expect(narrow).toBeGreaterThan(6_000);
  });

  it('are the formula itself where every value is certain', () => {
    const random = randomOf(7);
    let compared = 0;
    for (let round = 0; round < 4000; round++) {
      const expression = expressionOf(formulaText(random, 3));
      const { low } = valuesOf(random);
      const value = unlessFault(() => expression.evaluate(low));
      if (value === undefined || !Number.isFinite(value)) continue;
      const range = rangeOf(expression, { low, high: low });
      if (!Number.isFinite(range.low)) continue;
      expect([range.low, range.high].map((end) => end + 0)).toEqual([value + 0, value + 0]);
      compared++;
    }
    expect(compared).toBeGreaterThan(2000);
  });
});

describe('single functions over ranges', () => {
  const range = (text: string, a: [number, number], b: [number, number] = [0, 0]): [number, number] => {
    const room = new Float64Array(place.names + names.length);
    const values = { low: room.slice(), high: room.slice() };
    for (const [k, [low, high]] of [a, b].entries()) {
      values.low[place.names + k] = low;
      values.high[place.names + k] = high;
    }
    values.low[place.zeroPf] = values.high[place.zeroPf] = 1;
    const found = rangeOf(expressionOf(text), values);
    return [found.low, found.high];
  };

  // By hand, from where each function rises or falls.
  it.each<[string, [number, number], [number, number], [number, number]]>([
    ['a / b', [1, 2], [4, 8], [0.125, 0.5]],
    ['a / b', [1, 2], [0, 8], [0.125, Infinity]],
    ['a / b', [1, 2], [-1, 8], [-Infinity, Infinity]],
    ['a * b', [-1, 2], [3, 4], [-4, 8]],
    ['excess(a; b)', [1, 5], [2, 3], [0, 3]],
    ['a ^ 2', [-3, 2], [0, 0], [0, 9]],
    ['sqrt(a)', [-1, 9], [0, 0], [0, 3]],
    ['a > b', [1, 2], [2, 3], [0, 0]],
    ['a >= b', [1, 2], [2, 3], [0, 1]],
    ['a = b', [1, 2], [3, 4], [0, 0]],
    ['if(a > 0; b; 7)', [0, 1], [2, 3], [2, 7]],
    ['hypot(a; b)', [-3, 1], [4, 4], [4, 5]],
    ['not a', [0, 2], [0, 0], [0, 1]],
  ])('%s of %j and %j is %j', (text, a, b, expected) => {
    const found = range(text, a, b);
    expect(found[0]).toBeCloseTo(expected[0], 12);
    expect(found[1]).toBeCloseTo(expected[1], 12);
  });

  it('take a power factor from its corners: 3 and 4 make 0.6, without reactive it is 1', () => {
    const [low, high] = range('pf(a; b)', [3, 3], [0, 4]);
    expect(low).toBeCloseTo(0.6, 12);
    expect(high).toBeCloseTo(1, 12);
  });
});
