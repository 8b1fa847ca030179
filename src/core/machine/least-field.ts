import { PullOutError } from './errors';
import { LIMIT_TOLERANCE, compileMotor } from './motor';
import type { SynchronousMotor } from './motor';
import { checkLoad, pullOutOfState } from './operating-point';
import { brentRoot } from './roots';
import { holdField, solveAtPowerFactor } from './solve';

/**
 * Least field current a motor may run at under a shaft load: its pull-out ratio keeps the margin and its lagging current
 * keeps within the armature limit.
 *
 * @param motor  Motor data with its limits.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @returns Field current and the limit that sets it; null when even the field limit does not satisfy both.
 * @throws {RangeError} naming the argument out of range
 */
export function leastField(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltagePu?: number },
): { fieldCurrentA: number; binding: 'armature' | 'pull-out' } | null {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const shaft = at.shaftKw / model.baseKva;
  const stateAt = (fieldCurrentA: number) => {
    try {
      return holdField(model, fieldCurrentA, v).solve(shaft);
    } catch (error) {
      if (error instanceof PullOutError) return null;
      throw error;
    }
  };
  const { armaturePu, fieldCurrentA: highest, pullOutMargin } = model.limits;
  const marginShort = (fieldCurrentA: number) => {
    const s = stateAt(fieldCurrentA);
    return s === null ? -1 : Math.min(1, pullOutOfState(model, s).ratio / pullOutMargin - 1);
  };
  const lowest = 1e-6 * highest;
  if (marginShort(highest) * LIMIT_TOLERANCE < 0) return null;
  const byMargin =
    marginShort(lowest) >= 0 ? lowest : brentRoot(marginShort, lowest, highest, 'least field for pull-out');
  const spare = (fieldCurrentA: number) => armaturePu - (stateAt(fieldCurrentA)?.current ?? Infinity);
  const enough = byMargin * (1 + 1e-12);
  if (spare(enough) >= 0) return { fieldCurrentA: byMargin, binding: 'pull-out' };
  const unity = solveAtPowerFactor(model, shaft, 1, false, v).fieldCurrentA;
  if (unity <= enough || spare(unity) < 0) return null;
  return { fieldCurrentA: brentRoot(spare, enough, unity, 'least field for armature'), binding: 'armature' };
}
