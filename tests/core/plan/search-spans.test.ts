import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '../../../src/core/load';
import { operatingPoint } from '../../../src/core/machine';
import type { FieldControl } from '../../../src/core/machine';
import { createSimulator, searchSettings } from '../../../src/core/plan';
import type { SearchMotor, SearchedSetting, Spans } from '../../../src/core/plan';
import { partsOf } from '../../../src/core/plan/search-parts';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor, field } from './build-plant';

const bill = (...amounts: number[]) => Float64Array.from(amounts);
const total = (values: Float64Array, from = 0, to = values.length) =>
  values.subarray(from, to).reduce((sum, value) => sum + value, 0);
const sum = (values: Float64Array) => total(values);
const kvarAt = (motor: SearchMotor, fieldCurrentA: number) =>
  -operatingPoint(motor.motor, { shaftKw: 1200, fieldCurrentA }).kvar;
const ampsOf = (controls: FieldControl[]) =>
  controls.map((control) => (control.holds === 'field-current' ? control.fieldCurrentA : NaN));
const searched = (setting: SearchedSetting) => ({ searched: setting });
const isNight = (i: number) => !(i % 96 >= 24 && i % 96 < 88);

describe('settings by shift', () => {
  // The motor runs day and night. By day 800 kvarh a quarter-hour are metered, by night 80; leading energy at night costs three times
  // what lagging saves by day, so one setting for all hours stops at 320 kvar more than standing (see search-settings.test.ts).
  const load = buildLoad(2, { kvarhLagging: Float64Array.from({ length: 192 }, (_, i) => (isNight(i) ? 80 : 800)) });
  const motor = buildPlanMotor(load, { shaftKw: new Float64Array(192).fill(1200) });
  const totals = (series: LoadSeries) => {
    let cost = 0;
    series.kvarhLagging.forEach((lagging, i) => (cost += isNight(i) ? 3 * series.kvarhLeading[i]! : lagging));
    return bill(cost);
  };
  const spans: Spans = { index: Uint8Array.from({ length: 192 }, (_, i) => (isNight(i) ? 1 : 0)), count: 2 };

  it('beat one setting where a leading charge at night forbids more by day', () => {
    const one = searchSettings({ plant: { load, motors: [motor] }, totals });
    const two = searchSettings({ plant: { load, motors: [motor] }, fixed: { spans }, totals });
    // By day the field goes to its limit of 150 A; by night any field that leads nothing costs nothing, and standing stays.
    expect(ampsOf(two.controls[0]!)).toEqual([150, 105]);
    expect(two.leaveAlone).toBe(false);
    // 128 quarter-hours by day with what 150 A deliver beyond 105 A.
    expect(two.cost).toBeCloseTo(128 * (800 - (kvarAt(motor, 150) - kvarAt(motor, 105)) / 4), 6);
    expect(two.cost).toBeLessThan(one.cost - 100);
    expect(two.axes.map(({ motors, span }) => [...motors, span])).toEqual([
      [0, 0],
      [0, 1],
    ]);
  });

  it('is walked without every combination to the same end', () => {
    const whole = searchSettings({
      plant: { load, motors: [motor] },
      fixed: { spans },
      totals,
      exhaustiveUpTo: 10_000,
    });
    const walked = searchSettings({ plant: { load, motors: [motor] }, fixed: { spans }, totals, exhaustiveUpTo: 0 });
    expect(whole.exhaustive).toBe(true);
    expect(walked.controls).toEqual(whole.controls);
    expect(walked.priced).toBeLessThan(whole.priced / 4);
  });
});

