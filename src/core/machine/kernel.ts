import { axisCurrents, greatestAngle, leastAngle, powerOverAngle, smallestAngleFor, valueAt } from './angle-power';
import type { Impedance } from './angle-power';
import { PullOutError, requireRange } from './errors';

/** Impedance of a synchronous machine per phase (wye): armature resistance Ra, reactances Xd and Xq. [ohm], > 0, Ra >= 0 */
export interface MachineImpedance {
  raOhm: number;
  xdOhm: number;
  xqOhm: number;
}

/** Rounding allowed to a load that stands exactly at pull-out, as a share of the powers in play. */
const AT_PULL_OUT = 1e-12;

/**
 * Emf, load angle and current of a synchronous machine that takes a given power.
 *
 * Balanced steady state, two-reaction theory, per phase, motor (load) convention: V = E + Ra I + j Xd Id + j Xq Iq.
 * A round rotor has Xd = Xq. Leading current (Q < 0) needs E above V.
 *
 *     E' = V - (Ra + j Xq) I,   d = -arg E',   E = |E'| + (Xd - Xq) Im(I e^(jd))        [FIT] sec. 5.6
 *
 * @param at.phaseVoltageV  Terminal voltage V to neutral. [V], scalar, > 0
 * @param at.activePowerW  Power P taken per phase, load view. [W], scalar
 * @param at.reactivePowerVar  Reactive power Q absorbed per phase; negative when delivered. [var], scalar
 * @param z  Impedance per phase. [ohm]
 * @returns emfV: E, negative where only a reversed field would do; loadAngleRad: angle by which E lags V, (-pi, pi];
 *   currentA: armature current. [V], [rad], [A]
 * @throws {RangeError} naming the argument out of range
 * @source [FIT] sec. 5.6, motor convention. Differs from print: sign of the current reversed for a motor.
 */
export function excitation(
  at: { phaseVoltageV: number; activePowerW: number; reactivePowerVar: number },
  z: MachineImpedance,
): { emfV: number; loadAngleRad: number; currentA: number } {
  requireRange(at.phaseVoltageV > 0 && Number.isFinite(at.phaseVoltageV), 'phaseVoltageV', '> 0', at.phaseVoltageV);
  requireRange(Number.isFinite(at.activePowerW), 'activePowerW', 'finite', at.activePowerW);
  requireRange(Number.isFinite(at.reactivePowerVar), 'reactivePowerVar', 'finite', at.reactivePowerVar);
  const found = emfFor(at.phaseVoltageV, at.activePowerW, at.reactivePowerVar, impedance(z));
  return { emfV: found.e, loadAngleRad: found.angle, currentA: found.current };
}

/**
 * Reactive power of a synchronous machine at a given emf and load: the inverse of `excitation` on its stable side.
 *
 *     P = c0 + V E (Xq sin d - Ra cos d)/D + V^2 (Xd - Xq) sin 2d/(2D),   D = Ra^2 + Xd Xq
 *
 * Derivation: P = Re(V I*) with the axis currents of V = E + Ra I + j Xd Id + j Xq Iq; c0 = V^2 Ra/D.
 *
 * @param at.phaseVoltageV  Terminal voltage to neutral. [V], scalar, > 0
 * @param at.activePowerW  Power taken per phase, load view. [W], scalar
 * @param at.emfV  Emf E behind the reactances. [V], scalar, >= 0
 * @param z  Impedance per phase. [ohm]
 * @returns reactivePowerVar absorbed (negative when delivered), the smaller load angle, the current. [var], [rad], [A]
 * @throws {PullOutError} when the load exceeds what this emf can hold
 * @throws {RangeError} naming the argument out of range; activePowerW below the least over the angle is
 * @source [FIT] sec. 5.6 with Ra kept; Ra = 0 gives the printed power-angle equation.
 */
