import { describe, expect, it } from 'vitest';
import { leastLossField, lossCurve, operatingPoint } from '../../../src/core/machine';
import { buildMotor } from './build-motor';

/**
 * The machine of case LOSS-2000HP with a thousandth of its losses, so that the armature power is the 0.6 per unit the case
 * holds, whatever the losses do; watts per kvar are then a thousandth of the case's. 2000 hp x 0.746 / (0.96 x 0.8) =
 * 1942.71 kVA; copper 1 %, stray 0.4 %, field 0.9 % of it at rated field, exciter 85 %.
 */
const kva = 1492 / (0.96 * 0.8);
const thousandth = buildMotor({
  raPu: 0.01e-3,
  fieldResistanceOhm: (0.009e-3 * kva * 1000) / 150 ** 2,
  exciterEfficiency: 0.85,
  exciterSupply: 'bus',
  lossSplit: { coreKw: 0, frictionWindageKw: 0, strayKw: 0.004e-3 * kva },
});
const at = { shaftKw: 0.6 * kva, fromKvar: 0, sinceKvar: 0, points: 2 };

describe('lossCurve', () => {
  it.each([
    // Case LOSS-2000HP: extra watts per kvar since unity power factor, at 0.3 and 0.6 per unit
    [0.3, 12.125],
    [0.6, 17.402],
  ])('makes the mean of LOSS-2000HP at %f per unit delivered', (share, expected) => {
    const last = lossCurve(thousandth, { ...at, toKvar: share * kva }).at(-1)!;
    expect(1000 * last.averageWPerKvar).toBeCloseTo(expected, 2);
  });

  it('makes the marginal loss of LOSS-2000HP at 0.6 per unit', () => {
    const last = lossCurve(thousandth, { ...at, toKvar: 0.6 * kva }).at(-1)!;
    // Printed 27.965, found there as a difference over a finite step: half a unit of its last digit and the step's error
    expect(Math.abs(1000 * last.marginalWPerKvar - 27.965)).toBeLessThan(0.01);
  });

  it('has no marginal loss where the losses are least', () => {
    const motor = buildMotor();
    const least = leastLossField(motor, { shaftKw: 1000 });
    const [point] = lossCurve(motor, { ...at, shaftKw: 1000, fromKvar: -least.kvar, toKvar: 100 });
    expect(Math.abs(point!.marginalWPerKvar)).toBeLessThan(0.01);
    expect(point!.lossKw).toBeCloseTo(least.inputKw - 1000, 6);
  });

  it('adds its marginal losses up to the difference of the losses', () => {
    const motor = buildMotor({ exciterSupply: 'bus' });
    const points = lossCurve(motor, { ...at, shaftKw: 900, fromKvar: -300, toKvar: 900, points: 401 });
    // Trapezoid rule over 3 kvar steps; its error goes with the square of the step
    const sum = points
      .slice(1)
      .reduce((total, point, i) => total + 1.5 * (point.marginalWPerKvar + points[i]!.marginalWPerKvar), 0);
    expect(sum / 1000).toBeCloseTo(points.at(-1)!.lossKw - points[0]!.lossKw, 4);
  });

  it('takes field and losses from the operating point', () => {
    const motor = buildMotor();
    const [, point] = lossCurve(motor, { ...at, shaftKw: 700, toKvar: 500 });
    const same = operatingPoint(motor, { shaftKw: 700, kvar: -500 });
    expect(point!.fieldCurrentA).toBeCloseTo(same.fieldCurrentA, 9);
    expect(point!.lossKw).toBeCloseTo(same.inputKw - 700, 9);
  });

  it('counts the mean from any point, and is the marginal loss at that point', () => {
    const motor = buildMotor();
    const points = lossCurve(motor, { ...at, shaftKw: 700, sinceKvar: -200, fromKvar: -200, toKvar: 400, points: 3 });
    expect(points[0]!.averageWPerKvar).toBe(points[0]!.marginalWPerKvar);
    const extraW = 1000 * (points[2]!.lossKw - points[0]!.lossKw);
    expect(points[2]!.averageWPerKvar).toBeCloseTo(extraW / 600, 9);
  });

  it('leaves out what would need a reversed field', () => {
    const points = lossCurve(buildMotor(), { ...at, shaftKw: 0, fromKvar: -3 * kva, toKvar: 0, points: 31 });
    expect(points.length).toBeLessThan(31);
    expect(points.every((point) => point.fieldCurrentA >= 0)).toBe(true);
  });

  it('refuses ranges that are none', () => {
    expect(() => lossCurve(buildMotor(), { ...at, toKvar: 0 })).toThrow(/toKvar must be above fromKvar/);
    expect(() => lossCurve(buildMotor(), { ...at, toKvar: 1, points: 1 })).toThrow(/points/);
    expect(() => lossCurve(buildMotor(), { ...at, toKvar: 1, sinceKvar: NaN })).toThrow(/sinceKvar/);
  });
});
