import type { LoadSeries } from '../load';
import { kvarPerKw } from './network';
import type { CapacitorBank } from './types';

/** A bank laid over the intervals of a load. */
export interface PlacedBank {
  steps: number;
  /** Delivered by one step at the bus voltage, and its losses. */
  stepKvar: number;
  stepKw: number;
  /** Reactive power per active power that a controller holds at the meter; null: all steps are always connected. */
  target: number | null;
  /** First interval it is connected in. */
  first: number;
}

/** @throws {RangeError} naming the bank and the argument out of range */
export function placeBank(bank: CapacitorBank, load: LoadSeries, name: string): PlacedBank {
  const { steps, stepKvar, lossWPerKvar, holdsPowerFactor, voltagePu = 1, fromMs = load.startMs } = bank;
  if (!(Number.isInteger(steps) && steps >= 1 && steps <= 1000))
    throw new RangeError(`${name}.steps must be a whole number from 1 to 1000, got ${steps}`);
  if (!(stepKvar > 0 && Number.isFinite(stepKvar)))
    throw new RangeError(`${name}.stepKvar must be > 0, got ${stepKvar}`);
  if (!(lossWPerKvar >= 0 && Number.isFinite(lossWPerKvar)))
    throw new RangeError(`${name}.lossWPerKvar must be >= 0, got ${lossWPerKvar}`);
  if (!(voltagePu > 0 && voltagePu <= 2)) throw new RangeError(`${name}.voltagePu must be in (0, 2], got ${voltagePu}`);
  if (!Number.isFinite(fromMs)) throw new RangeError(`${name}.fromMs must be an instant in ms, got ${fromMs}`);
  const delivered = stepKvar * voltagePu ** 2;
  const first = Math.max(0, Math.ceil((fromMs - load.startMs) / (load.stepMinutes * 60_000)));
  return {
    steps,
    stepKvar: delivered,
    stepKw: (delivered * lossWPerKvar) / 1000,
    target: holdsPowerFactor === undefined ? null : kvarPerKw(holdsPowerFactor),
    first,
  };
}

/** Rounding allowed to a target, as a share of a step. */
const AT_TARGET = 1e-9;

/**
 * Steps a controller connects: the most that leave the meter no more leading than the target.
 *
 * @param meteredKw, meteredKvar  At the meter without the bank.
 */
export function stepsFor(bank: PlacedBank, meteredKw: number, meteredKvar: number): number {
  const target = bank.target!;
  // A step's own losses raise what may stay lagging.
  const perStep = bank.stepKvar + target * bank.stepKw;
  const steps = Math.floor((meteredKvar - target * Math.max(0, meteredKw)) / perStep + AT_TARGET);
  return Math.min(bank.steps, Math.max(0, steps));
}
