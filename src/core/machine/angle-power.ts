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

/** Grid steps of a full turn that begins at -90 degrees, where motoring and generating part. */
export const FIRST_STEP = -18;
export const LAST_STEP = 53;

/** Of two equal humps (no field: half a turn apart) the nearer to no load counts; powers closer than this share are equal. */
export const SAME_POWER = 1e-12;

/** Angle of the greatest power over the full turn from -90 to 270 degrees; the smaller where two are equal. */
export function greatestAngle(f: AnglePower): number {
  const same = SAME_POWER * (Math.abs(f.c1) + Math.abs(f.s1) + Math.abs(f.c2) + Math.abs(f.s2));
  let best = FIRST_STEP;
  let most = valueAt(f, best * GRID_STEP_RAD);
  for (let k = FIRST_STEP + 1; k <= LAST_STEP; k++) {
    const power = valueAt(f, k * GRID_STEP_RAD);
    if (power > most + same) [best, most] = [k, power];
  }
  const lo = (best - 1) * GRID_STEP_RAD;
  const hi = (best + 1) * GRID_STEP_RAD;
  if (!(slopeAt(f, lo) > 0 && slopeAt(f, hi) < 0)) return best * GRID_STEP_RAD;
  return brentRoot((angle) => slopeAt(f, angle), lo, hi, 'pull-out angle');
}

/** The same power seen as a generator sees it: turned about, and mirrored in the angle. */
function reversed(f: AnglePower): AnglePower {
  return { c0: -f.c0, c1: -f.c1, s1: f.s1, c2: -f.c2, s2: f.s2 };
}

/** Angle of the least power: the pull-out of a generator. */
export function leastAngle(f: AnglePower): number {
  return -greatestAngle(reversed(f));
}

/**
 * Smallest angle above the least power at which the power takes the value sought.
 *
 * @param topRad  Angle of the greatest power, for a target too near it for the grid.
 * @returns Angle, or null when even the least power exceeds the target.
 */
export function smallestAngleFor(f: AnglePower, target: number, topRad: number): number | null {
  const bottom = leastAngle(f);
  if (valueAt(f, bottom) > target) return null;
  let lo = bottom;
  for (let k = 1; k <= 72; k++) {
    const hi = bottom + k * GRID_STEP_RAD;
    if (valueAt(f, hi) >= target) return brentRoot((angle) => valueAt(f, angle) - target, lo, hi, 'load angle');
    lo = hi;
  }
  return angleFor((angle) => valueAt(f, angle), target, topRad);
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
