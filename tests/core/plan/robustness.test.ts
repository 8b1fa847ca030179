import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '../../../src/core/load';
import { perturbPlant, searchSettings, tryRobustness } from '../../../src/core/plan';
import type { SearchInput } from '../../../src/core/plan';
import { buildLoad, buildPlanMotor } from './build-plant';

const load = buildLoad(28);
const motor = buildPlanMotor(load, { leastFieldA: 90 });
const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0);
const bill = (...amounts: number[]) => Float64Array.from(amounts);

describe('perturbPlant', () => {
  it('gives the same year for the same seed, another for another, and leaves the plant alone', () => {
    const plant = { load, motors: [motor] };
    expect(perturbPlant(plant, 5)).toEqual(perturbPlant(plant, 5));
    expect(perturbPlant(plant, 5).load.kwh).not.toEqual(perturbPlant(plant, 6).load.kwh);
    expect(load).toEqual(buildLoad(28));
  });

  it('moves days with their weekday, whole, and the shaft load with them', () => {
    // Every interval of day d draws d + 1 kWh and the motor carries as much: nothing else is perturbed.
    const marked = buildLoad(28, { kwh: Float64Array.from({ length: 28 * 96 }, (_, i) => Math.floor(i / 96) + 1) });
    const carried = buildPlanMotor(marked, { shaftKw: marked.kwh.slice() });
    const still = { swappedDays: 1, dayShare: 0, intervalShare: 0, shaftShare: 0, voltagePu: 0 };
    const year = perturbPlant({ load: marked, motors: [carried] }, 3, still);
    const days = Array.from({ length: 28 }, (_, day) => year.load.kwh[day * 96]!);
    expect([...days].sort((a, b) => a - b)).toEqual(Array.from({ length: 28 }, (_, day) => day + 1));
    expect(days).not.toEqual(Array.from({ length: 28 }, (_, day) => day + 1));
    days.forEach((mark, day) => expect(Math.abs(mark - 1 - day) % 7).toBe(0));
    expect(year.load.kwh).toEqual(Float64Array.from({ length: 28 * 96 }, (_, i) => days[Math.floor(i / 96)]!));
    expect(year.motors[0]!.shaftKw).toEqual(year.load.kwh);
  });

  it('keeps missing intervals missing', () => {
    const holed = buildLoad(28);
    for (const channel of [holed.kwh, holed.kvarhLagging, holed.kvarhLeading]) channel.fill(NaN, 100, 110);
    holed.quality.fill(2, 100, 110);
    const year = perturbPlant({ load: holed, motors: [] }, 11);
    expect(year.load.quality.filter((mark) => mark === 2)).toHaveLength(10);
    year.load.quality.forEach((mark, i) => expect(Number.isNaN(year.load.kwh[i]!)).toBe(mark === 2));
  });
});

describe('tryRobustness', () => {
  // A cliff: 40,000 as soon as lagging energy passes 0.72 of active energy; energy at 0.05. On the metered year the best is the least
  // field that clears it. Any change of the year of a per cent or so pushes that setting over.
  const cliff = (series: LoadSeries) =>
    bill(sum(series.kvarhLagging) > 0.72 * sum(series.kwh) ? 40_000 : 0, 0.05 * sum(series.kwh));
  const input = (totals: SearchInput['totals']): SearchInput => ({
    plant: { load, motors: [{ ...motor, searched: { holds: 'field-current', stepA: 1 } }] },
    totals,
  });

  it('says that the edge of a cliff is best on the exact data only, and offers a setting further from it', () => {
    const found = searchSettings(input(cliff));
    const edge = found.controls[0]![0]!;
    if (edge.holds !== 'field-current') throw new Error('a field current expected');
    const robust = tryRobustness(input(cliff), found, { years: 40, seed: 4 });
    expect(robust.years).toBe(40);
    expect(robust.bestYears).toBeLessThan(35);
    expect(robust.onlyOnExactData).toBe(true);
    const safer = robust.safer!.controls[0]![0]!;
    if (safer.holds !== 'field-current') throw new Error('a field current expected');
    expect(safer.fieldCurrentA).toBeGreaterThan(edge.fieldCurrentA);
    expect(robust.safer!.meanCost).toBeLessThan(robust.chosen.meanCost - 500);
    expect(robust.safer!.meanRegret).toBeLessThan(robust.chosen.meanRegret);
    expect(robust.chosen.worstRegret).toBeGreaterThan(30_000);
  });

  it('confirms a setting whose surroundings are flat', () => {
    // Lagging energy at 0.05 against energy at 0.1: the field goes to its limit, and it does so in every year.
    const smooth = (series: LoadSeries) => bill(0.5 * sum(series.kvarhLagging), 0.05 * sum(series.kwh));
    const found = searchSettings(input(smooth));
    const robust = tryRobustness(input(smooth), found, { years: 12, seed: 4 });
    expect(robust.onlyOnExactData).toBe(false);
    expect(robust.safer).toBeNull();
    expect(robust.bestYears).toBe(12);
    expect(robust.chosen.meanSaving).toBeGreaterThan(0);
    expect(robust.chosen.spreadCost).toBeGreaterThan(0);
    // Three steps below the limit and none above it.
    expect(robust.neighbours).toHaveLength(3);
  });

  it('is the same for the same seed, and can be ended', () => {
    const found = searchSettings(input(cliff));
    const twice = [1, 2].map(() => tryRobustness(input(cliff), found, { years: 4, seed: 9 }));
    expect(twice[0]).toEqual(twice[1]);
    const cut = tryRobustness(input(cliff), found, { years: 9, onProgress: ({ years }) => years < 3 });
    expect(cut).toMatchObject({ years: 3, cancelled: true });
    expect(() => tryRobustness(input(cliff), found, { years: 1 })).toThrow(/years must be a whole number >= 2/);
  });
});
