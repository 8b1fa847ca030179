export { NotConvergedError, PullOutError } from './errors';
export { excitation, pullOut, reactivePower } from './kernel';
export type { MachineImpedance } from './kernel';
export { ASSUMED_SPLIT, DEFAULT_PULL_OUT_MARGIN, lossSplitKw, ratedCurrentA, ratedKva, remainingLossKw } from './motor';
export type { SynchronousMotor } from './motor';
export { operatingPoint } from './operating-point';
export type { Excitation, Limit, OperatingPoint } from './operating-point';
export { capability, capabilityOverBand } from './capability';
export type { Capability } from './capability';
export { fieldCurrentAtPanelA, panelCurrentA } from './panel';
export { capabilityCurve, leastLossField, unityField, vCurve } from './v-curve';
export type { LeastLoss, VCurvePoint } from './v-curve';
export { copperResistanceOhm, copperTemperatureC } from './copper';
export { KW_PER_HP, KW_PER_METRIC_HP } from './plate';
export type { AssumedValue, Nameplate, OutputUnit, PlateLimits, PlateRemark, WindingOhms } from './plate';
export type { LimitsBeside } from './plate-limits';
export { completeNameplate } from './nameplate';
export type { CompletedMotor } from './nameplate';
export type { ExciterKind, InsulationClass, RotorKind, TypicalValue } from './typical';
export { assumedSensitivity, withAssumed } from './sensitivity';
export type { AssumedSwing } from './sensitivity';
export { fixField } from './fixed-field';
export type { FixedField, TakenPower } from './fixed-field';
export { leastField } from './least-field';
export { reactiveRange } from './kvar-range';
export type { RangeLimit, ReactiveRange } from './kvar-range';
export { lossCurve } from './loss-curve';
export type { LossPoint } from './loss-curve';
export { pqLimits } from './pq-limits';
export type { PqLimits, PqPoint } from './pq-limits';
export type {
  FieldControl,
  FieldCurrentControl,
  FieldVoltageControl,
  KvarControl,
  OwnFieldControl,
  PlantPowerFactorControl,
  PowerFactorControl,
  VoltageControl,
} from './field-control';
export { controlField, heldFieldA } from './controlled-field';
export type { ControlledField } from './controlled-field';
export { LIMIT_CODE, reactiveSupply } from './kvar-supply';
export type { ReactiveSupply } from './kvar-supply';
export { newTaken } from './taken-many';
export type { TakenMany } from './taken-many';
export { DEFAULT_FIELD_HOT_C, fieldResistanceAtOhm } from './field-temperature';
export { cubicTable } from './cubic-table';
export { goldenMinimum } from './roots';
