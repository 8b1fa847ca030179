export { PriceError, ScheduleError, wordProblem, type ScheduleProblem } from './errors';
export { describeSchedule, type ScheduleDescription } from './describe';
export type {
  ChargeDefinition,
  ChargeEntry,
  ChargeGroup,
  ContractInput,
  Expression,
  NumberPlace,
  QuantityDefinition,
  QuantityEntry,
  RateEntry,
  Schedule,
  ScheduleSource,
  ScheduleText,
  SeasonTable,
  Straddle,
  WindowEntry,
  WindowRule,
} from './model';
export { compilePricing, priceBills } from './price/compile-pricing';
export { wordPeriod } from './price/period-plan';
export { priceQuantities } from './price/price-quantities';
export { readSchedule } from './read/read-schedule';
export type {
  CompiledPricing,
  PricedBill,
  PricedInput,
  PricedLine,
  PricedQuantity,
  PriceOptions,
  PricingGrid,
  PrintedRow,
  TotalsOptions,
} from './types';
