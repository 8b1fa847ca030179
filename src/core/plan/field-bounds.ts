import { capability, leastField } from '../machine';
import type { Limit, RangeLimit } from '../machine';
import { distinctLoads } from './distinct-loads';
import type { PlanMotor } from './types';

/** Where a limit binds. */
export interface Binding {
  limit: RangeLimit;
  shaftKw: number;
  voltagePu: number;
}

/** Field currents a motor may hold at every load it runs at and every voltage of its band. */
export interface FieldBounds {
  /** [A] */
  lowA: number;
  highA: number;
  /** Limit, load and voltage that set each end. */
  lowBinding: Binding;
  highBinding: Binding;
}

/** Loads examined beyond the highest and lowest, where a motor runs at many. */
const EXAMINED = 64;

/**
 * Field currents admissible at every load a motor runs at, after its reserve, and at both ends of its voltage band.
 *
 * The upper end is the least over loads and voltages of the field at capability; the lower end the greatest of the field that keeps
 * the pull-out margin and the armature limit, and of the least field allowed. Low voltage takes armature and pull-out first, high
 * voltage asks for more field at the same reactive power. Where a motor runs at more than 64 loads, 64 spread evenly over their
 * order are examined, the lowest and highest among them: both ends move monotonically with load beyond rated.
 *
 * @returns Bounds, or null with the load and voltage at which nothing is admissible and the limit that forbids it; a motor that
 *   never runs is bounded by its field limits alone.
 * @throws {RangeError} naming the argument out of range
 */
export function fieldBounds(planMotor: PlanMotor): FieldBounds | { none: Binding } {
  const { loads } = distinctLoads(planMotor.shaftKw, planMotor.shaftKw.length, 'motor');
  const examined = loads.length === 0 ? [0] : spread(loads);
  let bounds: FieldBounds | null = null;
  for (const shaftKw of examined) {
    for (const voltagePu of voltagesOf(planMotor)) {
      const found = boundsAt(planMotor, shaftKw, voltagePu);
      if ('none' in found) return found;
      bounds = bounds ? narrower(bounds, found) : found;
    }
  }
  const { lowA, highA, lowBinding } = bounds!;
  return lowA > highA ? { none: lowBinding } : bounds!;
}

/** Voltages at which limits must hold: the band's ends and the usual voltage between them. */
function voltagesOf({ voltagePu = 1, voltageBandPu }: PlanMotor): number[] {
  if (!voltageBandPu) return [voltagePu];
  const { low, high } = voltageBandPu;
  if (!(low > 0 && low <= high && high <= 2))
    throw new RangeError(`voltageBandPu must be low first, then high, in (0, 2], got ${low} to ${high}`);
  return [...new Set([low, Math.min(high, Math.max(low, voltagePu)), high])];
}

function boundsAt(planMotor: PlanMotor, shaftKw: number, voltagePu: number): FieldBounds | { none: Binding } {
  const { motor, leastFieldA = 0 } = planMotor;
  if (!(leastFieldA >= 0 && Number.isFinite(leastFieldA)))
    throw new RangeError(`leastFieldA must be >= 0, got ${leastFieldA}`);
  const at = (limit: RangeLimit): Binding => ({ limit, shaftKw, voltagePu });
  const high = capability(motor, { shaftKw, voltagePu });
  if (high.fieldCurrentA === null) return { none: at(high.binding) };
  const low = leastField(motor, { shaftKw, voltagePu });
  if (!low) return { none: at('pull-out') };
  const isLeast = leastFieldA > low.fieldCurrentA;
  return {
    lowA: isLeast ? leastFieldA : low.fieldCurrentA,
    highA: high.fieldCurrentA,
    lowBinding: at(isLeast ? 'least-field' : low.binding),
    highBinding: at(high.binding satisfies Limit),
  };
}

function narrower(a: FieldBounds, b: FieldBounds): FieldBounds {
  const low = b.lowA > a.lowA ? b : a;
  const high = b.highA < a.highA ? b : a;
  return { lowA: low.lowA, lowBinding: low.lowBinding, highA: high.highA, highBinding: high.highBinding };
}

function spread(loads: Float64Array): number[] {
  if (loads.length <= EXAMINED) return [...loads];
  return Array.from({ length: EXAMINED }, (_, k) => loads[Math.round((k * (loads.length - 1)) / (EXAMINED - 1))]!);
}
