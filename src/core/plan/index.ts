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
export type { Binding, FieldBounds } from './field-bounds';
export { USUAL_PERTURBATION, perturbPlant } from './perturb';
export type { Perturbation } from './perturb';
export { tryRobustness } from './robustness';
export type { Robustness, TriedSetting } from './robustness';
export { billReach } from './bill-reach';
export type { BillReach } from './bill-reach';
export { searchSettings } from './search-settings';
export type { CostPoint, SearchInput, SearchResult, SearchedAxis } from './search-settings';
export type { SearchMotor, SearchedSetting } from './search-axes';
export type { SearchedBank } from './search-candidates';
export type { SearchProgress } from './search-parts';
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
  USUAL_HARMONICS,
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
export type { Alternative, AlternativeKind, JudgedAlternative, Verdict } from './judge-plans';
export { shaftLoadFromSubmeter } from './submeter';
export type { SubmeterLoad } from './submeter';
export { laidPowerOn, meanPowerOn } from './mean-power';
export type { PowerSeries } from './mean-power';
export { AGREES_SHARE, compareLoadTest } from './load-test';
export type { LoadTestPoint, LoadTestResult, LoadTestRow, LoadTestSuspect, SuspectField } from './load-test';
export { admissibleFieldA, settingFault } from './setting-fault';
export type { LimitedMotor } from './setting-fault';
