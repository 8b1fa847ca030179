import { readFileSync } from 'node:fs';
import type { SynchronousMotor } from '../../src/core/machine';
import { boundOf, createSimulator, shaftLoadSeries } from '../../src/core/plan';
import type { PlanMotor } from '../../src/core/plan';
import { compilePricing, readSchedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear } from './pricing';
import type { Measured } from './run';

const MOST_SECONDS = 10;

const motor: SynchronousMotor = {
  ratedOutputKw: 560,
  ratedVoltageV: 4000,
  frequencyHz: 60,
  poles: 14,
  ratedPowerFactor: 0.8,
  ratedEfficiency: 0.955,
  ratedFieldCurrentA: 60,
  fieldResistanceOhm: 1.3,
  exciterEfficiency: 0.85,
  raPu: 0.008,
  xdPu: 1.15,
  xqPu: 0.75,
};

/**
 * The bound of a generated year (35,040 intervals, twelve bills) on the heaviest schedule with three motors, one of them at a load that
 * differs in every interval. It must lie below the bills of every constant field tried.
 */
export function benchBound(): Measured[] {
  const schedule = readSchedule(readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8'));
  const load = generatedYear(schedule.timeZone);
  const options = { periods: calendarMonths() };
  const { startMs, stepMinutes, kwh } = load;
  const grid = { startMs, stepMinutes, count: kwh.length };
  const shift = (from: string, to: string, shaftKw: number): Float64Array =>
    shaftLoadSeries({ rules: [{ days: ['weekday'], from, to, shaftKw }] }, grid, schedule.timeZone);
  const metered = Float64Array.from(kwh, (_, i) => 380 + 60 * Math.sin(i * 0.37) + 20 * Math.sin(i * 1.91));
  const motors: PlanMotor[] = [shift('06:00', '22:00', 450), shift('08:00', '18:00', 300), metered].map((shaftKw) => ({
    motor,
    shaftKw,
    standingFieldA: 40,
  }));
  const plant = { load, motors };
  const used = process.cpuUsage();
  const start = performance.now();
  const bound = boundOf({ plant, schedule, options });
  const seconds = (performance.now() - start) / 1000;
  const { user, system } = process.cpuUsage(used);
  if (bound.refused !== undefined) throw new Error(bound.refused);
  const simulator = createSimulator(plant);
  const pricing = compilePricing(schedule, grid, options);
  const costAt = (fieldCurrentA: number): number =>
    pricing
      .totals(simulator.apply(motors.map(() => [{ holds: 'field-current', fieldCurrentA }])))
      .reduce((sum, total) => sum + total, 0);
  const costs = Array.from({ length: 16 }, (_, k) => costAt(38 + k));
  const best = Math.min(...costs);
  if (bound.total > best) throw new Error(`the bound ${bound.total} lies above a constant field's ${best}`);
  return [
    {
      name: 'bound of a year on the heaviest schedule, three motors',
      ratio: (user + system) / 1e6,
      atMost: MOST_SECONDS,
      figures:
        `seconds of processor time (${seconds.toFixed(2)} by the clock); bound ${bound.total.toFixed(0)}, best of 16 equal constant fields ` +
        `${best.toFixed(0)}, as metered ${costAt(40).toFixed(0)}; losses not charged ${bound.freeLossCost?.toFixed(0)}`,
    },
  ];
}
