import { describe, expect, it } from 'vitest';
import { wordProblem } from '@/core/tariff';
import { buildSchedule, problemsOf } from './build';

// Every field of the language written wrongly in turn: what is wrong, and what to do.

interface Parts {
  head?: Record<string, string>;
  contract?: string;
  rates?: string;
  seasons?: string;
  windows?: string;
  quantities?: string;
  charges?: string;
}

/** What is said of a small schedule with some parts replaced. */
function said(parts: Parts): string {
  const section = (name: string, text: string | undefined): string => (text === undefined ? '' : `${name}:\n${text}\n`);
  const body = [
    section('contract', parts.contract),
    section('rates', parts.rates),
    section('seasons', parts.seasons ?? '  summer: 05-01 to 10-31\n  winter: rest'),
    section('windows', parts.windows ?? '  peak: { days: weekdays, hours: 08:00-20:00 }\n  low: { rest: peak }'),
    section('quantities', `  kwh: { sum: kwh }\n  maxKw: { highest: kw }\n${parts.quantities ?? ''}`),
    section('charges', parts.charges ?? '  fee: { amount: 1, group: fixed }'),
  ].join('');
  return problemsOf(() => buildSchedule(body, parts.head))
    .map((problem) => wordProblem(problem).replace(/^\d+:\d+ /, ''))
    .join('\n');
}

const quantity = (text: string): Parts => ({ quantities: `  q: ${text}` });
const charge = (text: string): Parts => ({ charges: `  c: ${text}` });

