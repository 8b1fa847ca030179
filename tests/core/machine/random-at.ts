import fc from 'fast-check';
import type { SynchronousMotor } from '../../../src/core/machine';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** Random loads, voltages and limits to run a motor at. */
export function randomAt() {
  return fc.record({
    /** Of rated output. */
    load: fc.oneof(between(0, 1.15), fc.constant(0)),
    voltagePu: between(0.9, 1.1),
    reserve: fc.constantFrom(0, 0, 0.05, 0.15),
    /** Least field allowed, of rated. */
    leastFieldShare: fc.constantFrom(0, 0, 0.2, 0.5),
  });
}

/** A motor of 5 kW: high resistance, a wide share of field loss, brushless, its exciter fed from the bus. */
export const tinyMotor: SynchronousMotor = {
  ratedOutputKw: 5,
  ratedVoltageV: 400,
  frequencyHz: 50,
  poles: 4,
  ratedPowerFactor: 0.9,
  ratedEfficiency: 0.82,
  ratedFieldCurrentA: 3.1,
  fieldResistanceOhm: 22,
  exciterEfficiency: 0.8,
  exciterSupply: 'bus',
  raPu: 0.05,
  xdPu: 1.3,
  xqPu: 0.8,
  exciterField: { ratedA: 0.9, noLoadA: 0.3 },
};
