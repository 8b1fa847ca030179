import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fixField, ratedKva } from '../../../src/core/machine';
import { laidPowerOn, meanPowerOn, shaftLoadFromSubmeter } from '../../../src/core/plan';
import { buildMotor, randomMotor } from '../machine/build-motor';

describe('meanPowerOn', () => {
  const startMs = Date.UTC(2026, 0, 1);
  const series = { startMs, stepMinutes: 15, kw: Float64Array.from([100, 200, 300, 400, NaN, 600, 700, 800]) };

  it('is the mean of finer intervals, missing with any of its parts', () => {
    expect([...meanPowerOn(series, { startMs, stepMinutes: 30, count: 4 })]).toEqual([150, 350, NaN, 750]);
  });

  it('holds the power of a longer interval through its parts', () => {
    expect([...meanPowerOn(series, { startMs, stepMinutes: 5, count: 4 })]).toEqual([100, 100, 100, 200]);
  });

  it('weighs parts of intervals that begin elsewhere by their time', () => {
    // 5 min of 100 kW and 10 min of 200 kW: (5 x 100 + 10 x 200)/15 = 166.67 kW.
    const shifted = { startMs: startMs + 10 * 60_000, stepMinutes: 15, count: 2 };
    expect(meanPowerOn(series, shifted)[0]).toBeCloseTo(500 / 3, 9);
  });

  it('keeps energy where all of it is known, for random steps', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 1000, noNaN: true }), { minLength: 60, maxLength: 60 }),
        fc.constantFrom(1, 5, 10, 15, 20, 30, 60),
        fc.constantFrom(5, 10, 15, 20, 30, 60),
        (kw, fromMinutes, toMinutes) => {
          const whole = Math.floor((60 * fromMinutes) / toMinutes);
          fc.pre(whole > 0 && (whole * toMinutes) % fromMinutes === 0);
          const laid = meanPowerOn(
            { startMs, stepMinutes: fromMinutes, kw: Float64Array.from(kw) },
            { startMs, stepMinutes: toMinutes, count: whole },
          );
          const parts = (whole * toMinutes) / fromMinutes;
          const before = kw.slice(0, parts).reduce((sum, one) => sum + one * fromMinutes, 0);
          expect(laid.reduce((sum, one) => sum + one * toMinutes, 0)).toBeCloseTo(before, 6);
        },
      ),
    );
  });

  it('is missing outside the series', () => {
    expect([...meanPowerOn(series, { startMs: startMs - 900_000, stepMinutes: 15, count: 2 })]).toEqual([NaN, 100]);
    expect(meanPowerOn(series, { startMs: startMs + 7 * 900_000, stepMinutes: 30, count: 1 })[0]).toBeNaN();
  });

  it('lets the later of two series stand where both have a value', () => {
    const later = { startMs: startMs + 900_000, stepMinutes: 15, kw: Float64Array.from([NaN, 33, 44, 55]) };
    const laid = laidPowerOn([series, later], { startMs, stepMinutes: 15, count: 6 });
    expect([...laid]).toEqual([100, 200, 33, 44, 55, 600]);
  });
});

describe('shaftLoadFromSubmeter', () => {
  it.each([20, 3000])('takes back the loads that %d readings were made of, for random motors', (count) => {
    fc.assert(
      fc.property(randomMotor(), fc.double({ min: 0.6, max: 1, noNaN: true }), (motor, share) => {
        const fieldCurrentA = share * motor.ratedFieldCurrentA;
        const fixed = fixField(motor, { fieldCurrentA });
        const most = Math.min(1.2 * motor.ratedOutputKw, 0.9 * fixed.greatestShaftKw);
        const loads = Float64Array.from({ length: count }, (_, i) => (most * (i + 1)) / count);
        const shuffled = loads.map((_, i) => loads[(i * 7919) % count]!);
        const inputKw = shuffled.map((shaftKw) => fixed.taken(shaftKw).inputKw);
        const back = shaftLoadFromSubmeter(motor, { inputKw, fieldCurrentA });
        expect(back).toMatchObject({ missing: 0, beyondPullOut: 0 });
        back.shaftKw.forEach((shaftKw, i) =>
          expect(Math.abs(shaftKw - shuffled[i]!) / ratedKva(motor)).toBeLessThan(1e-6),
        );
      }),
      { numRuns: 25 },
    );
  });

  it('tells standstill, running without load, missing and beyond pull-out apart', () => {
    const motor = buildMotor();
    const fixed = fixField(motor, { fieldCurrentA: 100 });
    const idle = fixed.taken(0).inputKw;
    const inputKw = Float64Array.from([0, 0.4 * idle, idle, NaN, 9000, NaN]);
    const whenMissing = new Float64Array(6).fill(700);
    const found = shaftLoadFromSubmeter(motor, { inputKw, fieldCurrentA: 100, whenMissing });
    expect(found.missing).toBe(2);
    expect(found.beyondPullOut).toBe(1);
    expect([...found.shaftKw.slice(0, 2)]).toEqual([0, 0]);
    expect(found.shaftKw[2]).toBeGreaterThan(0);
    expect(found.shaftKw[2]).toBeLessThan(0.01);
    expect([found.shaftKw[3], found.shaftKw[5]]).toEqual([700, 700]);
    expect(found.shaftKw[4]).toBeCloseTo(fixed.greatestShaftKw, 3);
    expect(shaftLoadFromSubmeter(motor, { inputKw, fieldCurrentA: 100 }).shaftKw[3]).toBe(0);
  });
});
