import { describe, expect, it } from 'vitest';
import { outcomeOf } from './outcome';

// Nothing a file says may run code, loop for ever, exhaust the process or reach outside.

const head =
  'schedule: stranger\ncurrency: EUR\ntimeZone: Europe/Lisbon\ninForce: 2020-01-01\nstraddle: days\ndemandWindow: 15 min\n';
const tail = 'charges:\n  a: { amount: 1, group: fixed }\n';
const many = (count: number, line: (i: number) => string): string =>
  Array.from({ length: count }, (_, i) => line(i)).join('');

describe('tricks of a stranger', () => {
  const aliases = `a: &a [x, x]\n${many(9, (i) => `${'bcdefghij'[i]}: &${'bcdefghij'[i]} [${Array(9).fill(`*${'abcdefghi'[i]}`).join(', ')}]\n`)}`;

  it.each([
    ['aliases that multiply', aliases],
    ['an alias to itself', 'a: &a [*a]\n'],
    ['a merge key', `${head}rates: &r { x: 1 }\nquantities: { <<: *r }\n${tail}`],
    ['a tag that calls', `${head}title: !!js/function 'function () { throw 1 }'\n${tail}`],
    ['a tag of our own', `${head}title: !run x\n${tail}`],
    [
      'keys of the prototype as parts',
      `${head}__proto__: { polluted: 1 }\nconstructor: { prototype: { polluted: 1 } }\n${tail}`,
    ],
    ['keys of the prototype as names', `${head}quantities:\n  __proto__: { sum: kwh }\n${tail}`],
    ['names of the prototype in formulas', `${head}quantities:\n  x: { formula: constructor + toString }\n${tail}`],
    ['functions of the prototype in formulas', `${head}quantities:\n  x: { formula: hasOwnProperty(1) }\n${tail}`],
    ['a map as a key', `${head}? { a: 1 }\n: 2\n${tail}`],
    ['control characters', `${head}title: "\u0000\u0007\u001b[2J"\u0001\n${tail}`],
    ['two documents', `${head}${tail}---\n${head}${tail}`],
    ['more than 200 kB', `${head}#${'x'.repeat(200_000)}\n${tail}`],
    ['brackets without end', `${head}a: ${'['.repeat(150_000)}`],
    ['braces nested by thousands', `${head}a: ${'{a: '.repeat(20_000)}1${'}'.repeat(20_000)}`],
    ['dashes nested by thousands', '- '.repeat(90_000)],
    ['question marks nested by thousands', '? '.repeat(90_000)],
    ['colons by thousands', ': '.repeat(90_000)],
    ['indents that only grow', `${head}${many(550, (i) => `${' '.repeat(i)}k${i}:\n`)}`],
    ['thousands of quantities', `${head}quantities:\n${many(6000, (i) => `  q${i}: { sum: kwh }\n`)}${tail}`],
    [
      'thousands of unknown names',
      `${head}quantities:\n${many(2500, (i) => `  quantity${i}: { formula: qantity${i} + 1 }\n`)}${tail}`,
    ],
    [
      'thousands of versions',
      `${head}${tail}versions:\n${many(3000, (i) => `  ${new Date(Date.UTC(2021, 0, 1 + i)).toISOString().slice(0, 10)}: { rounding: 0.01 }\n`)}`,
    ],
    [
      'versions of many lines each',
      `${head}charges:\n${many(249, (i) => `  c${i}: { amount: ${i}, group: fixed }\n`)}versions:\n${many(90, (i) => `  ${new Date(Date.UTC(2021, 0, 1 + i)).toISOString().slice(0, 10)}: { charges: { c1: { amount: ${i} } } }\n`)}`,
    ],
    ['seasons day by day', `${head}seasons:\n${many(300, (i) => `  s${i}: 01-01 to 01-01\n`)}${tail}`],
    [
      'families that multiply',
      `${head}windows:\n${many(30, (i) => `  w${i}: { days: every day, hours: 00:00-24:00 }\n`)}quantities:\n${many(240, (i) => `  q${i}: { sum: kwh, inEach: [${Array.from({ length: 30 }, (_, k) => `w${k}`).join(', ')}] }\n`)}${tail}`,
    ],
    [
      'names as long as the format has them',
      `${head}contract:\n${many(90, (i) => `  ${'abcdefghij'[i % 10]!.repeat(1000)}${i}: { unit: kW }\n`)}${tail}`,
    ],
    ['a formula of 501 characters', `${head}quantities:\n  x: { formula: ${'1+'.repeat(250)}1 }\n${tail}`],
    ['a formula nested 41 deep', `${head}quantities:\n  x: { formula: ${'('.repeat(41)}1${')'.repeat(41)} }\n${tail}`],
  ])('%s: refused with place and words', (_, text) => {
    const begun = performance.now();
    expect(outcomeOf(text)).toBe('not read');
    // A guard against hanging, not a measure of speed.
    expect(performance.now() - begun).toBeLessThan(20_000);
  });

  it.each([
    [
      'a rest of rests thirty deep',
      `${head}windows:\n  w0: { days: every day, hours: 10:00-11:00 }\n${many(28, (i) => `  w${i + 1}: { rest: [${Array(6).fill(`w${i}`).join(', ')}] }\n`)}quantities:\n  kwh: { sum: kwh, in: w28 }\ncharges:\n  a: { per: kwh, rate: 1, group: energy }\n`,
    ],
    [
      'thousands of holidays in thirty windows',
      `${head}holidays: { add: [${many(9000, (i) => `${new Date(Date.UTC(2021, 0, 1 + i)).toISOString().slice(0, 10)}, `)}] }\nwindows:\n${many(30, (i) => `  w${i}: { days: weekdays, hours: 10:00-11:00 }\n`)}quantities:\n  kwh: { sum: kwh, inEach: [${Array.from({ length: 30 }, (_, k) => `w${k}`).join(', ')}] }\ncharges:\n  a: { per: kwh, rate: 1, group: energy }\n`,
    ],
    [
      'as many quantities and lines as are read',
      `${head}quantities:\n${many(250, (i) => `  q${i}: { sum: excess(kvarhLagging; 0.${i + 1} * kwh), each: interval }\n`)}charges:\n${many(249, (i) => `  c${i}: { per: q${i}, rate: 0.01, group: reactive }\n`)}  tax: { percentOf: all above, rate: 5, group: tax }\n`,
    ],
    [
      'means of a thousand highest',
      `${head}quantities:\n${many(200, (i) => `  q${i}: { highest: kw + ${i}, count: 1000, each: interval, unit: kW }\n`)}charges:\n  a: { per: q1, rate: 1, group: energy }\n`,
    ],
    [
      'tiers by thousands',
      `${head}quantities:\n  kwh: { sum: kwh }\ncharges:\n  a: { per: kwh, tiers: [${many(4000, (i) => `{ to: ${i + 1}, rate: 1 }, `)}{ rate: 2 }], group: energy }\n`,
    ],
    [
      'a formula of 500 characters',
      `${head}quantities:\n  x: { formula: ${'1+'.repeat(249)}11 }\ncharges:\n  a: { amount: x, group: fixed }\n`,
    ],
    [
      'a formula nested 40 deep',
      `${head}quantities:\n  x: { formula: ${'('.repeat(40)}1${')'.repeat(40)} }\ncharges:\n  a: { amount: x, group: fixed }\n`,
    ],
    ['190 kB of comments', `${head}#${'x'.repeat(190_000)}\n${tail}`],
  ])('%s: priced', (_, text) => {
    const begun = performance.now();
    expect(outcomeOf(text)).toBe('priced');
    expect(performance.now() - begun).toBeLessThan(40_000);
  });

  it('leave the machine as it was', () => {
    expect(Object.keys(Object.prototype)).toEqual([]);
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined();
  });
});
