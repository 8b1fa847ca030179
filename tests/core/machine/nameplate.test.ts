import { describe, expect, it } from 'vitest';
import {
  assumedSensitivity,
  capability,
  completeNameplate,
  operatingPoint,
  ratedCurrentA,
  ratedKva,
} from '../../../src/core/machine';
import type { Nameplate } from '../../../src/core/machine';

/** 1500 hp, 4000 V: 1119 kW / (0.955 x 0.8) = 1464.7 kVA, 211.4 A; field 78 A at 125 V = 9.75 kW. */
const plate: Nameplate = {
  output: 1500,
  outputUnit: 'hp',
  voltageV: 4000,
  currentA: 211,
  powerFactor: 0.8,
  speedRpm: 514,
  frequencyHz: 60,
  efficiency: 0.955,
  fieldCurrentA: 78,
  fieldVoltageV: 125,
  exciter: 'static',
};

const fields = (remarks: { field: string }[]) => remarks.map((remark) => remark.field);

describe('completeNameplate', () => {
  it('takes what the plate says and assumes the rest, each with its range', () => {
    const { motor, assumed, problems, warnings } = completeNameplate(plate);
    expect(problems).toEqual([]);
    expect(warnings).toEqual([]);
    expect(motor).toMatchObject({
      ratedOutputKw: 1119,
      ratedVoltageV: 4000,
      poles: 14,
      ratedPowerFactor: 0.8,
      ratedFieldCurrentA: 78,
      exciterSupply: 'bus',
    });
    expect(motor!.fieldResistanceOhm).toBeCloseTo(125 / 78, 12);
    expect(fields(assumed)).toEqual([
      'raPu',
      'xdPu',
      'xqPu',
      'exciterEfficiency',
      'lossSplit.coreKw',
      'lossSplit.frictionWindageKw',
      'lossSplit.strayKw',
    ]);
    for (const { value, low, high, why } of assumed) {
      expect(low).toBeLessThanOrEqual(value);
      expect(high).toBeGreaterThanOrEqual(value);
      expect(why).not.toBe('');
    }
    expect(ratedCurrentA(motor!)).toBeCloseTo(211.4, 1);
    expect(operatingPoint(motor!, { shaftKw: 1119, fieldCurrentA: 78 }).powerFactor).toBeCloseTo(0.8, 2);
  });

  it('keeps every entered value', () => {
    const given = {
      raPu: 0.008,
      xdPu: 1.3,
      xqPu: 0.8,
      exciterEfficiency: 0.93,
      lossSplit: { coreKw: 9, frictionWindageKw: 7, strayKw: 5 },
    };
    const { motor, assumed } = completeNameplate({ ...plate, ...given, limits: { reserve: 0.05 } });
    expect(motor).toMatchObject({ ...given, limits: { reserve: 0.05 } });
    expect(assumed).toEqual([]);
  });

  it('works the efficiency out of current and power factor where the plate has none, and says so', () => {
    const { motor, assumed, warnings } = completeNameplate({ ...plate, efficiency: undefined });
    // 1119 kW / (sqrt 3 x 4 kV x 211 A x 0.8) = 0.9568
    expect(motor!.ratedEfficiency).toBeCloseTo(0.9568, 4);
    expect(fields(assumed)).not.toContain('ratedEfficiency');
    expect(fields(warnings)).toContain('efficiency');
  });

  it('works the power factor out of the current where the plate has none', () => {
    const { motor } = completeNameplate({ ...plate, powerFactor: undefined });
    // 1119 / (0.955 x sqrt 3 x 4 x 211) = 0.8015
    expect(motor!.ratedPowerFactor).toBeCloseTo(0.8015, 4);
  });

  it('assumes rating and field when the plate gives only output, volts, speed and frequency', () => {
    const { motor, assumed, problems } = completeNameplate({
      output: 800,
      outputUnit: 'kW',
      voltageV: 2300,
      frequencyHz: 50,
      poles: 10,
    });
    expect(problems).toEqual([]);
    expect(fields(assumed)).toEqual(
      expect.arrayContaining(['ratedEfficiency', 'ratedPowerFactor', 'ratedFieldCurrentA', 'fieldResistanceOhm']),
    );
    expect(capability(motor!, { shaftKw: 600 }).kvarDelivered).toBeGreaterThan(0);
  });

  it.each([
    ['output in kW taken for hp', { currentA: 283 }, 'currentA', /33\.9 %/, /output is in kW/],
    ['unity power factor on the plate', { currentA: 169 }, 'currentA', /20\.1 %/, /unity power factor/],
    ['volts per phase', { voltageV: 2309 }, 'currentA', /42\.4 %/, /per phase/],
    [
      'a speed of another pole number',
      { poles: 12 },
      'speedRpm',
      /12 poles at 60 Hz turn at 600\.0 rpm.*14\.3 %/,
      /has 14 poles/,
    ],
    ['a speed no pole number gives', { speedRpm: 1770 }, 'speedRpm', /1\.7 %/, /induction motor/],
    ['a cold field resistance', { fieldResistanceOhm: 1.28 }, 'fieldResistanceOhm', /20\.1 %/, /cold/],
  ] as const)('finds %s', (_name, change, field, message, remedy) => {
    const { problems } = completeNameplate({ ...plate, ...change });
    expect(fields(problems)).toEqual([field]);
    expect(problems[0]!.message).toMatch(message);
    expect(problems[0]!.remedy).toMatch(remedy);
  });

  it('finds a current that no efficiency explains', () => {
    const { problems } = completeNameplate({ ...plate, efficiency: undefined, currentA: 300 });
    expect(fields(problems)).toEqual(['currentA']);
    // 1119 kW of output from 300 A x sqrt 3 x 4 kV x 0.8 = 1662.8 kW: 0.673.
    expect(problems[0]!.message).toMatch(/take 1662\.8 kW for 1119\.0 kW of output, an efficiency of 0\.673/);
    expect(problems[0]!.remedy).toMatch(/Read output/);
    const slip = completeNameplate({ ...plate, efficiency: undefined, output: 1119, outputUnit: 'hp', currentA: 212 });
    expect(fields(slip.problems)).toEqual(['currentA']);
    expect(slip.problems[0]!.remedy).toMatch(/output is in kW/);
  });

  it('makes no motor of impossible figures and says how to enter them', () => {
    const { motor, problems } = completeNameplate({ ...plate, efficiency: 95.5, powerFactor: 80, output: 0 });
    expect(motor).toBeNull();
    expect(fields(problems)).toEqual(['output', 'powerFactor', 'efficiency']);
    expect(problems[2]!.remedy).toMatch(/95.5 % is written 0.955/);
    expect(fields(completeNameplate({ ...plate, speedRpm: undefined }).problems)).toEqual(['speedRpm']);
    expect(fields(completeNameplate({ ...plate, poles: 7 }).problems)).toEqual(['poles']);
  });

  it('refuses losses that exceed what the efficiency leaves, naming the pair and the amount', () => {
    const { motor, problems } = completeNameplate({ ...plate, efficiency: 0.99, currentA: undefined });
    expect(motor).toBeNull();
    expect(fields(problems)).toEqual(['efficiency']);
    expect(problems[0]!.message).toMatch(
      /Efficiency and field current and resistance disagree: 0\.9900 leaves 11\.30 kW/,
    );
  });

  it('lowers an assumed resistance within its range before it complains', () => {
    const { motor, assumed } = completeNameplate({ ...plate, efficiency: 0.982, currentA: undefined, raPu: undefined });
    const entry = assumed.find((a) => a.field === 'raPu')!;
    expect(entry.value).toBe(motor!.raPu);
    expect(entry.value).toBeLessThan(0.007);
    expect(entry.value).toBeGreaterThanOrEqual(entry.low);
  });

  it('warns of a field that looks like the exciter’s', () => {
    expect(fields(completeNameplate({ ...plate, fieldCurrentA: 4.2, fieldVoltageV: 60 }).warnings)).toEqual([
      'fieldCurrentA',
    ]);
  });

  it('warns when curve or loss split contradict the plate', () => {
    const openCircuitCurve = [
      { fieldCurrentA: 30, voltagePu: 0.8 },
      { fieldCurrentA: 60, voltagePu: 1.1 },
    ];
    expect(fields(completeNameplate({ ...plate, openCircuitCurve }).warnings)).toContain('openCircuitCurve');
    const lossSplit = { coreKw: 30, frictionWindageKw: 30, strayKw: 30 };
    expect(fields(completeNameplate({ ...plate, lossSplit }).warnings)).toEqual(['lossSplit']);
  });

  it('takes a two-pole motor for a round rotor', () => {
    const { motor } = completeNameplate({ output: 3000, outputUnit: 'kW', voltageV: 6600, frequencyHz: 50, poles: 2 });
    expect(motor!.xqPu).toBe(motor!.xdPu);
  });

  it('does not change its argument', () => {
    expect(() => completeNameplate(Object.freeze({ ...plate }))).not.toThrow();
  });
});

describe('assumedSensitivity', () => {
  it('orders assumed values by how far they move the deliverable kvar, and keeps the completed figure', () => {
    const { motor, assumed } = completeNameplate({
      output: 800,
      outputUnit: 'kW',
      voltageV: 2300,
      frequencyHz: 50,
      poles: 10,
    });
    const { kvarDelivered, swings } = assumedSensitivity(motor!, assumed, { shaftKw: 600 });
    expect(kvarDelivered).toBe(capability(motor!, { shaftKw: 600 }).kvarDelivered);
    expect(swings).toHaveLength(assumed.length);
    // Rated power factor dominates the kvar a motor can deliver; amperes of the field are only a scale.
    expect(swings[0]!.field).toBe('ratedPowerFactor');
    const scale = swings.find((s) => s.field === 'ratedFieldCurrentA')!;
    expect(scale.swingKvar! / ratedKva(motor!)).toBeLessThan(1e-9);
    const reactance = swings.find((s) => s.field === 'xdPu')!;
    expect(reactance.swingKvar).toBeCloseTo(Math.abs(reactance.kvarAtHigh! - reactance.kvarAtLow!), 12);
    expect(reactance.swingKvar).toBeGreaterThan(1);
  });
});
