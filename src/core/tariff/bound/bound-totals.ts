import type { BillingPeriod } from '../../load';
import { PriceError } from '../errors';
import type { Schedule } from '../model';
import { layGround } from '../price/interval-source';
import { planPeriods, wordPeriod } from '../price/period-plan';
import { checkNames, prepareRun } from '../price/pricing';
import type { PriceOptions } from '../types';
import { BoxSource } from './box-source';
import { branchBill } from './branch-bill';
import { envelopesOf, type Coupling } from './coupling';
import { LineBlocks } from './line-blocks';
import { cornersOf, type LoadBox } from './load-box';
import { point, type Range } from './range';
import { rangeCharges } from './range-charges';
import { rangeQuantities } from './range-quantities';
import { rangeState, type RangeBill, type RangeRun, type RangeSource } from './range-state';

/** Ranges of one bill: quantities as the last piece of the period has them, lines and total as rounded. [currency] */
export interface BoundedBill {
  period: BillingPeriod;
  quantities: Record<string, Range>;
  lines: Record<string, Range>;
  total: Range;
}

/** Ranges that hold the bills of every load in a box; or why there are none. */
export type BoundedTotals =
  | { totals: { low: Float64Array; high: Float64Array }; bills: BoundedBill[]; notes: string[]; refused?: undefined }
  | { refused: string };

/**
 * Encloses the bills of all loads in a box: each bill that `priceBills` gives for one of them lies within, total by total, line by
 * line and quantity by quantity.
 *
 * Interval arithmetic: the schedule is worked out from top to bottom as bills are, over the same cells, pieces and look-backs, with a
 * range in place of each value. What two places make of the same energy is taken as if they could choose apart, so the ranges may be
 * wider than what some load reaches, never narrower. A construct that cannot be enclosed gives an infinite end, which a note names.
 *
 * @param box  Lowest and highest energies of every interval, which are missing in none or all of the loads
 * @param options  As of `priceBills`
 * @param coupling  What delivering reactive energy costs in active energy at least: it raises the low ends of totals
 * @returns Totals per period, [currency], float64[periods]; `refused` says why bills of such loads cannot be priced at all
 * @throws {RangeError} where a lower end of the box lies above its upper end
 * @source Moore, Kearfott, Cloud, Introduction to Interval Analysis, SIAM 2009, ch. 5 (natural interval extension); from memory.
 */
export function boundTotals(
  schedule: Schedule,
  box: LoadBox,
  options: PriceOptions,
  coupling?: Coupling,
): BoundedTotals {
  return orRefused(() => {
    checkNames(schedule, options);
    const plans = planPeriods(schedule, options.periods);
    const { startMs, stepMinutes, quality } = box;
    const ground = layGround(schedule, plans, { startMs, stepMinutes, count: quality.length });
    const source = new BoxSource(ground, cornersOf(schedule, box));
    const run = prepareRanges(schedule, plans, options, source);
    return boundRun(run, coupling && ((bill) => branchCoupled(run, bill, source, coupling, quality)));
  });
}

/** Lays out a run over ranges. */
export function prepareRanges(
  schedule: Schedule,
  plans: ReturnType<typeof planPeriods>,
  options: Omit<PriceOptions, 'periods'>,
  source: RangeSource,
): RangeRun {
  const { hasIntervals } = source;
  const run = prepareRun(schedule, plans, options, {
    source: { hasIntervals, printed: () => undefined, measure: () => undefined },
    isUnity: false,
    wantsNotes: true,
  });
  const bills = run.bills.map((bill): RangeBill => ({
    bill,
    states: bill.pieces.map((piece) => rangeState(schedule, piece)),
    amounts: [],
    parts: [],
    blocks: new LineBlocks(),
    total: point(0),
  }));
  return { run, source, bills };
}

function branchCoupled(
  run: RangeRun,
  bill: RangeBill,
  source: BoxSource,
  coupling: Coupling,
  quality: Uint8Array,
): void {
  if (bill.states.length > 1 || !Number.isFinite(bill.total.low)) return;
  const box = source.reductionOf(bill, bill.states[0]!);
  branchBill(run, bill, box, envelopesOf(coupling, box.low, quality));
}

/** Works all bills out, in order; `tighten` may then raise a bill's low end. */
export function boundRun(run: RangeRun, tighten?: (bill: RangeBill) => void): BoundedTotals {
  for (const bill of run.bills) {
    for (const state of bill.states) rangeQuantities(run, bill, state);
    rangeCharges(run, bill);
    tighten?.(bill);
  }
  return {
    totals: {
      low: Float64Array.from(run.bills, ({ total }) => total.low),
      high: Float64Array.from(run.bills, ({ total }) => total.high),
    },
    bills: run.bills.map((bill) => presentBill(run.run.schedule, bill)),
    notes: run.bills.flatMap((bill) => [...(bill.bill.notes ?? []), ...openNotes(run.run.schedule, bill)]),
  };
}

/** The result of some work; the words of a refusal where bills cannot be priced. */
export function orRefused(work: () => BoundedTotals): BoundedTotals {
  try {
    return work();
  } catch (error) {
    if (error instanceof PriceError) return { refused: error.message };
    throw error;
  }
}

function presentBill(schedule: Schedule, { bill, states, amounts, total }: RangeBill): BoundedBill {
  const last = states[states.length - 1]!;
  const rangeAt = (slot: number): Range => ({ low: last.values.low[slot]!, high: last.values.high[slot]! });
  const quantities = last.point.piece.text.text.quantities
    .filter(({ slot }) => last.point.known[slot] === 1)
    .map(({ name, slot }) => [name, rangeAt(slot)] as const);
  const lines = schedule.lineOrder.flatMap((name, line) => (amounts[line] ? [[name, amounts[line]] as const] : []));
  return {
    period: bill.plan.period,
    quantities: Object.fromEntries(quantities),
    lines: Object.fromEntries(lines),
    total,
  };
}

/** Names the first line of a bill whose low end is open. */
function openNotes(schedule: Schedule, { bill, amounts, total }: RangeBill): string[] {
  if (Number.isFinite(total.low)) return [];
  const line = schedule.lineOrder.find((_, i) => amounts[i] !== undefined && !Number.isFinite(amounts[i].low));
  return [
    `${wordPeriod(bill.plan.period)}: line "${line ?? 'total'}" has no lower end over the loads asked for, so its bill has none.`,
  ];
}
