import { readFileSync } from 'node:fs';
import path from 'node:path';
import type { SynchronousMotor } from '../../src/core/machine';
import { createSimulator, searchFields, shaftLoadSeries, simulatePlan } from '../../src/core/plan';
import type { PlanMotor } from '../../src/core/plan';
import { compilePricing, priceBills, readSchedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear } from './pricing';
import type { Measured } from './run';

const LEAST_PER_SECOND = 150;

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

/**
 * Prices distinct random field currents of two motors over a generated year (35,040 intervals, twelve bills): machines solved,
 * registers changed, bills priced. Ten of them are priced again through `priceBills` and must agree to the cent.
 */
export function benchSearch(): Measured[] {
  const schedule = readSchedule(readFileSync(path.join('tariffs', 'ostrander-lp4.yaml'), 'utf8'));
  const load = generatedYear(schedule.timeZone);
  const options = { periods: calendarMonths() };
  const grid = { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length };
  const pricing = compilePricing(schedule, grid, options);
  const shifts = shaftLoadSeries(
    { rules: [{ days: ['weekday'], from: '06:00', to: '22:00', shaftKw: 900 }] },
    grid,
    schedule.timeZone,
  );
  const base = shaftLoadSeries(
    { rules: [{ days: ['every'], from: '00:00', to: '24:00', shaftKw: 350 }] },
    grid,
    schedule.timeZone,
  );
  const metered = base.map((kw, i) => kw + 60 * Math.sin(i * 0.37) + 20 * Math.sin(i * 1.91));
  const byCalendar: PlanMotor[] = [
    { motor: large, shaftKw: shifts, standingFieldA: 50 },
    { motor: small, shaftKw: base, standingFieldA: 36 },
  ];
  const bySubmeter: PlanMotor[] = [byCalendar[0]!, { ...byCalendar[1]!, shaftKw: metered }];
  const priceTwice = (motors: PlanMotor[], fields: number[]) => {
    const plan = motors.map((motor, m) => ({ ...motor, planFieldA: fields[m]! }));
    return priceBills(schedule, simulatePlan({ load, motors: plan }).load, options).map((bill) => bill.total);
  };
  const rows = [
    { name: 'settings priced, loads from a calendar', motors: byCalendar },
    { name: 'settings priced, one load from a submeter', motors: bySubmeter },
  ].map(({ name, motors }) => {
    const simulator = createSimulator({ load, motors });
    return measure(
      name,
      (fields) => pricing.totals(simulator.apply(fields)),
      (fields) => priceTwice(motors, fields),
    );
  });
  return [...rows, measureSearch(byCalendar, load, (series) => pricing.totals(series))];
}

function measure(
  name: string,
  price: (fields: number[]) => Float64Array,
  priceAgain: (fields: number[]) => number[],
): Measured {
  const candidates = distinctFields(320);
  for (const fields of candidates.slice(0, 20)) price(fields);
  const measured = candidates.slice(20);
  const { perSecond, wallPerSecond } = rateOf(measured, price);
  const differing = measured.slice(0, 10).filter((fields) => {
    const again = priceAgain(fields);
    return price(fields).some((total, bill) => Math.abs(total - again[bill]!) > 0.005);
  });
  if (differing.length > 0)
    throw new Error(`${name}: totals differ from priceBills at fields ${differing.join(' and ')}`);
  return {
    name,
    perSecond,
    atLeast: LEAST_PER_SECOND,
    figures: `per second of processor time (${wallPerSecond.toFixed(0)} by the clock): ${measured.length} distinct settings of two motors, 35,040 intervals, 12 bills; ten equal to priceBills to the cent`,
  };
}

function measureSearch(
  motors: PlanMotor[],
  load: ReturnType<typeof generatedYear>,
  totals: Parameters<typeof searchFields>[0]['totals'],
): Measured {
  const used = process.cpuUsage();
  const found = searchFields({ plant: { load, motors }, totals });
  const { user, system } = process.cpuUsage(used);
  const seconds = (user + system) / 1e6;
  return {
    name: 'whole search of two motors, 1 A steps',
    perSecond: found.priced / seconds,
    atLeast: LEAST_PER_SECOND,
    figures:
      `${found.priced} settings in ${seconds.toFixed(1)} s of processor time, ${found.exhaustive ? 'every combination' : 'descent'}; ` +
      `best ${found.fieldsA.join(' A and ')} A: ${found.cost.toFixed(2)} against ${found.standingCost.toFixed(2)} standing`,
  };
}

/** Candidates per second of processor time, which other work on the machine does not change, and of the clock on the wall. */
function rateOf(
  candidates: number[][],
  price: (fields: number[]) => Float64Array,
): { perSecond: number; wallPerSecond: number } {
  const start = performance.now();
  const used = process.cpuUsage();
  for (const fields of candidates) price(fields);
  const { user, system } = process.cpuUsage(used);
  const wallPerSecond = candidates.length / ((performance.now() - start) / 1000);
  return { perSecond: candidates.length / ((user + system) / 1e6), wallPerSecond };
}

/** Distinct pairs of field currents in tenths of an ampere, from a linear congruential sequence. */
function distinctFields(count: number): number[][] {
  let seed = 2024;
  const next = () => {
    seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
    return seed / 2_147_483_648;
  };
  const found = new Map<string, number[]>();
  while (found.size < count) {
    const fields = [Math.round((45 + 33 * next()) * 10) / 10, Math.round((32 + 28 * next()) * 10) / 10];
    found.set(fields.join(), fields);
  }
  return [...found.values()];
}
