import { describe, expect, it } from 'vitest';
import {
  completeNameplate,
  copperResistanceOhm,
  copperTemperatureC,
  fieldCurrentAtPanelA,
  operatingPoint,
  ratedCurrentA,
  ratedKva,
} from '../../../src/core/machine';
import type { Nameplate } from '../../../src/core/machine';

/** 1500 hp, 4000 V: 1119 kW / (0.955 x 0.8) = 1464.66 kVA; field 78 A at 125 V = 1.6026 ohm hot. */
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
const { fieldVoltageV: _volts, ...withoutVolts } = plate;
const fields = (remarks: { field: string }[]) => remarks.map((remark) => remark.field);
const valueOf = (completed: ReturnType<typeof completeNameplate>, field: string) =>
  completed.assumed.find((one) => one.field === field);

describe('copperResistanceOhm', () => {
  it('gives the 75 degC resistances of [FIT] ex. 5.8 from those at 25 degC', () => {
    // [FIT] sec. 5.3.2 prints for that 45 kVA machine, from memory: armature 0.0335 ohm and field 29.8 ohm at 25 degC; the
    // example takes 0.0399 (case FIT-5-8: Ra at 75 degC) and 35.5. Half a unit of the last printed digit.
    expect(copperResistanceOhm({ ohm: 29.8, fromC: 25, toC: 75 })).toBeCloseTo(35.5, 1);
    expect(Math.abs(copperResistanceOhm({ ohm: 0.0335, fromC: 25, toC: 75 }) - 0.0399)).toBeLessThan(0.0001);
  });

  it('is undone by copperTemperatureC', () => {
    const ohm = copperResistanceOhm({ ohm: 1.25, fromC: 18, toC: 112 });
    expect(copperTemperatureC({ ohm, knownOhm: 1.25, knownC: 18 })).toBeCloseTo(112, 9);
  });

  it('refuses what no winding has', () => {
    expect(() => copperResistanceOhm({ ohm: -1, fromC: 20, toC: 75 })).toThrow(/ohm must be >= 0/);
    expect(() => copperResistanceOhm({ ohm: 1, fromC: -300, toC: 75 })).toThrow(/fromC/);
  });
});

describe('a field resistance measured cold', () => {
  it('is brought to ambient plus rise where the plate gives the rise', () => {
    const cold = { coldField: { resistanceOhm: 1.25, atC: 20 }, temperatureRiseC: 80, ambientC: 40 };
    const completed = completeNameplate({ ...withoutVolts, ...cold });
    // 1.25 x (234.5 + 120) / (234.5 + 20) = 1.25 x 354.5 / 254.5 = 1.74116
    expect(completed.motor!.fieldResistanceOhm).toBeCloseTo(1.74116, 5);
    expect(valueOf(completed, 'fieldResistanceOhm')).toBeUndefined();
  });

  it('tells at which temperature the hot resistance holds', () => {
    expect(completeNameplate({ ...plate, temperatureRiseC: 80, ambientC: 35 }).motor!.fieldHotC).toBe(115);
    expect(completeNameplate({ ...plate, insulationClass: 'B' }).motor!.fieldHotC).toBe(95);
    expect(completeNameplate(plate).motor!.fieldHotC).toBeUndefined();
  });

  it('counts the rise from 40 degC where the plate names no ambient', () => {
    const cold = { coldField: { resistanceOhm: 1.25, atC: 20 }, temperatureRiseC: 60 };
    // 1.25 x (234.5 + 100) / 254.5 = 1.64293
    expect(completeNameplate({ ...withoutVolts, ...cold }).motor!.fieldResistanceOhm).toBeCloseTo(1.64293, 5);
  });

  it('is brought to a typical temperature of the class and marked assumed where it gives none', () => {
    const cold = { coldField: { resistanceOhm: 1.25, atC: 20 }, insulationClass: 'F' as const };
    const completed = completeNameplate({ ...withoutVolts, ...cold });
    // Class F is taken at 115 degC, from 95 to 155: 1.25 x 349.5, 329.5, 389.5 / 254.5
    const assumed = valueOf(completed, 'fieldResistanceOhm')!;
    expect(assumed.value).toBeCloseTo(1.7166, 4);
    expect(assumed.low).toBeCloseTo(1.61837, 4);
    expect(assumed.high).toBeCloseTo(1.91306, 4);
    expect(assumed.why).toContain('1.25 ohm at 20 degC');
  });

  it('is held against volts and amperes: agreeing within 5 % at ambient plus rise', () => {
    // 125 V / 78 A = 1.6026; 1.18 x 334.5 / 254.5 = 1.5509, 3.3 % below: agrees. 1.05 makes 1.3801: 16.1 % apart.
    const rise = { temperatureRiseC: 60, ambientC: 40 };
    const at = (resistanceOhm: number) =>
      completeNameplate({ ...plate, ...rise, coldField: { resistanceOhm, atC: 20 } });
    expect(at(1.18).problems).toEqual([]);
    const [problem] = at(1.05).problems;
    expect(problem).toMatchObject({ field: 'coldField' });
    expect(problem!.message).toMatch(/1\.380 ohm at 100 degC.*125 V \/ 78 A = 1\.603 ohm is 16\.1 % above/);
    // 1.60256 / 1.05 x 254.5 - 234.5 = 153.9 degC: hot, but no nonsense
    expect(problem!.message).toContain('154 degC');
    expect(problem!.remedy).toContain('temperature of the measurement');
  });

  it('is refused without a rise only where the winding would be colder or hotter than any', () => {
    const at = (resistanceOhm: number) => completeNameplate({ ...plate, coldField: { resistanceOhm, atC: 20 } });
    expect(at(1.2).problems).toEqual([]);
    expect(at(1.9).problems[0]!.remedy).toContain('No winding runs at that temperature');
    expect(at(0.7).problems[0]!.remedy).toContain('No winding runs at that temperature');
  });

  it('is held against a hot resistance that was entered', () => {
    const { problems } = completeNameplate({
      ...withoutVolts,
      fieldResistanceOhm: 1.3,
      coldField: { resistanceOhm: 1.3, atC: 20 },
      temperatureRiseC: 80,
    });
    expect(fields(problems)).toEqual(['coldField']);
    expect(problems[0]!.message).toContain('the hot resistance of 1.3 ohm');
  });
});

