import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  NotConvergedError,
  PullOutError,
  excitation,
  fixField,
  operatingPoint,
  pullOut,
  ratedKva,
  reactivePower,
  type OperatingPoint,
  type SynchronousMotor,
} from '../../../src/core/machine';
import { buildLosslessMotor, buildMotor, openCircuitCurve } from './build-motor';

const small = buildMotor({
  ratedOutputKw: 5,
  ratedVoltageV: 208,
  poles: 4,
  ratedEfficiency: 0.82,
  ratedFieldCurrentA: 3,
  fieldResistanceOhm: 20,
  raPu: 0.05,
});

const large = buildMotor({
  ratedOutputKw: 20_000,
  ratedVoltageV: 13_800,
  poles: 12,
  ratedEfficiency: 0.98,
  ratedFieldCurrentA: 450,
  fieldResistanceOhm: 0.2,
  raPu: 0.002,
});

const saturated = (motor: SynchronousMotor): SynchronousMotor => ({
  ...motor,
  xlPu: 0.12,
  openCircuitCurve: openCircuitCurve.map(({ fieldCurrentA, voltagePu }) => ({
    fieldCurrentA: (fieldCurrentA / 160) * motor.ratedFieldCurrentA,
    voltagePu,
  })),
});

const motors: [string, SynchronousMotor][] = [
  ['5 kW', small],
  ['5 kW with an open-circuit curve', saturated(small)],
  ['5 kW with its exciter on the bus', { ...small, exciterSupply: 'bus' }],
  ['20 MW', large],
  ['20 MW with an open-circuit curve', saturated(large)],
  ['20 MW with its exciter on the bus', { ...large, exciterSupply: 'bus' }],
];

/** Input less output and losses, as a share of rated kVA. */
function imbalance(motor: SynchronousMotor, shaftKw: number, { inputKw, lossesKw }: OperatingPoint): number {
  const lossKw = Object.values(lossesKw).reduce((sum, kw) => sum + kw, 0);
  return Math.abs(inputKw - shaftKw - lossKw) / ratedKva(motor);
}

describe.each(motors)('a motor of %s', (_, motor) => {
  const kva = ratedKva(motor);

  it.each([0, 0.001, 0.5, 1])('runs at unity at %d of rated load, and its field brings it back there', (load) => {
    const shaftKw = load * motor.ratedOutputKw;
    const unity = operatingPoint(motor, { shaftKw, powerFactor: 1, leading: true });
    expect(Math.abs(unity.kvar)).toBe(0);
    expect(unity.powerFactor).toBe(1);
    expect(imbalance(motor, shaftKw, unity)).toBeLessThan(1e-12);
    const back = operatingPoint(motor, { shaftKw, fieldCurrentA: unity.fieldCurrentA });
    expect(Math.abs(back.kvar) / kva).toBeLessThan(1e-9);
    expect(Math.abs(back.inputKw - unity.inputKw) / kva).toBeLessThan(1e-9);
  });

  it.each([0.2, 0.5, 0.9])(
    'holds a power factor of %d without load, where its losses alone are its input',
    (factor) => {
      const idle = operatingPoint(motor, { shaftKw: 0, powerFactor: factor, leading: true });
      expect(idle.inputKw).toBeGreaterThan(0);
      expect(imbalance(motor, 0, idle)).toBeLessThan(1e-12);
      expect(idle.powerFactor).toBeCloseTo(factor, 9);
      expect(idle.kvar).toBeLessThan(0);
    },
  );

  it('stands a millionth below the greatest load of its field, and falls out of step a millionth above', () => {
    const { fieldCurrentA, greatestShaftKw } = fixField(motor, { fieldCurrentA: motor.ratedFieldCurrentA });
    const shaftKw = greatestShaftKw * (1 - 1e-6);
    const point = operatingPoint(motor, { shaftKw, fieldCurrentA });
    expect(imbalance(motor, shaftKw, point)).toBeLessThan(1e-12);
    expect(point.beyond).toContain('pull-out');
    const back = operatingPoint(motor, { shaftKw, kvar: point.kvar });
    expect(Math.abs(back.fieldCurrentA / fieldCurrentA - 1)).toBeLessThan(1e-9);
    expect(Math.abs(back.loadAngleDeg - point.loadAngleDeg)).toBeLessThan(1e-7);
    const above = () => operatingPoint(motor, { shaftKw: greatestShaftKw * (1 + 1e-6), fieldCurrentA });
    expect(above).toThrow(PullOutError);
    expect(above).toThrow(expect.objectContaining({ name: 'PullOutError', pullOutPowerW: greatestShaftKw * 1000 }));
  });
});

