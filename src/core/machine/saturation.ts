import { requireRange } from './errors';

/** An open-circuit curve ready for use. Voltages per unit, field current in amperes. */
export interface SaturationCurve {
  voltagesPu: number[];
  currentsA: number[];
  /** Slope of the air-gap line: the steepest chord from the origin. [pu/A] */
  airGapPuPerA: number;
  xl: number;
}

/**
 * Checks an open-circuit curve and finds its air-gap line.
 *
 * @param points  Open-circuit voltage [pu] against field current [A], both ascending; the origin is added if absent.
 * @param xlPu  Leakage reactance behind which saturation is taken. [pu], >= 0
 * @throws {RangeError} naming the point out of order, or xlPu when missing
 * @source [I115] method of adding the saturation increment read at the voltage behind leakage reactance.
 */
export function compileCurve(
  points: { fieldCurrentA: number; voltagePu: number }[],
  xlPu: number | undefined,
): SaturationCurve {
  if (xlPu === undefined) {
    throw new RangeError(
      'xlPu must be given with an openCircuitCurve: saturation is read behind the leakage reactance.',
    );
  }
  const all = points[0] && points[0].fieldCurrentA === 0 && points[0].voltagePu === 0 ? points.slice(1) : points;
  requireRange(all.length >= 1, 'openCircuitCurve', 'at least one point beyond the origin', all.length);
  const voltagesPu = [0];
  const currentsA = [0];
  let airGapPuPerA = 0;
  all.forEach(({ fieldCurrentA, voltagePu }, i) => {
    const name = `openCircuitCurve[${i + points.length - all.length}]`;
    requireRange(
      fieldCurrentA > currentsA[i]! && Number.isFinite(fieldCurrentA),
      `${name}.fieldCurrentA`,
      `> ${currentsA[i]}`,
      fieldCurrentA,
    );
    requireRange(
      voltagePu > voltagesPu[i]! && Number.isFinite(voltagePu),
      `${name}.voltagePu`,
      `> ${voltagesPu[i]}`,
      voltagePu,
    );
    voltagesPu.push(voltagePu);
    currentsA.push(fieldCurrentA);
    airGapPuPerA = Math.max(airGapPuPerA, voltagePu / fieldCurrentA);
  });
  return { voltagesPu, currentsA, airGapPuPerA, xl: xlPu };
}

/** Field current of the curve at a voltage: straight lines between points, the last segment prolonged. [A] */
export function curveCurrentA(curve: SaturationCurve, voltagePu: number): number {
  const { voltagesPu: v, currentsA: i } = curve;
  let k = 1;
  while (k < v.length - 1 && voltagePu > v[k]!) k++;
  const share = (voltagePu - v[k - 1]!) / (v[k]! - v[k - 1]!);
  return i[k - 1]! + share * (i[k]! - i[k - 1]!);
}

/**
 * Field amperes beyond the air-gap line that saturation costs at a voltage behind leakage reactance. [A]
 *
 * Not negative between the points; beyond the last one only where the segment prolonged is steeper than the air-gap line.
 */
export function saturationIncrementA(curve: SaturationCurve, voltagePu: number): number {
  return curveCurrentA(curve, voltagePu) - voltagePu / curve.airGapPuPerA;
}
