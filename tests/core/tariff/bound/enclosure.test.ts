import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { addDays } from '@/core/load';
import {
  boundTotals,
  PriceError,
  priceBills,
  readSchedule,
  type BoundedBill,
  type LoadBox,
  type PricedBill,
  type PriceOptions,
  type Range,
  type Schedule,
} from '@/core/tariff';
import { kestrel, millrace, millracePlain, tidewater } from '../worked-schedules';
import { buildBox, loadInside, randomOf, shortPeriods, tellOf } from './build-box';
import { odd } from './odd-schedules';

// Every bill of every load in a box lies in the box's ranges, whatever the schedule: the one claim a bound rests on.

const folder = path.resolve('tariffs');
const library = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.yaml'));
const texts: [string, string][] = [
  ...library.map((name): [string, string] => [name, readFileSync(path.join(folder, name), 'utf8')]),
  ['heavy', readFileSync(path.resolve('tests', 'bench', 'heavy.yaml'), 'utf8')],
  ...Object.entries({ kestrel, millrace, millracePlain, tidewater }),
  ...Object.entries(odd),
];

/** Days on which something changes: versions, seasons, rider months, clocks. */
function startsOf(schedule: Schedule, random: () => number): string {
  const { inForce, texts: versions } = schedule;
  const first = inForce ?? '2026-01-01';
  const seasonal = versions.some(({ dependsOnSeason }) => dependsOnSeason) ? ['03-28', '04-29', '06-28', '10-29'] : [];
  const months = versions.flatMap(({ rates }) =>
    rates.flatMap(({ place }) =>
      place.kind === 'months' ? [...place.byMonth.keys()].map((month) => `${month}-01`) : [],
    ),
  );
  const later = versions.slice(1).map(({ from }) => addDays(from, -4));
  const year = Number(first.slice(0, 4)) + 1;
  const all =
    months.length > 0 ? months : [first, `${year}-03-26`, ...later, ...seasonal.map((day) => `${year}-${day}`)];
  const allowed = all.filter((date) => date >= first);
  return allowed[Math.floor(random() * allowed.length)] ?? first;
}

function stepOf(schedule: Schedule): number {
  const borders = schedule.texts.flatMap(({ windows, demandWindow }) => [
    ...[...windows.values()].flatMap(({ rules }) => rules.flatMap(({ spans }) => spans.flat())),
    demandWindow?.minutes ?? 60,
    demandWindow?.everyMinutes ?? 60,
  ]);
  return [60, 30, 15, 10, 5].find((step) => borders.every((border) => border % step === 0)) ?? 5;
}

function within(what: string, value: number, range: Range | undefined): void {
  if (!range || !(value >= range.low && value <= range.high))
    throw new Error(`${what} is ${value}, outside ${range?.low} to ${range?.high}`);
}

function compare(bill: PricedBill, bounded: BoundedBill): number {
  const when = bill.period.from;
  within(`${when} total`, bill.total, bounded.total);
  for (const { id, amount } of bill.lines) within(`${when} line ${id}`, amount, bounded.lines[id]);
  const quantities = Object.entries(bill.quantities);
  for (const [name, { value }] of quantities) within(`${when} quantity ${name}`, value, bounded.quantities[name]);
  return quantities.length + bill.lines.length + 1;
}

/** Prices a load; nothing where a formula has no value there. */
function priced(
  schedule: Schedule,
  load: Parameters<typeof priceBills>[1],
  options: PriceOptions,
): PricedBill[] | null {
  try {
    return priceBills(schedule, load, options);
  } catch (error) {
    if (error instanceof PriceError) return null;
    throw error;
  }
}

function makeCase(schedule: Schedule, random: () => number): { box: LoadBox; options: PriceOptions } {
  const from = startsOf(schedule, random);
  const periods = shortPeriods(from, [2 + Math.floor(3 * random()), 4, 3]);
  const { timeZone } = schedule;
  const box = buildBox({ from, to: periods[2]!.to, timeZone, stepMinutes: stepOf(schedule), random });
  return { box, options: tellOf(schedule, periods, random) };
}

const boxes = 30;

describe.each(texts)('ranges of bills on %s', (name, text) => {
  it('hold every quantity, line and total of random loads in random boxes', () => {
    const schedule = readSchedule(text);
    const random = randomOf(1 + ([...name].reduce((sum, letter) => 31 * sum + letter.charCodeAt(0), 7) % 1_000_003));
    let compared = 0;
    let finite = 0;
    for (let round = 0; round < boxes; round++) {
      const { box, options } = makeCase(schedule, random);
      const bound = boundTotals(schedule, box, options);
      for (let again = 0; again < 3; again++) {
        const bills = priced(schedule, loadInside(box, random), options);
        if (!bills) continue;
        if (bound.refused !== undefined) throw new Error(`refused though bills can be priced: ${bound.refused}`);
        for (const [i, bill] of bills.entries()) compared += compare(bill, bound.bills[i]!);
      }
      if (bound.refused === undefined && bound.totals.low.every((low) => Number.isFinite(low))) finite++;
    }
    expect(compared).toBeGreaterThan(boxes * 3 * 4);
    expect(finite).toBeGreaterThan(0.6 * boxes);
  });
});
