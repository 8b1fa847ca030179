import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { capability, operatingPoint, pullOut, ratedCurrentA, ratedKva } from '../../../src/core/machine';
import { capabilityCases, voltageCase } from '../../published/machine-capability';
import { buildLosslessMotor, buildMotor, randomMotor } from './build-motor';

const DIGITS = 5e-6;

describe('capability', () => {
  for (const c of capabilityCases) {
    const motor = buildLosslessMotor({ ratedPowerFactor: c.powerFactor, xdPu: c.xdPu, xqPu: c.xqPu });

    it(`has the emf and pull-out of ${c.id}`, () => {
      const rated = operatingPoint(motor, { shaftKw: motor.ratedOutputKw, powerFactor: c.powerFactor, leading: true });
      expect(Math.abs(rated.emfPu - c.emfPu)).toBeLessThan(5e-5);
      const greatest = pullOut({ phaseVoltageV: 1, emfV: rated.emfPu }, { raOhm: 0, xdOhm: c.xdPu, xqOhm: c.xqPu });
      expect(Math.abs(greatest.activePowerW - c.pullOutPu)).toBeLessThan(5e-5);
    });

    it.each(c.loads)(`gives the kvar of ${c.id} at %d of rated load`, (load, field, armature) => {
      const shaftKw = load * motor.ratedOutputKw;
      const wide = { armatureCurrentA: 1e6, pullOutMargin: 1 };
      const byField = capability({ ...motor, limits: wide }, { shaftKw });
      expect(Math.abs(byField.kvarDelivered! / 1000 - field)).toBeLessThan(DIGITS);
      expect(byField.binding).toBe('field');
      const both = capability({ ...motor, limits: { pullOutMargin: 1 } }, { shaftKw });
      if (armature === null) {
        expect(both).toEqual({ kvarDelivered: null, fieldCurrentA: null, binding: 'armature' });
      } else {
        expect(Math.abs(both.kvarDelivered! / 1000 - Math.min(field, armature))).toBeLessThan(DIGITS);
        if (field !== armature) expect(both.binding).toBe(field < armature ? 'field' : 'armature');
      }
      if (armature !== null && load < 1) {
        const strong = capability({ ...motor, limits: { fieldCurrentA: 1e4, pullOutMargin: 1 } }, { shaftKw });
        expect(Math.abs(strong.kvarDelivered! / 1000 - armature)).toBeLessThan(DIGITS);
        expect(strong.binding).toBe('armature');
      }
    });
  }

  it.each(voltageCase.rows)('follows the voltage at $voltagePu pu', ({ voltagePu, field, armature, fieldAtNoLoad }) => {
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: voltageCase.xdPu, xqPu: voltageCase.xqPu });
    const shaftKw = motor.ratedOutputKw;
    const wide = { ...motor, limits: { armatureCurrentA: 1e6 } };
    expect(Math.abs(capability(wide, { shaftKw, voltagePu }).kvarDelivered! / 1000 - field)).toBeLessThan(DIGITS);
    expect(Math.abs(capability(wide, { shaftKw: 0, voltagePu }).kvarDelivered! / 1000 - fieldAtNoLoad)).toBeLessThan(
      DIGITS,
    );
    const both = capability(motor, { shaftKw, voltagePu }).kvarDelivered! / 1000;
    expect(Math.abs(both - Math.min(field, armature))).toBeLessThan(DIGITS);
  });

  it('delivers 0.6 kvar per hp at rated load for 0.8 power factor', () => {
    // A trade chart of motor capability: 250 hp, 0.8 power factor, 100 % load, excitation held: factor 0.6, 150 kvar (graph reading, 1 %).
    const motor = buildMotor({
      ratedOutputKw: 250 * 0.746,
      ratedVoltageV: 2300,
      ratedEfficiency: 0.93,
      ratedFieldCurrentA: 40,
      fieldResistanceOhm: 1.5,
    });
    const { kvarDelivered } = capability(motor, { shaftKw: motor.ratedOutputKw });
    expect(Math.abs(kvarDelivered! / 150 - 1)).toBeLessThan(0.01);
  });

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
