import type { BillingPeriod } from '../../load';
import type { QuantityEntry, Schedule } from '../model';
import { planPeriods } from '../price/period-plan';
import { checkNames } from '../price/pricing';
import type { PriceOptions } from '../types';
import { boundRun, orRefused, prepareRanges, type BoundedTotals } from './bound-totals';
import type { Range } from './range';
import type { RangeBill, RangeRun, RangeSource, RangeState } from './range-state';

/** A period with the ranges of the quantities its bill would print, by name. */
export type RangeRow = BillingPeriod & { quantities: Record<string, Range> };

/**
 * Encloses the bills that `priceQuantities` makes of all printed quantities within ranges, as `boundTotals` does for loads.
 *
 * @param rows  Per period, ranges of any quantities of the schedule
 */
export function boundQuantities(
  schedule: Schedule,
  rows: readonly RangeRow[],
  options: Omit<PriceOptions, 'periods'> = {},
): BoundedTotals {
  return orRefused(() => {
    checkNames(schedule, options);
    return boundRun(prepareRanges(schedule, planPeriods(schedule, rows), options, new PrintedRanges(rows)));
  });
}

/** Quantities as bills print them, each with its range. */
class PrintedRanges implements RangeSource {
  readonly hasIntervals = false;

  constructor(private readonly rows: readonly RangeRow[]) {}

  printed({ bill }: RangeBill, { name }: QuantityEntry): Range | undefined {
    const { quantities } = this.rows[bill.plan.index]!;
    return Object.hasOwn(quantities, name) ? quantities[name] : undefined;
  }

  measure(_run: RangeRun, _bill: RangeBill, { point }: RangeState, { name, slot, unit }: QuantityEntry): void {
    point.missing[slot] = { name, kind: 'printed', detail: unit };
  }
}
