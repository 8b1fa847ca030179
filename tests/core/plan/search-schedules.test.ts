import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { localDateStartMs } from '../../../src/core/load';
import type { LoadSeries } from '../../../src/core/load';
import { createSimulator, fieldBounds, searchSettings, shaftLoadSeries } from '../../../src/core/plan';
import type { PlanMotor } from '../../../src/core/plan';
import { compilePricing, readSchedule } from '../../../src/core/tariff';
import { buildMotor } from '../machine/build-motor';
import { field } from './build-plant';

const periods = [
  { from: '2026-03-01', to: '2026-04-01' },
  { from: '2026-04-01', to: '2026-05-01' },
];

/** Two months of quarter-hours: two shifts on weekdays and a light night and weekend, which leads now and then. */
function buildMonths(timeZone: string): LoadSeries {
  const startMs = localDateStartMs('2026-03-01', timeZone);
  const count = (localDateStartMs('2026-05-01', timeZone) - startMs) / 900_000;
  const day = shaftLoadSeries(
    { rules: [{ days: ['weekday'], from: '06:00', to: '22:00', shaftKw: 1 }] },
    { startMs, stepMinutes: 15, count },
    timeZone,
  );
  const kw = day.map((busy, i) => (busy ? 3000 : 900) * (1 + 0.12 * Math.sin(i * 0.71) * Math.cos(i * 0.013)));
  const kvar = day.map(
    (busy, i) => kw[i]! * (busy ? 0.75 + 0.2 * Math.sin(i * 0.37) : 0.22 + 0.3 * Math.sin(i * 0.29)),
  );
  return {
    startMs,
    stepMinutes: 15,
    kwh: kw.map((value) => value / 4),
    kvarhLagging: kvar.map((value) => Math.max(0, value) / 4),
    kvarhLeading: kvar.map((value) => Math.max(0, -value) / 4),
    quality: new Uint8Array(count),
  };
}

/** One motor of two shifts, one that runs all hours. */
function buildTwo(load: LoadSeries, timeZone: string): PlanMotor[] {
  const grid = { startMs: load.startMs, stepMinutes: 15, count: load.kwh.length };
  const shaftKw = (days: 'weekday' | 'every', from: string, to: string, kw: number) =>
    shaftLoadSeries({ rules: [{ days: [days], from, to, shaftKw: kw }] }, grid, timeZone);
  const second = buildMotor({ ratedOutputKw: 900, ratedFieldCurrentA: 90, fieldResistanceOhm: 0.9 });
  return [
    { motor: buildMotor(), shaftKw: shaftKw('weekday', '06:00', '22:00', 1100), standingFieldA: 104 },
    { motor: second, shaftKw: shaftKw('every', '00:00', '24:00', 420), standingFieldA: 60 },
  ];
}

const schedules: [file: string, contract: Record<string, number>][] = [
  ['ostrander-lp4', {}],
  ['ostrander-hv3', {}],
  ['millrace-kva', {}],
  ['tidewater-kvarh', {}],
  ['forms/kva-demand', {}],
  ['forms/kvarh-cliff', {}],
  ['forms/kvar-excess-ratchet', {}],
  ['forms/percent-by-bands', {}],
  ['forms/percent-table-lead-and-lag', {}],
  ['forms/kw-two-percent-per-point', {}],
  ['forms/hourly-rescaled-to-reference', {}],
  ['forms/kvarh-price-by-pf-band', {}],
];

describe('searchSettings under published and invented schedules', () => {
  it.each(schedules)('finds what pricing every settable step of two motors finds: %s', (file, contract) => {
    const schedule = readSchedule(readFileSync(`tariffs/${file}.yaml`, 'utf8'));
    const load = buildMonths(schedule.timeZone);
    const motors = buildTwo(load, schedule.timeZone);
    const grid = { startMs: load.startMs, stepMinutes: 15, count: load.kwh.length };
    const pricing = compilePricing(schedule, grid, { periods, contract });
    const totals = (series: LoadSeries) => pricing.totals(series);
    const stepA = 3;
    const plant = {
      load,
      motors: motors.map((motor) => ({ ...motor, searched: { holds: 'field-current' as const, stepA } })),
    };
    const found = searchSettings({ plant, totals, exhaustiveUpTo: 0 });

    const steps = motors.map((motor) => {
      const bounds = fieldBounds(motor);
      if ('none' in bounds) throw new Error('bounds expected');
      const own = [motor.standingFieldA];
      for (let amperes = 0; amperes <= bounds.highA; amperes += stepA) if (amperes >= bounds.lowA) own.push(amperes);
      return own;
    });
    const simulator = createSimulator({ load, motors });
    let least = Infinity;
    for (const a of steps[0]!) {
      for (const b of steps[1]!) {
        const cost = totals(simulator.apply([field(a), field(b)])).reduce((sum, value) => sum + value, 0);
        least = Math.min(least, cost);
      }
    }
    expect(steps[0]!.length * steps[1]!.length).toBeGreaterThan(300);
    expect(found.exhaustive).toBe(false);
    expect(found.cost).toBeLessThanOrEqual(least + 0.005 + 1e-9);
    expect(found.cost).toBeGreaterThanOrEqual(least - 1e-6);
    expect(found.priced).toBeLessThan(steps[0]!.length * steps[1]!.length);
  });
});
