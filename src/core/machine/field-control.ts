/**
 * What a regulator, or a hand at a rheostat, holds while the shaft load and the bus voltage change.
 *
 * Held amperes and volts take no notice of limits. A regulator is kept within the motor's limits by its limiters: where what it
 * should hold lies beyond, the motor runs at the limit that binds.
 */
export type FieldControl =
  | FieldCurrentControl
  | FieldVoltageControl
  | PowerFactorControl
  | KvarControl
  | VoltageControl
  | PlantPowerFactorControl;

/** A constant field current, of the machine's own field. */
export interface FieldCurrentControl {
  holds: 'field-current';
  /** [A], >= 0 */
  fieldCurrentA: number;
}

/** A constant voltage at the field: the current falls as the winding warms. */
export interface FieldVoltageControl {
  holds: 'field-voltage';
  /** At the field's terminals. [V], >= 0 */
  fieldVoltageV: number;
  /** Temperature of the field winding; the hot one of `fieldResistanceOhm` when absent. [degC] */
  fieldC?: number;
}

/** A constant power factor at the motor's terminals, exciter power included. */
export interface PowerFactorControl {
  holds: 'power-factor';
  /** [unitless], (0, 1] */
  powerFactor: number;
  leading: boolean;
}

/** A constant reactive power. */
export interface KvarControl {
  holds: 'kvar';
  /** Delivered; negative: absorbed. [kvar] */
  kvarDelivered: number;
}

/** The voltage of the plant's bus, with droop. Answered per interval, since it hangs on the bus. */
export interface VoltageControl {
  holds: 'voltage';
  /** Set value at no reactive power. [pu of rated] */
  setPu: number;
  /** Fall of the set value from none to rated kVA of reactive power delivered. [pu], > 0 */
  droopPu: number;
}

/** The power factor at the service point, shared with the other motors that hold it. Answered per interval. */
export interface PlantPowerFactorControl {
  holds: 'plant-power-factor';
  /** [unitless], (0, 1], lagging */
  powerFactor: number;
}

/** Controls answered by shaft load and voltage alone. */
export type OwnFieldControl = FieldCurrentControl | FieldVoltageControl | PowerFactorControl | KvarControl;
