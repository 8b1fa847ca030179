import { describe, expect, it } from 'vitest';
import { operatingPoint, ratedKva, reactiveRange } from '../../../src/core/machine';
import type { FieldControl } from '../../../src/core/machine';
import { createSimulator, shiftRegisters, simulatePlan } from '../../../src/core/plan';
import type { BusSupply, PlanMotor, Spans } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor, field } from './build-plant';

const load = buildLoad(2);
const one = buildPlanMotor(load);
const two = buildPlanMotor(load, {
  motor: buildMotor({ ratedOutputKw: 900, ratedFieldCurrentA: 90, fieldResistanceOhm: 0.9 }),
  shaftKw: new Float64Array(load.kwh.length).fill(650),
  standingFieldA: 60,
});

const net = (series: typeof load, i: number) => 4 * (series.kvarhLagging[i]! - series.kvarhLeading[i]!);
const kw = (series: typeof load, i: number) => 4 * series.kwh[i]!;
const holdFactor = (powerFactor: number): FieldControl[] => [{ holds: 'plant-power-factor', powerFactor }];
const standing = (motor: PlanMotor, i: number) =>
  motor.shaftKw[i]! === 0
    ? { kvar: 0, inputKw: 0 }
    : operatingPoint(motor.motor, { shaftKw: motor.shaftKw[i]!, fieldCurrentA: motor.standingFieldA });

describe('controls of a motor’s own', () => {
  it('holds its reactive power whatever the load, and keeps within its limits', () => {
    const controls: FieldControl[][] = [[{ holds: 'kvar', kvarDelivered: 500 }]];
    const { load: after } = simulatePlan({ load, motors: [one] }, { controls });
    for (const i of [0, 30, 60, 100]) {
      const delivered = one.shaftKw[i]! > 0 ? 500 : 0;
      expect(net(after, i)).toBeCloseTo(net(load, i) - delivered - standing(one, i).kvar, 3);
    }
    const range = reactiveRange(one.motor, { shaftKw: 1200 })!;
    const far = simulatePlan({ load, motors: [one] }, { controls: [[{ holds: 'kvar', kvarDelivered: 9000 }]] });
    expect(far.motors[0]!.kvarPlan).toBeCloseTo(range.most, 3);
    expect(far.motors[0]!.limitedHours).toBe(32);
    expect(far.motors[0]!.beyondHours).toEqual({ armature: 0, field: 0, 'pull-out': 0 });
  });

  it('gives every span its own setting, and figures of each', () => {
    const spans: Spans = { index: Uint8Array.from(load.kwh, (_, i) => (i % 96 < 48 ? 0 : 1)), count: 2 };
    const controls = [[...field(120), ...field(140)]];
    const result = simulatePlan({ load, motors: [one] }, { spans, controls });
    const at = (fieldCurrentA: number) => operatingPoint(one.motor, { shaftKw: 1200, fieldCurrentA });
    for (const [i, amperes] of [
      [30, 120],
      [60, 140],
    ] as const) {
      const e = (at(amperes).kvar - at(105).kvar) / 4;
      const expected = shiftRegisters(load.kvarhLagging[i]!, load.kvarhLeading[i]!, e);
      expect(result.load.kvarhLagging[i]).toBeCloseTo(expected.kvarhLagging, 8);
    }
    const [motor] = result.motors;
    // Six to noon, noon to ten in the evening, two days.
    expect(motor!.spans.map((span) => span.hoursRunning)).toEqual([12, 20]);
    expect(motor!.spans.map((span) => span.fieldPlanA)).toEqual([120, 140]);
    expect(motor!.spans[0]!.extraLossKwh).toBeCloseTo(12 * (at(120).inputKw - at(105).inputKw), 6);
    expect(motor!.extraLossKwh).toBeCloseTo(motor!.spans[0]!.extraLossKwh + motor!.spans[1]!.extraLossKwh, 9);
  });

  it('gives the same year where only the spans that changed are simulated anew', () => {
    const spans: Spans = { index: Uint8Array.from(load.kwh, (_, i) => Math.floor(i / 31) % 3), count: 3 };
    const plant = { load, motors: [one, two] };
    const partly = createSimulator(plant, { spans });
    const banks = [{ steps: 4, stepKvar: 100, lossWPerKvar: 2, holdsPowerFactor: 0.9 }];
    const partlySwitched = createSimulator(plant, { spans, banks });
    const controls = [
      [...field(100), ...field(110), ...field(120)],
      [...field(60), ...field(62), ...field(64)],
    ];
    partly.apply(controls, new Set());
    partlySwitched.apply(controls, new Set());
    for (const [motor, span, amperes] of [
      [0, 1, 140],
      [1, 2, 80],
      [0, 0, 131],
      [1, 2, 64],
    ] as const) {
      controls[motor]![span] = field(amperes)[0]!;
      expect(partly.apply(controls, new Set([span]))).toEqual(createSimulator(plant, { spans }).apply(controls));
      expect(partlySwitched.apply(controls, new Set([span]))).toEqual(
        createSimulator(plant, { spans, banks }).apply(controls),
      );
    }
  });

  it('refuses a number of controls that is neither one nor one a span', () => {
    const spans: Spans = { index: new Uint8Array(load.kwh.length), count: 3 };
    const run = () => createSimulator({ load, motors: [one] }, { spans }).apply([[...field(1), ...field(2)]]);
    expect(run).toThrow(/controls\[0\] must have 1 or 3 controls, got 2/);
    const wrong = { index: new Uint8Array(3), count: 1 };
    expect(() => createSimulator({ load, motors: [one] }, { spans: wrong })).toThrow(/spans\.index must have 192/);
    const beyond = { index: new Uint8Array(load.kwh.length).fill(4), count: 2 };
    expect(() => createSimulator({ load, motors: [one] }, { spans: beyond })).toThrow(/below 2, got 4/);
  });
});

