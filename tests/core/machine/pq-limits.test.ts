import { describe, expect, it } from 'vitest';
import { operatingPoint, pqLimits, ratedKva } from '../../../src/core/machine';
import { capabilityCases } from '../../published/machine-capability-cases';
import { buildLosslessMotor, buildMotor, openCircuitCurve } from './build-motor';

describe('pqLimits', () => {
  it('draws the armature limit as a circle of its amperes at the voltage', () => {
    const motor = buildMotor({ limits: { reserve: 0.1 } });
    const { armature } = pqLimits(motor, { voltagePu: 0.95 });
    for (const p of armature)
      expect(Math.hypot(p.armatureKw, p.kvarDelivered)).toBeCloseTo(0.9 * 0.95 * ratedKva(motor), 8);
    expect(armature[0]!.kvarDelivered).toBeGreaterThan(0);
    expect(armature.at(-1)!.kvarDelivered).toBeLessThan(0);
  });

  it('draws the field limit as the circle of a round rotor: centre -V^2/X, radius V E/X', () => {
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu: 1 });
    const { field } = pqLimits(motor);
    expect(field.length).toBeGreaterThan(40);
    // Rated emf sqrt((1 + 0.6)^2 + 0.8^2) = 1.78885.
    for (const p of field) expect(Math.hypot(p.armatureKw, p.kvarDelivered + 1000)).toBeCloseTo(1788.854, 2);
  });

  it('meets the least excitation of a salient motor at a pull-out ratio of 1.5', () => {
    const { recomputed } = capabilityCases.find(({ id }) => id === 'CAP-UEL')!;
    const deliveredPu = Number(recomputed.Q_supplied_pu_at_P08_k150);
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu: 0.65, limits: { pullOutMargin: 1.5 } });
    // 1.1 pu in 12 parts of 0.1 pu: point 8 stands at 0.8 pu.
    const { pullOut } = pqLimits(motor, { points: 12 });
    const at = pullOut.find((p) => Math.abs(p.armatureKw - 800) < 1e-6)!;
    expect(Math.abs(at.kvarDelivered / 1000 - deliveredPu)).toBeLessThan(5e-6);
  });

  it('puts a saturated motor on its field line at its field limit', () => {
    const motor = buildMotor({ xlPu: 0.15, openCircuitCurve });
    for (const shaftKw of [300, 900, 1400]) {
      const point = operatingPoint(motor, { shaftKw, fieldCurrentA: 150 });
      const { field } = pqLimits(motor, { points: 400 });
      const near = field.reduce((a, b) =>
        Math.abs(b.armatureKw - point.inputKw) < Math.abs(a.armatureKw - point.inputKw) ? b : a,
      );
      expect(Math.abs(near.kvarDelivered + point.kvar)).toBeLessThan(5);
    }
  });

  it('refuses too few points', () => {
    expect(() => pqLimits(buildMotor(), { points: 3 })).toThrow(/points must be a whole number >= 8/);
  });
});
