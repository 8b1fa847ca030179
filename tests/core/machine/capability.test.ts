import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { capability, operatingPoint, ratedCurrentA, ratedKva } from '../../../src/core/machine';
import { loadShares, nameplateCases } from '../../published/machine-capability-cases';
import { buildLosslessMotor, buildMotor, randomMotor } from './build-motor';

describe('capability', () => {
  for (const { id, plate, recomputed } of nameplateCases) {
    it.each(loadShares)(`names the limit that leaves less of ${id} at %d of rated load`, (share) => {
      const motor = buildLosslessMotor({ ...plate, limits: { pullOutMargin: 1 } });
      const at = `load${String(Math.round(100 * share)).padStart(3, '0')}`;
      const [field, armature] = [recomputed[`Qfield_pu_${at}`]!, recomputed[`Qarm_pu_${at}`]!];
      const { binding } = capability(motor, { shaftKw: share * motor.ratedOutputKw });
      // At the rated point both bind.
      if (field === armature) expect(['field', 'armature']).toContain(binding);
      else expect(binding).toBe(armature === null || armature < field ? 'armature' : 'field');
    });
  }

  it('names pull-out when the field cannot hold the load or the margin fails', () => {
    expect(capability(buildMotor(), { shaftKw: 6000 })).toEqual({
      kvarDelivered: null,
      fieldCurrentA: null,
      binding: 'pull-out',
    });
    const weak = buildMotor({ limits: { fieldCurrentA: 70, pullOutMargin: 1.6 } });
    expect(capability(weak, { shaftKw: 1100 })).toEqual({
      kvarDelivered: null,
      fieldCurrentA: null,
      binding: 'pull-out',
    });
  });

  it('names armature when a weak field leaves a lagging current beyond its limit', () => {
    const weak = buildMotor({ limits: { fieldCurrentA: 60, armatureCurrentA: 180, pullOutMargin: 1 } });
    expect(capability(weak, { shaftKw: 1200 })).toEqual({
      kvarDelivered: null,
      fieldCurrentA: null,
      binding: 'armature',
    });
  });

  it('keeps the reserve of both amperes', () => {
    const motor = buildMotor({ limits: { reserve: 0.1, fieldCurrentA: 160 } });
    const light = capability(motor, { shaftKw: 700 });
    expect(light.fieldCurrentA).toBeCloseTo(144, 9);
    const heavy = capability(motor, { shaftKw: 1490 });
    expect(heavy.binding).toBe('armature');
    const point = operatingPoint(motor, { shaftKw: 1490, kvar: -heavy.kvarDelivered! });
    expect(point.lineCurrentA / ratedCurrentA(motor)).toBeCloseTo(0.9, 9);
  });

  it('answers with a point that breaks no limit while a little more breaks the binding one, for random motors', () => {
    fc.assert(
      fc.property(
        randomMotor(),
        fc.double({ min: 0, max: 1.3, noNaN: true }),
        fc.double({ min: 0.9, max: 1.1, noNaN: true }),
        (motor, load, voltagePu) => {
          const shaftKw = load * motor.ratedOutputKw;
          const found = capability(motor, { shaftKw, voltagePu });
          if (found.kvarDelivered === null) {
            expect(found.fieldCurrentA).toBeNull();
            return;
          }
          const step = 1e-7 * ratedKva(motor);
          const inside = operatingPoint(motor, { shaftKw, voltagePu, kvar: -found.kvarDelivered + step });
          expect(inside.beyond).toEqual([]);
          const outside = operatingPoint(motor, {
            shaftKw,
            voltagePu,
            kvar: -found.kvarDelivered - 1e-5 * ratedKva(motor),
          });
          expect(outside.beyond).toContain(found.binding);
        },
      ),
      { numRuns: 1000 },
    );
  });

  it('refuses a negative load', () => {
    expect(() => capability(buildMotor(), { shaftKw: -1 })).toThrow(/shaftKw must be >= 0/);
  });
});