describe('power factor at the service point', () => {
  it('is met in every interval in which the motors can meet it, and they stop at their limits elsewhere', () => {
    const plant = { load, motors: [one, two] };
    const { load: after, trace } = createSimulator(plant).trace([holdFactor(0.9), holdFactor(0.9)]);
    const tangent = Math.tan(Math.acos(0.9));
    let met = 0;
    load.kwh.forEach((_, i) => {
      const ranges = [one, two].map((m) => (m.shaftKw[i] ? reactiveRange(m.motor, { shaftKw: m.shaftKw[i]! }) : null));
      const most = ranges.reduce((sum, range) => sum + (range?.most ?? 0), 0);
      const delivered = trace.deliveredKvar.reduce((sum, of) => sum + of[i]!, 0);
      const gap = net(after, i) - tangent * kw(after, i);
      if (Math.abs(gap) < 1e-4) met++;
      else {
        expect(gap).toBeGreaterThan(0);
        expect(delivered).toBeCloseTo(most, 3);
      }
      const before = [one, two].reduce((sum, m) => sum + standing(m, i).kvar, 0);
      expect(net(after, i)).toBeCloseTo(net(load, i) - before - delivered, 6);
    });
    expect(met).toBeGreaterThan(40);
    expect(met).toBeLessThan(190);
  });

  it('counts the losses of what the motors deliver', () => {
    const { load: after, trace } = createSimulator({ load, motors: [one] }).trace([holdFactor(0.82)]);
    for (const i of [30, 50, 80]) {
      const kvar = -trace.deliveredKvar[0]![i]!;
      const more = operatingPoint(one.motor, { shaftKw: 1200, kvar }).inputKw - standing(one, i).inputKw;
      // Straight pieces of a forty-eighth of the range: a few watts.
      expect(Math.abs(kw(after, i) - kw(load, i) - more)).toBeLessThan(0.02);
    }
  });

  it('shares in the way that loses least: no other share of the same sum loses less', () => {
    const { trace } = createSimulator({ load, motors: [one, two] }).trace([holdFactor(0.84), holdFactor(0.84)]);
    const loss = (m: PlanMotor, i: number, delivered: number) =>
      operatingPoint(m.motor, { shaftKw: m.shaftKw[i]!, kvar: -delivered }).inputKw;
    for (const i of [30, 60, 84]) {
      const [a, b] = trace.deliveredKvar.map((of) => of[i]!) as [number, number];
      const found = loss(one, i, a) + loss(two, i, b);
      const range = [one, two].map((m) => reactiveRange(m.motor, { shaftKw: m.shaftKw[i]! })!);
      for (let share = 0; share <= 200; share++) {
        const other = range[0]!.least + ((range[0]!.most - range[0]!.least) * share) / 200;
        const rest = a + b - other;
        if (rest < range[1]!.least || rest > range[1]!.most) continue;
        expect(loss(one, i, other) + loss(two, i, rest)).toBeGreaterThan(found - 0.01);
      }
    }
  });

  it('meets it at the meter where a transformer lies between meter and bus', () => {
    const upstream = { ratedKva: 7500, resistancePu: 0.008, reactancePu: 0.06 };
    const { load: after, trace } = createSimulator({ load, motors: [one], upstream }).trace([holdFactor(0.82)]);
    const free = [...load.kwh.keys()].filter((i) => one.shaftKw[i]! > 0 && trace.limited[0]![i] === 0);
    expect(free.length).toBeGreaterThan(20);
    for (const i of free) expect(net(after, i) / kw(after, i)).toBeCloseTo(Math.tan(Math.acos(0.82)), 8);
  });

  it('refuses two power factors at one meter', () => {
    const run = () => createSimulator({ load, motors: [one, two] }).apply([holdFactor(0.9), holdFactor(0.95)]);
    expect(run).toThrow(/one power factor at a meter, got 0\.9 and 0\.95/);
  });

  it('leaves missing intervals missing', () => {
    const holed = buildLoad(1);
    for (const channel of [holed.kwh, holed.kvarhLagging, holed.kvarhLeading]) channel[40] = NaN;
    holed.quality[40] = 2;
    const { load: after } = simulatePlan(
      { load: holed, motors: [buildPlanMotor(holed)] },
      { controls: [holdFactor(0.9)] },
    );
    expect([after.kwh[40], after.kvarhLagging[40], after.kvarhLeading[40]]).toEqual([NaN, NaN, NaN]);
    expect(after.kwh[41]).toBeGreaterThan(0);
  });
});

