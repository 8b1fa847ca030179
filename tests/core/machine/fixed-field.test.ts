import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PullOutError, capability, fixField, leastField, operatingPoint, ratedKva } from '../../../src/core/machine';
import { buildMotor, openCircuitCurve, randomMotor } from './build-motor';

const loads = (count: number, toKw: number) => Float64Array.from({ length: count }, (_, i) => (toKw * i) / (count - 1));

describe('fixField', () => {
  it.each([10, 500])('takes what operatingPoint says at each of %d loads, for random motors', (count) => {
    fc.assert(
      fc.property(randomMotor(), fc.double({ min: 0.6, max: 1.05, noNaN: true }), (motor, share) => {
        const fieldCurrentA = share * motor.ratedFieldCurrentA;
        const fixed = fixField(motor, { fieldCurrentA });
        const shaftKw = loads(count, Math.min(motor.ratedOutputKw, 0.97 * fixed.greatestShaftKw));
        const { kvar, inputKw } = fixed.takenAt(shaftKw);
        for (let i = 0; i < count; i += Math.ceil(count / 40)) {
          const point = operatingPoint(motor, { shaftKw: shaftKw[i]!, fieldCurrentA });
          expect(Math.abs(kvar[i]! - point.kvar) / ratedKva(motor)).toBeLessThan(1e-7);
          expect(Math.abs(inputKw[i]! - point.inputKw) / ratedKva(motor)).toBeLessThan(1e-7);
        }
      }),
      { numRuns: 60 },
    );
  });

  it('refuses loads beyond pull-out, few or many', () => {
    for (const motor of [buildMotor(), buildMotor({ xlPu: 0.15, openCircuitCurve })]) {
      const fixed = fixField(motor, { fieldCurrentA: 60 });
      for (const count of [5, 200])
        expect(() => fixed.takenAt(loads(count, fixed.greatestShaftKw * 1.01))).toThrow(PullOutError);
    }
    expect(() => fixField(buildMotor(), { fieldCurrentA: 100 }).taken(-1)).toThrow(/shaftKw/);
    expect(() => fixField(buildMotor(), { fieldCurrentA: NaN })).toThrow(/fieldCurrentA/);
  });
});

describe('leastField', () => {
  it('keeps the pull-out margin and no more, as the least emf of a salient motor does', () => {
    // Salient 1.0/0.65 without losses at 0.8 pu and ratio 1.5: emf 1.0924, worked apart from this code; rated emf 1.7789 at 150 A.
    const motor = buildMotor({
      ratedOutputKw: 800,
      ratedEfficiency: 1,
      raPu: 0,
      xdPu: 1,
      xqPu: 0.65,
      fieldResistanceOhm: 0,
      lossSplit: { coreKw: 0, frictionWindageKw: 0, strayKw: 0 },
      limits: { pullOutMargin: 1.5 },
    });
    const found = leastField(motor, { shaftKw: 800 })!;
    expect(found.binding).toBe('pull-out');
    expect(found.fieldCurrentA).toBeCloseTo((150 * 1.0924) / 1.7789, 1);
    expect(operatingPoint(motor, { shaftKw: 800, fieldCurrentA: found.fieldCurrentA }).pullOutRatio).toBeCloseTo(
      1.5,
      9,
    );
  });

  it('is admissible just above and not just below, for random motors', () => {
    fc.assert(
      fc.property(randomMotor(), fc.double({ min: 0.1, max: 1, noNaN: true }), (motor, load) => {
        const shaftKw = load * motor.ratedOutputKw;
        const found = leastField(motor, { shaftKw });
        if (!found) {
          expect(capability(motor, { shaftKw: shaftKw * 1.000001 }).kvarDelivered).toBeNull();
          return;
        }
        fc.pre(
          found.fieldCurrentA < 0.999 * motor.ratedFieldCurrentA &&
            operatingPoint(motor, { shaftKw, fieldCurrentA: found.fieldCurrentA * (1 + 1e-6) }).emfPu > 1e-5,
        );
        expect(operatingPoint(motor, { shaftKw, fieldCurrentA: found.fieldCurrentA * (1 + 1e-6) }).beyond).toEqual([]);
        let below: string[];
        try {
          below = operatingPoint(motor, { shaftKw, fieldCurrentA: found.fieldCurrentA * (1 - 1e-4) }).beyond;
        } catch (error) {
          expect(error).toBeInstanceOf(PullOutError);
          below = ['pull-out'];
        }
        expect(below).toContain(found.binding);
      }),
      { numRuns: 300 },
    );
  });

  it('is nothing where the field limit itself lacks the margin', () => {
    expect(leastField(buildMotor({ limits: { pullOutMargin: 3 } }), { shaftKw: 1492 })).toBeNull();
  });
});
