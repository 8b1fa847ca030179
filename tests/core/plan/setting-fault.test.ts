import { describe, expect, it } from 'vitest';
import type { SynchronousMotor } from '../../../src/core/machine';
import { admissibleFieldA, settingFault } from '../../../src/core/plan';
import type { LimitedMotor } from '../../../src/core/plan';

const machine: SynchronousMotor = {
  ratedOutputKw: 1492,
  ratedVoltageV: 4160,
  frequencyHz: 60,
  poles: 32,
  ratedPowerFactor: 0.8,
  ratedEfficiency: 0.957,
  ratedFieldCurrentA: 204,
  fieldResistanceOhm: 0.5,
  exciterEfficiency: 0.9,
  raPu: 0.01,
  xdPu: 1.1,
  xqPu: 0.7,
};

const motor = (limits: Partial<LimitedMotor['limits']> = {}): LimitedMotor => ({
  name: 'M-1',
  machine,
  limits: { fieldA: 204, armatureA: 270, pullOutMargin: 1.3, reservePercent: 0, ...limits },
});
const amperes = (fieldCurrentA: number) => ({ holds: 'field-current', fieldCurrentA }) as const;
const loads = [1119, 600];

describe('settingFault', () => {
  it('names the field limit and how far beyond it a current lies', () => {
    expect(settingFault(motor(), amperes(230), loads)).toBe(
      '230 A is 26 A beyond the field limit of M-1, 204 A. Set it lower.',
    );
  });

  it('names the least field', () => {
    expect(settingFault(motor({ leastFieldA: 120 }), amperes(110), [])).toBe(
      '110 A is 10 A below the least field of M-1, 120 A. Set it higher.',
    );
  });

  it('takes held volts for the current they make: 110 V over 0.5 ohm are 220 A', () => {
    const fault = settingFault(motor(), { holds: 'field-voltage', fieldVoltageV: 110 }, loads);
    expect(fault).toMatch(/^110 V make 220 A of field, which is 16 A beyond the field limit/);
    expect(settingFault(motor(), { holds: 'field-voltage', fieldVoltageV: 80 }, loads)).toBeNull();
  });

  it('holds at both ends of the voltage band and says at which it does not', () => {
    // The least field that holds at rated voltage: at 80 % of it the pull-out falls below its margin.
    const { lowA } = admissibleFieldA(motor(), loads)!;
    expect(settingFault(motor(), amperes(lowA * 1.001), loads)).toBeNull();
    const banded = motor({ voltageBandPu: { low: 0.8, high: 1.1 } });
    expect(settingFault(banded, amperes(lowA * 1.001), loads)).toMatch(/and 80 % of rated voltage M-1 would/);
  });

  it('leaves regulators to their limiters as long as some excitation is admissible', () => {
    expect(settingFault(motor(), { holds: 'power-factor', powerFactor: 0.5, leading: true }, loads)).toBeNull();
    const starved = motor({ leastFieldA: 203.9 });
    // Near the rated field the stator is beyond its limit at full load and more.
    expect(settingFault(starved, { holds: 'kvar', kvarDelivered: 100 }, [1600])).toMatch(
      /no excitation within all its limits/,
    );
  });

  it('asks nothing of a motor that stands still', () => {
    expect(settingFault(motor(), amperes(10), [])).toBeNull();
  });
});

describe('admissibleFieldA', () => {
  it('gives ends that keep every limit, and beyond which one breaks', () => {
    const { lowA, highA } = admissibleFieldA(motor(), loads)!;
    for (const fieldA of [lowA * 1.0001, (lowA + highA) / 2, highA * 0.9999])
      expect(settingFault(motor(), amperes(fieldA), loads)).toBeNull();
    for (const fieldA of [lowA * 0.99, highA * 1.01])
      expect(settingFault(motor(), amperes(fieldA), loads)).not.toBeNull();
  });

  it('is narrower over a voltage band, and null where limits exclude each other', () => {
    const whole = admissibleFieldA(motor(), loads)!;
    const banded = admissibleFieldA(motor({ voltageBandPu: { low: 0.9, high: 1.1 } }), loads)!;
    expect(banded.lowA).toBeGreaterThanOrEqual(whole.lowA);
    expect(banded.highA).toBeLessThanOrEqual(whole.highA);
    expect(admissibleFieldA(motor({ leastFieldA: 300 }), loads)).toBeNull();
  });
});