describe('a motor near pull-out without losses', () => {
  it.each([1e-6, 1e-8, 1e-10])('has the kvar of its equation when %d of its greatest load is spare', (spare) => {
    // Round rotor of 1 pu: P = V E sin d, so sin d = 1 - spare; kvar absorbed = V^2 - V E cos d.
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu: 1 });
    // Rated emf |1 + 0.6 + j 0.8|.
    const emf = Math.sqrt(1.6 ** 2 + 0.8 ** 2);
    const cosine = Math.sqrt(1 - (1 - spare) ** 2);
    const point = operatingPoint(motor, { shaftKw: 1000 * emf * (1 - spare), fieldCurrentA: 150 });
    expect(Math.abs(point.kvar / 1000 - (1 - emf * cosine))).toBeLessThan(1e-9);
    expect(Math.abs(point.pullOutRatio - 1 / (1 - spare))).toBeLessThan(1e-12);
  });
});

describe('motors of the same data per unit', () => {
  it('run alike at 5 kW and at 20 MW', () => {
    const scale = 4000;
    const little = buildMotor({ ratedOutputKw: 5, ratedVoltageV: 208, fieldResistanceOhm: 2e-3 });
    const big = buildMotor({ ratedOutputKw: 5 * scale, ratedVoltageV: 13_800, fieldResistanceOhm: 2e-3 * scale });
    for (const load of [0, 0.3, 1]) {
      for (const fieldCurrentA of [90, 120, 150]) {
        const one = operatingPoint(little, { shaftKw: 5 * load, fieldCurrentA });
        const other = operatingPoint(big, { shaftKw: 5 * scale * load, fieldCurrentA });
        expect(other.kvar / one.kvar / scale).toBeCloseTo(1, 9);
        expect(other.inputKw / one.inputKw / scale).toBeCloseTo(1, 12);
        expect(other.loadAngleDeg).toBeCloseTo(one.loadAngleDeg, 9);
        expect((other.lineCurrentA * 13_800) / (one.lineCurrentA * 208) / scale).toBeCloseTo(1, 11);
        expect(other.beyond).toEqual(one.beyond);
      }
    }
  });
});

const share = (min: number, max: number) => fc.double({ min, max, noNaN: true });

