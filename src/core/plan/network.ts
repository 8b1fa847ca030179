/** Checks an argument of this file's formulas. */
function requireThat(ok: boolean, name: string, range: string, received: number): void {
  if (!ok) throw new RangeError(`${name} must be ${range}, got ${received}`);
}

/** Reactive power per active power at a power factor: tan(arccos pf). [kvar/kW] */
export function kvarPerKw(powerFactor: number): number {
  requireThat(powerFactor > 0 && powerFactor <= 1, 'powerFactor', 'in (0, 1]', powerFactor);
  return Math.sqrt(1 - powerFactor ** 2) / powerFactor;
}

/**
 * Reactive power that brings a lagging load from one power factor to another.
 *
 *     Q = P (tan(arccos pf1) - tan(arccos pf2))
 *
 * @param input.demandKw  Active power. [kW], >= 0
 * @param input.fromPowerFactor, input.toPowerFactor  Lagging. [unitless], (0, 1]
 * @returns Reactive power to deliver; negative when the target is lower. [kvar]
 * @throws {RangeError} naming the argument out of range
 * @example correctiveKvar({ demandKw: 100, fromPowerFactor: 0.75, toPowerFactor: 0.9 }) // => 39.76
 * @source Common practice; tabulated by makers of capacitors.
 */
export function correctiveKvar(input: { demandKw: number; fromPowerFactor: number; toPowerFactor: number }): number {
  requireThat(input.demandKw >= 0 && Number.isFinite(input.demandKw), 'demandKw', '>= 0', input.demandKw);
  return input.demandKw * (kvarPerKw(input.fromPowerFactor) - kvarPerKw(input.toPowerFactor));
}

/** A load or source on the plant's bus: reactive power absorbed is positive. */
export interface BusLoad {
  kw: number;
  kvar: number;
}

/** Sum of loads on one bus with its power factor. */
export function combineLoads(loads: BusLoad[]): BusLoad & { kva: number; powerFactor: number; leading: boolean } {
  const kw = loads.reduce((sum, load) => sum + load.kw, 0);
  const kvar = loads.reduce((sum, load) => sum + load.kvar, 0);
  const kva = Math.hypot(kw, kvar);
  return { kw, kvar, kva, powerFactor: kva === 0 ? 1 : kw / kva, leading: kvar < 0 };
}

/**
 * Share of the resistive loss upstream that a better power factor saves at constant active power and voltage.
 *
 *     1 - (pf1/pf2)^2
 *
 * @param fromPowerFactor, toPowerFactor  [unitless], (0, 1]
 * @returns [unitless]; negative when the power factor gets worse. It is a share of the loss upstream, not of the plant's energy.
 * @source Common practice. Derivation: loss goes with current squared, current with 1/pf.
 */
export function upstreamLossSavedShare(fromPowerFactor: number, toPowerFactor: number): number {
  kvarPerKw(fromPowerFactor);
  kvarPerKw(toPowerFactor);
  return 1 - (fromPowerFactor / toPowerFactor) ** 2;
}

/**
 * Rise of the bus voltage when reactive power is delivered behind a reactance.
 *
 * @param input.kvar  Delivered. [kvar]
 * @param input.shortCircuitKva  Short-circuit power at the bus; behind a transformer alone, its kVA over its reactance. [kVA], > 0
 * @returns Rise of the voltage. [pu]
 * @source Common practice: kvar / kVA of short circuit; resistance neglected.
 */
export function voltageRisePu(input: { kvar: number; shortCircuitKva: number }): number {
  requireThat(input.shortCircuitKva > 0, 'shortCircuitKva', '> 0', input.shortCircuitKva);
  return input.kvar / input.shortCircuitKva;
}

/**
 * Harmonic order at which capacitors resonate with the supply.
 *
 *     h = sqrt(kVA of short circuit / kvar)
 *
 * @param input.kvar  Capacitors connected. [kvar], > 0
 * @param input.shortCircuitKva  Short-circuit power at their bus. [kVA], > 0
 * @returns Order. [unitless]. Over-excited motors add no such resonance.
 * @source Common practice; IEEE Std 1036.
 */
export function resonanceOrder(input: { kvar: number; shortCircuitKva: number }): number {
  requireThat(input.kvar > 0, 'kvar', '> 0', input.kvar);
  requireThat(input.shortCircuitKva > 0, 'shortCircuitKva', '> 0', input.shortCircuitKva);
  return Math.sqrt(input.shortCircuitKva / input.kvar);
}

/** Characteristic orders of six-pulse rectifiers and drives, with the third of single-phase loads. */
export const USUAL_HARMONICS = [3, 5, 7, 11, 13] as const;

/**
 * Resonance of capacitors with the supply, judged against the usual harmonics.
 *
 * @param input.detuningPercent  Reactor of a detuned bank, as a percentage of capacitive reactance (5.67, 7, 14); absent: none.
 * @returns Order of resonance, and the harmonics within half an order of it. A detuned bank is judged by its own tuning order
 *   10/sqrt(p): harmonics below it that the supply might amplify, and none above.
 * @source Common practice: keep half an order away, detune where drives are present.
 */
export function resonanceCheck(input: { kvar: number; shortCircuitKva: number; detuningPercent?: number }): {
  order: number;
  near: number[];
} {
  const { detuningPercent } = input;
  if (detuningPercent === undefined) {
    const order = resonanceOrder(input);
    return { order, near: USUAL_HARMONICS.filter((h) => Math.abs(h - order) < 0.5) };
  }
  requireThat(detuningPercent > 0 && detuningPercent < 50, 'detuningPercent', 'in (0, 50)', detuningPercent);
  const tuned = 10 / Math.sqrt(detuningPercent);
  const plain = resonanceOrder(input);
  // Supply reactance in series with the reactor lowers the order: h = 1/sqrt(1/plain^2 + 1/tuned^2).
  const order = 1 / Math.sqrt(1 / plain ** 2 + 1 / tuned ** 2);
  return { order, near: USUAL_HARMONICS.filter((h) => Math.abs(h - order) < 0.5) };
}
