import { assertLoadSeries, type LoadSeries } from '../../load';
import { PriceError } from '../errors';
import type { Schedule } from '../model';
import type { CompiledPricing, PricedBill, PriceOptions, PricingGrid, TotalsOptions } from '../types';
import { addLoadNotes } from '../words/load-notes';
import { writeBills } from '../words/write-bill';
import { IntervalSource, layGround, withCarriedChannels, type PeriodGround } from './interval-source';
import { planPeriods, type PeriodPlan } from './period-plan';
import { checkNames, prepareRun, priceRun } from './pricing';
import type { Run } from './run';

/**
 * Lays a schedule out over a grid and periods: calendar, classes and cells, without any load.
 *
 * @param grid  Beginning, step and number of intervals every load priced with it must have
 * @throws {PriceError} for periods outside the grid or the schedule's time, demand windows or borders the step cannot tell, unknown names
 */
export function compilePricing(schedule: Schedule, grid: PricingGrid, options: PriceOptions): CompiledPricing {
  checkNames(schedule, options);
  const plans = planPeriods(schedule, options.periods);
  const ground = layGround(schedule, plans, grid);
  return new Pricing(
    schedule,
    { startMs: grid.startMs, stepMinutes: grid.stepMinutes, count: grid.count },
    options,
    plans,
    ground,
  );
}

/**
 * Prices consecutive billing periods, in order, from intervals; ratchets look back through them.
 *
 * @throws {PriceError} naming period and name where a bill cannot be priced
 */
export function priceBills(schedule: Schedule, load: LoadSeries, options: PriceOptions): PricedBill[] {
  assertLoadSeries(load);
  const { startMs, stepMinutes } = load;
  return compilePricing(schedule, { startMs, stepMinutes, count: load.kwh.length }, options).bills(load);
}

class Pricing implements CompiledPricing {
  private lastRun: Run | undefined;
  private hasGathered = false;

  constructor(
    private readonly schedule: Schedule,
    private readonly grid: PricingGrid,
    private readonly options: PriceOptions,
    private readonly plans: PeriodPlan[],
    private readonly ground: PeriodGround[],
  ) {}

  totals(load: LoadSeries, { isActiveUnchanged = false, changed }: TotalsOptions = {}): Float64Array {
    this.checkGrid(load);
    const carried = withCarriedChannels(this.schedule, load).load;
    const source = new IntervalSource(this.ground, carried, this.hasGathered ? changed : undefined);
    source.gather(isActiveUnchanged && this.hasGathered);
    this.hasGathered = true;
    this.lastRun ??= prepareRun(this.schedule, this.plans, this.options, { source, isUnity: false, wantsNotes: false });
    this.lastRun.source = source;
    priceRun(this.lastRun);
    return Float64Array.from(this.lastRun.bills, (bill) => bill.total);
  }

  bills(load: LoadSeries): PricedBill[] {
    this.checkGrid(load);
    const { load: carried, note } = withCarriedChannels(this.schedule, load);
    const zero = new Float64Array(load.kwh.length);
    const unity = this.run({ ...carried, kvarhLagging: zero, kvarhLeading: zero }, true);
    const run = this.run(carried, false);
    for (const bill of run.bills) {
      if (note !== undefined) bill.notes?.add(note);
      addLoadNotes(bill, this.ground[bill.plan.index]!, carried);
    }
    this.hasGathered = false;
    return writeBills(run, unity, run.source as IntervalSource);
  }

  private run(load: LoadSeries, isUnity: boolean): Run {
    const source = new IntervalSource(this.ground, load);
    source.gather(false);
    const run = prepareRun(this.schedule, this.plans, this.options, { source, isUnity, wantsNotes: true });
    priceRun(run);
    return run;
  }

  private checkGrid(load: LoadSeries): void {
    assertLoadSeries(load);
    const { startMs, stepMinutes, count } = this.grid;
    if (load.startMs === startMs && load.stepMinutes === stepMinutes && load.kwh.length === count) return;
    throw new PriceError(
      'The series does not lie on the grid the pricing was laid out for. Lay it out for this series.',
      { name: 'load' },
    );
  }
}
