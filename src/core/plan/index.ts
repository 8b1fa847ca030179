export { shiftRegisters } from './registers';
export { shaftLoadSeries } from './shaft-load';
export type { ShiftCalendar, ShiftRule } from './shaft-load';
export type { DayKind, Grid } from './local-days';
export { MOST_SPANS, spanSeries } from './spans';
export type { SpanRule } from './spans';
export { boundOf } from './bound';
export type { PlanBound, RefusedBound } from './bound';
export type { BoundGround } from './bound-box';
export { estimateFromBills } from './estimate-from-bills';
export type { BillsEstimate, EstimatedBill, WidthPart } from './estimate-from-bills';
export { layOutBills } from './estimate-load';
export type { Estimate, PrintedBasis, PrintedYear } from './estimate-load';
export type { Doubt } from './estimate-quantity';
export { createSimulator } from './simulator';
export type { FixedSetup, SimulationTrace, Simulator } from './simulator';
export { simulatePlan } from './simulate-plan';
export type { BankPlanResult, PlanResult } from './simulate-plan';
export type { MotorPlanResult, MotorSpanResult } from './motor-result';
export type { BusVoltage } from './bus-voltage';
export { fieldBounds } from './field-bounds';
export type { FieldBounds } from './field-bounds';
export { searchFields } from './search-fields';
export type { CostPoint, SearchMotor, SearchProgress, SearchResult } from './search-fields';
export type {
  BusSupply,
  CapacitorBank,
  InductionMotor,
  PlanMotor,
  PlanSetup,
  Plant,
  Replacement,
  Spans,
  Upstream,
} from './types';
export {
  combineLoads,
  correctiveKvar,
  kvarPerKw,
  resonanceCheck,
  resonanceOrder,
  upstreamLossSavedShare,
  voltageRisePu,
} from './network';
export type { BusLoad } from './network';
export { sizeCapacitors } from './size-capacitors';
export type { CapacitorSize, CapacitorSizing } from './size-capacitors';
export { judgePlans } from './judge-plans';
export type { Alternative, JudgedAlternative, Verdict } from './judge-plans';
export { shaftLoadFromSubmeter } from './submeter';
