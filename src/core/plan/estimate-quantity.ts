import type { MeasuredQuantity } from '../tariff';
import type { ChangeOver, MomentChange } from './estimate-change';
import type { Estimate } from './estimate-load';

/** What makes an estimate wide. */
export type Doubt = 'none' | 'moment' | 'netting' | 'formula';

/** A quantity after a plan. */
export interface QuantityEstimate extends Estimate {
  doubt: Doubt;
}

/** What else the bill tells that narrows an estimate. */
export interface MonthFacts {
  /** Lagging energy printed over the same intervals, and leading; absent: not printed. */
  lagging?: Estimate;
  leading?: Estimate;
  laggingAfter?: Estimate;
  /** Highest and mean active power of the intervals, as far as printed. [kW] */
  highestKw?: number;
  meanKw?: number;
  /** The measure's value in the even load, before and after. */
  even?: { before: number; after: number };
}

/** Energies and powers of one printed quantity after a plan changed the load. Reactive power of nothing but the motors may lead. */
export function estimateAfter(
  quantity: MeasuredQuantity,
  printed: Estimate,
  change: ChangeOver,
  facts: MonthFacts,
): QuantityEstimate {
  const one = (value: number): QuantityEstimate => estimateOne(quantity, value, change, facts);
  const [low, best, high] = [one(printed.low), one(printed.best), one(printed.high)];
  return {
    low: Math.min(low.low, best.low, high.low),
    best: best.best,
    high: Math.max(low.high, best.high, high.high),
    doubt: best.doubt,
  };
}

function estimateOne(
  quantity: MeasuredQuantity,
  value: number,
  change: ChangeOver,
  facts: MonthFacts,
): QuantityEstimate {
  const { operation, channel } = quantity;
  if (channel === undefined) return byFormula(quantity, value, change, facts);
  if (operation === 'sum') return sumAfter(channel, value, change, facts);
  const moments = change.moments.length > 0 ? change.moments : [still];
  return momentAfter(quantity, value, moments, facts);
}

const still: MomentChange = { moreKw: 0, moreKvar: 0, standingKw: 0, standingKvar: 0, intervals: 0 };

function sumAfter(
  channel: NonNullable<MeasuredQuantity['channel']>,
  value: number,
  change: ChangeOver,
  facts: MonthFacts,
): QuantityEstimate {
  const { delivered, absorbed, surelyMet } = change;
  const exactly = (more: number): QuantityEstimate => ({ ...same(value + more), doubt: 'none' });
  switch (channel) {
    case 'kwh':
      return exactly(change.moreKwh);
    case 'kvarhNet':
      return exactly(absorbed - delivered);
    case 'kvarhLagging': {
      const low = Math.max(0, value - delivered) + Math.max(0, absorbed - (facts.leading?.high ?? 0));
      const high = Math.max(low, value - surelyMet + absorbed);
      return kept({ low, best: value + change.evenLagging, high, doubt: 'netting' });
    }
    case 'kvarhLeading': {
      const { lagging, laggingAfter } = facts;
      if (lagging && laggingAfter) {
        // Net energy changes by what is delivered: what does not lessen the lagging register adds to the leading one.
        const leading = (after: number, before: number): number =>
          Math.max(0, value + after - before + delivered - absorbed);
        return kept({
          low: leading(laggingAfter.low, lagging.low),
          best: leading(laggingAfter.best, lagging.best),
          high: leading(laggingAfter.high, lagging.high),
          doubt: 'netting',
        });
      }
      const low = Math.max(0, value - absorbed);
      return kept({ low, best: value + change.evenLeading, high: value + delivered, doubt: 'netting' });
    }
    default: {
      // No two apparent energies differ by more than the length of what lies between them.
      const [low, high] = [Math.max(0, value - change.mostKvah), value + change.mostKvah];
      return kept({ low, best: value + change.evenKvah, high, doubt: 'netting' });
    }
  }
}

