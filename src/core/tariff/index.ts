/**
 * The schedule language: reading a tariff, pricing bills on it, explaining them.
 *
 * Where the language leaves a choice, this is what is done:
 * - A file that does not say `straddle` goes by days, one without `demandWindow` takes the series' own interval, one without `inForce` holds
 *   for every day; each is noted in `Schedule.notes`.
 * - `straddle` is one word, or one each for `text` (versions), `season` (of rates; windows keep their days) and `month` (of riders):
 *   `straddle: { text: days, season: end }`. `start` and `end` as one word leave seasons shared by days.
 * - In a version a map by season or window is changed key by key where all its keys are known, else replaced; months are always added. Saying
 *   another kind (`formula` where there was `highest`) drops what belonged to the old one. `field: removed` takes a field away.
 * - Only quantities and charges added by a version must say `before`. Other additions stand above the next entry of the version that is
 *   there already, so that it may use them, else last.
 * - A rate is not worked out where the quantity it prices is 0.
 * - A look back names lines of several windows by member: `energyPeak + energyOffPeak`.
 * - A line shared by intervals takes, in each piece, the share that the measures under that piece's text have there.
 * - A top-up or cap that stands in some pieces only compares the parts the lines have in these; its own parts go by days.
 * - A condition that fails makes the rest of its line unneeded.
 * - "This year" of a look back is the calendar year of a period's first day. A look back counts bills; gaps between them are noted.
 * - A told month of history is completed with the rates and contract inputs of the bill that looks back.
 * - At unity from printed figures, a measure whose formula is a multiple of the cell's active energy or power becomes that multiple of the
 *   printed measure of the same kind; what comes out the same for any active amount is taken as certain.
 * - A printed look back keeps its value at unity unless every period it asks for is known.
 * - A negative quantity is priced at the first tier's rate.
 * - Highest values within 1e-12 of each other are a tie: the earlier instant stands.
 * - `examples` are bills the schedule must reproduce, figures of quantities, lines, `total`, `reactiveCost`. Reading prices none of them:
 *   `checkExamples` does. A figure fits within `within`; left out, within half the currency's minor unit, or half a unit of the last digit
 *   written where that is less, and 1e-9 for crumbs of binary arithmetic.
 * - Units are followed through formulas: kWh, kvarh, kVAh are energies, kW, kvar, kVA powers, a power times hours an energy. Adding or
 *   comparing unlike ones is refused, in amounts and rates noted (a bare name there may stand for itself times 1). A number as written up
 *   to 2 is a share and keeps the kind; above 2 it may be hours of use or a price, and what it makes is not judged.
 * - `per` said by a version of a percentage belongs to the percentage; only `percentOf: removed` makes another charge of it.
 * - Misspelt contract inputs and given quantities are refused; names of history nobody knows are noted.
 */
export { boundQuantities, type RangeRow } from './bound/bound-quantities';
export { boundTotals, type BoundedBill, type BoundedTotals } from './bound/bound-totals';
export { boxOfLoad, type LoadBox, type Registers } from './bound/load-box';
export type { Range } from './bound/range';
export { breakEvens, type BreakEven, type BreakEvens, type CheaperStretch } from './compare/break-evens';
export { measuredQuantities, type MeasuredQuantity } from './compare/measured-intervals';
export { printedParts, type PrintedFactor, type PrintedParts } from './compare/printed-parts';
export { carryQuantities, type CarriedQuantities } from './compare/carry-quantities';
export { averagePowerFactor, energiesOf, scaledLoad, shareToReach, withoutLagging } from './compare/vary-load';
export { PriceError, ScheduleError, wordProblem, type ScheduleProblem } from './errors';
export { checkExamples, type ExampleResult } from './check-examples';
export { describeSchedule, type ScheduleDescription } from './describe';
export { looksBack } from './looks-back';
export { scheduleJsonSchema } from './schema';
export type {
  ChargeDefinition,
  ChargeEntry,
  ChargeGroup,
  ContractInput,
  ExampleReadings,
  Expression,
  NumberPlace,
  QuantityDefinition,
  QuantityEntry,
  RateEntry,
  Schedule,
  ScheduleExample,
  ScheduleSource,
  ScheduleText,
  SeasonTable,
  Straddle,
  StraddleRule,
  WindowEntry,
  WindowRule,
} from './model';
export { compilePricing, priceBills } from './price/compile-pricing';
export { wordPeriod } from './price/period-plan';
export { priceQuantities } from './price/price-quantities';
export { stepMinutesFor } from './try/steady-measures';
export { assumeMonth } from './try/assume';
export { ToldError, type AskedQuantity, type AssumedMonth, type ToldMonth } from './try/told';
export { monthAtPowerFactor, priceMonth, type AskedLookBack, type TriedBill } from './try/try-month';
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
