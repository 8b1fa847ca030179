import type { SynchronousMotor } from './motor';
import type { ExciterKind, RotorKind } from './typical';

/** A horsepower as motor nameplates count it. [kW/hp], common practice in North America */
export const KW_PER_HP = 0.746;

/** A nameplate as worded on the plate, with whatever else is known of the motor. */
export interface Nameplate {
  output: number;
  outputUnit: 'hp' | 'kW';
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
  exciter?: ExciterKind;
  exciterEfficiency?: number;
  /** Brushless: amperes of the exciter's field, full load and (if known) no load at rated voltage. */
  exciterField?: { ratedA: number; noLoadA?: number };
  rotor?: RotorKind;
  raPu?: number;
  xdPu?: number;
  xqPu?: number;
  xlPu?: number;
  openCircuitCurve?: SynchronousMotor['openCircuitCurve'];
  lossSplit?: SynchronousMotor['lossSplit'];
  limits?: SynchronousMotor['limits'];
}

/** A value that no plate gave. `field` is a path in `SynchronousMotor`. */
export interface AssumedValue {
  field: string;
  value: number;
  low: number;
  high: number;
  why: string;
}

/** What is wrong with a nameplate, or worth a look. `field` is a field of `Nameplate`. */
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

/** Rated output. [kW] */
export function outputKwOf(plate: Pick<Nameplate, 'output' | 'outputUnit'>): number {
  return plate.outputUnit === 'hp' ? plate.output * KW_PER_HP : plate.output;
}
