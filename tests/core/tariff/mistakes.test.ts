import { describe, expect, it } from 'vitest';
import { priceQuantities, readSchedule, wordProblem, type ScheduleProblem } from '@/core/tariff';
import { problemsOf } from './build';
import { millrace } from './worked-schedules';

// The table of mistakes of the language's design: what is slipped into a working schedule, and what the person reads.

/** Problems of Millrace with one text replaced by another. */
function slip(found: string, written: string): ScheduleProblem[] {
  if (!millrace.includes(found)) throw new Error(`The working schedule does not hold ${found}`);
  return problemsOf(() => readSchedule(millrace.replace(found, written)));
}

/** `path: message remedy` of each problem. */
function words(problems: ScheduleProblem[]): string[] {
  return problems.map((problem) => wordProblem(problem).replace(/^\d+:\d+ /, ''));
}

describe('mistakes in a schedule', () => {
  const table: [name: string, found: string, written: string, read: string][] = [
    [
      'a misspelt part',
      'quantities:',
      'quantites:',
      'quantites: is not a part of a schedule. Did you mean "quantities"?',
    ],
    [
      'an unknown name',
      'max(maxKva; 0.80',
      'max(maxKVa; 0.80',
      'quantities.billedKva.formula: nothing is called "maxKVa". Did you mean "maxKva"?',
    ],
    [
      'a comma in a function',
      'max(maxKva; 0.80 * yearKva; 0.50 * contractKva)',
      'max(maxKva, 0.80 * yearKva)',
      'quantities.billedKva.formula: a comma ends the value here. Write ; between the values: max(a; b).',
    ],
    [
      'a decimal comma',
      '{ summer: 11.50, winter: 8.20 }',
      '9,80',
      'charges.demand.rate: a decimal comma was read as two entries. Write 9.80.',
    ],
    [
      'netting left open',
      'leadNight:   { sum: excess(kvarhLeading; 0.20 * kwh), each: hour, in: night }',
      'leadNight:   { sum: excess(kvarhLeading; 0.20 * kwh), in: night }',
      'quantities.leadNight: sums a formula but does not say over what. Add each: interval, hour or day. For the whole period write a formula.',
    ],
    [
      'pf without a rule for zero',
      'zeroKwh: { pf: 1 }',
      '',
      "quantities.pf.formula: pf(...) is used, but the schedule doesn't say what it is in a period without kWh. Add zeroKwh: { pf: 1 }.",
    ],
    [
      'a summed power',
      'kvarh:       { sum: kvarhLagging }',
      'kvarh:       { sum: kw }',
      'quantities.kvarh.sum: "kw" is a power; powers are not summed. Use highest, or the energy channel.',
    ],
    [
      'round as a function',
      'pf(allKwh; kvarh), round: 0.01',
      'round(pf(allKwh; kvarh))',
      'quantities.pf.formula: there is no function "round". Give the quantity round: 0.01 instead.',
    ],
    [
      'a last tier with an end',
      '- { rate: 2 }',
      '- { to: 20, rate: 2 }',
      'charges.surcharge.tiers.2: the last tier has an upper end. Leave out "to", so that nothing goes unpriced.',
    ],
    [
      'a season without a rate',
      '{ summer: 11.50, winter: 8.20 }',
      '{ summer: 11.50 }',
      'charges.demand.rate: no value for season "winter". Give one for every season.',
    ],
    [
      'a window without a rate',
      'offPeak: { summer: 0.0880, winter: 0.0910 }',
      '',
      'charges.energy.rate: no value for window "offPeak". Give one for every window.',
    ],
    [
      'two kinds in one entry',
      '{ highest: kva }',
      '{ highest: kva, sum: kvarhLagging }',
      'quantities.maxKva: says both sum and highest. Say exactly one of sum, highest, lowest, value, formula, pick, past, given.',
    ],
    [
      'the same name twice',
      '  reactive:  { per: excessKvarh, rate: 0.0180',
      '  kvarh:  { per: excessKvarh, rate: 0.0180',
      'charges.kvarh: "kvarh" is already the name of a quantity (line 34). Every name is used once.',
    ],
    [
      'a wrong clock',
      'hours: 10:00-20:00',
      'hours: 10-20',
      'windows.peak.1.hours: "10-20" is not a span of the day. Write 08:00-12:00; 22:00-06:00 runs over midnight.',
    ],
    [
      'a list in in',
      'in: night',
      'in: [night, peak]',
      'quantities.leadNight.in: takes one window. Say inEach for one value per window; to pool them, define a window that holds them together.',
    ],
    [
      'a misspelt entry in a version',
      '      reactive:  { rate: 0.0210 }',
      '      reactve:  { rate: 0.0210 }',
      'versions.2026-08-01.charges.reactve: is new in this version but does not say where it stands. Did you mean "reactive"?',
    ],
    [
      'an unused rate',
      'allowance: 0.40',
      'allowance: 0.40\n  feul: 0.1',
      'rates.feul: is used nowhere. Did you mean "fuel"?',
    ],
    [
      'a name used too early',
      '{ sum: kvarhLagging }',
      '{ formula: 2 * maxKva }',
      'quantities.kvarh.formula: "maxKva" comes later in the file; move it above.',
    ],
    [
      'a line used too early',
      '{ amount: 420.00, group: fixed, label: Service }',
      '{ percentOf: [demand], rate: 1, group: fixed }',
      'charges.service.percentOf: "demand" stands below this line; move this one down.',
    ],
    ['an unknown calendar', 'calendar: PT', 'calendar: PZ', 'holidays.calendar: no holiday calendar is called "PZ".'],
    [
      'an unknown time zone',
      'Europe/Lisbon',
      'Europe/Lisboa',
      'timeZone: "Europe/Lisboa" is not a time zone. Write its name in the time zone database: Europe/Lisbon.',
    ],
    [
      'seasons that leave a gap',
      'winter: rest',
      'winter: 11-01 to 04-29',
      'seasons: 04-30 belongs to no season. Together the seasons fill the year; one may be rest.',
    ],
    [
      'an unknown season',
      'season: summer, days',
      'season: sumer, days',
      'windows.peak.1.season: no season is called "sumer". Did you mean "summer"?',
    ],
    [
      'a misspelt field',
      'each: hour',
      'eahc: hour',
      'quantities.leadNight.eahc: is not a part of a quantity that says sum. Did you mean "each"?',
    ],
    [
      'a charge without group',
      'rate: 0.0180, group: reactive',
      'rate: 0.0180',
      'charges.reactive: does not say its group. Add group: energy, demand, reactive, fixed, adjustment, tax.',
    ],
    [
      'a channel without a measure',
      'excess(kvarh; allowance',
      'excess(kvarhLagging; allowance',
      'quantities.excessKvarh.formula: "kvarhLagging" is a channel of the meter, not a quantity.',
    ],
    [
      'a division by %',
      'allowance * allKwh',
      '40% * allKwh',
      'quantities.excessKvarh.formula: "%" is not part of a formula.',
    ],
    [
      'inherited words',
      'excess(0.90; pf)',
      'constructor(0.90; pf)',
      'quantities.pointsBelow.formula: there is no function "constructor".',
    ],
    [
      'inherited names',
      'excess(0.90; pf)',
      'excess(toString; pf)',
      'quantities.pointsBelow.formula: nothing is called "toString".',
    ],
  ];

  it.each(table)('%s', (_, found, written, read) => {
    const problems = slip(found, written);
    expect(
      words(problems).some((line) => line.startsWith(read)),
      words(problems).join('\n'),
    ).toBe(true);
  });

  it('points into the formula', () => {
    const [problem] = slip('max(maxKva; 0.80', 'max(maxKVa; 0.80');
    const line = millrace.split('\n').findIndex((text) => text.includes('billedKva:'));
    expect(problem).toMatchObject({ line: line + 1, column: millrace.split('\n')[line]!.indexOf('maxKva;') + 1 });
  });

  it('tells all mistakes of a file at once, in its order, and no consequences', () => {
    const twice = millrace
      .replace('{ highest: kva }', '{ highst: kva }')
      .replace('rate: 0.0120', 'rte: 0.0120')
      .replace('timeZone: Europe/Lisbon', 'timeZone: Nowhere');
    const problems = problemsOf(() => readSchedule(twice));
    expect(problems.map(({ path }) => path)).toEqual(['timeZone', 'quantities.maxKva.highst', 'charges.leading.rte']);
  });

  it('refuses a unit left out where it is charged', () => {
    const problems = slip('clause: "4.2" }\n  excess', '}\n  excess');
    expect(problems).toEqual([]);
    expect(words(slip('unit: kVA, clause: "4.2"', 'clause: "4.2"'))[0]).toBe(
      'charges.demand.per: "billedKva" is a formula without a unit. Give it one: billedKva: { formula: ..., unit: kWh }.',
    );
  });

  it.each([
    ['anchors', 'kvarh:       { sum: kvarhLagging }', 'kvarh: &a { sum: kvarhLagging }', 'carries an anchor (&a).'],
    ['tags', 'title: Large', 'title: !!str Large', 'carries a tag'],
    [
      'a key twice',
      'title: Large supply, kVA demand, time of use',
      'title: Large\ntitle: Small',
      'stands twice (first in line 2).',
    ],
    ['a second document', 'versions:', '---\nversions:', 'holds more than one document.'],
  ])('refuses %s', (_, found, written, read) => {
    expect(words(slip(found, written)).join('\n')).toContain(read);
  });

  it('refuses what is no schedule', () => {
    expect(words(problemsOf(() => readSchedule('- 1')))[0]).toContain('is no schedule.');
    expect(words(problemsOf(() => readSchedule('')))[0]).toContain('is no schedule.');
    expect(words(problemsOf(() => readSchedule('a: [')))[0]).toContain('a { or [ above is not closed.');
    expect(words(problemsOf(() => readSchedule(`schedule: ${'x'.repeat(200_001)}`)))[0]).toContain(
      'at most 200000 are read',
    );
    expect(words(problemsOf(() => readSchedule('title: T')))).toEqual(
      expect.arrayContaining([
        expect.stringContaining('schedule: is missing.'),
        expect.stringContaining('currency: is missing.'),
      ]),
    );
  });
});