describe('bus voltage', () => {
  const supply: BusSupply = {
    shortCircuitKva: 60_000,
    xOverR: 10,
    noLoadPu: 1.02,
    allowedPu: { low: 0.95, high: 1.0 },
  };

  it('is estimated as it stands and with the plan', () => {
    const { bus } = simulatePlan({ load, motors: [one], supply }, { controls: [field(140)] });
    // r = 1/(60000 sqrt(101)), x = 10 r; V = 1.02 - (r P + x Q)/1.02, by hand over the metered series.
    const r = 1 / (60_000 * Math.sqrt(101));
    const volts = (series: typeof load, i: number) => 1.02 - (r * kw(series, i) + 10 * r * net(series, i)) / 1.02;
    const all = Array.from(load.kwh, (_, i) => volts(load, i));
    expect(bus!.standing.leastPu).toBeCloseTo(Math.min(...all), 12);
    expect(bus!.standing.greatestPu).toBeCloseTo(Math.max(...all), 12);
    expect(bus!.standing.hoursAbove).toBe(all.filter((pu) => pu > 1.0).length / 4);
    expect(bus!.plan.leastPu).toBeGreaterThan(bus!.standing.leastPu);
    expect(simulatePlan({ load, motors: [one] }, { controls: [field(140)] }).bus).toBeNull();
  });

  it('is held with droop: Q = (Vset - V0)/(droop/S + x)', () => {
    const control: FieldControl = { holds: 'voltage', setPu: 1.0, droopPu: 0.04 };
    const { load: after, trace } = createSimulator({ load, motors: [one], supply }).trace([[control]]);
    const r = 1 / (60_000 * Math.sqrt(101));
    let free = 0;
    load.kwh.forEach((_, i) => {
      const delivered = trace.deliveredKvar[0]![i]!;
      if (one.shaftKw[i] === 0) return expect(delivered).toBe(0);
      // The bus without the motor's reactive power: its own kW of losses counted.
      const withoutKvar = net(after, i) + delivered;
      const v0 = 1.02 - (r * kw(after, i) + 10 * r * withoutKvar) / 1.02;
      const asked = (1.0 - v0) / (0.04 / ratedKva(one.motor) + (10 * r) / 1.02);
      const range = reactiveRange(one.motor, { shaftKw: 1200 })!;
      expect(delivered).toBeCloseTo(Math.min(range.most, Math.max(range.least, asked)), 2);
      if (trace.limited[0]![i] === 0) free++;
    });
    expect(free).toBeGreaterThan(10);
  });

  it('is shared by droop among motors: equal set values and droops load them alike', () => {
    const plant = { load, motors: [one, { ...one }], supply };
    const control: FieldControl[] = [{ holds: 'voltage', setPu: 1.0, droopPu: 0.05 }];
    const { trace } = createSimulator(plant).trace([control, control]);
    expect(trace.deliveredKvar[0]![50]).toBeCloseTo(trace.deliveredKvar[1]![50]!, 6);
    expect(trace.deliveredKvar[0]![50]).not.toBe(0);
  });

  it('refuses to be held where the supply is not known, or by a droop that is none', () => {
    const control = (setPu: number, droopPu: number): FieldControl[][] => [[{ holds: 'voltage', setPu, droopPu }]];
    expect(() => createSimulator({ load, motors: [one] }).apply(control(1, 0.05))).toThrow(
      /supply of its bus is not known/,
    );
    const { apply } = createSimulator({ load, motors: [one], supply });
    expect(() => apply(control(1, 0))).toThrow(/droopPu must be in \(0, 1\], got 0/);
    expect(() => apply(control(0, 0.05))).toThrow(/setPu/);
    const wrong = { ...supply, shortCircuitKva: 0 };
    expect(() => createSimulator({ load, motors: [one], supply: wrong })).toThrow(/shortCircuitKva/);
  });
});

