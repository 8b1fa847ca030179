/** How a value between two steps is rounded; `nearest` is half away from zero. */
export type RoundingMode = 'nearest' | 'half down' | 'down' | 'up';

/** A rounding rule: the step, a positive decimal, and the mode. */
export interface Rounding {
  step: number;
  mode: RoundingMode;
}

/**
 * Digits after the decimal point in the shortest decimal form of a number. [unitless], integer >= 0
 *
 * @example decimalsOf(0.05) // => 2
 */
export function decimalsOf(value: number): number {
  const [mantissa = '', exponent = '0'] = String(value).split('e');
  const fraction = mantissa.split('.')[1] ?? '';
  return Math.max(0, fraction.length - Number(exponent));
}

/**
 * Rounds to a multiple of a step; the only rounding of money and billed quantities in the core.
 *
 * A value within 1e-12 |value / step| of a tie, in steps, is a tie (at least within 1e-9; from 1e7 steps on no further off than 1e-5 and
 * from 1e10 on than what a few operations on doubles lose, or large amounts would be rounded from well below the half); in `down` and
 * `up` a value that near to a multiple is that multiple. The result is the nearest double to the decimal.
 *
 * @param value  What is rounded. [any unit], scalar
 * @param rounding.step  [unit of the value], > 0
 * @param rounding.mode  `nearest` (half away from zero), `half down` (half towards zero), `down` (towards zero), `up` (away from zero)
 * @throws {RangeError} if the value is not finite or the step not positive
 * @source Common practice; tolerances are decisions of this project. `@example roundToStep(2.675, { step: 0.01, mode: 'nearest' }) // => 2.68`
 */
export function roundToStep(value: number, { step, mode }: Rounding): number {
  if (!Number.isFinite(value)) throw new RangeError(`value must be finite, got ${value}`);
  if (!(step > 0) || !Number.isFinite(step)) throw new RangeError(`step must be a positive number, got ${step}`);
  const steps = Math.abs(value) / step;
  const tolerance = Math.min(0.25, Math.max(1e-9, Math.min(1e-12 * steps, 1e-5), 1e-15 * steps));
  const whole = wholeSteps(steps, tolerance, mode);
  if (whole === 0) return 0;
  const scale = scaleOf(step);
  const size = (whole * Math.round(step * scale)) / scale;
  return value < 0 ? -size : size;
}

const scales = new Map<number, number>();

/** Power of ten that makes a step whole. */
function scaleOf(step: number): number {
  let scale = scales.get(step);
  if (scale === undefined) {
    scale = 10 ** decimalsOf(step);
    if (scales.size < 1000) scales.set(step, scale);
  }
  return scale;
}

function wholeSteps(steps: number, tolerance: number, mode: RoundingMode): number {
  switch (mode) {
    case 'nearest':
      return Math.floor(steps + 0.5 + tolerance);
    case 'half down':
      return Math.max(0, Math.ceil(steps - 0.5 - tolerance));
    case 'down':
      return Math.floor(steps + tolerance);
    case 'up':
      return Math.max(0, Math.ceil(steps - tolerance));
  }
}