describe('mistakes while pricing', () => {
  const schedule = readSchedule(millrace);
  const march = { from: '2026-03-01', to: '2026-04-01' };
  const all = { kwhPeak: 1, kwhOffPeak: 1, kvarh: 1, maxKva: 1, leadNight: 0 };

  it('names the bill, the quantity and the line', () => {
    const { kwhPeak: _, ...rest } = all;
    const july = { from: '2026-07-01', to: '2026-08-01' };
    expect(() => priceQuantities(schedule, [{ ...july, quantities: rest }], {})).toThrow(
      'July 2026: the bill does not give "kwhPeak" (kWh), which line "Energy" needs.',
    );
    expect(() => priceQuantities(schedule, [{ ...july, quantities: rest }], {})).toThrow(
      expect.objectContaining({ name: 'kwhPeak', period: july }),
    );
  });

  it('names the month of a rider that is missing', () => {
    expect(() => priceQuantities(schedule, [{ ...march, quantities: all }], {})).toThrow(
      'no fuel rate for 2026-03; add it under rates.fuel.months.',
    );
  });

  it('names both dates of a period before the schedule', () => {
    const december = { from: '2025-12-15', to: '2026-01-15', quantities: all };
    expect(() => priceQuantities(schedule, [december], {})).toThrow(/2025-12-15.*2026-01-01/);
  });

  it('refuses periods that overlap, and what is no period', () => {
    const july = { from: '2026-07-01', to: '2026-08-01', quantities: all };
    expect(() => priceQuantities(schedule, [july, { ...july, from: '2026-07-31', to: '2026-08-31' }], {})).toThrow(
      'Give the periods in order.',
    );
    expect(() => priceQuantities(schedule, [{ ...july, to: '2026-06-31' }], {})).toThrow('is no billing period');
  });

  it('refuses contract inputs nobody knows or outside their range', () => {
    const july = { from: '2026-07-01', to: '2026-08-01', quantities: all };
    expect(() => priceQuantities(schedule, [july], { contract: { contractKvA: 3000 } })).toThrow(
      'Did you mean "contractKva"?',
    );
    expect(() => priceQuantities(schedule, [july], { contract: { contractKva: 50 } })).toThrow(
      'must be between 100 and 50,000 kVA, got 50',
    );
    expect(() => priceQuantities(schedule, [july], { contract: [{}, {}] })).toThrow('Give one for each period.');
  });
});