describe('settings by season', () => {
  const load = buildLoad(4);
  const motor = buildPlanMotor(load);
  const spans: Spans = { index: Uint8Array.from(load.kwh, (_, i) => (i < 192 ? 0 : 1)), count: 2 };
  // Each bill of two days is least where the motor delivers in 32 running hours what a certain field does.
  const target = (amperes: number) => (kvarAt(motor, amperes) - kvarAt(motor, 105)) * 32;
  const saved = (series: LoadSeries, from: number, to: number) =>
    total(load.kvarhLagging, from, to) - total(series.kvarhLagging, from, to) + total(series.kvarhLeading, from, to);
  const totals = (series: LoadSeries) =>
    bill((saved(series, 0, 192) - target(127)) ** 2, (saved(series, 192, 384) - target(118)) ** 2);
  const input = { plant: { load, motors: [motor] }, fixed: { spans }, totals };

  it('are searched side by side where no bill looks back: one year priced answers for both', () => {
    const apart = searchSettings({ ...input, bills: { ofSpan: [[0], [1]], looksBack: false } });
    expect(ampsOf(apart.controls[0]!)).toEqual([127, 118]);
    expect(apart.cost).toBeLessThan(1e-6);
    expect(apart.exhaustive).toBe(true);
    // As many years as one season has settings: 72 to 150 A within the limits, not their square.
    expect(apart.priced).toBeLessThan(90);
    const together = searchSettings({ ...input, exhaustiveUpTo: 10_000 });
    expect(together.controls).toEqual(apart.controls);
    expect(together.priced).toBeGreaterThan(5000);
    expect(apart.axes.map(({ curve }) => curve.length)).toEqual(together.axes.map(({ curve }) => curve.length));
    apart.axes.forEach(({ curve }, a) =>
      curve.forEach(({ cost }, k) => expect(cost).toBeCloseTo(together.axes[a]!.curve[k]!.cost, 4)),
    );
  });

  it('are searched together where a ratchet carries one season into the other', () => {
    const peak = (series: LoadSeries, from: number, to: number) => {
      let most = 0;
      for (let i = from; i < to; i++)
        most = Math.max(most, 4 * Math.hypot(series.kwh[i]!, series.kvarhLagging[i]! - series.kvarhLeading[i]!));
      return most;
    };
    // The second season is charged its own peak or 97 % of the first one's; energy is dear.
    const ratchet = (series: LoadSeries) => {
      const first = peak(series, 0, 192);
      const second = Math.max(peak(series, 192, 384) * 0.9, 0.97 * first);
      return bill(first * 0.4 + total(series.kwh, 0, 192), second * 4 + total(series.kwh, 192, 384));
    };
    const own = { ...motor, ...searched({ holds: 'field-current', stepA: 5 }) };
    const found = searchSettings({
      plant: { load, motors: [own] },
      fixed: { spans },
      totals: ratchet,
      bills: { ofSpan: [[0], [1]], looksBack: true },
      exhaustiveUpTo: 0,
    });
    const simulator = createSimulator({ load, motors: [motor] }, { spans });
    let least = Infinity;
    const steps = [105, ...Array.from({ length: 15 }, (_, k) => 80 + 5 * k)].filter((amperes) => amperes <= 150);
    for (const a of steps)
      for (const b of steps) least = Math.min(least, sum(ratchet(simulator.apply([[...field(a), ...field(b)]]))));
    expect(found.cost).toBeCloseTo(least, 6);
    expect(found.cost).toBeLessThan(found.standingCost - 1);
  });
});

describe('partsOf', () => {
  it('joins axes that move a common bill, directly or by way of others', () => {
    expect(partsOf([[0, 1], [2], [1, 3], [4], []], 5)).toEqual([
      { axes: [0, 2], bills: [0, 1, 3] },
      { axes: [1], bills: [2] },
      { axes: [3], bills: [4] },
      { axes: [4], bills: [] },
    ]);
    expect(partsOf([[0], [1], [0, 1]], 2)).toEqual([{ axes: [0, 1, 2], bills: [0, 1] }]);
  });
});