describe('a delta winding', () => {
  it('is a wye of a third of its ohms at the volts to neutral, for random machines', () => {
    const machine = fc.record({
      lineV: share(200, 15_000),
      xd: share(0.3, 90),
      saliency: share(0.5, 1),
      ra: share(0, 0.1),
    });
    fc.assert(
      fc.property(machine, share(0, 0.7), share(-0.8, 0.2), ({ lineV, xd, saliency, ra }, p, q) => {
        const delta = { raOhm: ra * xd, xdOhm: xd, xqOhm: xd * saliency };
        const wye = { raOhm: delta.raOhm / 3, xdOhm: delta.xdOhm / 3, xqOhm: delta.xqOhm / 3 };
        const powers = { activePowerW: (p * lineV ** 2) / xd, reactivePowerVar: (q * lineV ** 2) / xd };
        const phaseVoltageV = lineV / Math.sqrt(3);
        const inDelta = excitation({ phaseVoltageV: lineV, ...powers }, delta);
        const inWye = excitation({ phaseVoltageV, ...powers }, wye);
        expect((inWye.emfV * Math.sqrt(3)) / inDelta.emfV).toBeCloseTo(1, 10);
        expect(inWye.loadAngleRad).toBeCloseTo(inDelta.loadAngleRad, 10);
        // Amperes of a line against those of a delta's phase.
        expect(Math.abs(inWye.currentA - Math.sqrt(3) * inDelta.currentA)).toBeLessThan((1e-10 * lineV) / xd);
        const most = pullOut({ phaseVoltageV: lineV, emfV: inDelta.emfV }, delta);
        const mostInWye = pullOut({ phaseVoltageV, emfV: inWye.emfV }, wye);
        expect(mostInWye.activePowerW / most.activePowerW).toBeCloseTo(1, 10);
        fc.pre(inDelta.loadAngleRad < most.loadAngleRad - 0.02);
        const held = reactivePower({ phaseVoltageV, emfV: inWye.emfV, activePowerW: powers.activePowerW }, wye);
        expect((held.reactivePowerVar * xd) / lineV ** 2).toBeCloseTo(q, 8);
      }),
      { numRuns: 2000 },
    );
  });
});

describe('a load that no armature power carries', () => {
  // Without other losses than Ra = 0.01 at 1 pu: p = 0.5 + 0.01 (p^2 + q^2), solved up to q^2 = (1/0.04 - 0.5)/0.01 = 2450, q = 49.497.
  const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, raPu: 0.01, exciterSupply: 'bus' });

  it.each([1, 20, 40, 49])('is not one of %d times rated kvar', (q) => {
    const { inputKw } = operatingPoint(motor, { shaftKw: 500, kvar: -1000 * q });
    const p = (1 - Math.sqrt(1 - 0.04 * (0.5 + 0.01 * q ** 2))) / 0.02;
    expect(inputKw / 1000 / p).toBeCloseTo(1, 10);
  });

  it.each([49.6, 60, 1000])('is told as such at %d times rated kvar', (q) => {
    const run = () => operatingPoint(motor, { shaftKw: 500, kvar: -1000 * q });
    expect(run).toThrow(NotConvergedError);
    const told = { name: 'NotConvergedError', code: 'armature power at a reactive power', iterations: 60 };
    expect(run).toThrow(expect.objectContaining(told));
    expect(run).toThrow(/did not converge in 60 iterations \(residual \d.*Check the values given/);
  });
});

describe('a power factor that the losses of its own kvar forbid', () => {
  // Idle, 0.04 pu of friction and Ra = 0.01 at 1 pu: p = 0.04 + 0.01 s^2, so pf = p/s = 0.04/s + 0.01 s, never below 2 sqrt(0.0004) = 0.04.
  const lossSplit = { frictionWindageKw: 40, coreKw: 0, strayKw: 0 };
  const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, raPu: 0.01, lossSplit });

  it.each([0.0401, 0.05, 0.3, 0.99])('is not one of %d: the smaller apparent power is taken', (powerFactor) => {
    const { inputKw, kvar } = operatingPoint(motor, { shaftKw: 0, powerFactor, leading: true });
    const s = (powerFactor - Math.sqrt(powerFactor ** 2 - 0.0016)) / 0.02;
    expect(inputKw / 1000 / (powerFactor * s)).toBeCloseTo(1, 8);
    expect(kvar / 1000 / (-s * Math.sqrt(1 - powerFactor ** 2))).toBeCloseTo(1, 8);
  });

  it.each([0.0399, 0.01, 1e-4])('is told as such at %d', (powerFactor) => {
    expect(() => operatingPoint(motor, { shaftKw: 0, powerFactor, leading: true })).toThrow(NotConvergedError);
  });
});
