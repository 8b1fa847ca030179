import { brentRoot } from './roots';

/**
 * A power of the machine over its load angle at constant emf and voltage. Currents are affine in cos d and sin d,
 * so terminal power, developed power and shaft power alike are trigonometric polynomials of second degree:
 *
 *     F(d) = c0 + c1 cos d + s1 sin d + c2 cos 2d + s2 sin 2d
 */
export interface AnglePower {
  c0: number;
  c1: number;
  s1: number;
  c2: number;
  s2: number;
}

/** Impedance of the machine in any consistent unit. */
export interface Impedance {
  ra: number;
  xd: number;
  xq: number;
}

export const GRID_STEP_RAD = Math.PI / 36;

export function valueAt(f: AnglePower, angleRad: number): number {
  const c = Math.cos(angleRad);
  const s = Math.sin(angleRad);
  return f.c0 + f.c1 * c + f.s1 * s + f.c2 * (c * c - s * s) + f.s2 * 2 * s * c;
}

export function slopeAt(f: AnglePower, angleRad: number): number {
  const c = Math.cos(angleRad);
  const s = Math.sin(angleRad);
  return -f.c1 * s + f.s1 * c - f.c2 * 4 * s * c + f.s2 * 2 * (c * c - s * s);
}

/**
 * Armature current in the frame of the q axis, motor convention, emf lagging the voltage by the load angle.
 *
 *     V cos d = E + Ra Iq - Xd x        V sin d = Ra x + Xq Iq
 *
 * Derivation: V = E + Ra I + j Xd Id + j Xq Iq with I = (Iq + j x) e^(-jd), split into real and imaginary parts.
 * x > 0 demagnetises: it is the leading part of the current.
 */
export function axisCurrents(v: number, e: number, angleRad: number, z: Impedance): { iq: number; x: number } {
  const c = v * Math.cos(angleRad);
  const s = v * Math.sin(angleRad);
  const d = z.ra * z.ra + z.xd * z.xq;
  return { iq: (z.ra * (c - e) + z.xd * s) / d, x: (z.xq * (e - c) + z.ra * s) / d };
}

/**
 * Terminal power less `heat` times the square of the current, over the load angle.
 *
 * heat = 0 is terminal power; heat = Ra is developed power; heat = Ra + stray is shaft power but for constants.
 */
export function powerOverAngle(v: number, e: number, z: Impedance, heat: number): AnglePower {
  const d = z.ra * z.ra + z.xd * z.xq;
  const iq = { k: (-z.ra * e) / d, c: (z.ra * v) / d, s: (z.xd * v) / d };
  const x = { k: (z.xq * e) / d, c: (-z.xq * v) / d, s: (z.ra * v) / d };
  const mean = (v * (iq.c + x.s)) / 2;
  const squares = iq.c * iq.c + x.c * x.c;
  const sines = iq.s * iq.s + x.s * x.s;
  return {
    c0: mean - heat * (iq.k * iq.k + x.k * x.k + (squares + sines) / 2),
    c1: v * iq.k - 2 * heat * (iq.k * iq.c + x.k * x.c),
    s1: v * x.k - 2 * heat * (iq.k * iq.s + x.k * x.s),
    c2: (v * (iq.c - x.s)) / 2 - (heat * (squares - sines)) / 2,
    s2: (v * (iq.s + x.c)) / 2 - heat * (iq.c * iq.s + x.c * x.s),
  };
}

/** Angle of the greatest power for motoring, between -90 and 180 degrees. */
export function greatestAngle(f: AnglePower): number {
  let best = -18;
  for (let k = -18; k <= 36; k++) {
    if (valueAt(f, k * GRID_STEP_RAD) > valueAt(f, best * GRID_STEP_RAD)) best = k;
  }
  const lo = (best - 1) * GRID_STEP_RAD;
  const hi = (best + 1) * GRID_STEP_RAD;
  if (!(slopeAt(f, lo) > 0 && slopeAt(f, hi) < 0)) return best * GRID_STEP_RAD;
  return brentRoot((angle) => slopeAt(f, angle), lo, hi, 'pull-out angle');
}

/**
 * Stable angle at which a power rising up to `topRad` takes the value sought: the first met going down from the top.
 *
 * @returns Angle, or null when even half a turn below the top gives more.
 */
export function angleFor(value: (angleRad: number) => number, target: number, topRad: number): number | null {
  let hi = topRad;
  for (let k = 1; k <= 36; k++) {
    const lo = topRad - k * GRID_STEP_RAD;
    if (value(lo) <= target) {
      if (value(hi) <= target) return hi;
      return brentRoot((angle) => value(angle) - target, lo, hi, 'load angle');
    }
    hi = lo;
  }
  return null;
}