describe('set points of regulators', () => {
  const load = buildLoad(2);
  const motor = buildPlanMotor(load);
  const running = motor.shaftKw.reduce((count, kw) => count + (kw > 0 ? 1 : 0), 0);

  it('finds the reactive power that a charge asks for', () => {
    // The charge vanishes where the motor delivers 450 kvar in its running hours.
    const before = sum(load.kvarhLagging) - (running / 4) * kvarAt(motor, 105) * -1;
    const totals = (series: LoadSeries) =>
      bill(Math.abs(before - sum(series.kvarhLagging) + sum(series.kvarhLeading) - (running / 4) * 450));
    const own = { ...motor, ...searched({ holds: 'kvar', stepKvar: 50, lowKvar: 0, highKvar: 900 }) };
    const found = searchSettings({ plant: { load, motors: [own] }, totals });
    expect(found.controls[0]).toEqual([{ holds: 'kvar', kvarDelivered: 450 }]);
    expect(found.axes[0]!.curve).toHaveLength(20);
  });

  it('holds the plant’s power factor no better than the charge asks for', () => {
    // Free down to 0.83, then 1 per kvarh; energy at 0.3: what lies above 0.83 only loses energy.
    const tangent = Math.tan(Math.acos(0.83));
    const totals = (series: LoadSeries) => {
      let excess = 0;
      series.kvarhLagging.forEach((kvarh, i) => (excess += Math.max(0, kvarh - tangent * series.kwh[i]!)));
      return bill(excess, 0.3 * sum(series.kwh));
    };
    const hold = searched({ holds: 'plant-power-factor', step: 0.01, least: 0.75, most: 0.95 });
    const second = buildPlanMotor(load, {
      motor: buildMotor({ ratedOutputKw: 900, ratedFieldCurrentA: 90 }),
      standingFieldA: 70,
      shaftKw: motor.shaftKw.map((kw) => kw / 2),
    });
    const found = searchSettings({
      plant: {
        load,
        motors: [
          { ...motor, ...hold },
          { ...second, ...hold },
        ],
      },
      totals,
    });
    const wanted = [{ holds: 'plant-power-factor', powerFactor: 0.83 }];
    expect(found.controls).toEqual([wanted, wanted]);
    expect(found.axes).toHaveLength(1);
    expect(found.axes[0]!.motors).toEqual([0, 1]);
  });

  it('tries power factors from lagging over unity to leading', () => {
    const totals = (series: LoadSeries) => bill(sum(series.kvarhLagging) + 5 * sum(series.kvarhLeading));
    const own = { ...motor, ...searched({ holds: 'power-factor', step: 0.1, leastLagging: 0.8, leastLeading: 0.8 }) };
    const found = searchSettings({ plant: { load, motors: [own] }, totals });
    expect(found.axes[0]!.curve.slice(1).map(({ control }) => control)).toEqual([
      { holds: 'power-factor', powerFactor: 0.8, leading: false },
      { holds: 'power-factor', powerFactor: 0.9, leading: false },
      { holds: 'power-factor', powerFactor: 1, leading: true },
      { holds: 'power-factor', powerFactor: 0.9, leading: true },
      { holds: 'power-factor', powerFactor: 0.8, leading: true },
    ]);
    expect(found.controls[0]).toEqual([{ holds: 'power-factor', powerFactor: 0.8, leading: true }]);
  });

  it.each([
    [{ holds: 'kvar', stepKvar: 0, lowKvar: 0, highKvar: 1 }, /stepKvar must be > 0/],
    [{ holds: 'kvar', stepKvar: 1, lowKvar: 5, highKvar: 1 }, /least value first/],
    [{ holds: 'kvar', stepKvar: 1e-3, lowKvar: 0, highKvar: 1000 }, /at most 2000 settings/],
    [{ holds: 'plant-power-factor', step: 0.1, least: 0.5, most: 1.2 }, /power factors in \(0, 1\]/],
  ] as [SearchedSetting, RegExp][])('refuses %j', (setting, message) => {
    const run = () =>
      searchSettings({ plant: { load, motors: [{ ...motor, ...searched(setting) }] }, totals: () => bill(1) });
    expect(run).toThrow(message);
  });

  it('leaves a motor alone that is not searched', () => {
    const totals = (series: LoadSeries) => bill(sum(series.kvarhLagging));
    const found = searchSettings({ plant: { load, motors: [{ ...motor, searched: null }, motor] }, totals });
    expect(ampsOf(found.controls[0]!)).toEqual([105]);
    expect(ampsOf(found.controls[1]!)).toEqual([150]);
  });
});

describe('a searched bank', () => {
  // 400 kvar day and night: 1 per lagging kvarh, 3 per leading: eight steps of 50 kvar meet it (as in alternatives.test.ts).
  const load = buildLoad(1, { kvarhLagging: new Float64Array(96).fill(100) });
  const totals = (series: LoadSeries) => bill(sum(series.kvarhLagging) + 3 * sum(series.kvarhLeading));
  const bank = { stepKvar: 50, lossWPerKvar: 0, mostSteps: 12 };

  it('is sized with the motors, and its own cost counted', () => {
    const plant = { load, motors: [{ ...buildPlanMotor(load), searched: null }] };
    const found = searchSettings({ plant, bank: { ...bank, yearlyCostPerStep: 1190 }, totals });
    expect(found).toMatchObject({ bankSteps: 8, bankCost: 9520, cost: 9520, leaveAlone: false, standingCost: 9600 });
    expect(found.bankCurve.map(({ cost }) => cost)[9]).toBe(3600 + 9 * 1190);
    // At 1,201 a step saves less than it costs.
    expect(searchSettings({ plant, bank: { ...bank, yearlyCostPerStep: 1201 }, totals })).toMatchObject({
      bankSteps: 0,
      leaveAlone: true,
    });
    expect(() => searchSettings({ plant, bank: { ...bank, mostSteps: 0 }, totals })).toThrow(/mostSteps/);
  });

  it('shares the work with a motor: together they do what neither does alone', () => {
    // The motor runs at all hours and loses energy at 0.5; steps cost nothing: capacitors do it all and the motor goes to least loss.
    const motor = {
      ...buildPlanMotor(load, { shaftKw: new Float64Array(96).fill(1200) }),
      ...searched({ holds: 'field-current', stepA: 1 }),
    };
    const priced = (series: LoadSeries) => bill(sum(totals(series)), 0.5 * sum(series.kwh));
    const walked = searchSettings({ plant: { load, motors: [motor] }, bank, totals: priced, exhaustiveUpTo: 0 });
    const whole = searchSettings({ plant: { load, motors: [motor] }, bank, totals: priced, exhaustiveUpTo: 10_000 });
    expect(whole.exhaustive).toBe(true);
    expect(walked.cost).toBeCloseTo(whole.cost, 6);
    expect(walked.bankSteps).toBeGreaterThan(0);
  });
});
