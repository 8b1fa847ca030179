import type { BillingPeriod } from '../../load';
import { channelOf, type ChannelName } from '../channels';
import type { QuantityEntry, Schedule } from '../model';
import { layGround } from '../price/interval-source';
import { planPeriods } from '../price/period-plan';
import type { Reduction } from '../price/reduction';
import type { PricingGrid } from '../types';

/** A measured quantity of a period with the intervals it is measured over. */
export interface MeasuredQuantity {
  name: string;
  unit: string;
  operation: 'sum' | 'highest' | 'lowest' | 'value';
  /** Set where a bare channel is measured without a condition. */
  channel?: ChannelName;
  /** Whether it reads the leading register. */
  usesLeading: boolean;
  /** How many values a highest or lowest is the mean of. */
  count: number;
  /** Numbers of the intervals. */
  intervals: Int32Array;
}

/**
 * The measured quantities of each period under its last text, each with the intervals it is measured over.
 *
 * @throws {PriceError} as laying the schedule out over the grid does
 */
export function measuredQuantities(
  schedule: Schedule,
  grid: PricingGrid,
  periods: readonly BillingPeriod[],
): MeasuredQuantity[][] {
  const plans = planPeriods(schedule, periods);
  const ground = layGround(schedule, plans, grid);
  return plans.map((plan, i) => {
    const { text } = plan.pieces[plan.pieces.length - 1]!;
    const reduction = ground[i]!.reductions.get(text)!;
    return text.text.quantities.flatMap((quantity) => measuredOver(quantity, text.text.quantities, reduction));
  });
}

function measuredOver(quantity: QuantityEntry, all: QuantityEntry[], reduction: Reduction): MeasuredQuantity[] {
  const { name, unit, definition } = quantity;
  if (definition.kind !== 'measure' && definition.kind !== 'value') return [];
  const measure = definition.kind === 'value' ? all.find((other) => other.name === definition.at) : quantity;
  const isPlain = definition.kind === 'value' || definition.where === undefined;
  return [
    {
      name,
      unit,
      operation: definition.kind === 'value' ? 'value' : definition.operation,
      ...(isPlain && definition.channel ? { channel: definition.channel } : {}),
      usesLeading: definition.expression.channels.some((channel) => channelOf(channel).usesLeading),
      count: definition.kind === 'value' ? 1 : definition.count,
      intervals: measure ? intervalsOf(reduction, measure.slot) : new Int32Array(0),
    },
  ];
}

function intervalsOf({ measures, classes }: Reduction, slot: number): Int32Array {
  const plan = measures.get(slot);
  if (!plan) return new Int32Array(0);
  const { runFirst, runEnd } = plan.kind === 'cells' ? plan.cells : classes;
  const found = new Set<number>();
  for (let run = 0; run < runFirst.length; run++) {
    if (plan.kind !== 'cells' && plan.classes[classes.runClass[run]!] !== 1) continue;
    for (let i = runFirst[run]!; i < runEnd[run]!; i++) found.add(i);
  }
  return Int32Array.from(found).sort();
}
