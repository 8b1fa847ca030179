import { describe, expect, it } from 'vitest';
import { PullOutError, operatingPoint } from '../../../src/core/machine';
import { createSimulator, fieldBounds, shiftRegisters, simulatePlan } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor, field } from './build-plant';

const load = buildLoad(7);
const planMotor = buildPlanMotor(load);
const at = (fieldCurrentA: number, shaftKw = 1200) => operatingPoint(planMotor.motor, { shaftKw, fieldCurrentA });

describe('simulatePlan', () => {
  it('changes every running interval by what the motor takes beyond standing, the others not at all', () => {
    const result = simulatePlan({ load, motors: [planMotor] }, { controls: [field(140)] });
    const more = at(140).kvar - at(105).kvar;
    const loss = at(140).inputKw - at(105).inputKw;
    expect(more).toBeLessThan(-400);
    load.kwh.forEach((kwh, i) => {
      const running = planMotor.shaftKw[i]! > 0;
      const expected = shiftRegisters(load.kvarhLagging[i]!, load.kvarhLeading[i]!, running ? more / 4 : 0);
      expect(result.load.kvarhLagging[i]).toBeCloseTo(expected.kvarhLagging, 8);
      expect(result.load.kvarhLeading[i]).toBeCloseTo(expected.kvarhLeading, 8);
      expect(result.load.kwh[i]).toBeCloseTo(kwh + (running ? loss / 4 : 0), 8);
    });
    const [motor] = result.motors;
    expect(motor!.hoursRunning).toBe(7 * 16);
    expect(motor!.usualShaftKw).toBe(1200);
    expect(motor!.kvarStanding).toBeCloseTo(-at(105).kvar, 8);
    expect(motor!.kvarPlan).toBeCloseTo(-at(140).kvar, 8);
    expect(motor!.extraLossKwh).toBeCloseTo(loss * 112, 6);
    expect(result.extraKwh).toBeCloseTo(loss * 112, 6);
    expect(motor!.leastPullOutRatio).toBeCloseTo(at(140).pullOutRatio, 10);
    expect(motor!.leastPullOutRatioStanding).toBeCloseTo(at(105).pullOutRatio, 10);
    expect(motor!.nearestLimitHours).toEqual({ armature: 0, field: 112, 'pull-out': 0 });
    expect(motor!.beyondHours).toEqual({ armature: 0, field: 0, 'pull-out': 0 });
    expect(motor!.greatestFieldShare).toBeCloseTo(140 / 150, 12);
  });

  it('changes nothing when the plan is standing', () => {
    const result = simulatePlan({ load, motors: [planMotor] }, { controls: [field(planMotor.standingFieldA)] });
    expect(result.load).toEqual(load);
    expect(result.extraKwh).toBe(0);
    expect(result.motors[0]!.extraLossKwh).toBe(0);
  });

  it('is the same change whether two motors are simulated together or one after the other', () => {
    const other = buildPlanMotor(load, { motor: buildMotor({ ratedFieldCurrentA: 80 }), standingFieldA: 50 });
    const both = simulatePlan({ load, motors: [planMotor, other] }, { controls: [field(120), field(60)] });
    const first = simulatePlan({ load, motors: [planMotor] }, { controls: [field(120)] });
    const second = simulatePlan({ load: first.load, motors: [other] }, { controls: [field(60)] });
    both.load.kvarhLagging.forEach((kvarh, i) => expect(kvarh).toBeCloseTo(second.load.kvarhLagging[i]!, 8));
  });

  it('adds capacitor steps from their date, their output with the square of the voltage, and their losses', () => {
    const fromMs = load.startMs + 3 * 86_400_000;
    const result = simulatePlan(
      { load, motors: [] },
      { controls: [], banks: [{ steps: 1, stepKvar: 400, lossWPerKvar: 2, voltagePu: 1.05, fromMs }] },
    );
    // 400 x 1.05^2 = 441 kvar, 0.882 kW.
    expect(result.load.kvarhLagging[3 * 96 - 1]).toBe(load.kvarhLagging[3 * 96 - 1]);
    expect(result.load.kvarhLagging[3 * 96 + 40]).toBeCloseTo(load.kvarhLagging[3 * 96 + 40]! - 441 / 4, 9);
    expect(result.load.kwh[3 * 96 + 40]).toBeCloseTo(load.kwh[3 * 96 + 40]! + 0.882 / 4, 9);
    expect(result.extraKwh).toBeCloseTo(0.882 * 4 * 24, 6);
  });

  it('meters the change of transformer loss: R (S2^2 - S1^2)/kVA and X alike, S at the meter', () => {
    const upstream = { ratedKva: 7500, resistancePu: 0.008, reactancePu: 0.06 };
    const result = simulatePlan({ load, motors: [planMotor], upstream }, { controls: [field(140)] });
    const i = 50;
    const before = (load.kwh[i]! * 4) ** 2 + (load.kvarhLagging[i]! * 4) ** 2;
    const after = (result.load.kwh[i]! * 4) ** 2 + (result.load.kvarhLagging[i]! * 4) ** 2;
    const loss = at(140).inputKw - at(105).inputKw;
    expect(result.load.kwh[i]! * 4).toBeCloseTo(load.kwh[i]! * 4 + loss + (0.008 / 7500) * (after - before), 6);
    const more = at(140).kvar - at(105).kvar;
    expect(result.load.kvarhLagging[i]! * 4).toBeCloseTo(
      load.kvarhLagging[i]! * 4 + more + (0.06 / 7500) * (after - before),
      6,
    );
    expect(after).toBeLessThan(before);
  });

  it('keeps missing intervals missing and their quality', () => {
    const holed = buildLoad(1);
    for (const channel of [holed.kwh, holed.kvarhLagging, holed.kvarhLeading]) channel[40] = NaN;
    holed.quality[40] = 2;
    holed.quality[41] = 1;
    const result = simulatePlan({ load: holed, motors: [buildPlanMotor(holed)] }, { controls: [field(130)] });
    expect([result.load.kwh[40], result.load.kvarhLagging[40], result.load.kvarhLeading[40]]).toEqual([NaN, NaN, NaN]);
    expect([...result.load.quality.slice(39, 43)]).toEqual([0, 2, 1, 0]);
    expect(Number.isFinite(result.extraKwh)).toBe(true);
  });

  it('takes an absent leading register as zero and says so', () => {
    const single = buildLoad(1, { kvarhLeading: new Float64Array(96).fill(NaN) });
    const result = simulatePlan({ load: single, motors: [buildPlanMotor(single)] }, { controls: [field(130)] });
    expect(result.notes.join(' ')).toMatch(/no leading register/);
    expect(result.load.kvarhLeading.every((kvarh) => kvarh >= 0)).toBe(true);
  });

  it('counts hours leading at the service point before and after', () => {
    const light = buildLoad(1, { kvarhLagging: new Float64Array(96).fill(50) });
    const result = simulatePlan({ load: light, motors: [buildPlanMotor(light)] }, { controls: [field(140)] });
    expect(result.hoursLeadingBefore).toBe(0);
    expect(result.hoursLeadingAfter).toBe(16);
  });

  it('gathers a submeter series of many loads without losing its highest, to 0.1 % of the loss', () => {
    const shaftKw = Float64Array.from(load.kwh, (_, i) => (i % 7 === 0 ? 0 : 600 + 800 * Math.abs(Math.sin(i * 0.37))));
    const result = simulatePlan({ load, motors: [{ ...planMotor, shaftKw }] }, { controls: [field(140)] });
    let expected = 0;
    for (const kw of shaftKw) if (kw > 0) expected += (at(140, kw).inputKw - at(105, kw).inputKw) / 4;
    expect(Math.abs(result.motors[0]!.extraLossKwh / expected - 1)).toBeLessThan(1e-3);
    expect(Math.abs(result.extraKwh / expected - 1)).toBeLessThan(1e-6);
    expect(result.motors[0]!.leastPullOutRatio).toBeCloseTo(at(140, Math.max(...shaftKw)).pullOutRatio, 9);
  });

  it('names the motor whose field does not hold its load', () => {
    const run = () => simulatePlan({ load, motors: [planMotor] }, { controls: [field(30)] });
    expect(run).toThrow(PullOutError);
    expect(run).toThrow(/motors\[0\]: The shaft load of 1200 kW exceeds/);
  });

  it.each([
    [{ shaftKw: new Float64Array(3) }, /shaftKw must have 672 values/],
    [{ shaftKw: new Float64Array(672).fill(-1) }, /shaftKw\[0\] must be >= 0, got -1/],
    [{ shaftKw: new Float64Array(672).fill(NaN) }, /got NaN/],
  ])('refuses a shaft load that does not fit', (wrong, message) => {
    expect(() => simulatePlan({ load, motors: [{ ...planMotor, ...wrong }] }, { controls: [field(120)] })).toThrow(
      message,
    );
  });

  it.each([
    [{ stepKvar: 0, lossWPerKvar: 1 }, /stepKvar must be > 0/],
    [{ stepKvar: 1, lossWPerKvar: -1 }, /lossWPerKvar/],
    [{ stepKvar: 1, lossWPerKvar: 1, voltagePu: 3 }, /voltagePu/],
    [{ stepKvar: 1, lossWPerKvar: 1, fromMs: NaN }, /fromMs must be an instant in ms, got NaN/],
    [{ stepKvar: 1, lossWPerKvar: 1, steps: 0 }, /steps must be a whole number/],
    [{ stepKvar: 1, lossWPerKvar: 1, holdsPowerFactor: 1.2 }, /powerFactor must be in \(0, 1\]/],
    [{ stepKvar: 1, lossWPerKvar: 1, behind: 1 }, /banks\[0\]\.behind must name one of 1 meters/],
  ])('refuses the bank %j', (bank, message) => {
    const run = () => simulatePlan({ load, motors: [] }, { controls: [], banks: [{ steps: 1, ...bank }] });
    expect(run).toThrow(message);
  });

  it.each([
    [{ ratedKva: 0, resistancePu: 0.01, reactancePu: 0.06 }, /ratedKva/],
    [{ ratedKva: 1, resistancePu: -0.01, reactancePu: 0.06 }, /resistancePu/],
    [{ ratedKva: 1, resistancePu: 0.01, reactancePu: 6 }, /reactancePu/],
  ])('refuses upstream data %j', (upstream, message) => {
    expect(() => simulatePlan({ load, motors: [], upstream }, { controls: [] })).toThrow(message);
  });

  it('does not change its arguments', () => {
    const copy = buildLoad(7);
    simulatePlan(
      { load, motors: [planMotor] },
      { controls: [field(140)], banks: [{ steps: 1, stepKvar: 10, lossWPerKvar: 1 }] },
    );
    expect(load).toEqual(copy);
  });
});

