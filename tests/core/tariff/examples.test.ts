import { describe, expect, it } from 'vitest';
import { checkExamples, readSchedule, wordProblem, type ExampleResult, type Schedule } from '@/core/tariff';
import { buildSchedule, problemsOf } from './build';
import { millrace } from './worked-schedules';

const july = `
examples:
  - title: July 2026, worked by hand
    source: section 1 of the design
    from: 2026-07-01
    to: 2026-08-01
    contract: { contractKva: 2000 }
    history: { maxKva: [3000] }
    quantities: { kwhPeak: 300000, kwhOffPeak: 500000, kvarh: 400000, maxKva: 2100, leadNight: 900 }
    expect: { demand: 27600.00, pf: 0.89, total: 126874.37, reactiveCost: 2748.37 }
`;

/** Millrace with its July, one text of it replaced by another. */
function withSlip(found: string, written: string): string {
  if (!july.includes(found)) throw new Error(`The example does not hold ${found}`);
  return millrace + july.replace(found, written);
}

const checkOne = (schedule: Schedule): ExampleResult => checkExamples(schedule)[0]!;
const misfits = ({ figures }: ExampleResult): string[] => figures.filter(({ fits }) => !fits).map(({ name }) => name);

describe('examples of a schedule', () => {
  // The bill worked by hand in the language's design: demand 2,400 x 11.50; pf 0.8944 to 0.89; total and reactive cost there.
  it('are bills it must give', () => {
    const result = checkOne(readSchedule(millrace + july));
    expect(result).toMatchObject({
      title: 'July 2026, worked by hand',
      source: 'section 1 of the design',
      period: { from: '2026-07-01', to: '2026-08-01' },
      path: 'examples.1',
      fits: true,
    });
    expect(result.problem).toBeUndefined();
    expect(result.figures.map(({ name, expected, fits }) => [name, expected, fits])).toEqual([
      ['demand', 27_600, true],
      ['pf', 0.89, true],
      ['total', 126_874.37, true],
      ['reactiveCost', 2748.37, true],
    ]);
    expect(result.bill?.lines.map(({ id }) => id)).toContain('surcharge');
  });

  it('tell a wrong figure, beside what was found', () => {
    const result = checkOne(readSchedule(withSlip('demand: 27600.00', 'demand: 27600.01')));
    expect(result.fits).toBe(false);
    expect(result.figures[0]).toEqual({ name: 'demand', expected: 27_600.01, found: 27_600, fits: false });
    expect(misfits(result)).toEqual(['demand']);
  });

  it('judge a figure by half a unit of its last digit, unless they say within what', () => {
    // The power factor is rounded to 0.89; as 0.8944 it is wrong by far more than 0.00005, and inside the half cent of an amount.
    expect(misfits(checkOne(readSchedule(withSlip('pf: 0.89,', 'pf: 0.8944,'))))).toEqual(['pf']);
    const wide = withSlip('126874.37, reactiveCost: 2748.37 }', '126874, reactiveCost: 2748 }\n    within: 0.5');
    expect(checkOne(readSchedule(wide)).fits).toBe(true);
    expect(misfits(checkOne(readSchedule(wide.replace('within: 0.5', 'within: 0.3'))))).toEqual([
      'total',
      'reactiveCost',
    ]);
  });

  it('tell why a bill cannot be priced', () => {
    const result = checkOne(readSchedule(withSlip('kwhPeak: 300000, ', '')));
    expect(result).toMatchObject({
      fits: false,
      problem: 'July 2026: the bill does not give "kwhPeak" (kWh), which line "Energy" needs.',
    });
    expect(result.bill).toBeUndefined();
    expect(result.figures.map(({ found }) => found)).toEqual([null, null, null, null]);
  });

  it('find nothing where another version has the figure', () => {
    // The levy begins in August.
    const result = checkOne(readSchedule(withSlip('demand: 27600.00', 'levy: 10')));
    expect(result.figures[0]).toEqual({ name: 'levy', expected: 10, found: null, fits: false });
  });

  it('of every currency: without minor units half a unit is the tolerance', () => {
    const text = (total: string): Schedule =>
      buildSchedule(
        `quantities:\n  kwh: { sum: kwh }\ncharges:\n  energy: { per: kwh, rate: 12.345, round: 0.1, group: energy }
examples:\n  - { title: T, from: 2026-01-01, to: 2026-02-01, quantities: { kwh: 10 }, expect: { total: ${total} } }`,
        { currency: 'JPY' },
      );
    // 10 x 12.345 = 123.45, to 123.5.
    expect(checkOne(text('123')).fits).toBe(true);
    expect(checkOne(text('123.4')).fits).toBe(false);
  });
});

