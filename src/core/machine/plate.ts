import type { SynchronousMotor } from './motor';
import type { ExciterKind, InsulationClass, RotorKind, TypicalValue } from './typical';

/** A horsepower as motor nameplates count it. [kW/hp], common practice in North America */
export const KW_PER_HP = 0.746;

/** A metric horsepower, 75 kgf m/s (PS, CV, ch). [kW/hp] 75 x 9.80665 W, rounded as nameplates do */
export const KW_PER_METRIC_HP = 0.7355;

/** Units a nameplate gives its output in. */
export type OutputUnit = 'hp' | 'metric-hp' | 'kW';

/** Reactances and armature resistance in ohms of one phase of the winding, as a test sheet gives them. */
export interface WindingOhms {
  /** How the winding is connected: a delta's ohms count a third in the wye that replaces it. */
  connection: 'wye' | 'delta';
  /** [ohm], > 0 */
  xdOhm?: number;
  xqOhm?: number;
  /** [ohm], >= 0; hot unless `raAtC` says otherwise */
  raOhm?: number;
  /** Temperature at which raOhm was measured. [degC] */
  raAtC?: number;
}

/** Limits set by a person, besides those of the plate. */
export interface PlateLimits {
  fieldCurrentA?: number;
  armatureCurrentA?: number;
  pullOutMargin?: number;
  /** Share of field and armature amperes kept unused. [unitless], [0, 1) */
  reserve?: number;
  /** Brushless: greatest current of the exciter's field, as the panel shows it. [A] */
  exciterFieldA?: number;
  /** What the exciter is rated to give, at the motor's field. [A], [V] */
  exciterOutputA?: number;
  exciterOutputV?: number;
  /** Least field current that regulator or maker allow, as the panel shows it. [A] */
  leastPanelA?: number;
  /** Terminal voltages at which every limit must hold. [pu of rated] */
  voltageBandPu?: { low: number; high: number };
}

/** A nameplate as worded on the plate, with whatever else is known of the motor. */
export interface Nameplate {
  output: number;
  outputUnit: OutputUnit;
  /** Line to line. [V] */
  voltageV: number;
  /** Full-load line current. [A] */
  currentA?: number;
  /** Leading at full load. [unitless], (0, 1] */
  powerFactor?: number;
  speedRpm?: number;
  poles?: number;
  frequencyHz: number;
  /** At full load. [unitless], (0, 1] */
  efficiency?: number;
  /** Of the machine's own field, at full load. [A] */
  fieldCurrentA?: number;
  /** At the field's terminals, full load. [V] */
  fieldVoltageV?: number;
  /** Hot. [ohm] */
  fieldResistanceOhm?: number;
  /** Field resistance as measured at a temperature, cold for instance. [ohm], [degC] */
  coldField?: { resistanceOhm: number; atC: number };
  /** Apparent power where the plate states it. [kVA] */
  apparentKva?: number;
  /** Stated with the output; raises no limit. [unitless], >= 1 */
  serviceFactor?: number;
  /** Rise of the windings at rated load above the ambient. [K] */
  temperatureRiseC?: number;
  insulationClass?: InsulationClass;
  /** Ambient that the rise counts from, 40 where the plate is silent. [degC] */
  ambientC?: number;
  exciter?: ExciterKind;
  exciterEfficiency?: number;
  /** Brushless: amperes of the exciter's field, full load and (if known) no load at rated voltage. */
  exciterField?: { ratedA: number; noLoadA?: number };
  rotor?: RotorKind;
  raPu?: number;
  xdPu?: number;
  xqPu?: number;
  xlPu?: number;
  /** In place of the per-unit values. */
  ohms?: WindingOhms;
  openCircuitCurve?: SynchronousMotor['openCircuitCurve'];
  lossSplit?: SynchronousMotor['lossSplit'];
  limits?: PlateLimits;
}

/** A value that no plate gave. `field` is a path in `SynchronousMotor`. */
export interface AssumedValue {
  field: string;
  value: number;
  low: number;
  high: number;
  why: string;
}

/** Notes a value as assumed and returns it. */
export type Assume = (field: string, typical: TypicalValue, why: string) => number;

/** What is wrong with a nameplate, or worth a look. `field` is a path in `Nameplate`. */
export interface PlateRemark {
  field: string;
  message: string;
  remedy: string;
}

/** Poles from the plate, or from speed and frequency: the nearest even number. */
export function polesOf(plate: Pick<Nameplate, 'poles' | 'speedRpm' | 'frequencyHz'>): number {
  if (plate.poles !== undefined) return plate.poles;
  return Math.max(2, 2 * Math.round((60 * plate.frequencyHz) / (plate.speedRpm ?? 3600)));
}

const kwPerUnit: Record<OutputUnit, number> = { hp: KW_PER_HP, 'metric-hp': KW_PER_METRIC_HP, kW: 1 };

/** Rated output. [kW] */
export function outputKwOf(plate: Pick<Nameplate, 'output' | 'outputUnit'>): number {
  return plate.output * kwPerUnit[plate.outputUnit];
}
