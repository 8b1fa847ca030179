export { addDays, addMonths, dayNumber, isCalendarDate, isoDate, weekdayOf } from './dates';
export { assertLoadSeries, intervalStartMs, quality, stepLengthsMinutes } from './series';
export type { BillingPeriod, LoadSeries } from './series';
export { sumLoads } from './sum-loads';
export { changeBetween, isTimeZone, localDateOf, localDateStartMs, zoneOffsetMs } from './zone';