describe('examples of meter readings', () => {
  const schedule = (example: string): Schedule =>
    buildSchedule(
      `windows:
  night: { days: every day, hours: 22:00-06:00 }
  day: { rest: night }
quantities:
  kwh: { sum: kwh, inEach: [day, night] }
  over: { sum: excess(kvarhLagging; 0.5 * kwh), each: hour }
  lead: { sum: kvarhLeading }
  late: { given: flag, default: 0 }
charges:
  energy: { per: kwh, rate: 1, group: energy }
  over: { per: overKvarh, rate: 1, group: reactive }
  fee: { amount: 7 * late, group: fixed }
`.replace('over: { sum', 'overKvarh: { sum') + example,
    );
  const stretch = (begin: string, more = ''): string => `examples:
  - title: An evening
    from: 2026-10-01
    to: 2026-11-01
    readings: { begin: ${begin}, step: 30 min, kwh: [10, 20, 30, 40], kvarhLagging: [9, 8, 20, 20], kvarhLeading: [1, 0, 0, 2] }
    ${more}`;

  // 21:00 to 22:00 by day 30 kWh with 17 kvarh, 2 beyond half; 22:00 to 23:00 at night 70 with 40, 5 beyond. Leading 3, not netted.
  it('begin by the local clock', () => {
    const result = checkOne(
      schedule(
        stretch(
          '2026-10-07 21:00',
          'quantities: { late: 1 }\n    expect: { kwhDay: 30, kwhNight: 70, overKvarh: 7, lead: 3, fee: 7, total: 114 }',
        ),
      ),
    );
    expect(result.problem).toBeUndefined();
    expect(misfits(result)).toEqual([]);
    expect(result.bill?.notes.join('\n')).toContain('missing');
  });

  it('begin at the first of two hours where the clock goes back', () => {
    // In Lisbon 25 October 2026 01:00 to 02:00 comes twice: four half hours from the first 01:00 end at the second 02:00.
    const { examples } = schedule(stretch('2026-10-25 01:00', 'expect: { total: 1 }'));
    expect(new Date(examples[0]!.readings!.startMs).toISOString()).toBe('2026-10-25T00:00:00.000Z');
  });
});

