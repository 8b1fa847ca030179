import type { LoadSeries } from '../load';
import type { FieldControl } from '../machine';
import { resonanceCheck } from './network';
import { createSimulator } from './simulator';
import type { FixedSetup } from './simulator';
import type { CapacitorBank, Plant } from './types';

/** A bank of so many steps, priced. */
export interface CapacitorSize {
  steps: number;
  /** A controller switches the steps; false: they are always connected. */
  switched: boolean;
  /** Rated. [kvar] */
  kvar: number;
  /** Bill sum of the year. [currency] */
  billCost: number;
  /** Bill sum plus the bank's own yearly cost. [currency] */
  yearCost: number;
  /**
   * Resonance with the supply; null where the short-circuit power is not known or the bank is empty. Of a switched bank that number
   * of its steps that resonates nearest to a usual harmonic.
   */
  resonance: { order: number; near: number[]; steps: number } | null;
}

/** Sizes of a capacitor bank, none first, fixed before switched, and the cheapest. */
export interface CapacitorSizing {
  sizes: CapacitorSize[];
  /** The size of least yearly cost; the earlier at a tie, none included. */
  best: CapacitorSize;
  cancelled: boolean;
}

/** Differences of cost below this are none. [currency] */
const SAME_COST = 0.005;

/**
 * Sizes a capacitor bank by pricing the year's bills with every number of steps: the alternative to raising fields.
 *
 * @param input.plant  Load and motors.
 * @param input.controls  Controls per motor; standing when absent.
 * @param input.fixed  Spans, and banks and replacements besides.
 * @param input.step  One step: rated kvar, losses with its reactors, bus voltage over rated voltage, meter.
 * @param input.mostSteps  Most steps tried. Whole, 1 to 200
 * @param input.holdsPowerFactor  Tries a controller that holds it besides fixed steps; absent: fixed steps only.
 * @param input.totals  Bill totals of a load series, period by period.
 * @param input.yearlyCostPerKvar  Capital and upkeep of the bank per year; 0 when absent. [currency/kvar]
 * @param input.yearlyCostOfController  Besides, of a switched bank; 0 when absent. [currency]
 * @param input.shortCircuitKva  At the bank's bus, for the resonance check.
 * @param input.detuningPercent  Reactors of a detuned bank.
 * @param input.onProgress  Called after every size; returning false ends the search.
 * @returns Every size with bills, yearly cost and resonance, and the cheapest.
 * @throws {RangeError} naming the argument out of range
 */
export function sizeCapacitors(input: {
  plant: Plant;
  controls?: FieldControl[][];
  fixed?: FixedSetup;
  step: Pick<CapacitorBank, 'stepKvar' | 'lossWPerKvar' | 'voltagePu' | 'behind'>;
  mostSteps: number;
  holdsPowerFactor?: number;
  totals: (load: LoadSeries) => Float64Array;
  yearlyCostPerKvar?: number;
  yearlyCostOfController?: number;
  shortCircuitKva?: number;
  detuningPercent?: number;
  onProgress?: (progress: { priced: number; planned: number }) => boolean | void;
}): CapacitorSizing {
  const { plant, fixed = {}, step, mostSteps, holdsPowerFactor, totals, onProgress } = input;
  const { yearlyCostPerKvar = 0, yearlyCostOfController = 0 } = input;
  if (!(Number.isInteger(mostSteps) && mostSteps >= 1 && mostSteps <= 200))
    throw new RangeError(`mostSteps must be a whole number from 1 to 200, got ${mostSteps}`);
  if (!(yearlyCostPerKvar >= 0)) throw new RangeError(`yearlyCostPerKvar must be >= 0, got ${yearlyCostPerKvar}`);
  if (!(yearlyCostOfController >= 0))
    throw new RangeError(`yearlyCostOfController must be >= 0, got ${yearlyCostOfController}`);
  const controls = input.controls ?? plant.motors.map((motor) => standing(motor.standingFieldA));
  const tried = sizesTried(mostSteps, holdsPowerFactor !== undefined);
  const sizes: CapacitorSize[] = [];
  let cancelled = false;
  for (const { steps, switched } of tried) {
    const banks = steps === 0 ? [] : [{ ...step, steps, ...(switched && { holdsPowerFactor }) }];
    const simulator = createSimulator(plant, { ...fixed, banks: [...(fixed.banks ?? []), ...banks] });
    const billCost = totals(simulator.apply(controls)).reduce((sum, total) => sum + total, 0);
    const kvar = steps * step.stepKvar;
    const ownCost = yearlyCostPerKvar * kvar + (switched ? yearlyCostOfController : 0);
    const resonance = resonanceOf(steps, switched, step.stepKvar, input);
    sizes.push({ steps, switched, kvar, billCost, yearCost: billCost + ownCost, resonance });
    cancelled = onProgress?.({ priced: sizes.length, planned: tried.length }) === false;
    if (cancelled) break;
  }
  const best = sizes.reduce((a, b) => (b.yearCost < a.yearCost - SAME_COST ? b : a));
  return { sizes, best, cancelled };
}

const standing = (fieldCurrentA: number): FieldControl[] => [{ holds: 'field-current', fieldCurrentA }];

function sizesTried(mostSteps: number, withController: boolean): { steps: number; switched: boolean }[] {
  const counts = Array.from({ length: mostSteps }, (_, k) => k + 1);
  return [
    { steps: 0, switched: false },
    ...counts.map((steps) => ({ steps, switched: false })),
    ...(withController ? counts.map((steps) => ({ steps, switched: true })) : []),
  ];
}

function resonanceOf(
  steps: number,
  switched: boolean,
  stepKvar: number,
  { shortCircuitKva, detuningPercent }: { shortCircuitKva?: number; detuningPercent?: number },
): CapacitorSize['resonance'] {
  if (steps === 0 || shortCircuitKva === undefined) return null;
  const counts = switched ? Array.from({ length: steps }, (_, k) => k + 1) : [steps];
  const checks = counts.map((connected) => ({
    steps: connected,
    ...resonanceCheck({ kvar: connected * stepKvar, shortCircuitKva, detuningPercent }),
  }));
  const gap = ({ order, near }: { order: number; near: number[] }) =>
    Math.min(1, ...near.map((harmonic) => Math.abs(harmonic - order)));
  return checks.reduce((a, b) => (gap(b) <= gap(a) ? b : a));
}
