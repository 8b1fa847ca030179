import fc from 'fast-check';
import type { SynchronousMotor } from '../../../src/core/machine';

/** A 2000 hp motor of 0.8 leading power factor, its data complete. */
export function buildMotor(overrides: Partial<SynchronousMotor> = {}): SynchronousMotor {
  return {
    ratedOutputKw: 1492,
    ratedVoltageV: 4160,
    frequencyHz: 60,
    poles: 8,
    ratedPowerFactor: 0.8,
    ratedEfficiency: 0.96,
    ratedFieldCurrentA: 150,
    fieldResistanceOhm: 0.6,
    exciterEfficiency: 0.85,
    raPu: 0.01,
    xdPu: 1.1,
    xqPu: 0.7,
    ...overrides,
  };
}

/** A motor without any loss, 1000 kVA. */
export function buildLosslessMotor(
  overrides: Partial<SynchronousMotor> & { ratedPowerFactor: number },
): SynchronousMotor {
  return buildMotor({
    ratedOutputKw: 1000 * overrides.ratedPowerFactor,
    ratedEfficiency: 1,
    raPu: 0,
    fieldResistanceOhm: 0,
    lossSplit: { frictionWindageKw: 0, coreKw: 0, strayKw: 0 },
    ...overrides,
  });
}

export const openCircuitCurve = [
  { fieldCurrentA: 30, voltagePu: 0.45 },
  { fieldCurrentA: 60, voltagePu: 0.85 },
  { fieldCurrentA: 80, voltagePu: 1 },
  { fieldCurrentA: 110, voltagePu: 1.12 },
  { fieldCurrentA: 160, voltagePu: 1.25 },
];

const share = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** Random motors from 20 kW to 20 MW, of either exciter supply, some with an open-circuit curve. */
export function randomMotor(): fc.Arbitrary<SynchronousMotor> {
  return fc
    .record({
      sizeExponent: share(Math.log(20), Math.log(20000)),
      ratedPowerFactor: fc.constantFrom(1, 0.95, 0.9, 0.85, 0.8, 0.7),
      ratedFieldCurrentA: share(2, 600),
      fieldShare: share(0.003, 0.02),
      exciterEfficiency: share(0.75, 1),
      exciterSupply: fc.constantFrom<'shaft' | 'bus'>('shaft', 'bus'),
      raPu: share(0, 0.03),
      xdPu: share(0.6, 2),
      saliency: share(0.5, 1),
      loss: share(0.01, 0.04),
      curved: fc.boolean(),
    })
    .map((r) => {
      const ratedOutputKw = Math.exp(r.sizeExponent);
      const fieldKw = r.fieldShare * ratedOutputKw;
      const total =
        fieldKw / r.exciterEfficiency + (r.raPu / r.ratedPowerFactor) * ratedOutputKw + r.loss * ratedOutputKw;
      return {
        ratedOutputKw,
        ratedVoltageV: ratedOutputKw < 500 ? 480 : 4160,
        frequencyHz: 60,
        poles: 6,
        ratedPowerFactor: r.ratedPowerFactor,
        // The armature's share grows with 1/efficiency: 1/(1 + 1.2 losses) leaves room for it.
        ratedEfficiency: 1 / (1 + 1.2 * (total / ratedOutputKw)),
        ratedFieldCurrentA: r.ratedFieldCurrentA,
        fieldResistanceOhm: (fieldKw * 1000) / r.ratedFieldCurrentA ** 2,
        exciterEfficiency: r.exciterEfficiency,
        exciterSupply: r.exciterSupply,
        raPu: r.raPu,
        xdPu: r.xdPu,
        xqPu: r.xdPu * r.saliency,
        xlPu: 0.12,
        ...(r.curved && {
          openCircuitCurve: openCircuitCurve.map((p) => ({
            ...p,
            fieldCurrentA: (p.fieldCurrentA / 160) * r.ratedFieldCurrentA,
          })),
        }),
      };
    });
}