describe('capacitor banks', () => {
  // 1,000 kW and 900 kvar by day, 400 kvar by night; the target of 0.95 leaves 1000 tan(acos 0.95) = 328.68 kvar.
  const flat = buildLoad(1, {
    kwh: new Float64Array(96).fill(250),
    kvarhLagging: Float64Array.from({ length: 96 }, (_, i) => (i >= 24 && i < 88 ? 225 : 100)),
  });

  it('switches the most steps that leave the meter no more leading than the target, and counts them', () => {
    const banks = [{ steps: 6, stepKvar: 150, lossWPerKvar: 0, holdsPowerFactor: 0.95 }];
    const { load: after, banks: figures } = simulatePlan({ load: flat, motors: [] }, { controls: [], banks });
    // (900 - 328.68)/150 = 3.81: three steps by day. (400 - 328.68)/150: none by night.
    expect(net(after, 50)).toBeCloseTo(900 - 450, 9);
    expect(net(after, 2)).toBeCloseTo(400, 9);
    expect(figures[0]).toMatchObject({ stepHours: 3 * 16, switchings: 6, deliveredKvarh: 450 * 16, lossKwh: 0 });
  });

  it('never uses more steps than it has, and counts their losses', () => {
    const banks = [{ steps: 2, stepKvar: 150, lossWPerKvar: 2, holdsPowerFactor: 0.95 }];
    const result = simulatePlan({ load: flat, motors: [] }, { controls: [], banks });
    expect(net(result.load, 50)).toBeCloseTo(600, 9);
    expect(result.extraKwh).toBeCloseTo(0.6 * 16, 9);
    expect(result.banks[0]!.lossKwh).toBeCloseTo(0.6 * 16, 9);
  });

  it('acts after the motors, behind its own meter', () => {
    const motor = buildPlanMotor(flat);
    const banks = [{ steps: 6, stepKvar: 150, lossWPerKvar: 0, holdsPowerFactor: 0.95 }];
    const plan = simulatePlan({ load: flat, motors: [motor] }, { controls: [field(110)], banks });
    const alone = simulatePlan({ load: flat, motors: [motor] }, { controls: [field(110)] });
    const left = net(alone.load, 50) - kw(alone.load, 50) * Math.tan(Math.acos(0.95));
    expect(net(plan.load, 50)).toBeCloseTo(net(alone.load, 50) - 150 * Math.floor(left / 150), 6);
    const beside = simulatePlan(
      { load: flat, beside: [flat], motors: [] },
      { controls: [], banks: [{ ...banks[0]!, behind: 1 }] },
    );
    expect(beside.load.kvarhLagging[50]).toBeCloseTo((900 + 450) / 4, 9);
  });

  it('keeps fixed steps connected at all hours', () => {
    const banks = [{ steps: 3, stepKvar: 150, lossWPerKvar: 1 }];
    const result = simulatePlan({ load: flat, motors: [] }, { controls: [], banks });
    expect(net(result.load, 2)).toBeCloseTo(-50, 9);
    expect(result.banks[0]).toMatchObject({ stepHours: 72, switchings: 0 });
    expect(result.hoursLeadingAfter).toBe(8);
  });
});

