import { describe, expect, it } from 'vitest';
import {
  combineLoads,
  correctiveKvar,
  resonanceCheck,
  resonanceOrder,
  upstreamLossSavedShare,
  voltageRisePu,
} from '../../../src/core/plan';

describe('combineLoads', () => {
  it('is leading when more is delivered than absorbed, and unity with nothing', () => {
    expect(combineLoads([{ kw: 3, kvar: -4 }])).toEqual({ kw: 3, kvar: -4, kva: 5, powerFactor: 0.6, leading: true });
    expect(combineLoads([])).toMatchObject({ kva: 0, powerFactor: 1, leading: false });
  });
});

describe('correctiveKvar', () => {
  it('refuses a power factor out of range', () => {
    expect(() => correctiveKvar({ demandKw: 1, fromPowerFactor: 0, toPowerFactor: 1 })).toThrow(
      /powerFactor must be in \(0, 1\], got 0/,
    );
    expect(() => correctiveKvar({ demandKw: -1, fromPowerFactor: 0.5, toPowerFactor: 1 })).toThrow(/demandKw/);
  });
});

describe('upstreamLossSavedShare', () => {
  it('refuses a power factor out of range', () => {
    expect(() => upstreamLossSavedShare(0.75, 1.2)).toThrow(/got 1.2/);
  });
});

describe('voltageRisePu and resonanceOrder', () => {
  // 400 kvar behind 1500 kVA of 5.75 %: short circuit 26 087 kVA, rise 1.533 %, order 8.08; the three usual formulas by hand.
  const bus = { kvar: 400, shortCircuitKva: 1500 / 0.0575 };

  it('agree with the hand calculation of a transformer', () => {
    expect(voltageRisePu(bus)).toBeCloseTo(0.015333, 6);
    expect(resonanceOrder(bus)).toBeCloseTo(8.0757, 4);
    expect(resonanceCheck(bus)).toEqual({ order: resonanceOrder(bus), near: [] });
  });

  it('warn of a harmonic within half an order', () => {
    expect(resonanceCheck({ kvar: 530, shortCircuitKva: bus.shortCircuitKva }).near).toEqual([7]);
  });

  it('keep a bank with 7 % reactors below the fifth harmonic: tuned to 3.78', () => {
    const found = resonanceCheck({ ...bus, detuningPercent: 7 });
    // 1/sqrt(1/8.0757^2 + 0.07) = 3.423
    expect(found.order).toBeCloseTo(3.423, 3);
    expect(found.near).toEqual([3]);
  });

  it('refuse what is not there', () => {
    expect(() => resonanceOrder({ kvar: 0, shortCircuitKva: 1 })).toThrow(/kvar/);
    expect(() => voltageRisePu({ kvar: 1, shortCircuitKva: 0 })).toThrow(/shortCircuitKva/);
    expect(() => resonanceCheck({ ...bus, detuningPercent: 60 })).toThrow(/detuningPercent/);
  });
});
