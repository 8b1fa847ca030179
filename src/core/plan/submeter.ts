import { fixField } from '../machine';
import type { SynchronousMotor } from '../machine';

/**
 * Shaft load of a motor from its submeter, at the field it ran with.
 *
 * The input less the losses at that field, solved for each reading. A reading below half the motor's input at no load is a motor
 * that stands still: 0. So is a missing reading (NaN), which is counted: a motor that is not known to run is not planned with.
 *
 * @param motor  Motor data.
 * @param at.inputKw  Metered active power per interval, mean. [kW], Float64Array
 * @param at.fieldCurrentA  Field current during the metering. [A]
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu]
 * @returns Shaft load per interval, never NaN [kW]; how many readings were missing; how many exceeded what the field can hold
 *   (they are set to the greatest it holds).
 * @throws {RangeError} naming the argument out of range
 */
export function shaftLoadFromSubmeter(
  motor: SynchronousMotor,
  at: { inputKw: Float64Array; fieldCurrentA: number; voltagePu?: number },
): { shaftKw: Float64Array; missing: number; beyondPullOut: number } {
  const fixed = fixField(motor, at);
  const noLoadKw = fixed.taken(0).inputKw;
  const greatestKw = fixed.greatestShaftKw * (1 - 1e-9);
  const mostInputKw = fixed.taken(greatestKw).inputKw;
  const known = new Map<number, number>();
  let missing = 0;
  let beyondPullOut = 0;
  const shaftKw = at.inputKw.map((inputKw) => {
    if (Number.isNaN(inputKw)) {
      missing++;
      return 0;
    }
    if (inputKw < noLoadKw / 2) return 0;
    if (inputKw >= mostInputKw) {
      beyondPullOut++;
      return greatestKw;
    }
    const found = known.get(inputKw) ?? shaftFor(fixed.taken, inputKw, noLoadKw, greatestKw);
    known.set(inputKw, found);
    return found;
  });
  return { shaftKw, missing, beyondPullOut };
}

/** Load whose input is as metered; running at no load keeps a token load, since 0 stands for standstill. */
function shaftFor(
  taken: (shaftKw: number) => { inputKw: number },
  inputKw: number,
  noLoadKw: number,
  greatestKw: number,
): number {
  const token = 1e-6 * greatestKw;
  let lo = token;
  let hi = greatestKw;
  if (inputKw <= noLoadKw + token) return token;
  let shaftKw = Math.min(hi, inputKw - noLoadKw);
  for (let i = 0; i < 100; i++) {
    const gap = taken(shaftKw).inputKw - inputKw;
    if (Math.abs(gap) <= 1e-10 * greatestKw) return shaftKw;
    if (gap > 0) hi = shaftKw;
    else lo = shaftKw;
    const next = shaftKw - gap;
    shaftKw = next > lo && next < hi ? next : (lo + hi) / 2;
  }
  return shaftKw;
}
