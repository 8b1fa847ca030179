import { describe, expect, it } from 'vitest';
import {
  capability,
  capabilityCurve,
  leastLossField,
  operatingPoint,
  unityField,
  vCurve,
} from '../../../src/core/machine';
import { buildMotor } from './build-motor';

describe('vCurve', () => {
  it('meets the triplet of [FIT] ex. 5.1 and 5.2: 47 A at 0.95 lagging, 55.2 A at unity for the same power', () => {
    // 460 V, 90.83 kW, Xs 1.68 ohm: base 460^2/100 kVA = 2.116 ohm, 0.794 pu. E at 47 A is 278.8 V, 1.0498 pu. 55.195 A: the
    // source's 55.04 A brought to the exact power.
    const motor = buildMotor({
      ratedOutputKw: 80,
      ratedVoltageV: 460,
      ratedPowerFactor: 0.8,
      ratedEfficiency: 1,
      raPu: 0,
      xdPu: 1.68 / 2.116,
      xqPu: 1.68 / 2.116,
      fieldResistanceOhm: 0,
      lossSplit: { coreKw: 0, frictionWindageKw: 0, strayKw: 0 },
    });
    const perEmf = operatingPoint(motor, { shaftKw: 80, powerFactor: 0.8, leading: true }).emfPu;
    const scaled = { ...motor, ratedFieldCurrentA: (47 * perEmf) / ((278.82 * Math.sqrt(3)) / 460) };
    const low = operatingPoint(scaled, { shaftKw: 90.829, fieldCurrentA: 47 });
    expect(low.powerFactor).toBeCloseTo(0.95, 3);
    expect(low.leading).toBe(false);
    expect(unityField(scaled, { shaftKw: 90.829 })).toBeCloseTo(55.195, 2);
  });

  it('falls to unity field and rises beyond it, leaving out points beyond pull-out', () => {
    const motor = buildMotor();
    const curve = vCurve(motor, { shaftKw: 1492, fieldFromA: 0, fieldToA: 160, points: 161 });
    expect(curve.length).toBeGreaterThan(80);
    expect(curve.length).toBeLessThan(161);
    const bottom = curve.reduce((a, b) => (b.lineCurrentA < a.lineCurrentA ? b : a));
    expect(Math.abs(bottom.fieldCurrentA - unityField(motor, { shaftKw: 1492 }))).toBeLessThan(1.5);
    for (const point of curve) expect(point.leading).toBe(point.kvar < 0);
    const unity = curve.findIndex((point) => point.leading);
    for (let k = unity + 1; k < curve.length; k++)
      expect(curve[k]!.lineCurrentA).toBeGreaterThan(curve[k - 1]!.lineCurrentA);
  });

  it.each([
    [{ fieldFromA: 10, fieldToA: 5, points: 5 }, /fieldToA must be above fieldFromA/],
    [{ fieldFromA: 1, fieldToA: 5, points: 1 }, /points/],
  ])('refuses %o', (range, message) => {
    expect(() => vCurve(buildMotor(), { shaftKw: 100, ...range })).toThrow(message);
  });
});

describe('leastLossField', () => {
  it('lies below unity field, and no other field loses less', () => {
    const motor = buildMotor();
    const least = leastLossField(motor, { shaftKw: 1100 });
    expect(least.kvar).toBeGreaterThan(0);
    expect(least.fieldCurrentA).toBeLessThan(unityField(motor, { shaftKw: 1100 }));
    for (let field = 80; field <= 150; field += 0.5) {
      expect(operatingPoint(motor, { shaftKw: 1100, fieldCurrentA: field }).inputKw).toBeGreaterThanOrEqual(
        least.inputKw - 1e-9,
      );
    }
  });
});

describe('capabilityCurve', () => {
  it('is capability, load by load', () => {
    const motor = buildMotor();
    expect(capabilityCurve(motor, { loads: [1600, 0, 700], voltagePu: 0.97 })).toEqual(
      [1600, 0, 700].map((shaftKw) => ({ shaftKw, ...capability(motor, { shaftKw, voltagePu: 0.97 }) })),
    );
  });
});
