export { addDays, addMonths, dayNumber, isCalendarDate, isoDate, weekdayOf } from './dates';
export { compareLoads, type LoadsBeside } from './compare-loads';
export { energiesDiffer, meteredDays, meteredOver, type Metered, type MeteredPeak } from './metered';
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
