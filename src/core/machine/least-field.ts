import { compileMotor } from './motor';
import type { SynchronousMotor } from './motor';
import { checkLoad } from './operating-point';
import { rangeStates } from './kvar-range';

/**
 * Least field current a motor may run at under a shaft load: its pull-out ratio keeps the margin and its lagging current
 * keeps within the armature limit. Where both hold at any field, the one that leaves no emf.
 *
 * @param motor  Motor data with its limits.
 * @param at.shaftKw  Shaft load. [kW], >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @returns Field current and the limit that sets it; null when nothing is admissible at this load.
 * @throws {RangeError} naming the argument out of range
 */
export function leastField(
  motor: SynchronousMotor,
  at: { shaftKw: number; voltagePu?: number },
): { fieldCurrentA: number; binding: 'armature' | 'pull-out' } | null {
  const model = compileMotor(motor);
  const v = checkLoad(at);
  const range = rangeStates(model, at.shaftKw / model.baseKva, v, 0);
  if (!range?.admissible) return null;
  const binding = range.leastBinding === 'armature' ? 'armature' : 'pull-out';
  return { fieldCurrentA: Math.max(0, range.least.fieldCurrentA), binding };
}
