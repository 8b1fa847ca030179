import { readFileSync } from 'node:fs';
import { localDateStartMs } from '../../src/core/load';
import type { FieldControl, SynchronousMotor } from '../../src/core/machine';
import {
  billReach,
  createSimulator,
  searchSettings,
  shaftLoadSeries,
  simulatePlan,
  spanSeries,
} from '../../src/core/plan';
import type { Grid, PlanMotor, ShiftRule } from '../../src/core/plan';
import { compilePricing, looksBack, priceBills, readSchedule, type Schedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear } from './pricing';
import type { Measured } from './run';

const leastPerSecond = 400;
const longestSearchSeconds = 5;

const large: SynchronousMotor = {
  ratedOutputKw: 1119,
  ratedVoltageV: 4000,
  frequencyHz: 60,
  poles: 14,
  ratedPowerFactor: 0.8,
  ratedEfficiency: 0.955,
  ratedFieldCurrentA: 78,
  fieldResistanceOhm: 1.6,
  exciterEfficiency: 0.85,
  raPu: 0.008,
  xdPu: 1.15,
  xqPu: 0.75,
};

const small: SynchronousMotor = { ...large, ratedOutputKw: 450, ratedFieldCurrentA: 60, fieldResistanceOhm: 1.3 };

const whole = { days: ['every' as const], from: '00:00', to: '24:00' };
const shift = { days: ['weekday' as const], from: '06:00', to: '22:00' };

/** Three motors: one of two shifts, two that run day and night. */
export function buildMotors(grid: Grid, timeZone: string): PlanMotor[] {
  const loads = (...rules: ShiftRule[]) => shaftLoadSeries({ rules }, grid, timeZone);
  return [
    { motor: large, shaftKw: loads({ ...shift, shaftKw: 900 }), standingFieldA: 50 },
    { motor: small, shaftKw: loads({ ...whole, shaftKw: 350 }), standingFieldA: 36 },
    { motor: small, shaftKw: loads({ ...whole, shaftKw: 260 }, { ...shift, shaftKw: 390 }), standingFieldA: 36 },
  ];
}

/**
 * Prices distinct random field currents of three motors over a generated year (35,040 intervals, twelve bills) on the heavy schedule:
 * machines solved, every interval's kvar changed, bills priced. Ten are simulated and priced again by `simulatePlan` and `priceBills` and
 * must agree to the cent. Then whole searches.
 */
export function benchSearch(): Measured[] {
  const schedule = readSchedule(readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8'));
  const load = generatedYear(schedule.timeZone);
  const grid = { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length };
  const byCalendar = buildMotors(grid, schedule.timeZone);
  const metered = byCalendar[1]!.shaftKw.map((kw, i) => kw + 60 * Math.sin(i * 0.37) + 20 * Math.sin(i * 1.91));
  const bySubmeter = byCalendar.map((motor, m) => (m === 1 ? { ...motor, shaftKw: metered } : motor));
  const year = { schedule, load, grid };
  return [
    measure('candidate years, loads from a calendar', byCalendar, year),
    measure('candidate years, one load from a submeter', bySubmeter, year),
    measureSearch('search of three motors and two seasons, heavy schedule with a ratchet', byCalendar, year),
  ];
}

interface Year {
  schedule: Schedule;
  load: ReturnType<typeof generatedYear>;
  grid: Grid;
}

function measure(name: string, motors: PlanMotor[], { schedule, load, grid }: Year): Measured {
  const options = { periods: calendarMonths() };
  const pricing = compilePricing(schedule, grid, options);
  const simulator = createSimulator({ load, motors });
  const price = (controls: FieldControl[][]) => pricing.totals(simulator.apply(controls));
  const candidates = distinctFields(450);
  for (const controls of candidates.slice(0, 50)) price(controls);
  const measured = candidates.slice(50);
  const { perSecond, wallPerSecond } = rateOf(measured, price);
  const differing = measured.slice(0, 10).filter((controls) => {
    const planned = simulatePlan({ load, motors }, { controls }).load;
    const again = priceBills(schedule, planned, options);
    return price(controls).some((total, bill) => Math.round(100 * total) !== Math.round(100 * again[bill]!.total));
  });
  if (differing.length > 0) throw new Error(`${name}: totals differ from priceBills`);
  return {
    name,
    perSecond,
    atLeast: leastPerSecond,
    figures:
      `per second of processor time (${wallPerSecond.toFixed(0)} by the clock): ${measured.length} distinct settings of three motors, ` +
      '35,040 intervals, 12 bills; ten equal to priceBills to the cent',
  };
}

/** A whole search: field currents of three motors in each of two seasons, 1 A steps. */
function measureSearch(name: string, motors: PlanMotor[], { schedule, load, grid }: Year): Measured {
  const options = { periods: calendarMonths() };
  const pricing = compilePricing(schedule, grid, options);
  const rules = [{ name: 'Winter' }, { name: 'Summer', months: [4, 5, 6, 7, 8, 9] }];
  const spans = spanSeries(rules, grid, schedule.timeZone);
  const start = performance.now();
  const used = process.cpuUsage();
  let told = 0;
  const found = searchSettings({
    plant: { load, motors },
    fixed: { spans },
    totals: (series, changed) => pricing.totals(series, { changed }),
    bills: billReach(spans, billIntervals(grid, schedule.timeZone), looksBack(schedule)),
    onProgress: () => void told++,
  });
  const { user, system } = process.cpuUsage(used);
  const seconds = (user + system) / 1e6;
  if (told !== found.priced) throw new Error('progress must be told for every setting priced');
  return {
    name: `${name} [s of processor time]`,
    ratio: seconds,
    atMost: longestSearchSeconds,
    figures:
      `${found.priced} settings, ${((performance.now() - start) / 1000).toFixed(1)} s by the clock; ` +
      `${found.cost.toFixed(2)} against ${found.standingCost.toFixed(2)} standing`,
  };
}

/** Intervals of each bill. */
function billIntervals({ startMs, stepMinutes, count }: Grid, timeZone: string) {
  const place = (date: string) =>
    Math.min(count, Math.round((localDateStartMs(date, timeZone) - startMs) / (stepMinutes * 60_000)));
  return calendarMonths().map(({ from, to }) => ({ first: place(from), end: place(to) }));
}

/** Candidates per second of processor time, which other work on the machine does not change, and of the clock on the wall. */
function rateOf(candidates: FieldControl[][][], price: (controls: FieldControl[][]) => Float64Array) {
  const start = performance.now();
  const used = process.cpuUsage();
  for (const controls of candidates) price(controls);
  const { user, system } = process.cpuUsage(used);
  const wallPerSecond = candidates.length / ((performance.now() - start) / 1000);
  return { perSecond: candidates.length / ((user + system) / 1e6), wallPerSecond };
}

/** Distinct triples of field currents in tenths of an ampere, from a linear congruential sequence. */
function distinctFields(count: number): FieldControl[][][] {
  let seed = 2024;
  const next = () => {
    seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
    return seed / 2_147_483_648;
  };
  const tenths = (low: number, high: number) => Math.round((low + (high - low) * next()) * 10) / 10;
  const found = new Map<string, FieldControl[][]>();
  while (found.size < count) {
    const fields = [tenths(51, 78), tenths(37, 60), tenths(37, 60)];
    found.set(
      fields.join(),
      fields.map((fieldCurrentA) => [{ holds: 'field-current', fieldCurrentA }]),
    );
  }
  return [...found.values()];
}
