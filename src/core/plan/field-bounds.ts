import { capability, leastField } from '../machine';
import type { Limit } from '../machine';
import { distinctLoads } from './distinct-loads';
import type { PlanMotor } from './types';

/** Field currents a motor may hold at every load it runs at. */
export interface FieldBounds {
  /** [A] */
  lowA: number;
  highA: number;
  /** Limit and load that set each end. */
  lowBinding: { limit: Limit; shaftKw: number };
  highBinding: { limit: Limit; shaftKw: number };
}

/** Loads examined beyond the highest and lowest, where a motor runs at many. */
const EXAMINED = 64;

/**
 * Field currents admissible at every load a motor runs at, after its reserve.
 *
 * The upper end is the least over the loads of the field at capability; the lower end the greatest over the loads of the
 * field that keeps the pull-out margin and the armature limit. Where a motor runs at more than 64 loads, 64 spread evenly
 * over their order are examined, the lowest and highest among them: both ends move monotonically with load beyond rated.
 *
 * @returns Bounds, or null with the load at which nothing is admissible and the limit that forbids it; a motor that never
 *   runs is bounded by its field limit alone.
 * @throws {RangeError} naming the argument out of range
 */
export function fieldBounds(planMotor: PlanMotor): FieldBounds | { none: { limit: Limit; shaftKw: number } } {
  const { motor, voltagePu } = planMotor;
  const { loads } = distinctLoads(planMotor.shaftKw, planMotor.shaftKw.length, 'motor');
  const examined = loads.length === 0 ? [0] : spread(loads);
  let bounds: FieldBounds | null = null;
  for (const shaftKw of examined) {
    const high = capability(motor, { shaftKw, voltagePu });
    if (high.fieldCurrentA === null) return { none: { limit: high.binding, shaftKw } };
    const low = leastField(motor, { shaftKw, voltagePu });
    if (!low) return { none: { limit: 'pull-out', shaftKw } };
    const highBinding = { limit: high.binding, shaftKw };
    const lowBinding = { limit: low.binding, shaftKw };
    bounds ??= { lowA: low.fieldCurrentA, highA: high.fieldCurrentA, lowBinding, highBinding };
    if (low.fieldCurrentA > bounds.lowA) bounds = { ...bounds, lowA: low.fieldCurrentA, lowBinding };
    if (high.fieldCurrentA < bounds.highA) bounds = { ...bounds, highA: high.fieldCurrentA, highBinding };
  }
  if (bounds!.lowA > bounds!.highA)
    return { none: { limit: bounds!.lowBinding.limit, shaftKw: bounds!.lowBinding.shaftKw } };
  return bounds!;
}

function spread(loads: Float64Array): number[] {
  if (loads.length <= EXAMINED) return [...loads];
  return Array.from({ length: EXAMINED }, (_, k) => loads[Math.round((k * (loads.length - 1)) / (EXAMINED - 1))]!);
}