describe('slips in an example', () => {
  it.each<[found: string, written: string, read: string]>([
    ['title: July 2026, worked by hand\n    source', 'source', 'examples.1: has no title. Add title:'],
    ['title: July', 'titel: July', 'examples.1.titel: is not a part of an example. Did you mean "title"?'],
    ['from: 2026-07-01\n    ', '', 'examples.1: does not say its first day. Add from: 2026-07-01.'],
    ['to: 2026-08-01', 'to: 2026-08-32', 'examples.1.to: "2026-08-32" is not a date. Write 2026-08-01.'],
    ['to: 2026-08-01', 'to: 2026-06-01', 'examples.1.to: 2026-06-01 does not lie after from, 2026-07-01.'],
    ['from: 2026-07-01', 'from: 2025-07-01', 'examples.1.from: 2025-07-01 lies before inForce, 2026-01-01.'],
    [
      'contractKva: 2000',
      'contractKvA: 2000',
      'examples.1.contract.contractKvA: no contract input is called "contractKvA". Did you mean "contractKva"?',
    ],
    ['contractKva: 2000', 'contractKva: much', 'examples.1.contract.contractKva: "much" is not a number.'],
    [
      'history: { maxKva: [3000]',
      'history: { maxKvar: [3000]',
      'examples.1.history.maxKvar: no quantity or line is called "maxKvar". Did you mean "maxKva"?',
    ],
    ['[3000]', '3000', 'examples.1.history.maxKva: is not a list of numbers.'],
    ['[3000]', '[high]', 'examples.1.history.maxKva.1: "high" is not a number.'],
    [
      'kwhPeak: 300000, kwhOffPeak',
      'kwhPaek: 300000, kwhOffPeak',
      'examples.1.quantities.kwhPaek: no quantity is called "kwhPaek". Did you mean "kwhPeak"?',
    ],
    [
      'kwhPeak: 300000, kwhOffPeak: 500000',
      'kwh: 800000',
      'examples.1.quantities.kwh: "kwh" stands for one value per window. Name kwhPeak, kwhOffPeak.',
    ],
    [
      'demand: 27600.00',
      'demnd: 27600.00',
      'examples.1.expect.demnd: no line or quantity is called "demnd". Did you mean "demand"?',
    ],
    [
      'demand: 27600.00',
      'energy: 27600.00',
      'examples.1.expect.energy: "energy" stands for one value per window. Name energyPeak, energyOffPeak.',
    ],
    [
      'demand: 27600.00',
      'demand: 27,600',
      'examples.1.expect.demand: a comma inside a number was read as two entries. Write 27600, or 27.600.',
    ],
    [
      'demand: 27600.00',
      'demand: "27,600"',
      'examples.1.expect.demand: "27,600" is not a number. Write 27600, or 27.600.',
    ],
    [
      '{ demand: 27600.00, pf: 0.89, total: 126874.37, reactiveCost: 2748.37 }',
      '{}',
      'examples.1.expect: says nothing that must come out. Add expect: { total: 126874.37 }.',
    ],
    ['    expect:', '    within: 0.1 # expect:', 'examples.1: does not say what must come out.'],
    ['    expect:', '    within: 0\n    expect:', 'examples.1.within: 0 is no tolerance. Write a number above 0'],
    ['    quantities:', '    # quantities:', 'examples.1: says no figures to price. Add quantities:'],
  ])('%j written %j', (found, written, read) => {
    const problems = problemsOf(() => readSchedule(withSlip(found, written)));
    const said = problems.map((problem) => wordProblem(problem).replace(/^\d+:\d+ /, ''));
    expect(said).toHaveLength(1);
    expect(said[0]).toContain(read);
  });

  const readings = 'begin: 2026-03-14 18:00, step: 60 min, kwh: [100, 120], kvarhLagging: [60, 70]';
  it.each<[found: string, written: string, read: string]>([
    ['begin: 2026-03-14 18:00, ', '', 'examples.1.readings: does not say when the first reading begins. Write begin:'],
    [
      '18:00',
      '25:00',
      'examples.1.readings.begin: "2026-03-14 25:00" is not an instant. Write begin: 2026-07-14 18:00',
    ],
    ['18:00', '18:15', 'examples.1.readings.begin: 18:15 is no multiple of 60 minutes.'],
    [
      '2026-03-14 18:00',
      '2026-03-29 01:00',
      'examples.1.readings.begin: the local clock never shows 2026-03-29 01:00.',
    ],
    ['step: 60 min, ', '', 'examples.1.readings: does not say the length of a reading. Write step: 1, 5, 10'],
    ['60 min', '45 min', 'examples.1.readings.step: "45 min" is not a length of readings. Write step: 1, 5, 10'],
    ['60 min', 'an hour', 'examples.1.readings.step: "an hour" is not a length of readings.'],
    ['kwh: [100, 120], ', '', 'examples.1.readings: gives no kwh. Add kwh: and the energy of each interval.'],
    ['[100, 120]', '[]', 'examples.1.readings.kwh: is an empty list.'],
    ['[100, 120]', '[100, much]', 'examples.1.readings.kwh.2: "much" is not a number.'],
    ['[60, 70]', '[60]', 'examples.1.readings.kvarhLagging: has 1 value, kwh has 2. Give one for every interval.'],
    ['[60, 70]', '[60, -70]', 'examples.1.readings.kvarhLagging: -70 is below 0. What is delivered stands under'],
    ['kvarhLagging', 'kvarLagging', 'examples.1.readings.kvarLagging: is not a part of readings. Did you mean'],
    ['2026-03-14 18:00', '2026-03-31 23:00', 'examples.1.readings: hold readings outside the period.'],
    ['2026-03-14 18:00', '2026-02-28 23:00', 'They lie from 2026-03-01 00:00 to 2026-03-31 24:00.'],
    [
      '} expect',
      '}, quantities: { kwh: 5 } expect',
      'examples.1.quantities.kwh: "kwh" is worked out from the readings. Leave it out, or leave the readings out.',
    ],
  ])('readings with %j written %j', (found, written, read) => {
    const example = `{ title: T, from: 2026-03-01, to: 2026-04-01, readings: { ${readings} } expect: { total: 1 } }`;
    if (!example.includes(found)) throw new Error(`The example does not hold ${found}`);
    const text = example.replace(found, written).replace('} expect', '}, expect');
    const body = `quantities:\n  kwh: { sum: kwh }\ncharges:\n  energy: { per: kwh, rate: 1, group: energy }\nexamples:\n  - ${text}`;
    const said = problemsOf(() => buildSchedule(body)).map(wordProblem);
    expect(said).toHaveLength(1);
    expect(said[0]).toContain(read);
  });

  it.each([
    ['examples: 5', 'examples: is not a list. Write a list of worked bills'],
    ['examples: []', 'examples: is an empty list.'],
    ['examples: [5]', 'examples.1: is not a set of entries. Write title, from, to, quantities or readings, expect.'],
  ])('%s', (text, read) => {
    expect(problemsOf(() => readSchedule(millrace + text)).map(wordProblem)[0]).toContain(read);
  });

  it('are held to what can be read at a glance', () => {
    const many = (count: number): string => `[${Array.from({ length: count }, () => '1').join(', ')}]`;
    const said = (text: string): string =>
      problemsOf(() => readSchedule(`${millrace}examples: ${text}\n`))
        .map(wordProblem)
        .join();
    expect(said(many(51))).toContain('examples: holds 51 bills, at most 50 are read. Keep the telling ones.');
    const period = 'title: T, from: 2026-03-01, to: 2026-07-31, expect: { total: 1 }';
    expect(said(`[{ ${period}, readings: { begin: 2026-03-02 00:00, step: 60 min, kwh: ${many(3001)} } }]`)).toContain(
      'examples.1.readings.kwh: holds 3001 numbers, at most 3000 are read.',
    );
    expect(said(`[{ ${period}, quantities: {}, history: { maxKva: ${many(121)} } }]`)).toContain(
      'examples.1.history.maxKva: holds 121 numbers, at most 120 are read.',
    );
  });

  it('in a version are refused: examples stand for the whole file', () => {
    const text = `${millrace}  2026-09-01:\n    examples: []\n`;
    expect(problemsOf(() => readSchedule(text)).map(wordProblem)[0]).toContain('is not a part of a version.');
  });
});