describe('reactances and resistance in ohms', () => {
  it('make the per-unit values of the 45 kVA machine of [FIT] ex. 5.4, wye', () => {
    // Case FIT-5-4: 0.8356 ohm at 45 kVA, 220 V are 0.777 pu; base ohm 220^2 / 45000 = 1.07556. Output and efficiency are
    // chosen so that the rating is 45 kVA: 45 x 0.8 x 0.9 = 32.4 kW.
    const { motor } = completeNameplate({
      output: 32.4,
      outputUnit: 'kW',
      voltageV: 220,
      powerFactor: 0.8,
      efficiency: 0.9,
      frequencyHz: 60,
      poles: 4,
      rotor: 'round',
      fieldCurrentA: 5.5,
      fieldResistanceOhm: 10,
      ohms: { connection: 'wye', xdOhm: 0.83564, xqOhm: 0.83564, raOhm: 0.0335, raAtC: 25 },
      temperatureRiseC: 35,
    });
    expect(ratedKva(motor!)).toBeCloseTo(45, 9);
    expect(motor!.xdPu).toBeCloseTo(0.777, 3);
    // 0.0335 ohm at 25 degC brought to 40 + 35 = 75 degC: 0.03995 / 1.07556 = 0.0371 pu, printed 0.037 (C of the reference)
    expect(motor!.raPu).toBeCloseTo(0.0371, 4);
  });

  it('count a delta a third: 36 ohm a phase are the 12 of the wye ([GUR] ex. 8.3)', () => {
    const ohmsOf = (connection: 'wye' | 'delta', ohm: number) =>
      completeNameplate({ ...plate, ohms: { connection, xdOhm: ohm, xqOhm: 0.65 * ohm } }).motor!;
    expect(ohmsOf('delta', 36).xdPu).toBeCloseTo(ohmsOf('wye', 12).xdPu, 12);
    // 12 ohm x 1464.66 kVA / 4 kV^2 = 1098.49 / 1000 = 1.0985 pu
    expect(ohmsOf('wye', 12).xdPu).toBeCloseTo(1.0985, 4);
  });

  it('are refused beside per-unit values of the same name', () => {
    const { problems } = completeNameplate({ ...plate, xdPu: 1.1, ohms: { connection: 'wye', xdOhm: 12 } });
    expect(fields(problems)).toEqual(['ohms.xdOhm']);
  });

  it('leave what they do not say to typical values', () => {
    const { assumed } = completeNameplate({ ...plate, ohms: { connection: 'wye', xdOhm: 12 } });
    expect(fields(assumed)).toContain('xqPu');
    expect(fields(assumed)).not.toContain('xdPu');
  });

  it('mark a resistance as assumed where the temperature of the hot winding is', () => {
    const completed = completeNameplate({ ...plate, ohms: { connection: 'wye', raOhm: 0.08, raAtC: 20 } });
    // Base ohm 4000^2 / 1464660 = 10.9241; 0.08 x (234.5 + 95) / 254.5 = 0.103576 ohm = 0.009481 pu
    expect(valueOf(completed, 'raPu')!.value).toBeCloseTo(0.009481, 6);
  });
});

