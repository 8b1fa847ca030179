import type { LoadSeries } from '../load';
import { resonanceCheck } from './network';
import { createSimulator } from './simulator';
import type { Plant } from './types';

/** A bank of so many steps, priced. */
export interface CapacitorSize {
  steps: number;
  /** Rated. [kvar] */
  kvar: number;
  /** Bill sum of the year. [currency] */
  billCost: number;
  /** Bill sum plus the bank's own yearly cost. [currency] */
  yearCost: number;
  /** Resonance with the supply; null where the short-circuit power is not known or the bank is empty. */
  resonance: { order: number; near: number[] } | null;
}

/** Sizes of a capacitor bank, none first, and the cheapest. */
export interface CapacitorSizing {
  sizes: CapacitorSize[];
  /** The size of least yearly cost; the smaller at a tie, none included. */
  best: CapacitorSize;
  cancelled: boolean;
}

/** Differences of cost below this are none. [currency] */
const SAME_COST = 0.005;

/**
 * Sizes a fixed capacitor bank by pricing the year's bills with every number of steps: the alternative to raising fields.
 *
 * @param input.plant  Load and motors.
 * @param input.fieldsA  Field current per motor; standing when absent. [A]
 * @param input.step  One step: rated kvar, losses, and bus voltage over rated voltage.
 * @param input.mostSteps  Most steps tried. Whole, 1 to 200
 * @param input.totals  Bill totals of a load series, period by period.
 * @param input.yearlyCostPerKvar  Capital and upkeep of the bank per year; 0 when absent. [currency/kvar]
 * @param input.shortCircuitKva  At the bank's bus, for the resonance check.
 * @param input.detuningPercent  Reactors of a detuned bank.
 * @param input.onProgress  Called after every size; returning false ends the search.
 * @returns Every size with bills, yearly cost and resonance, and the cheapest.
 * @throws {RangeError} naming the argument out of range
 */
export function sizeCapacitors(input: {
  plant: Plant;
  fieldsA?: number[];
  step: { kvar: number; lossWPerKvar: number; voltagePu?: number };
  mostSteps: number;
  totals: (load: LoadSeries) => Float64Array;
  yearlyCostPerKvar?: number;
  shortCircuitKva?: number;
  detuningPercent?: number;
  onProgress?: (progress: { priced: number; planned: number }) => boolean | void;
}): CapacitorSizing {
  const { plant, step, mostSteps, totals, yearlyCostPerKvar = 0, shortCircuitKva, detuningPercent, onProgress } = input;
  if (!(Number.isInteger(mostSteps) && mostSteps >= 1 && mostSteps <= 200)) {
    throw new RangeError(`mostSteps must be a whole number from 1 to 200, got ${mostSteps}`);
  }
  if (!(yearlyCostPerKvar >= 0)) throw new RangeError(`yearlyCostPerKvar must be >= 0, got ${yearlyCostPerKvar}`);
  const fieldsA = input.fieldsA ?? plant.motors.map((motor) => motor.standingFieldA);
  const sizes: CapacitorSize[] = [];
  let cancelled = false;
  for (let steps = 0; steps <= mostSteps && !cancelled; steps++) {
    const bank = steps === 0 ? [] : [{ ...step, kvar: steps * step.kvar }];
    const billCost = totals(createSimulator(plant, bank).apply(fieldsA)).reduce((sum, total) => sum + total, 0);
    const kvar = steps * step.kvar;
    const resonance =
      steps > 0 && shortCircuitKva !== undefined ? resonanceCheck({ kvar, shortCircuitKva, detuningPercent }) : null;
    sizes.push({ steps, kvar, billCost, yearCost: billCost + yearlyCostPerKvar * kvar, resonance });
    cancelled = onProgress?.({ priced: sizes.length, planned: mostSteps + 1 }) === false;
  }
  const best = sizes.reduce((a, b) => (b.yearCost < a.yearCost - SAME_COST ? b : a));
  return { sizes, best, cancelled };
}
