import {
  KW_PER_HP,
  excitation,
  pullOut,
  reactivePower,
  type MachineImpedance,
  type SynchronousMotor,
} from '@/core/machine';
import { kvarPerKw, type BusLoad } from '@/core/plan';
import { buildLosslessMotor } from '../core/machine/build-motor';

/** Figures by their names in the list of published cases; null where nothing is admissible; the sense of a power factor is a word. */
export type Figures = Record<string, number | string | null>;

/**
 * A worked example of the list of published cases.
 *
 * The list carries its digits in the source's sense: the emf's angle is negative where it lags, reactive power of a motor is positive
 * where it delivers, whatever the sense of the core.
 */
export interface MachineCase {
  id: string;
  /**
   * Author or publisher, title, example. "Companion notebook": of FOSSEE, Python Textbook Companions; "from memory": the figures were not
   * read in a source.
   */
  source: string;
  /** What the core gives. */
  find: () => Figures;
  /** Digits as printed. */
  printed?: Record<string, number>;
  /** Relative. Printed figures are held to half a unit of their last digit where that is less. */
  tolerance: number;
  /** What holds instead of half a unit, for one figure or for all: the source rounds on the way, or prints a last nought unseen here. */
  within?: number | Record<string, number>;
  /** Printed figures that are wrong, and why: the recomputed ones hold. */
  wrong?: Record<string, string>;
  /** The same example worked independently of this code and of the source, to five digits. */
  recomputed: Figures;
  /** Figures that are no result of the core, and what they are. */
  outside?: Record<string, string>;
}

const ROOT3 = Math.sqrt(3);

export const degrees = (angleRad: number) => (angleRad * 180) / Math.PI;

/** Volts to neutral. */
export const toNeutral = (lineV: number) => lineV / ROOT3;

export const round = (xsOhm: number, raOhm = 0): MachineImpedance => ({ raOhm, xdOhm: xsOhm, xqOhm: xsOhm });

/** Line amperes of an apparent power. */
export const lineAmperes = (kva: number, lineV: number) => (kva * 1000) / (ROOT3 * lineV);

/** Torque of a power at a speed. [N m] */
export const torqueNm = (kw: number, rpm: number) => (kw * 1000) / ((rpm * 2 * Math.PI) / 60);

/** Torque of a power at a speed; a horsepower is 33 000 ft lb a minute. [lb ft] */
export const torqueLbFt = (kw: number, rpm: number) => ((kw / KW_PER_HP) * 33000) / (2 * Math.PI * rpm);

export const lagging = (kw: number, powerFactor: number): BusLoad => ({ kw, kvar: kw * kvarPerKw(powerFactor) });

export const leading = (kw: number, powerFactor: number): BusLoad => ({ kw, kvar: -kw * kvarPerKw(powerFactor) });

/** A motor of a phase voltage and impedance at a three-phase load: its excitation. */
export function atLoad(phaseVoltageV: number, { kw, kvar }: BusLoad, z: MachineImpedance) {
  const powers = { activePowerW: (kw * 1000) / 3, reactivePowerVar: (kvar * 1000) / 3 };
  const { emfV, loadAngleRad, currentA } = excitation({ phaseVoltageV, ...powers }, z);
  return { emfV, deltaDeg: -degrees(loadAngleRad), currentA, currentDeg: degrees(Math.atan2(-kvar, kw)) };
}

/** A motor held at an emf under a three-phase power: what it delivers and takes. */
export function atEmf(phaseVoltageV: number, kw: number, emfV: number, z: MachineImpedance) {
  const activePowerW = (kw * 1000) / 3;
  const { reactivePowerVar, loadAngleRad, currentA } = reactivePower({ phaseVoltageV, activePowerW, emfV }, z);
  return {
    kvarDelivered: (-3 * reactivePowerVar) / 1000,
    deltaDeg: -degrees(loadAngleRad),
    currentA,
    currentDeg: degrees(Math.atan2(-reactivePowerVar, activePowerW)),
    powerFactor: activePowerW / (phaseVoltageV * currentA),
    sense: reactivePowerVar < 0 ? 'leading' : 'lagging',
  };
}

/** Greatest three-phase power of an emf. */
export function greatest(phaseVoltageV: number, emfV: number, z: MachineImpedance) {
  const { activePowerW, loadAngleRad } = pullOut({ phaseVoltageV, emfV }, z);
  return { kw: (3 * activePowerW) / 1000, deltaDeg: -degrees(loadAngleRad) };
}

/** A motor on a base of its own choice from ohms; no loss but those given. */
export function motorOfOhms(
  base: { kva: number; lineV: number },
  z: MachineImpedance,
  overrides: Partial<SynchronousMotor> = {},
): SynchronousMotor {
  const perOhm = (base.kva * 1000) / base.lineV ** 2;
  return buildLosslessMotor({
    ratedPowerFactor: 0.8,
    ratedOutputKw: 0.8 * base.kva,
    ratedVoltageV: base.lineV,
    raPu: z.raOhm * perOhm,
    xdPu: z.xdOhm * perOhm,
    xqPu: z.xqOhm * perOhm,
    ...overrides,
  });
}