describe('the figures of one plate', () => {
  /** Case HUB-8-1: 100 hp, 460 V, 0.8 leading, 96 %, 4 poles; printed 122 A. Wye, 2.72 ohm. */
  const hubert: Nameplate = {
    output: 100,
    outputUnit: 'hp',
    voltageV: 460,
    currentA: 122,
    powerFactor: 0.8,
    efficiency: 0.96,
    frequencyHz: 60,
    poles: 4,
    speedRpm: 1800,
    rotor: 'round',
    raPu: 0.005,
    fieldCurrentA: 8,
    fieldVoltageV: 120,
    ohms: { connection: 'wye', xdOhm: 2.72, xqOhm: 2.72 },
  };

  it('agree for the machine of HUB-8-1, whose emf at full load is the one printed', () => {
    const { motor, problems } = completeNameplate(hubert);
    expect(problems).toEqual([]);
    // Printed 535 V a phase, armature resistance neglected there: 460 / sqrt 3 = 265.58 V is 1 pu
    const emfV =
      operatingPoint({ ...motor!, raPu: 0 }, { shaftKw: 74.6, fieldCurrentA: 8 }).emfPu * (460 / Math.sqrt(3));
    expect(Math.abs(emfV - 535)).toBeLessThan(0.5);
  });

  it('say by how much a current is off', () => {
    // 74.6 kW / (sqrt 3 x 0.46 kV x 0.96 x 0.8) = 121.92 A; 130 / 121.92 = 1.0663
    const { problems } = completeNameplate({ ...hubert, currentA: 130 });
    expect(problems[0]!.message).toMatch(/by 6\.6 %: the plate says 130 A, the others make 121\.9 A/);
  });
});

describe('horsepower', () => {
  it('is of 746 W, metric of 735.5 W (MEH-6-12 counts so)', () => {
    expect(completeNameplate(plate).motor!.ratedOutputKw).toBeCloseTo(1119, 9);
    const metric = completeNameplate({ ...plate, outputUnit: 'metric-hp', currentA: 208 });
    expect(metric.motor!.ratedOutputKw).toBeCloseTo(1103.25, 9);
    expect(metric.problems).toEqual([]);
  });

  it('of either kind is found where the plate meant kW', () => {
    const { problems } = completeNameplate({ ...plate, outputUnit: 'metric-hp', currentA: 283 });
    expect(problems[0]!.remedy).toContain('output is in kW');
  });
});

describe('what a plate states beside its output', () => {
  it('finds kVA that volts and amperes contradict', () => {
    // sqrt 3 x 4 kV x 211 A = 1461.9 kVA
    expect(completeNameplate({ ...plate, apparentKva: 1465 }).problems).toEqual([]);
    const [problem] = completeNameplate({ ...plate, apparentKva: 1600 }).problems;
    expect(problem).toMatchObject({ field: 'apparentKva' });
    expect(problem!.message).toMatch(/by 9\.5 %: the plate says 1600 kVA, the others make 1461\.9 kVA/);
    expect(completeNameplate({ ...plate, apparentKva: 1119 }).problems[0]!.remedy).toContain('output in kW');
  });

  it('finds kVA that output, efficiency and power factor contradict where there is no current', () => {
    const [problem] = completeNameplate({ ...plate, currentA: undefined, apparentKva: 1600 }).problems;
    // 1119 / (0.955 x 0.8) = 1464.7
    expect(problem!.message).toMatch(/output, efficiency and power factor by 9\.2 %/);
  });

  it('warns of a rise that the class of insulation does not bear', () => {
    const { problems, warnings } = completeNameplate({ ...plate, temperatureRiseC: 105, insulationClass: 'B' });
    expect(problems).toEqual([]);
    expect(fields(warnings)).toEqual(['temperatureRiseC']);
    expect(warnings[0]!.message).toContain('145 degC, 15 K over');
    expect(completeNameplate({ ...plate, temperatureRiseC: 80, insulationClass: 'B' }).warnings).toEqual([]);
  });

  it('raises no limit by a service factor', () => {
    const at = { shaftKw: 1119, fieldCurrentA: 80 };
    expect(operatingPoint(completeNameplate({ ...plate, serviceFactor: 1.15 }).motor!, at).beyond).toContain('field');
    expect(completeNameplate({ ...plate, serviceFactor: 1.15 }).motor).toEqual(completeNameplate(plate).motor);
  });

  it('is refused where it is not above zero', () => {
    expect(fields(completeNameplate({ ...plate, temperatureRiseC: 0 }).problems)).toEqual(['temperatureRiseC']);
  });
});