describe('the fields of a schedule', () => {
  it.each<[Parts, string]>([
    [{ head: { schedule: 'Not An Id' } }, 'schedule: "Not An Id" is not an id. Write small letters'],
    [{ head: { currency: 'euro' } }, 'currency: "euro" is not a currency. Write its three letters: EUR.'],
    [{ head: { inForce: '2026-13-01' } }, 'inForce: "2026-13-01" is not a date.'],
    [{ head: { meters: 'added' } }, 'meters: "added" is not a way of metering. Write one or summed.'],
    [{ head: { straddle: 'interval' } }, 'straddle: "interval" is no way to divide a bill. Did you mean "intervals"?'],
    [{ head: { rounding: '0.01 upwards' } }, 'rounding: "0.01 upwards" is not a step of rounding. Write 0.01'],
    [{ head: { rounding: '[1]' } }, 'rounding: is not a step of rounding.'],
    [{ head: { demandWindow: '15min' } }, 'demandWindow: "15min" is not a demand window. Write 15 min'],
    [
      { head: { demandWindow: '30 min rolling every 7 min' } },
      'demandWindow: "30 min rolling every 7 min" is not a demand window.',
    ],
    [{ head: { source: 'a sheet' } }, 'source: is not a set of entries.'],
    [
      { head: { source: '{ status: guessed }' } },
      'source.status: "guessed" is not a status. Write found, memory, invented.',
    ],
    [{ head: { source: '{ publsher: X }' } }, 'source.publsher: is not a part of a source. Did you mean "publisher"?'],
    [{ head: { zeroKwh: '{ pf: one }' } }, 'zeroKwh.pf: "one" is not a number.'],
    [{ head: { zeroKwh: '{ tan: 0 }' } }, 'zeroKwh.tan: is not a part of zeroKwh.'],
    [{ head: { holidays: '{ calendar: IT-99 }' } }, 'holidays.calendar: the holiday calendar of IT has no part "99".'],
    [
      { head: { holidays: '{ calendar: DE-BY-ZZ }' } },
      'holidays.calendar: the holiday calendar of DE-BY has no part "ZZ".',
    ],
    [{ head: { holidays: '{ add: [24.12.2026] }' } }, 'holidays.add.1: "24.12.2026" is not a date. Write 2026-12-24.'],
    [{ contract: '  a: 5' }, 'contract.a: is not a set of entries.'],
    [
      { contract: '  a: { unit: kW, default: much }', ...charge('{ amount: a, group: fixed }') },
      'contract.a.default: "much" is not a number.',
    ],
    [
      { contract: '  a: { unit: kW, default: 5, range: [10, 20] }', ...charge('{ amount: a, group: fixed }') },
      'contract.a.default: 5 lies outside the range 10 to 20.',
    ],
    [
      { contract: '  a: { unit: kW, range: [20, 10] }', ...charge('{ amount: a, group: fixed }') },
      'contract.a.range: is not a range.',
    ],
    [
      { contract: '  a: { unit: date, default: 20260230 }', ...charge('{ amount: daysSince(a), group: fixed }') },
      'contract.a.default: 20260230 is not a date. Write it like 20260115.',
    ],
    [{ contract: '  A: { unit: kW }' }, 'contract.A: "A" is not a name.'],
    [{ contract: '  days: { unit: kW }' }, 'contract.days: "days" is a word of the language.'],
    [{ rates: '  r: { months: { July: 1 } }' }, 'rates.r.months.July: "July" is not a month. Write 2026-07.'],
    [{ rates: '  r: { months: { } }', ...charge('{ amount: r, group: fixed }') }, 'rates.r: has no month.'],
    [{ rates: '  r: { spring: 1 }' }, 'rates.r.spring: no season is called "spring".'],
    [
      { rates: '  r: kwh', ...charge('{ amount: r, group: fixed }') },
      'rates.r: "kwh" comes later in the file; move it above.',
    ],
    [
      { seasons: '  summer: 13-01 to 10-31\n  winter: rest' },
      'seasons.summer: "13-01 to 10-31" is not a span of the year.',
    ],
    [
      { seasons: '  summer: 05-01 to 10-31\n  winter: 10-31 to 04-30' },
      'seasons.winter: 10-31 is in season "summer" too.',
    ],
    [{ seasons: '  summer: rest\n  winter: rest' }, 'seasons.winter: "rest" is already the season summer.'],
    [{ windows: '  peak: { days: weekdays }' }, 'windows.peak: does not say its hours. Both are required'],
    [{ windows: '  peak: { hours: 08:00-12:00 }' }, 'windows.peak: does not say its days.'],
    [
      { windows: '  peak: { days: workdays, hours: 08:00-12:00 }' },
      'windows.peak.days: "workdays" is not a kind of day. Did you mean "weekdays"?',
    ],
    [
      { windows: '  peak: { days: every day, hours: 8:00-12:00 }' },
      'windows.peak.hours: "8:00-12:00" is not a span of the day.',
    ],
    [
      { windows: '  peak: { days: every day, hours: 12:00-12:00 }' },
      'windows.peak.hours: "12:00-12:00" is not a span of the day.',
    ],
    [
      { windows: '  peak: { days: every day, hours: 20:00-25:00 }' },
      'windows.peak.hours: "20:00-25:00" is not a span of the day.',
    ],
    [
      { windows: '  low: { rest: peek }\n  peak: { days: every day, hours: 08:00-12:00 }' },
      'windows.low.rest: no window above is called "peek".',
    ],
    [{ windows: '  peak: []' }, 'windows.peak: has no rule.'],
    [{ windows: '  Peak: { rest: a }' }, 'windows.Peak: "Peak" is not a name.'],
    [quantity('5'), 'quantities.q: is not a set of entries.'],
    [quantity('{ unit: kW }'), 'quantities.q: does not say what it is. Say exactly one of sum, highest'],
    [quantity('{ sum: kwh, highest: kw, value: kw }'), 'quantities.q: says sum, highest, value at once.'],
    [quantity('{ sum: 5, each: hour }'), 'quantities.q.sum: reads no channel of the meter.'],
    [quantity('{ sum: kvah }'), 'quantities.q: sums kvah but does not say over what.'],
    [quantity('{ sum: kwh, where: kwh > 5 }'), 'quantities.q: sums under a condition but does not say over what.'],
    [quantity('{ sum: kw + kvarLagging, each: hour }'), 'quantities.q.sum: adds powers; powers are not summed.'],
    [quantity('{ sum: kwh, in: peak, inEach: [peak, low] }'), 'quantities.q: says both in and inEach.'],
    [quantity('{ sum: kwh, inEach: [peak, peak] }'), 'quantities.q.inEach: names a window twice.'],
    [quantity('{ sum: kwh, in: noon }'), 'quantities.q.in: no window above is called "noon". There are peak, low.'],
    [quantity('{ sum: kwh, each: week }'), 'quantities.q.each: "week" is nothing a measure is settled over.'],
    [quantity('{ highest: kw, count: 0 }'), 'quantities.q.count: 0 is not a count.'],
    [
      quantity('{ highest: kw, count: 2, days: separate }'),
      'quantities.q.days: is not known here. Write days: distinct',
    ],
    [quantity('{ sum: kwh, count: 2 }'), 'quantities.q.count: is not a part of a quantity that says sum.'],
    [quantity('{ value: kw }'), 'quantities.q: does not say at which instant.'],
    [quantity('{ value: kw, at: kwh }'), 'quantities.q.at: "kwh" has no instant.'],
    [quantity('{ value: kw, at: 2 * maxKw }'), 'quantities.q.at: "2 * maxKw" has no instant.'],
    [quantity('{ formula: [1, 2] }'), 'quantities.q.formula: is not a single formula.'],
    [quantity('{ formula: "" }'), 'quantities.q.formula: is empty.'],
    [quantity('{ formula: max }'), 'quantities.q.formula: "max" is a function. Write max( ) with its values.'],
    [
      quantity('{ formula: total(kwh) }'),
      'quantities.q.formula: total( ) takes the name of a quantity that has one value per window.',
    ],
    [
      quantity('{ formula: daysSince(kwh) }'),
      'quantities.q.formula: daysSince( ) takes a contract input with unit: date.',
    ],
    [
      quantity('{ formula: ratio(kwh; maxKw) }'),
      "quantities.q.formula: ratio(...) is used, but the schedule doesn't say what it is",
    ],
    [
      quantity('{ formula: 2 * kwh, unit: kWg }'),
      'quantities.q.unit: "kWg" is not a unit of a meter. Did you mean "kWh"?',
    ],
    [quantity('{ pick: kwh, otherwise: 1 }'), 'quantities.q: has no steps to pick from.'],
    [quantity('{ pick: kwh, from: { 5: 1 } }'), 'quantities.q: does not say what holds below the last step.'],
    [quantity('{ pick: kwh, from: { five: 1 }, otherwise: 1 }'), 'quantities.q.from.five: "five" is not a number.'],
    [
      quantity('{ pick: kwh, from: { 5: 1, 5.0: 2 }, otherwise: 1 }'),
      'quantities.q.from: has two steps from the same number.',
    ],
    [quantity('{ past: kwh, over: last 2 periods }'), 'quantities.q: does not say what to take of the past.'],
    [
      quantity('{ past: kwh, take: best, over: last 2 periods }'),
      'quantities.q.take: "best" is nothing to take of the past.',
    ],
    [quantity('{ past: kwh, take: sum }'), 'quantities.q: does not say over which periods.'],
    [
      quantity('{ past: kwh, take: sum, over: last periods }'),
      'quantities.q.over: "last periods" is no span of periods.',
    ],
    [quantity('{ past: kwh, take: streak, over: last 2 periods }'), 'quantities.q.over: is not said of a streak.'],
    [
      quantity('{ past: kwh, take: sum, over: last 2 periods, season: winter }'),
      'quantities.q.season: "winter" does not say how much of a period lies in the season.',
    ],
    [
      quantity('{ past: kwh, take: sum, over: last 2 periods, season: wholly autumn }'),
      'quantities.q.season: no season is called "autumn".',
    ],
    [quantity('{ past: nothing, take: sum, over: last 2 periods }'), 'quantities.q.past: nothing is called "nothing".'],
    [
      quantity('{ past: later, take: sum, over: this and last 2 periods }\n  later: { sum: kwh }'),
      'quantities.q.past: "later" comes later in the file; move it above.',
    ],
    [quantity('{ given: kWh, default: none }'), 'quantities.q.default: "none" is not a number.'],
    [
      { quantities: '  kva: { sum: kwh }' },
      'quantities.kva: carries the name of a channel, but is not its plain highest.',
    ],
    [
      { quantities: '  a: { sum: kwh, inEach: [peak, low] }\n  aPeak: { sum: kwh }' },
      'quantities.a: makes "aPeak" for window "peak", a name that is used already.',
    ],
    [
      {
        quantities:
          '  a: { sum: kwh, inEach: [peak] }\n  b: { sum: kwh * if(a > 0; 1; 0), each: hour, inEach: [peak, low] }',
      },
      'quantities.b: "a" has no value for window "low".',
    ],
    [charge('{ group: fixed }'), 'charges.c: does not say what it charges. Say exactly one of amount, per'],
    [charge('{ amount: 1, percentOf: all above, group: fixed }'), 'charges.c: says both amount and percentOf.'],
    [charge('{ amount: 1, group: fix }'), 'charges.c.group: "fix" is not a group. Write energy, demand'],
    [
      charge('{ amount: { months: { 2026-07: 1 } }, group: fixed }'),
      'charges.c.amount: gives values by month, which only rates can.',
    ],
    [charge('{ per: kwh, group: energy }'), 'charges.c: has no rate. Say exactly one of rate, tiers.'],
    [charge('{ per: kwh, rate: 1, tiers: [ { rate: 1 } ], group: energy }'), 'charges.c: says both rate and tiers.'],
    [charge('{ per: 2 * kwh, rate: 1, group: energy }'), 'charges.c.per: takes the name of a quantity.'],
    [charge('{ per: kwh, tiers: 5, group: energy }'), 'charges.c.tiers: is not a list of tiers.'],
    [
      charge('{ per: kwh, tiers: [ { rate: 1 }, { rate: 2 } ], group: energy }'),
      'charges.c.tiers.1: a tier before the last has no upper end.',
    ],
    [
      charge('{ per: kwh, tiers: [ { to: 5, rate: 1 }, { to: 4, rate: 2 }, { rate: 3 } ], group: energy }'),
      'charges.c.tiers: the upper ends of the tiers do not rise.',
    ],
    [charge('{ per: kwh, tiers: [ { to: 5 }, { rate: 3 } ], group: energy }'), 'charges.c.tiers.1: has no rate.'],
    [charge('{ percentOf: [], rate: 1, group: tax }'), 'charges.c.percentOf: is an empty list.'],
    [charge('{ percentOf: [kwh], rate: 1, group: tax }'), 'charges.c.percentOf.1: "kwh" is not a line of the bill.'],
    [charge('{ percentOf: [fee], rate: 1, group: tax }'), 'charges.c.percentOf.1: no line above is called "fee".'],
    [
      { charges: '  a: { amount: 1, group: fixed }\n  c: { percentOf: [a, a], rate: 1, group: tax }' },
      'charges.c.percentOf: names a line twice.',
    ],
    [
      { charges: '  a: { amount: 1, group: fixed }\n  c: { percentOf: a, tiers: [ { rate: 1 } ], group: tax }' },
      'charges.c.tiers: tiers need a quantity.',
    ],
    [
      { charges: '  a: { amount: 1, group: fixed }\n  c: { percentOf: a, per: 2 * kwh, rate: 1, group: tax }' },
      'charges.c.per: takes the name of a quantity.',
    ],
    [
      { charges: '  a: { amount: 1, group: fixed }\n  c: { topUp: a, group: tax }' },
      'charges.c: does not say to what.',
    ],
    [charge('{ amount: 1, group: fixed, when: }'), 'charges.c.when: is empty.'],
    [charge('{ amount: 1, group: fixed, round: cents }'), 'charges.c.round: "cents" is not a step of rounding.'],
    [
      {
        quantities: '  f: { sum: kwh, inEach: [peak, low] }',
        charges: '  c: { per: f, rate: { peak: 1, low: 2, noon: 3 }, group: energy }',
      },
      'charges.c.rate.noon: "noon" is not one of the windows charged here.',
    ],
    [
      {
        quantities: '  f: { sum: kwh, inEach: [peak, low] }',
        charges: '  cPeak: { amount: 1, group: fixed }\n  c: { per: f, rate: 1, group: energy }',
      },
      'charges.c: makes a line "cPeak", a name that is used already.',
    ],
  ])('%j', (parts, words) => {
    expect(said(parts)).toContain(words);
  });

  it('are fine as they are', () => {
    expect(said({})).toBe('');
  });
});