export function reactivePower(
  at: { phaseVoltageV: number; activePowerW: number; emfV: number },
  z: MachineImpedance,
): { reactivePowerVar: number; loadAngleRad: number; currentA: number } {
  requireRange(Number.isFinite(at.activePowerW), 'activePowerW', 'finite', at.activePowerW);
  const { curve, top, greatest, zed } = pullOutOf(at, z);
  const scale = Math.abs(greatest) + Math.abs(at.activePowerW);
  if (at.activePowerW > greatest + AT_PULL_OUT * scale) {
    throw new PullOutError(
      `The load of ${at.activePowerW} W per phase exceeds the ${greatest} W this field can hold: raise the emf or lower the load.`,
      greatest,
    );
  }
  const angle = smallestAngleFor(curve, at.activePowerW, top);
  if (angle === null) {
    const least = valueAt(curve, leastAngle(curve));
    throw new RangeError(`activePowerW must be >= ${least}, the least over the load angle, got ${at.activePowerW}`);
  }
  const { iq, x } = axisCurrents(at.phaseVoltageV, at.emfV, angle, zed);
  return {
    reactivePowerVar: at.phaseVoltageV * (Math.sin(angle) * iq - Math.cos(angle) * x),
    loadAngleRad: angle,
    currentA: Math.hypot(iq, x),
  };
}

/**
 * Greatest terminal power per phase over the load angle at constant emf and voltage, and the angle it occurs at.
 *
 * @param at.phaseVoltageV  Terminal voltage to neutral. [V], scalar, > 0
 * @param at.emfV  Emf E. [V], scalar, >= 0
 * @param z  Impedance per phase. [ohm]
 * @returns activePowerW and loadAngleRad at pull-out. [W], [rad]
 * @throws {RangeError} naming the argument out of range
 * @source [FIT] sec. 5.6: dP/dd = 0, armature resistance kept.
 */
export function pullOut(
  at: { phaseVoltageV: number; emfV: number },
  z: MachineImpedance,
): { activePowerW: number; loadAngleRad: number } {
  const { top, greatest } = pullOutOf(at, z);
  return { activePowerW: greatest, loadAngleRad: top };
}

/** The same solution as `excitation`, in any consistent unit and unchecked. */
export function emfFor(v: number, p: number, q: number, z: Impedance): { e: number; angle: number; current: number } {
  const re = p / v;
  const im = -q / v;
  const behindRe = v - z.ra * re + z.xq * im;
  const behindIm = -z.ra * im - z.xq * re;
  const behind = Math.hypot(behindRe, behindIm);
  const angle = behind === 0 ? 0 : -Math.atan2(behindIm, behindRe);
  const leading = im * Math.cos(angle) + re * Math.sin(angle);
  return { e: behind + (z.xd - z.xq) * leading, angle: angle === 0 ? 0 : angle, current: Math.hypot(re, im) };
}

function pullOutOf(at: { phaseVoltageV: number; emfV: number }, z: MachineImpedance) {
  requireRange(at.phaseVoltageV > 0 && Number.isFinite(at.phaseVoltageV), 'phaseVoltageV', '> 0', at.phaseVoltageV);
  requireRange(at.emfV >= 0 && Number.isFinite(at.emfV), 'emfV', '>= 0', at.emfV);
  const zed = impedance(z);
  const curve = powerOverAngle(at.phaseVoltageV, at.emfV, zed, 0);
  const top = greatestAngle(curve);
  return { curve, top, greatest: valueAt(curve, top), zed };
}

function impedance(z: MachineImpedance): Impedance {
  requireRange(z.raOhm >= 0 && Number.isFinite(z.raOhm), 'raOhm', '>= 0', z.raOhm);
  requireRange(z.xdOhm > 0 && Number.isFinite(z.xdOhm), 'xdOhm', '> 0', z.xdOhm);
  requireRange(z.xqOhm > 0 && Number.isFinite(z.xqOhm), 'xqOhm', '> 0', z.xqOhm);
  return { ra: z.raOhm, xd: z.xdOhm, xq: z.xqOhm };
}
