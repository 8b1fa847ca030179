/** A value of common practice with the range it is usually found in. */
export interface TypicalValue {
  value: number;
  low: number;
  high: number;
}

/** How the field is fed. */
export type ExciterKind = 'static' | 'shaft-dc' | 'brushless';

/** Class of the winding's insulation by its letter. */
export type InsulationClass = 'A' | 'B' | 'F' | 'H';

/** Kind of rotor. */
export type RotorKind = 'salient' | 'round';

/**
 * Typical values of synchronous motors by size, speed and rotor, all of common practice and from memory of handbook
 * tables; they stand in for data the nameplate does not carry and are to be confirmed with the maker.
 */

/** Efficiency at rated output; a unity power factor motor is about half a point better than one of 0.8. [unitless] */
export function typicalEfficiency(outputKw: number, powerFactor: number): TypicalValue {
  const better = powerFactor > 0.95 ? 0.005 : 0;
  if (outputKw < 200) return { value: 0.92 + better, low: 0.89, high: 0.945 };
  if (outputKw < 1000) return { value: 0.945 + better, low: 0.925, high: 0.96 };
  return { value: 0.96 + better, low: 0.945, high: 0.978 };
}

/** Whether an efficiency could be that of a motor of this size: a little beyond the typical range on either side. */
export function isPlausibleEfficiency(efficiency: number, outputKw: number): boolean {
  const { low, high } = typicalEfficiency(outputKw, 1);
  return efficiency > low - 0.06 && efficiency < Math.min(0.995, high + 0.012);
}

/** Armature resistance, hot. [pu] */
export function typicalRaPu(outputKw: number): TypicalValue {
  if (outputKw < 100) return { value: 0.035, low: 0.03, high: 0.05 };
  if (outputKw < 500) return { value: 0.015, low: 0.01, high: 0.03 };
  if (outputKw < 1000) return { value: 0.01, low: 0.006, high: 0.02 };
  return { value: 0.007, low: 0.003, high: 0.01 };
}

/** Direct-axis synchronous reactance. [pu] */
export function typicalXdPu(speedRpm: number, rotor: RotorKind): TypicalValue {
  if (rotor === 'round') return { value: 1.4, low: 1, high: 2 };
  return speedRpm < 500 ? { value: 1.1, low: 0.8, high: 1.5 } : { value: 1.1, low: 0.65, high: 1.5 };
}

/** Quadrature-axis reactance as a share of the direct-axis reactance. [unitless] */
export function typicalXqShare(speedRpm: number, rotor: RotorKind): TypicalValue {
  if (rotor === 'round') return { value: 1, low: 0.95, high: 1 };
  return speedRpm < 500 ? { value: 0.68, low: 0.6, high: 0.75 } : { value: 0.65, low: 0.55, high: 0.75 };
}

/** Leakage reactance. [pu] */
export const typicalXlPu: TypicalValue = { value: 0.15, low: 0.1, high: 0.2 };

/** Field power at rated field as a share of rated kVA. [unitless] */
export function typicalFieldShare(kva: number): TypicalValue {
  if (kva < 200) return { value: 0.03, low: 0.02, high: 0.05 };
  if (kva < 1000) return { value: 0.02, low: 0.015, high: 0.03 };
  if (kva < 5000) return { value: 0.01, low: 0.008, high: 0.015 };
  return { value: 0.0075, low: 0.005, high: 0.01 };
}

/** Voltage of the field at rated field current. [V] */
export function typicalFieldVoltageV(outputKw: number): TypicalValue {
  return outputKw < 1000 ? { value: 125, low: 40, high: 250 } : { value: 125, low: 62.5, high: 250 };
}

/** Efficiency of the exciter with its rectifier. [unitless] */
export function typicalExciterEfficiency(kind: ExciterKind | undefined): TypicalValue {
  if (kind === 'static') return { value: 0.95, low: 0.92, high: 0.97 };
  if (kind === 'shaft-dc') return { value: 0.8, low: 0.75, high: 0.85 };
  if (kind === 'brushless') return { value: 0.85, low: 0.8, high: 0.9 };
  return { value: 0.85, low: 0.75, high: 0.97 };
}

/** Losses besides those of windings, as shares of rated kVA. [unitless] */
export const typicalLossShares: Record<'coreKw' | 'frictionWindageKw' | 'strayKw', { low: number; high: number }> = {
  coreKw: { low: 0.006, high: 0.015 },
  frictionWindageKw: { low: 0.003, high: 0.02 },
  strayKw: { low: 0.003, high: 0.01 },
};

/** Ambient that temperature rises count from. [degC], common practice of nameplates */
export const USUAL_AMBIENT_C = 40;

/**
 * Temperature of a winding at rated load. [degC]
 *
 * By the class of insulation: the reference temperatures to which efficiency tests bring windings (75, 95, 115, 130), from
 * memory of IEC 60034-2-1; the range runs from a rise 20 K lower to the class's own limit. Without a class: between them.
 */
export function typicalHotC(insulation: InsulationClass | undefined): TypicalValue {
  if (insulation === 'A') return { value: 75, low: 60, high: 105 };
  if (insulation === 'B') return { value: 95, low: 75, high: 130 };
  if (insulation === 'F') return { value: 115, low: 95, high: 155 };
  if (insulation === 'H') return { value: 130, low: 110, high: 180 };
  return { value: 95, low: 75, high: 130 };
}
