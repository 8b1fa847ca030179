import { describe, expect, it } from 'vitest';
import { operatingPoint, ratedCurrentA, withAssumed } from '../../../src/core/machine';
import type { SynchronousMotor } from '../../../src/core/machine';
import { compareLoadTest } from '../../../src/core/plan';
import type { LoadTestRow } from '../../../src/core/plan';
import { buildLosslessMotor, buildMotor } from '../machine/build-motor';

/** What instruments at a motor would show. */
function readings(motor: SynchronousMotor, at: { shaftKw: number; fieldCurrentA: number; voltagePu?: number }[]) {
  return at.map(({ shaftKw, fieldCurrentA, voltagePu }): LoadTestRow => {
    const { inputKw, kvar, lineCurrentA } = operatingPoint(motor, { shaftKw, fieldCurrentA, voltagePu });
    return { fieldCurrentA, inputKw, kvar, lineCurrentA, voltagePu };
  });
}

const spread = [
  { shaftKw: 300, fieldCurrentA: 90 },
  { shaftKw: 800, fieldCurrentA: 120 },
  { shaftKw: 1300, fieldCurrentA: 145, voltagePu: 1.02 },
  { shaftKw: 1300, fieldCurrentA: 110 },
];

describe('compareLoadTest', () => {
  it('agrees with a row worked by hand', () => {
    // 1000 kVA without losses, round, X 1: rated 0.8 leading gives E = |(1 + 0.6) + j0.8| = 1.788854 at 150 A. At 100 A E = 1.192570; 500 kW:
    // sin d = 0.5/1.192570 = 0.419263, cos d = 0.907867, Q delivered = 1.192570 x 0.907867 - 1 = 0.082695 pu = 82.695 kvar;
    // I = sqrt(0.5^2 + 0.082695^2) = 0.506792 pu.
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu: 1 });
    const row: LoadTestRow = { fieldCurrentA: 100, inputKw: 500, kvar: -80, lineCurrentA: null };
    const { points, offShare, suspects } = compareLoadTest(motor, [row]);
    expect(points[0]!.shaftKw).toBeCloseTo(500, 6);
    expect(points[0]!.kvar).toBeCloseTo(-82.695, 2);
    expect(points[0]!.kvarOff).toBeCloseTo(-2.695, 2);
    expect(points[0]!.lineCurrentA / ratedCurrentA(motor)).toBeCloseTo(0.506792, 5);
    expect(offShare).toBeCloseTo(0.002695, 5);
    expect(suspects).toEqual([]);
  });

  it.each(['xdPu', 'xqPu', 'ratedFieldCurrentA'] as const)('finds that %s is another than in the data', (field) => {
    const data = buildMotor();
    const actual = withAssumed(data, field, data[field] * 0.6);
    const heavy = [100, 112, 125].map((fieldCurrentA) => ({ shaftKw: 1492, fieldCurrentA }));
    const { suspects, offShare } = compareLoadTest(data, readings(actual, field === 'xqPu' ? heavy : spread));
    expect(offShare).toBeGreaterThan(0.02);
    expect(suspects[0]!.field).toBe(field);
    expect(suspects[0]!.fitted / actual[field]).toBeCloseTo(1, 3);
    expect(suspects[0]!.leftShare).toBeLessThan(1e-4);
  });

  it('gives the shaft load of each row, by its own field and voltage', () => {
    const motor = buildMotor();
    const { points, offShare } = compareLoadTest(motor, readings(motor, spread));
    points.forEach((point, i) => expect(point.shaftKw).toBeCloseTo(spread[i]!.shaftKw, 4));
    expect(offShare).toBeLessThan(1e-8);
    points.forEach((point) => expect(point.instrumentsOff).toBeCloseTo(0, 9));
  });

  it('takes amperes where kvar were not read', () => {
    const motor = buildMotor();
    const rows = readings(motor, spread.slice(0, 2)).map((row) => ({ ...row, kvar: null }));
    expect(compareLoadTest(motor, rows)).toMatchObject({ compared: 2 });
    expect(compareLoadTest(motor, rows).offShare).toBeLessThan(1e-6);
    const bare = rows.map((row) => ({ ...row, lineCurrentA: null }));
    expect(compareLoadTest(motor, bare)).toMatchObject({ compared: 0, offShare: null, suspects: [] });
  });

  it('says how far volts and amperes disagree with kW and kvar', () => {
    const motor = buildMotor();
    const [row] = readings(motor, spread.slice(0, 1));
    const { points } = compareLoadTest(motor, [{ ...row!, lineCurrentA: 1.1 * row!.lineCurrentA! }]);
    expect(points[0]!.instrumentsOff).toBeCloseTo(0.1, 9);
  });

  it('marks rows that cannot be: standing still, beyond what the field holds', () => {
    const rows = [
      { fieldCurrentA: 90, inputKw: 5, kvar: 0, lineCurrentA: null },
      { fieldCurrentA: 40, inputKw: 4000, kvar: 0, lineCurrentA: null },
    ];
    const { points, compared } = compareLoadTest(buildMotor(), rows);
    expect(points.map(({ fault }) => fault)).toEqual(['stands', 'pull-out']);
    expect(compared).toBe(0);
  });

  it('refuses no rows and figures out of range', () => {
    expect(() => compareLoadTest(buildMotor(), [])).toThrow(/at least one/);
    const row = { fieldCurrentA: 90, inputKw: 500, kvar: 0, lineCurrentA: null };
    expect(() => compareLoadTest(buildMotor(), [{ ...row, inputKw: -1 }])).toThrow(/rows\[0\]\.inputKw/);
    expect(() => compareLoadTest(buildMotor(), [{ ...row, kvar: NaN }])).toThrow(/rows\[0\]\.kvar/);
  });
});