function momentAfter(
  { channel, operation, count }: MeasuredQuantity,
  value: number,
  moments: MomentChange[],
  facts: MonthFacts,
): QuantityEstimate {
  // The likeliest moment of a highest value: the one at which most motors run at most load.
  const likely = moments.reduce((most, moment) => (moment.standingKw > most.standingKw ? moment : most));
  const over = (of: (moment: MomentChange) => number): QuantityEstimate => {
    const ends = moments.map(of);
    return { low: Math.min(...ends), best: of(likely), high: Math.max(...ends), doubt: 'moment' };
  };
  switch (channel) {
    case 'kw':
      return over(({ moreKw }) => value + moreKw);
    case 'kvarNet':
      return over(({ moreKvar }) => value + moreKvar);
    case 'kvarLagging':
      return over(({ moreKvar }) => Math.max(0, value + moreKvar));
    case 'kvarLeading': {
      const most = over(({ moreKvar }) => Math.max(0, value - moreKvar));
      // Where something is still drawn at that moment, delivering more need not lead.
      return { ...most, low: Math.min(most.low, value), best: value > 0 ? most.best : value };
    }
    case 'kva': {
      if (operation === 'highest' && count === 1) return apparentAfter(value, moments, likely, facts);
      const most = Math.max(...moments.map(({ moreKw, moreKvar }) => Math.hypot(moreKw, moreKvar)));
      const best = value + apparentMore(value, likely, facts);
      return kept({ low: Math.max(0, value - most), best, high: value + most, doubt: 'moment' });
    }
    default:
      return { ...same(value), doubt: 'formula' };
  }
}

const parts = 16;

/**
 * Highest apparent power after a change. At the moment it was set the plant drew between its mean and its highest active power, the
 * rest being reactive; at other moments it drew any power up to that, and reactive power of at least what the motors take.
 */
function apparentAfter(
  value: number,
  moments: MomentChange[],
  likely: MomentChange,
  facts: MonthFacts,
): QuantityEstimate {
  const most = Math.min(value, facts.highestKw ?? value);
  const least = Math.min(most, facts.meanKw ?? 0);
  let low = Infinity;
  let high = 0;
  for (const { moreKw, moreKvar, standingKvar } of moments) {
    for (let k = 0; k <= parts; k++) {
      const kw = least + ((most - least) * k) / parts;
      const kvar = Math.sqrt(Math.max(0, value * value - kw * kw));
      const after = Math.hypot(kw + moreKw, kvar + moreKvar);
      low = Math.min(low, after);
      high = Math.max(high, after, Math.hypot(kw + moreKw, Math.min(kvar, Math.max(0, standingKvar)) + moreKvar));
    }
  }
  return kept({ low, best: value + apparentMore(value, likely, facts), high, doubt: 'moment' });
}

/** Change of an apparent power at a moment, the highest active power being drawn then. */
function apparentMore(value: number, { moreKw, moreKvar }: MomentChange, { highestKw, meanKw }: MonthFacts): number {
  const kw = Math.min(value, highestKw ?? meanKw ?? value);
  const kvar = Math.sqrt(Math.max(0, value * value - kw * kw));
  return Math.hypot(kw + moreKw, kvar + moreKvar) - value;
}

/** What is settled by a formula in each cell cannot be told from a month's figures: in proportion to the even load at best. */
function byFormula(
  { usesLeading, unit }: MeasuredQuantity,
  value: number,
  { delivered, absorbed }: ChangeOver,
  { even }: MonthFacts,
): QuantityEstimate {
  const best = !even ? value : even.before > 0 ? (value * even.after) / even.before : value + even.after - even.before;
  const more = unit === 'kvarh' ? (usesLeading ? delivered + absorbed : absorbed) : 0;
  return {
    low: Math.min(0, value, best),
    best,
    high: Math.max(value + more, best),
    doubt: 'formula',
  };
}

function same(value: number): Estimate {
  return { low: value, best: value, high: value };
}

/** The best guess brought between its ends. */
function kept(estimate: QuantityEstimate): QuantityEstimate {
  const { low, best, high } = estimate;
  return { ...estimate, best: Math.min(Math.max(best, low), Math.max(low, high)) };
}
