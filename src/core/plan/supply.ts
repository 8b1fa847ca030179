import type { MeteredPower } from './upstream';
import type { BusSupply } from './types';

/** Reactance over resistance of a supply of which nothing is said. Common practice at medium voltage. */
const USUAL_X_OVER_R = 10;

/** A supply's impedance on its short-circuit power, per kVA. */
export interface SupplyImpedance {
  noLoadPu: number;
  /** Fall of the bus voltage per kW and per kvar taken. [pu/kW], [pu/kvar] */
  puPerKw: number;
  puPerKvar: number;
}

/**
 * Impedance of the supply at the plant's bus.
 *
 *     r = 1/(Ssc sqrt(1 + k^2)),   x = k r,   k = X/R
 *
 * @throws {RangeError} naming the argument out of range
 */
export function supplyImpedance(supply: BusSupply): SupplyImpedance {
  const { shortCircuitKva, xOverR = USUAL_X_OVER_R, noLoadPu = 1 } = supply;
  if (!(shortCircuitKva > 0 && Number.isFinite(shortCircuitKva)))
    throw new RangeError(`supply.shortCircuitKva must be > 0, got ${shortCircuitKva}`);
  if (!(xOverR > 0 && Number.isFinite(xOverR))) throw new RangeError(`supply.xOverR must be > 0, got ${xOverR}`);
  if (!(noLoadPu > 0 && noLoadPu <= 2)) throw new RangeError(`supply.noLoadPu must be in (0, 2], got ${noLoadPu}`);
  const puPerKw = 1 / (shortCircuitKva * Math.sqrt(1 + xOverR ** 2));
  return { noLoadPu, puPerKw, puPerKvar: xOverR * puPerKw };
}

/**
 * Estimated voltage of the plant's bus at a load.
 *
 *     V = V0 - (r P + x Q)/V0
 *
 * The usual approximation of the fall of voltage along an impedance, the part across the current left out. [pu]
 *
 * @source Common practice.
 */
export function busVoltagePu({ noLoadPu, puPerKw, puPerKvar }: SupplyImpedance, { kw, kvar }: MeteredPower): number {
  return noLoadPu - (puPerKw * kw + puPerKvar * kvar) / noLoadPu;
}

/** A motor that holds the bus voltage. Reactive power delivered is positive. */
export interface VoltageHolder {
  setPu: number;
  droopPu: number;
  ratedKva: number;
  /** What it may deliver at its load. [kvar] */
  lowKvar: number;
  highKvar: number;
}

/**
 * Reactive power delivered by motors that hold the voltage of one bus with droop.
 *
 *     Q = S (Vset - V)/droop within its range,   V = V0 + x sum(Q)
 *
 * Of one motor within its range this is Q = (Vset - V0)/(droop/S + x). The sum falls as V rises, so there is one answer: found by
 * Newton's method on straight pieces, kept between bounds.
 *
 * @param voltagePu  Bus voltage V0 with none of them delivering. [pu]
 * @param puPerKvar  Rise of the bus voltage per kvar delivered, x. [pu/kvar], >= 0
 * @param out  Set to what each delivers. [kvar]
 */
export function shareByDroop(
  voltagePu: number,
  puPerKvar: number,
  holders: readonly VoltageHolder[],
  out: Float64Array,
): void {
  const deliver = (v: number): { sum: number; slope: number } => {
    let sum = 0;
    let slope = 0;
    holders.forEach(({ setPu, droopPu, ratedKva, lowKvar, highKvar }, m) => {
      const asked = (ratedKva * (setPu - v)) / droopPu;
      out[m] = Math.min(highKvar, Math.max(lowKvar, asked));
      sum += out[m]!;
      if (out[m] === asked) slope += ratedKva / droopPu;
    });
    return { sum, slope };
  };
  let low = -Infinity;
  let high = Infinity;
  let v = voltagePu;
  for (let round = 0; round < 60; round++) {
    const { sum, slope } = deliver(v);
    const gap = v - voltagePu - puPerKvar * sum;
    if (Math.abs(gap) < 1e-13) return;
    if (gap > 0) high = v;
    else low = v;
    const next = v - gap / (1 + puPerKvar * slope);
    v = next > low && next < high ? next : (low + high) / 2;
  }
}
