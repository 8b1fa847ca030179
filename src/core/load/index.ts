export { addDays, addMonths, dayNumber, isCalendarDate, isoDate, weekdayOf } from './dates';
export { checkLoad } from './checks';
export type { SaidEnergy } from './checks/bill-energy';
export type { LoadFault, LoadFinding } from './checks/finding';
export { compareLoads, type LoadsBeside } from './compare-loads';
export { energiesDiffer, meteredDays, meteredOver, type Metered, type MeteredPeak } from './metered';
export {
  estimateGap,
  gapMethods,
  linearLongestMinutes,
  weekdayWeeks,
  type GapEstimate,
  type GapMethod,
} from './estimate-gap';
export {
  aggregateLoad,
  emptyLoad,
  endOfLoad,
  layersThatShow,
  overlayLoads,
  type LaidLoad,
  type LoadGrid,
  type LoadLayer,
} from './overlay';
export { sumLoads } from './sum-loads';
export { changeBetween, isTimeZone, localDateOf, localDateStartMs, zoneOffsetMs } from './zone';
export {
  assertLoadSeries,
  intervalStartMs,
  quality,
  stepLengthsMinutes,
  type BillingPeriod,
  type LoadSeries,
} from './series';
export { wholeReadings } from './whole-readings';