describe('limits a person sets', () => {
  /** 204 A of field at 5.1 A of the exciter's: 40 A per ampere, through the origin. */
  const brushless: Nameplate = { ...plate, exciter: 'brushless', exciterField: { ratedA: 3.9 } };

  it('are the field’s own where the exciter gives more', () => {
    const completed = completeNameplate({ ...plate, limits: { fieldCurrentA: 74, exciterOutputA: 90 } });
    expect(completed.motor!.limits!.fieldCurrentA).toBe(74);
    expect(completed.fieldLimitBy).toBe('field');
  });

  it('are the exciter’s amperes or volts where these are less', () => {
    const amperes = completeNameplate({ ...plate, limits: { exciterOutputA: 70 } });
    expect(amperes.motor!.limits!.fieldCurrentA).toBe(70);
    expect(amperes.fieldLimitBy).toBe('exciter');
    // 120 V over 125 / 78 ohm = 74.88 A
    const volts = completeNameplate({ ...plate, limits: { exciterOutputV: 120, exciterOutputA: 76 } });
    expect(volts.motor!.limits!.fieldCurrentA).toBeCloseTo(74.88, 9);
  });

  it('are in exciter-field amperes for a brushless machine', () => {
    const completed = completeNameplate({ ...brushless, limits: { exciterFieldA: 3.5, leastPanelA: 1 } });
    // 78 A / 3.9 A = 20: 70 A most, 20 A least
    expect(completed.motor!.limits!.fieldCurrentA).toBeCloseTo(70, 9);
    expect(completed.leastFieldA).toBeCloseTo(20, 9);
    expect(completed.fieldLimitBy).toBe('exciter');
  });

  it('follow the line between no load and rated field where both are known', () => {
    const completed = completeNameplate({
      ...brushless,
      exciterField: { ratedA: 3.9, noLoadA: 1.9 },
      limits: { exciterFieldA: 3.4 },
    });
    const { motor } = completed;
    expect(fieldCurrentAtPanelA(motor!, 3.4)).toBeCloseTo(motor!.limits!.fieldCurrentA!, 9);
    // Three quarters of the way from no load to rated
    const noLoadA = fieldCurrentAtPanelA(motor!, 1.9);
    expect(motor!.limits!.fieldCurrentA).toBeCloseTo(noLoadA + 0.75 * (78 - noLoadA), 9);
  });

  it.each([
    ['an exciter-field limit without the rated one', plate, { exciterFieldA: 3 }, 'limits.exciterFieldA'],
    [
      'an exciter-field limit of no field',
      { ...brushless, exciterField: { ratedA: 3.9, noLoadA: 2.5 } },
      { exciterFieldA: 0.1 },
      'limits.exciterFieldA',
    ],
    ['a least field above the most', plate, { leastPanelA: 80 }, 'limits.leastPanelA'],
    ['a least field within the reserve', plate, { leastPanelA: 72, reserve: 0.1 }, 'limits.leastPanelA'],
    ['a band that misses rated voltage', plate, { voltageBandPu: { low: 1.02, high: 1.05 } }, 'limits.voltageBandPu'],
  ])('refuse %s', (_name, of, limits, field) => {
    expect(fields(completeNameplate({ ...of, limits }).problems)).toContain(field);
  });

  it('leave a voltage band beside the machine', () => {
    const band = { low: 0.95, high: 1.05 };
    const completed = completeNameplate({ ...plate, limits: { voltageBandPu: band } });
    expect(completed.voltageBandPu).toEqual(band);
    expect(completed.motor!.limits).not.toHaveProperty('voltageBandPu');
    expect(ratedCurrentA(completed.motor!)).toBeCloseTo(211.4, 1);
  });
});