describe('a synchronous motor in place of an induction motor', () => {
  const induction = {
    ratedOutputKw: 1000,
    points: [
      { loadShare: 0.5, efficiency: 0.94, powerFactor: 0.8 },
      { loadShare: 0.75, efficiency: 0.95, powerFactor: 0.86 },
      { loadShare: 1, efficiency: 0.95, powerFactor: 0.88 },
    ],
  };
  const replace = (shaftKw: number) => ({
    induction,
    motor: buildMotor(),
    shaftKw: new Float64Array(load.kwh.length).fill(shaftKw),
    controls: field(140),
  });

  it('takes out what the data sheet says and puts in what the new motor takes', () => {
    const { load: after, replacements } = simulatePlan(
      { load, motors: [] },
      { controls: [], replacements: [replace(750)] },
    );
    // 750/0.95 = 789.474 kW; kvar = 789.474 x sqrt(1 - 0.86^2)/0.86 = 468.444.
    const point = operatingPoint(buildMotor(), { shaftKw: 750, fieldCurrentA: 140 });
    expect(kw(after, 10)).toBeCloseTo(kw(load, 10) - 789.4737 + point.inputKw, 3);
    expect(net(after, 10)).toBeCloseTo(net(load, 10) - 468.4462 + point.kvar, 3);
    expect(replacements[0]!.kvarStanding).toBeCloseTo(-468.4462, 3);
    expect(replacements[0]!.extraLossKwh).toBeCloseTo((point.inputKw - 789.4737) * 48, 1);
    expect(replacements[0]!.leastPullOutRatioStanding).toBeNull();
  });

  it('reads losses and kvar straight between the points of the sheet', () => {
    const { replacements } = simulatePlan({ load, motors: [] }, { controls: [], replacements: [replace(625)] });
    // At 500 kW: 531.915 kW in, 398.936 kvar. Half way to 750 kW: 433.691 kvar.
    expect(replacements[0]!.kvarStanding).toBeCloseTo(-(398.9362 + 468.4462) / 2, 3);
  });

  it.each([
    [{ ...induction, ratedOutputKw: 0 }, /ratedOutputKw/],
    [{ ...induction, points: induction.points.slice(0, 1) }, /at least two, got 1/],
    [{ ...induction, points: [...induction.points].reverse() }, /points\[1\]\.loadShare must be above 1/],
  ])('refuses a data sheet %#', (wrong, message) => {
    const run = () =>
      simulatePlan({ load, motors: [] }, { controls: [], replacements: [{ ...replace(500), induction: wrong }] });
    expect(run).toThrow(message);
  });
});