describe('createSimulator', () => {
  it('gives the same series however often and in whatever order fields are tried', () => {
    const simulator = createSimulator({ load, motors: [planMotor] });
    const first = Float64Array.from(simulator.apply([field(130)]).kvarhLagging);
    simulator.apply([field(90)]);
    simulator.apply([field(105)]);
    expect(simulator.apply([field(130)]).kvarhLagging).toEqual(first);
    expect(() => simulator.apply([field(1), field(2)])).toThrow(/controls must have 1 lists, one a motor, got 2/);
  });
});

describe('fieldBounds', () => {
  it('keeps every limit at every load, and not a step more', () => {
    const shaftKw = Float64Array.from(load.kwh, (_, i) => [0, 500, 1200, 1550][i % 4]!);
    const bounds = fieldBounds({ ...planMotor, shaftKw });
    if ('none' in bounds) throw new Error('bounds expected');
    for (const kw of [500, 1200, 1550]) {
      expect(at(bounds.lowA * (1 + 1e-9), kw).beyond).toEqual([]);
      expect(at(bounds.highA * (1 - 1e-9), kw).beyond).toEqual([]);
    }
    expect(at(bounds.highA * 1.001, bounds.highBinding.shaftKw).beyond).toContain(bounds.highBinding.limit);
    expect(at(bounds.lowA * 0.999, bounds.lowBinding.shaftKw).beyond).toContain(bounds.lowBinding.limit);
    expect(bounds.highBinding).toEqual({ limit: 'armature', shaftKw: 1550, voltagePu: 1 });
  });

  it('says at which load nothing is admissible', () => {
    expect(fieldBounds({ ...planMotor, shaftKw: new Float64Array(4).fill(2500) })).toEqual({
      none: { limit: 'armature', shaftKw: 2500, voltagePu: 1 },
    });
  });

  it('bounds a motor that never runs by its field limit', () => {
    const bounds = fieldBounds({ ...planMotor, shaftKw: new Float64Array(4) });
    expect('none' in bounds ? null : bounds.highA).toBeCloseTo(150, 9);
  });

  it('holds at both ends of the voltage band, each end set by its own voltage', () => {
    const shaftKw = new Float64Array(4).fill(1450);
    const bounds = fieldBounds({ ...planMotor, shaftKw, voltageBandPu: { low: 0.92, high: 1.06 } });
    if ('none' in bounds) throw new Error('bounds expected');
    const beyond = (fieldCurrentA: number, voltagePu: number) =>
      operatingPoint(planMotor.motor, { shaftKw: 1450, voltagePu, fieldCurrentA }).beyond;
    for (const voltagePu of [0.92, 0.95, 1, 1.03, 1.06]) {
      expect(beyond(bounds.lowA * (1 + 1e-9), voltagePu)).toEqual([]);
      expect(beyond(bounds.highA * (1 - 1e-9), voltagePu)).toEqual([]);
    }
    // Less voltage, more current for the same power: the over-excited end is set low, where one more ampere breaks the armature's limit.
    expect(bounds.highBinding).toEqual({ limit: 'armature', shaftKw: 1450, voltagePu: 0.92 });
    expect(beyond(bounds.highA * 1.001, 0.92)).toContain('armature');
    expect(beyond(bounds.lowA * 0.999, bounds.lowBinding.voltagePu)).toContain(bounds.lowBinding.limit);
    const alone = fieldBounds({ ...planMotor, shaftKw });
    expect('none' in alone ? 0 : alone.highA).toBeGreaterThan(bounds.highA);
  });

  it('keeps the least field a regulator or maker allows, and says so', () => {
    const bounds = fieldBounds({ ...planMotor, leastFieldA: 95 });
    expect(bounds).toMatchObject({ lowA: 95, lowBinding: { limit: 'least-field', shaftKw: 1200, voltagePu: 1 } });
    expect(fieldBounds({ ...planMotor, leastFieldA: 400 })).toMatchObject({ none: { limit: 'least-field' } });
    expect(() => fieldBounds({ ...planMotor, leastFieldA: -1 })).toThrow(/leastFieldA must be >= 0/);
    expect(() => fieldBounds({ ...planMotor, voltageBandPu: { low: 1.1, high: 0.9 } })).toThrow(/voltageBandPu/);
  });
});
