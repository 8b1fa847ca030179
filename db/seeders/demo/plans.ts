import { planInput } from '../../../src/schemas/plan-input';
import { planDefaults } from '../../../src/schemas/plan-money';
import { constantFieldA } from '../../../src/schemas/plan-settings';
import type { FoundSetting } from '../../../src/schemas/search';
import { supplyInput } from '../../../src/schemas/supply';

/** How Works 2 is supplied, as the utility's letter and the plant's relay study say. */
export const kestrelSupply = supplyInput.parse({
  shortCircuitKva: 56_000,
  xOverR: 8,
  noLoadPercent: 102,
  allowedLowPercent: 95,
  allowedHighPercent: 105,
  meterUpstream: false,
});

/** The bank of the quotation: detuned steps of 300 kvar with a controller. */
const bankOf = (steps: number, cost: number) => ({
  name: 'Substation, 2.4 kV',
  steps,
  stepKvar: 300,
  lossWPerKvar: 5,
  detuningPercent: 7,
  holdsPowerFactor: 0.95,
  cost,
});

/** Capacitors in place of any change at the motors. */
export const kestrelCapacitors = planInput.parse({
  name: 'Plan B',
  fields: [],
  banks: [bankOf(5, 191_500)],
  workCost: 0,
  yearlyUpkeep: 4_600,
  economics: { ...planDefaults },
});

/** Half of the way at the motors, the rest by capacitors. */
export const kestrelBoth = (found: FoundSetting[]) =>
  planInput.parse({
    name: 'Plan C',
    fields: found.map(({ motorId, todayA, ...setting }) => ({
      motorId,
      fieldA: Math.round(((constantFieldA(setting) ?? todayA) + todayA) / 2),
    })),
    banks: [bankOf(3, 115_000)],
    workCost: 61_500,
    yearlyUpkeep: 5_900,
    economics: { ...planDefaults },
  });
